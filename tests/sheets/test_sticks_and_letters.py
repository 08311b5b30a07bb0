"""Stick plans and single-stroke lettering."""

from __future__ import annotations

import string
from itertools import combinations_with_replacement, product

import pytest

from buildgen.design.schema import Stock
from buildgen.part import Kit, Part, Stick, Title
from buildgen.problems import DesignError
from buildgen.sheets.letters import glyph, width_mm, write
from buildgen.sheets.sticks import SAW_MM, plan_sticks, scarfed_across, sticks_csv
from buildgen.shelf import load_shelf
from buildgen.solid import Box, Pose


def kit_of(*lengths: float) -> Kit:
    parts = tuple(
        Part(f"S{i}", "stick", "balsa", Stick(Box((0, 0, 0), (n, 5, 5)), n, "5 x 5"), Pose(), "s",
             "wing.spar[1]", 160)
        for i, n in enumerate(lengths)
    )
    return Kit(Title("t", "t", "A", "0" * 64), parts)


def fewest(lengths: list[float], stock: float) -> int:
    """Fewest bars by trying every assignment."""
    for bars in range(1, len(lengths) + 1):
        for way in product(range(bars), repeat=len(lengths)):
            loads = [sum(n + SAW_MM for n, k in zip(lengths, way, strict=True) if k == b) - SAW_MM
                     for b in range(bars)]
            if max(loads) <= stock:
                return bars
    raise AssertionError


@pytest.mark.parametrize(
    "lengths",
    [[500, 499, 480, 300, 200], [600, 600, 390, 390], [340, 330, 330, 660, 320],
     [499.5, 499.5, 499.5, 499.5], [500, 500], [990, 5, 4]],
)
def test_the_plan_takes_the_fewest_bars(lengths: list[float]) -> None:
    plan = plan_sticks(kit_of(*lengths), load_shelf())[0]
    assert len(plan.bars) == fewest(lengths, plan.stock_length_mm)
    placed = sorted(p.part for bar in plan.bars for p in bar.pieces)
    assert placed == sorted(f"S{i}" for i in range(len(lengths)))
    for bar in plan.bars:
        used = sum(p.length_mm + SAW_MM for p in bar.pieces) - SAW_MM
        assert used + bar.left_mm == pytest.approx(plan.stock_length_mm)


def test_first_fit_alone_would_not_do() -> None:
    """Longest first takes three bars here, two are enough: the programme finds them."""
    lengths = [410.0, 350.0, 300.0, 300.0, 300.0, 330.0]
    plan = plan_sticks(kit_of(*lengths), load_shelf())[0]
    assert len(plan.bars) == fewest(lengths, plan.stock_length_mm)


def test_a_stick_longer_than_stock_is_named() -> None:
    with pytest.raises(DesignError, match="S0") as error:
        plan_sticks(kit_of(1500), load_shelf())
    assert error.value.problems[0].path == "wing.spar[1]"


def test_the_list_has_a_line_for_each_piece() -> None:
    text = sticks_csv(plan_sticks(kit_of(500, 200), load_shelf()))
    assert len(text.splitlines()) == 3
    assert "S0,500.0" in text


@pytest.mark.parametrize("letter", string.ascii_letters + string.digits + string.punctuation)
def test_every_letter_has_strokes_within_its_cell(letter: str) -> None:
    strokes, scale = glyph(letter)
    assert strokes
    assert strokes != glyph("\u2603")[0]
    assert all(0 <= x <= 4 and 0 <= y <= 8 for line in strokes for x, y in line)
    assert scale == (0.72 if letter.islower() else 1.0)


def test_accents_add_strokes_and_nothing_vanishes() -> None:
    for accented, base in (("é", "e"), ("Ü", "U"), ("ñ", "n"), ("Å", "A"), ("ç", "c")):
        assert len(glyph(accented)[0]) > len(glyph(base)[0])
    for word in ("Größe", "Øre", "шмель", "風"):
        assert len(write(word, 5)) >= len(word)


def test_lettering_is_as_high_and_wide_as_asked() -> None:
    strokes = write("R12L", 5.0, (10.0, 20.0))
    xs = [x for line in strokes for x, _ in line]
    ys = [y for line in strokes for _, y in line]
    assert max(ys) - min(ys) == pytest.approx(5.0)
    assert (max(ys) + min(ys)) / 2 == pytest.approx(20.0)
    assert max(xs) - min(xs) <= width_mm("R12L", 5.0) + 1e-9


def at_hand(*sticks: tuple[float, int | None], scarf: float | None = None) -> Stock:
    return Stock(stick=[{"material": "balsa", "length_mm": n, "count": c} for n, c in sticks],
                 scarf_ratio=scarf)


def bought(lengths: list[float], sizes: list[float]) -> float:
    """Least length of bars bought, by trying every choice of bars and every assignment."""
    best = sum(max(sizes) for _ in lengths)
    for m in range(1, len(lengths) + 1):
        for bars in combinations_with_replacement(sizes, m):
            if sum(bars) >= best:
                continue
            for way in product(range(m), repeat=len(lengths)):
                loads = [sum(n + SAW_MM for n, k in zip(lengths, way, strict=True) if k == b)
                         for b in range(m)]
                if all(a <= b + SAW_MM for a, b in zip(loads, bars, strict=True)):
                    best = sum(bars)
                    break
    return best


@pytest.mark.parametrize("lengths", [[450, 440, 300, 299], [700, 500, 260, 200, 90],
                                     [610, 600, 590, 380, 20]])
def test_of_several_lengths_the_least_is_bought(lengths: list[float]) -> None:
    plans = plan_sticks(kit_of(*lengths), load_shelf(), 1, at_hand((1000.0, None), (600.0, None),
                                                                   (915.0, None)))
    assert all(p.proven for p in plans)
    assert sum(p.stock_length_mm * len(p.bars) for p in plans) == bought(
        lengths, [1000.0, 600.0, 915.0])
    cut = sorted(p.part for plan in plans for b in plan.bars for p in b.pieces)
    assert cut == sorted(f"S{i}" for i in range(len(lengths)))


def test_offcuts_come_before_new_stock() -> None:
    plans = plan_sticks(kit_of(400, 300, 300), load_shelf(), 1, at_hand((450.0, 1), (650.0, 1)))
    assert [(p.stock_length_mm, len(p.bars)) for p in plans] == [(650.0, 1), (450.0, 1)]


def test_a_long_stick_is_scarfed_at_the_slope_stated() -> None:
    """1500 mm of 5 x 5 at 1 in 10 overlap by 50 mm: two pieces of (1500 + 50) / 2, by hand."""
    plan, = plan_sticks(kit_of(1500), load_shelf(), 1, at_hand((1000.0, None), scarf=10.0))
    pieces = [p for b in plan.bars for p in b.pieces]
    assert [(p.part, p.length_mm, p.scarf_mm) for p in pieces] == [
        ("S0.1", 775.0, 50.0), ("S0.2", 775.0, 50.0)]
    assert "S0.1,775.0,225.0,50.0,yes" in sticks_csv([plan])


@pytest.mark.parametrize("section", ["8 x 6 tube", "3 rod", "10.5 x 14 block"])
def test_tubes_and_rods_take_no_scarf(section: str) -> None:
    assert scarfed_across(section) is None


def test_many_kits_are_planned_in_a_moment() -> None:
    lengths = [300.0 + 7 * i for i in range(12)]
    plans = plan_sticks(kit_of(*lengths), load_shelf(), 10, at_hand((1000.0, None), (915.0, None)))
    assert sum(len(b.pieces) for p in plans for b in p.bars) == 120
