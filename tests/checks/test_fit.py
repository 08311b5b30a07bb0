"""The dry fit finds what is planted in a good kit, and nothing in a good one."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import replace

import numpy as np
import pytest
from shapely.affinity import scale, translate
from shapely.geometry import Polygon, box

from buildgen import Build
from buildgen.checks import Desk
from buildgen.checks.fit import Finding, Fit, dry_fit, fit_of
from buildgen.checks.fit_joint import measure
from buildgen.checks.fit_space import Solid, clashes, pairs, shared
from buildgen.part import Bend, Joint, Kit, Part, Plate, Stick, Title
from buildgen.solid import Box, Placed, Pose, Rod, mesh

TITLE = Title("t", "t", "A", "0" * 64)


def changed(kit: Kit, id: str, by: Callable[[Part], Part], *dropped: Joint) -> Kit:
    """The kit with one part changed, and without some joints."""
    parts = tuple(by(p) if p.id == id else p for p in kit.parts)
    return Kit(kit.title, parts, tuple(j for j in kit.joints if j not in dropped))


def plate(part: Part, **changes: object) -> Part:
    assert isinstance(part.form, Plate)
    return replace(part, form=replace(part.form, **changes))  # type: ignore[arg-type]


def found(kit: Kit, *faults: str) -> list[Finding]:
    return [f for f in fit_of(kit).findings if not faults or f.fault in faults]


def touches(finding: Finding, *ids: str) -> bool:
    return {finding.inner, finding.outer} == set(ids)


def block(id: str, low: tuple[float, ...], high: tuple[float, ...], step: str = "1") -> Part:
    size = np.subtract(high, low)
    form = Plate(box(0, 0, size[0], size[1]), float(size[2]))
    return Part(id, id, "balsa", form, Pose(origin=np.array(low, float)), step, "", 160.0)


# ---------------------------------------------------------------- nothing in a good kit


def test_a_shipped_kit_has_a_clean_dry_fit(kit: Build) -> None:
    fit = fit_of(kit)
    assert fit.findings == ()
    assert fit.pair_count > 100
    assert len(fit.joints) == len(kit.joints) > 80
    assert len(fit.ways) > 15


def test_joints_name_real_parts_on_both_sides(marram: Build) -> None:
    ids = marram.by_id
    assert all({j.inner, j.outer} <= ids.keys() for j in marram.joints)
    ribs = {p.id for p in marram.parts if p.id.startswith("R") and p.id != "R0"}
    held = {j.outer for j in marram.joints if j.kind == "spar in hole"}
    assert ribs <= held
    mounts = {(j.inner, j.outer) for j in marram.joints if j.kind == "mount on tongue"}
    assert {("M1R", "R3R"), ("M1R", "R4R"), ("M1L", "R3L"), ("M1L", "R4L")} <= mounts


def test_play_of_a_spar_is_that_of_its_circle(marram: Build) -> None:
    """The true circle in the plate against the tube's radius, by plain subtraction."""
    spar = marram.by_id["S1a"]
    rib = marram.by_id["R2R"]
    assert isinstance(rib.form, Plate)
    radius = marram._design.definition.wing.spar[0].outer_mm / 2  # type: ignore[operator]
    centre = rib.pose.local(spar.centroid_mm)[:2]
    near = [c for c in rib.form.circles if np.hypot(*(centre - c[:2])) < 1.0]
    assert len(near) == 1
    joint = next(j for j in marram.joints if (j.inner, j.outer) == ("S1a", "R2R"))
    things = [Solid(p, p.solid) for p in (spar, rib) if p.solid is not None]
    gap = measure(joint, *things).gap_mm
    assert gap is not None
    off = float(np.hypot(*(centre - near[0][:2])))
    assert gap[0] == pytest.approx(near[0][2] - radius - off, abs=0.01)
    assert gap[1] == pytest.approx(near[0][2] - radius + off, abs=0.02)


# ---------------------------------------------------------------- planted faults


