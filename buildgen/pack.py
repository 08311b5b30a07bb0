"""Everything of a build onto disk: sheets, prints, lists, packet, model, manifest."""

from __future__ import annotations

from pathlib import Path
from typing import TYPE_CHECKING, Any

from buildgen.packet.package import Package
from buildgen.packet.plans import write_plans
from buildgen.packet.write import write_manifest, write_packet
from buildgen.prints.files import start, start_all
from buildgen.prints.model import write_glb
from buildgen.problems import DesignError, Problem
from buildgen.sheets.drawing import draw
from buildgen.sheets.dxf import sheet_dxf
from buildgen.sheets.leftovers import leftovers_text
from buildgen.sheets.paper import write_paper
from buildgen.sheets.sticks import sticks_csv
from buildgen.sheets.svg import sheet_svg
from buildgen.sheets.ticket import ticket, tickets_csv

if TYPE_CHECKING:
    from buildgen.build import Build
    from buildgen.design.schema import Laser
    from buildgen.part import Kit
    from buildgen.sheets.sheet import Sheet


def write_all(build: Build, room: Path) -> None:
    """The whole packet: solids in a process of their own beside the flat work."""
    (room / "prints").mkdir()
    build.say("printing parts: solids")
    (room / "model").mkdir()
    job = start_all(build, room / "prints", room / "model" / "airframe.step")
    try:
        write_sheets(build, room)
        (room / "plans").mkdir()
        assert build.design is not None
        write_plans(build, build.design.definition.packet.paper, room / "plans")
        write_glb(build, room / "model" / "airframe.glb")
        reports = _sound(job.finish())
        build.say("packet")
        package = package_of(build, reports)
        write_packet(package, room)
        job.end()
    except BaseException:
        job.stop()
        raise
    write_manifest(package, room)


def write_cut(build: Build, room: Path, by_hand: bool = False) -> None:
    """Sheets and the stick list; `by_hand` adds the sheets at 1:1 on paper."""
    assert build.design is not None
    write_sheets(build, room)
    old = [s for s in build.cut_before.recorded if s.parts]
    if old:
        spacing = build.design.definition.laser.spacing_mm
        (room / "leftovers.toml").write_text(leftovers_text(old, spacing), "utf-8", newline="\n")
    if by_hand:
        fresh = [s for s in build.sheets if not s.cut_from]
        write_paper(fresh, build, build.design.definition.laser, room / "sheets-1to1.pdf")


def write_coupon(sheet: Sheet, kit: Kit, text: str, laser: Laser, room: Path) -> None:
    """The fit coupon as DXF and SVG, and what to do with it."""
    (room / "coupon.dxf").write_text(sheet_dxf(sheet, kit, laser), "utf-8", newline="\n")
    (room / "coupon.svg").write_text(sheet_svg(sheet, kit, laser), "utf-8", newline="\n")
    (room / "coupon.txt").write_text(text, "utf-8", newline="\n")


def write_mounts(build: Build, room: Path) -> None:
    """The printed parts."""
    build.say("printing parts: solids")
    job = start(build.of("print"), room)
    try:
        _sound(job.finish())
        job.end()
    except BaseException:
        job.stop()
        raise


def write_sheets(build: Build, room: Path) -> None:
    """DXF and SVG of each sheet that is not cut yet, tickets.csv and sticks.csv."""
    assert build.design is not None
    folder = room / "sheets"
    folder.mkdir()
    laser = build.design.definition.laser
    fresh = [s for s in build.sheets if not s.cut_from]
    tickets = []
    for sheet in fresh:
        drawing = draw(sheet, build, laser)
        dxf = sheet_dxf(sheet, build, laser, drawing)
        svg = sheet_svg(sheet, build, laser, drawing)
        (folder / f"{sheet.file}.dxf").write_text(dxf, "utf-8", newline="\n")
        (folder / f"{sheet.file}.svg").write_text(svg, "utf-8", newline="\n")
        tickets.append(ticket(sheet, build, laser, drawing))
    (room / "tickets.csv").write_text(tickets_csv(tickets), "utf-8", newline="\n")
    (room / "sticks.csv").write_text(sticks_csv(build.stick_plans), "utf-8", newline="\n")


def package_of(build: Build, reports: tuple[Any, ...] = ()) -> Package:
    """The bundle that the packet is written from."""
    assert build.design is not None
    return Package(
        build, build.design.definition, build.sheets, build.stick_plans, build.balance,
        build.checks, reports, build.design.text, build.design.file, build.desk.fit,
    )


def _sound(reports: tuple[Any, ...]) -> tuple[Any, ...]:
    """Reports of prints that are all sound; else what is wrong with which."""
    faults = [Problem("", f"print {r.key}: {fault}") for r in reports for fault in r.faults]
    if faults:
        raise DesignError(*faults)
    return reports
