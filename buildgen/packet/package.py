"""Everything that a packet is written from: one bundle, read only."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property
from typing import TYPE_CHECKING

from buildgen.checks.report import WORST_FIRST, Balance, Check
from buildgen.part import Kit, Part, Plate, Printed

if TYPE_CHECKING:
    from buildgen.checks.fit import Fit
    from buildgen.design.schema import Definition
    from buildgen.prints.make import Report
    from buildgen.sheets.layout import Sheet
    from buildgen.sheets.sticks import StickPlan

PRINT_ENDINGS = (".step", ".stl", ".3mf")


@dataclass(frozen=True, eq=False)
class Package:
    """What was made, laid out, weighed and checked.

    Attributes:
        print_reports: one for each file stem of printed solids, as the printers' room gives them.
        source_text: the definition as it was read, byte for byte.
        source_name: its file name.
        fit: the dry fit, None where none was made.
    """

    kit: Kit
    definition: Definition
    sheets: tuple[Sheet, ...]
    stick_plans: tuple[StickPlan, ...]
    balance: Balance
    checks: tuple[Check, ...] = ()
    print_reports: tuple[Report, ...] = ()
    source_text: str = ""
    source_name: str = ""
    fit: Fit | None = None

    @cached_property
    def sheet_of(self) -> dict[str, Sheet]:
        """Part id to the sheet it is cut from."""
        return {p.part: sheet for sheet in self.sheets for p in sheet.placements}

    @cached_property
    def place_on_sheet(self) -> dict[str, int]:
        """Part id to its number on its sheet, counted from 1 in the order of placing."""
        return {
            p.part: number
            for sheet in self.sheets
            for number, p in enumerate(sheet.placements, start=1)
        }

    @cached_property
    def checks_worst_first(self) -> tuple[Check, ...]:
        return tuple(c for verdict in WORST_FIRST for c in self.checks if c.verdict == verdict)

    def sheet_file(self, part: Part) -> str:
        """File name of the sheet the part is cut from; empty where there is none."""
        sheet = self.sheet_of.get(part.id)
        return f"{sheet.file}.dxf" if sheet and isinstance(part.form, Plate) else ""

    def print_files(self, part: Part) -> tuple[str, ...]:
        """File names of a printed part, shared by its twins."""
        if not isinstance(part.form, Printed):
            return ()
        report = self.report_of.get(part.files_key)
        if report is not None and report.files:
            return tuple(report.files)
        return tuple(part.files_key + ending for ending in PRINT_ENDINGS)

    @cached_property
    def report_of(self) -> dict[str, Report]:
        """File stem of a print to what was measured on it."""
        return {report.key: report for report in self.print_reports}