def test_a_spar_hole_moved_by_half_a_millimetre(marram: Build) -> None:
    def moved(rib: Part) -> Part:
        assert isinstance(rib.form, Plate)
        spar = rib.pose.local(marram.by_id["S1a"].centroid_mm)
        circles = tuple(
            (x + 0.5, y, r) if np.hypot(x - spar[0], y - spar[1]) < 1.0 else (x, y, r)
            for x, y, r in rib.form.circles
        )
        assert circles != rib.form.circles
        return plate(rib, circles=circles)

    faults = found(changed(marram, "R2R", moved))
    assert {f.fault for f in faults} >= {"clash", "tight"}
    assert all(touches(f, "R2R", "S1a") for f in faults)
    tight = next(f for f in faults if f.fault == "tight")
    assert tight.value == pytest.approx(0.10 - 0.5, abs=0.03)


def test_a_former_one_millimetre_too_wide(marram: Build) -> None:
    def wider(former: Part) -> Part:
        assert isinstance(former.form, Plate)
        x0, _, x1, _ = former.form.outline.bounds
        grown = scale(former.form.outline, (x1 - x0 + 1.0) / (x1 - x0), 1.0, origin=(0, 0))
        return plate(former, outline=grown)

    faults = found(changed(marram, "F3", wider), "clash")
    assert {frozenset((f.inner, f.outer)) for f in faults} == {
        frozenset(("F3", "FSR")), frozenset(("F3", "FSL"))}
    assert all(f.at_mm[0] == pytest.approx(marram.by_id["F3"].centroid_mm[0], abs=3)
               for f in faults)


def test_a_former_one_millimetre_too_narrow_has_no_contact(marram: Build) -> None:
    def narrower(former: Part) -> Part:
        assert isinstance(former.form, Plate)
        x0, y0, x1, y1 = former.form.outline.bounds
        cut = former.form.outline.intersection(box(x0 + 0.5, y0, x1 - 0.5, y1))
        return plate(former, outline=cut)

    faults = found(changed(marram, "F3", narrower))
    assert {(f.fault, f.inner, f.outer) for f in faults} == {
        ("no contact", "F3", "FSR"), ("no contact", "F3", "FSL")}


def test_a_tab_on_the_wrong_side(marram: Build) -> None:
    """The fin's tab at its top instead of in its slot; and a tab 12 mm ahead of its slot."""
    def ahead(fin: Part) -> Part:
        assert isinstance(fin.form, Plate)
        low = fin.form.outline.bounds[1]
        tab = fin.form.outline.intersection(box(-500, low - 1, 500, 0))
        rest = fin.form.outline.intersection(box(-500, 0, 500, 500))
        moved = rest.union(translate(tab, -12, 0.0).buffer(1e-6, join_style="mitre"))
        return plate(fin, outline=moved)

    def upside_down(fin: Part) -> Part:
        assert isinstance(fin.form, Plate)
        rest = fin.form.outline.intersection(box(-500, 0, 500, 500))
        return plate(fin, outline=rest)

    faults = found(changed(marram, "V1", ahead), "clash")
    assert [{f.inner, f.outer} >= {"T1", "V1"} for f in faults] == [True]
    faults = found(changed(marram, "V1", upside_down))
    assert [(f.fault, f.inner, f.outer) for f in faults] == [("loose", "V1", "T1")]


def test_a_rib_turned_over(marram: Build) -> None:
    def over(rib: Part) -> Part:
        assert isinstance(rib.form, Plate)
        lift = Pose(np.diag([1.0, -1.0, -1.0]), np.array([0.0, 0.0, rib.form.thickness_mm]))
        return replace(rib, pose=lift.then(rib.pose))

    faults = found(changed(marram, "R6R", over))
    assert faults
    assert all("R6R" in (f.inner, f.outer) for f in faults)
    assert {"clash", "loose"} & {f.fault for f in faults}


def test_a_mount_with_its_sockets_one_millimetre_outboard(marram: Build) -> None:
    def shifted(mount: Part) -> Part:
        return replace(mount, pose=Pose(mount.pose.rotation, mount.pose.origin + (0, 1.0, 0)))

    faults = found(changed(marram, "M1R", shifted))
    assert {f.fault for f in faults} >= {"clash", "tight", "no way in"}
    assert all("M1R" in (f.inner, f.outer) for f in faults)


