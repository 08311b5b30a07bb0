"""The whole job on one screen: read, make, lay out, check, pack."""

from __future__ import annotations

import shutil
import tempfile
from collections.abc import Callable, Sequence
from dataclasses import dataclass, replace
from functools import cached_property
from pathlib import Path

from buildgen.airframe import Airframe, make_kit, shape_airframe
from buildgen.checks import Check, Desk, run_checks
from buildgen.checks.balance import balance_of, balanced
from buildgen.checks.report import Balance
from buildgen.design import Design
from buildgen.design.schema import Laser
from buildgen.part import Kit
from buildgen.problems import DesignError, Problem
from buildgen.sheets.frozen import CutBefore, cut_before, freeze
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
    kits: int = 1

    @cached_property
    def balance(self) -> Balance:
        """Weights and balance."""
        return balance_of(self, self._frame)

    @cached_property
    def checks(self) -> tuple[Check, ...]:
        """Every check with its verdict."""
        return run_checks(self.desk)

    @cached_property
    def desk(self) -> Desk:
        """What the checks look at, the dry fit among it."""
        return Desk(self, self._frame, self.balance)

    @cached_property
    def cut_before(self) -> CutBefore:
        """Sheets recorded as cut, held against the parts of today."""
        return cut_before(self, self._design)

    @cached_property
    def sheets(self) -> tuple[Sheet, ...]:
        """Plates laid on sheets, after those that were cut before."""
        cut = self.cut_before.sheets
        self.say("laying parts on sheets")
        try:
            return lay_out(self, self._design.definition, self._design.shelf, kits=self.kits,
                           cut=cut)
        except DesignError as error:
            raise self._design.placed(error) from None

    def frozen(self, names: Sequence[str]) -> Build:
        """The same build once these sheets are recorded as cut, beside the definition.

        Raises:
            DesignError: no such sheet, or the record cannot be written.
        """
        freeze(self.sheets, names, self, self._design)
        return replace(self)

    @cached_property
    def stick_plans(self) -> tuple[StickPlan, ...]:
        """Sticks and tubes cut from stock."""
        return plan_sticks(self, self._design.shelf, self.kits, self._design.definition.stock)

    @property
    def worst(self) -> str:
        """The worst verdict: "pass", "warn" or "fail"."""
        verdicts = {c.verdict for c in self.checks}
        return next((v for v in ("fail", "warn") if v in verdicts), "pass")

    @property
    def laser(self) -> Laser:
        """The cutter of the definition."""
        return self._design.definition.laser

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

    def write_cut(self, folder: Path | str, by_hand: bool = False) -> Path:
        """Cut sheets, tickets and stick list only; `by_hand` adds the sheets at 1:1 on paper."""
        from buildgen.pack import write_cut

        return swapped_in(Path(folder) / f"{self.title.name}-cut",
                          lambda room: write_cut(self, room, by_hand))

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
    return Build(kit.title, kit.parts, kit.joints, kit.boards, design, frame, say)


def write_coupon(
    material: str, thickness_mm: float, design: str | None, folder: Path | str
) -> str:
    """The fit coupon of a material into `folder`/<coupon-material-thickness>/.

    Args:
        material: a name on the shelf.
        thickness_mm: of the sheet, with calipers.
        design: whose shelf and layers to use; None for the shipped shelf.

    Returns:
        What to do with it.

    Raises:
        DesignError: no such material, or one that must not go under a laser.
    """
    from buildgen import pack
    from buildgen.design import load
    from buildgen.sheets.coupon import coupon
    from buildgen.shelf import load_shelf

    own = load(design) if design else None
    shelf, laser = (own.shelf, own.definition.laser) if own else (load_shelf(), Laser())
    made = coupon(shelf.material(material, "", "sheet"), thickness_mm)
    goal = swapped_in(Path(folder) / made.sheet.file, lambda room: pack.write_coupon(
        made.sheet, made.kit, made.text, laser, room))
    return f"  written to {goal}\n\n{made.text}"


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
