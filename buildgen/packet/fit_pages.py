"""The dry fit on paper: what was measured, kind by kind, and every finding."""

from __future__ import annotations

from reportlab.platypus import Flowable, PageBreak

from buildgen.checks.fit import Finding
from buildgen.checks.fit_joint import Measured
from buildgen.packet import words
from buildgen.packet.amounts import fixed
from buildgen.packet.package import Package
from buildgen.packet.page import NOTE, Column, Heading, gap, table, text

JOINT_COLUMNS = (
    Column(words.JOINT, 40), Column(words.COUNT, 18, True), Column(words.LEAST_PLAY, 30, True),
    Column(words.MOST_PLAY, 30, True), Column(words.CONTACT, 34, True),
    Column(words.FIT_BAND, 22, True),
)
FINDING_COLUMNS = (Column(words.FINDING, 26), Column(words.FIT_SAYS, 148))


def fit_pages(package: Package) -> list[Flowable]:
    """Nothing where no dry fit was made."""
    fit = package.fit
    if fit is None:
        return []
    says = words.FIT_TEXT.format(
        pairs=fit.pair_count, limit=f"{fit.limit_mm3:g}", joints=len(fit.joints),
        ways=len(fit.ways),
    )
    kinds = dict.fromkeys(m.joint.kind for m in fit.joints)
    rows = [_kind_row(kind, [m for m in fit.joints if m.joint.kind == kind]) for kind in kinds]
    story: list[Flowable] = [
        PageBreak(), Heading(words.DRY_FIT), text(says, NOTE), gap(2),
        table(JOINT_COLUMNS, rows), gap(5), Heading(words.FINDINGS, 1),
    ]
    if not fit.findings:
        return [*story, text(words.NO_FINDINGS)]
    return [*story, table(FINDING_COLUMNS, [_finding_row(f) for f in fit.findings])]


def _kind_row(kind: str, found: list[Measured]) -> list[str]:
    """Least and greatest play and least contact of all joints of a kind."""
    gaps = [m.gap_mm for m in found if m.gap_mm is not None]
    areas = [m.contact_mm2 for m in found if m.contact_mm2 is not None]
    return [
        kind, str(len(found)),
        fixed(min(g[0] for g in gaps), 2) if gaps else "",
        fixed(max(g[1] for g in gaps), 2) if gaps else "",
        fixed(min(areas), 1) if areas else "",
        fixed(max(m.joint.gap_mm[1] for m in found), 2),
    ]


def _finding_row(finding: Finding) -> list[str]:
    return [words.FAULTS[finding.fault], finding.says]