def test_a_joiner_that_a_closed_rib_keeps_out(marram: Build) -> None:
    """It lies free where it ends up, but the end rib has no hole for it to come through."""
    tube, rib = marram.by_id["SR1b"], marram.by_id["R9R"]
    joiner = marram.by_id["J1bR"]
    assert isinstance(tube.form, Stick) and isinstance(joiner.form, Stick)
    assert isinstance(rib.form, Plate)
    way = np.array(next(j.way for j in marram.joints
                        if (j.inner, j.outer) == ("J1bR", "SR1b")))
    at = tube.centroid_mm - way * tube.form.length_mm / 2
    spot = rib.pose.local(at)[:2]
    filled = Polygon(rib.form.outline.exterior, [
        r for r in rib.form.outline.interiors
        if Polygon(r).distance(Polygon(box(*spot, *spot))) > 5.0])
    circles = tuple(c for c in rib.form.circles if np.hypot(*(spot - c[:2])) > 5.0)

    def rod(part: Part, start: float, length: float, r: float, bore: float = 0.0) -> Part:
        assert isinstance(part.form, Stick)
        shape = Placed(Rod(r, length, bore), Pose.at(at + start * way, way, (1, 0, 0)))
        return replace(part, form=replace(part.form, shape=shape))

    gone = [j for j in marram.joints if {j.inner, j.outer} in (
        {"SR1b", "R9R"}, {"J1bR", "S1a"})]
    kit = changed(marram, "R9R", lambda p: plate(p, outline=filled, circles=circles), *gone)
    kit = changed(kit, "SR1b", lambda p: rod(p, 6.0, tube.form.length_mm - 6.0, 4.0, 3.0))
    kit = changed(kit, "J1bR", lambda p: rod(p, 8.0, 25.0, 2.5))
    faults = found(kit)
    assert [(f.fault, f.inner, f.outer) for f in faults] == [("no way in", "J1bR", "R9R")]


# ---------------------------------------------------------------- the measures themselves


def test_shared_volume_is_exact_for_blocks() -> None:
    kit = Kit(TITLE, (block("a", (0, 0, 0), (10, 10, 10)), block("b", (8, 7, 6), (20, 20, 20))))
    fit = fit_of(kit)
    assert [(c.first, c.second) for c in fit.clashes] == [("a", "b")]
    assert fit.clashes[0].volume_mm3 == pytest.approx(2 * 3 * 4, rel=1e-9)
    assert fit.clashes[0].at_mm == pytest.approx((9, 8.5, 8))
    assert fit.findings[0].says == "a and b: share 24.0 mm3, at x 9, y 8, z 8"


def test_blocks_that_touch_share_nothing() -> None:
    kit = Kit(TITLE, (block("a", (0, 0, 0), (10, 10, 10)), block("b", (10, 0, 0), (20, 10, 10))))
    assert fit_of(kit).findings == ()


def test_a_rod_in_a_hole_of_its_own_diameter_shares_nothing() -> None:
    """Facets out of phase would seem to share space: holes are circumscribed, rods inscribed."""
    rib = Part("r", "r", "balsa", Plate(box(-9, -9, 9, 9), 3.0, ((0.0, 0.0, 4.0),)), Pose(), "1",
               "")
    turned = Pose.at((0, 0, -10), (0, 0, 1), (np.cos(0.3), np.sin(0.3), 0))
    rod = Part("s", "s", "rod", Stick(Placed(Rod(4.0, 20.0), turned), 20.0, "8 rod"), Pose(), "1",
               "")
    assert rib.solid is not None and rod.solid is not None
    assert shared(rib.solid, rod.solid).volume() == pytest.approx(0, abs=1e-6)


