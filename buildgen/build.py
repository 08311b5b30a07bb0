"""The whole job on one screen: read, make, lay out, check, pack."""

from __future__ import annotations

import shutil
import tempfile
from collections.abc import Callable
from dataclasses import dataclass
from functools import cached_property
from pathlib import Path

from buildgen.airframe import Airframe, make_kit, shape_airframe
from buildgen.checks import Check, Desk, run_checks
from buildgen.checks.balance import balance_of, balanced
from buildgen.checks.report import Balance
from buildgen.design import Design
from buildgen.part import Kit
from buildgen.problems import DesignError, Problem
from buildgen.sheets.layout import Sheet, lay_out
from buildgen.sheets.sticks import StickPlan, plan_sticks

Say = Callable[[str], None]


def _quiet(_: str) -> None:
    """Say nothing: the default of library use."""


@dataclass(frozen=True, eq=False)
class Build(Kit):
    """A kit with everything that follows from it; each is made once, when first asked for."""

    design: Design | None = None
    frame: Airframe | None = None
    say: Say = _quiet

    @cached_property
    def balance(self) -> Balance:
        """Weights and balance."""
        return balance_of(self, self._frame)

    @cached_property
    def checks(self) -> tuple[Check, ...]:
        """Every check with its verdict."""
        return run_checks(Desk(self, self._frame, self.balance))

    @cached_property
    def sheets(self) -> tuple[Sheet, ...]:
        """Plates laid on sheets."""
        self.say("laying parts on sheets")
        return lay_out(self, self._design.definition, self._design.shelf)

    @cached_property
    def stick_plans(self) -> tuple[StickPlan, ...]:
        """Sticks and tubes cut from stock."""
        return plan_sticks(self, self._design.shelf)

    @property
    def worst(self) -> str:
        """The worst verdict: "pass", "warn" or "fail"."""
        verdicts = {c.verdict for c in self.checks}
        return next((v for v in ("fail", "warn") if v in verdicts), "pass")

    @property
    def _design(self) -> Design:
        assert self.design is not None
        return self.design

    @property
    def _frame(self) -> Airframe:
        assert self.frame is not None
        return self.frame

    def write(self, folder: Path | str) -> Path:
        """The whole packet into `folder`/<name>/; an earlier one is replaced when all is done.

        Returns:
            The packet's folder.

        Raises:
            DesignError: something cannot be made, or the folder cannot be written.
        """
        from buildgen.pack import write_all

        return swapped_in(Path(folder) / self.title.name, lambda room: write_all(self, room))

    def write_cut(self, folder: Path | str) -> Path:
        """Cut sheets and stick list only."""
        from buildgen.pack import write_cut

        return swapped_in(Path(folder) / f"{self.title.name}-cut",
                          lambda room: write_cut(self, room))

    def write_mounts(self, folder: Path | str) -> Path:
        """Printable parts only."""
        from buildgen.pack import write_mounts

        return swapped_in(Path(folder) / f"{self.title.name}-mounts",
                          lambda room: write_mounts(self, room))


def build(design: Design, say: Say = _quiet) -> Build:
    """The kit of a design.

    Raises:
        DesignError: it cannot be built; every fault with file, line and key.
    """
    try:
        say("shaping the airframe")
        frame = shape_airframe(design.definition, design.shelf, design.section_folders)
        kit = balanced(make_kit(frame, design.title), frame)
    except DesignError as error:
        raise design.placed(error) from None
    return Build(kit.title, kit.parts, kit.joints, design, frame, say)


def swapped_in(goal: Path, write: Callable[[Path], None]) -> Path:
    """Write into a temporary folder beside the goal and swap it in when complete.

    A run that fails or is interrupted leaves the former folder as it was.
    """
    try:
        goal.parent.mkdir(parents=True, exist_ok=True)
        room = Path(tempfile.mkdtemp(prefix=f".{goal.name}-", dir=goal.parent))
    except OSError as error:
        raise DesignError(
            Problem("", f"The folder {goal.parent} cannot be written.", f"{error.strerror}.")
        ) from None
    try:
        room.chmod(0o755)
        write(room)
        old = goal.with_name(f".{goal.name}-old")
        shutil.rmtree(old, ignore_errors=True)
        if goal.exists():
            goal.rename(old)
        room.rename(goal)
        shutil.rmtree(old, ignore_errors=True)
    finally:
        shutil.rmtree(room, ignore_errors=True)
    return goal
