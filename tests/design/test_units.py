"""Inches and ounces beside millimetres and grams."""

from __future__ import annotations

import pytest

from buildgen.design.units import parse_fraction, to_metric


@pytest.mark.parametrize(
    ("text", "value"),
    [("3/32", 3 / 32), ("1 1/2", 1.5), ("1-1/2", 1.5), ("12", 12.0), ("0.5", 0.5)],
)
def test_fractions_are_read_as_a_builder_writes_them(text: str, value: float) -> None:
    found = parse_fraction(text)
    assert found is not None
    assert float(found) == value


def test_an_inch_is_25_4_mm_and_an_ounce_28_35_g() -> None:
    """International inch (1959) and avoirdupois ounce, exact."""
    made, problems, written = to_metric(
        {"wing": {"chord_in": 10, "panel": [{"span_in": "1/2"}]}, "mass_oz": 2}
    )
    assert problems == []
    assert made["wing"]["chord_mm"] == pytest.approx(254)
    assert made["wing"]["panel"][0]["span_mm"] == pytest.approx(12.7)
    assert made["mass_g"] == pytest.approx(56.69904625)
    assert written[("wing", "chord_mm")] == "chord_in"


def test_both_units_of_one_key_are_a_fault() -> None:
    _, problems, _ = to_metric({"chord_in": 10, "chord_mm": 254})
    assert len(problems) == 1


def test_lists_are_converted_item_by_item() -> None:
    made, _, _ = to_metric({"size_in": [1, "1/2", 0.25]})
    assert made["size_mm"] == pytest.approx([25.4, 12.7, 6.35])