@pytest.mark.parametrize(("gap", "area"), [(0.0, 60.0), (0.2, 60.0), (0.4, 0.0)])
def test_contact_is_the_area_within_the_band(gap: float, area: float) -> None:
    one, two = (Part(i, i, "balsa", Stick(Box(low, high), 20.0, "block"), Pose(), "1", "")
                for i, low, high in (("a", (0, 0, gap), (20, 3, 5)),
                                     ("b", (-5, -5, -5), (30, 9, 0))))
    joint = Joint("face to face", "a", "b", (0.0, 0.3), (0.0, 0.0, -1.0))
    solids = [Solid(p, p.solid) for p in (one, two) if p.solid is not None]
    assert measure(joint, *solids).contact_mm2 == pytest.approx(area, abs=1e-6)


def test_plates_face_to_face_may_stand_apart_by_no_more_than_the_band() -> None:
    for gap, faults in ((0.05, []), (0.5, ["no contact"])):
        kit = Kit(TITLE, (block("a", (0, 0, 0), (20, 20, 3)),
                          block("b", (0, 5, 3 + gap), (20, 20, 6))),
                  (Joint("face to face", "a", "b", (0.0, 0.1)),))
        fit = fit_of(kit)
        assert [f.fault for f in fit.findings] == faults
        assert fit.joints[0].facing_mm2 == pytest.approx(20 * 15)


def test_boxes_far_apart_are_no_pairs() -> None:
    things = [Solid(p, p.solid) for p in (
        block("a", (0, 0, 0), (9, 9, 9)), block("b", (20, 0, 0), (29, 9, 9)),
        block("c", (5, 5, 5), (25, 6, 6))) if p.solid is not None]
    assert {(a.id, b.id) for a, b in pairs(things)} == {("a", "c"), ("b", "c")}
    assert [(c.first, c.second) for c in clashes(pairs(things))] == [("b", "c"), ("a", "c")]


def test_a_bent_side_is_measured_leg_by_leg() -> None:
    """A block against the inside of a folded sheet touches the leg that it stands at."""
    path = np.array([[0.0, 0.0], [100.0, 0.0], [200.0, 20.0]])
    flat = np.concatenate([[0.0], np.cumsum(np.linalg.norm(np.diff(path, axis=0), axis=1))])
    side = Part("side", "side", "balsa", Plate(box(0, 0, flat[-1], 40), 2.0, bend=Bend(flat, path)),
                Pose(), "1", "")
    post = block("post", (40, 5, 2), (46, 35, 20))
    kit = Kit(TITLE, (side, post), (Joint("face to face", "post", "side", (0.0, 0.1)),))
    fit = fit_of(kit)
    assert fit.findings == ()
    assert fit.joints[0].contact_mm2 == pytest.approx(6 * 30, rel=1e-3)


def test_checks_tell_the_worst(marram: Build) -> None:
    good = Desk(marram, marram._frame, marram.balance)
    assert [(c.id, c.verdict, c.value) for c in dry_fit(good)] == [
        ("dry-fit", "pass", 0.0), ("joint-fit", "pass", 0.0), ("way-in", "pass", 0.0)]
    bad = changed(marram, "S1a", lambda p: replace(p, pose=Pose(origin=np.array([0, 0, 2.0]))))
    checks = list(dry_fit(Desk(bad, marram._frame, marram.balance)))
    assert checks[0].verdict == "fail"
    assert checks[0].value and checks[0].value > 5
    assert "S1a" in checks[0].advice and "mm3" in checks[0].advice


def test_the_same_kit_gives_the_same_findings(sedge: Build) -> None:
    bad = changed(sedge, "SR1at", lambda p: replace(p, pose=Pose(origin=np.array([0, 0, -1.0]))))
    one, two = (fit_of(bad) for _ in range(2))
    assert one.findings == two.findings != ()


def test_meshes_of_moved_parts_are_closed(sedge: Build) -> None:
    fit: Fit = fit_of(sedge)
    assert all(m.gap_mm is not None or m.contact_mm2 is not None for m in fit.joints)
    assert mesh(Box((0, 0, 0), (1, 1, 1))).volume() == pytest.approx(1.0)
