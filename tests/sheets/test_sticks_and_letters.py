"""Stick plans and single-stroke lettering."""

from __future__ import annotations

import string
from itertools import product

import pytest

from buildgen.part import Kit, Part, Stick, Title
from buildgen.problems import DesignError
from buildgen.sheets.letters import glyph, width_mm, write
from buildgen.sheets.sticks import SAW_MM, plan_sticks, sticks_csv
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
