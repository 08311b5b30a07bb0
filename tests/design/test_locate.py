"""The line of every key of a definition."""

from __future__ import annotations

import pytest

from buildgen.design.locate import Lines, path_from_text, path_text

TEXT = '''# a remark with [brackets] and key = 1
name = "a # b"

[wing]            # the wing
section = "x"
ribs.material = "balsa"

[[wing.panel]]
span_mm = 1
[[wing.panel]]
span_mm = [
  1,
  2,
]
"odd key" = 3
note = """
span_mm = 7
"""
motor = { mass_g = 1, pattern = "16x16" }
'''


@pytest.mark.parametrize(
    ("path", "line"),
    [(("name",), 2), (("wing",), 4), (("wing", "section"), 5), (("wing", "ribs", "material"), 6),
     (("wing", "panel", 0), 8), (("wing", "panel", 0, "span_mm"), 9),
     (("wing", "panel", 1, "span_mm"), 11), (("wing", "panel", 1, "odd key"), 15),
     (("wing", "panel", 1, "motor"), 19), (("wing", "panel", 1, "nothing"), 10),
     (("nowhere",), 0)],
)
def test_lines(path: tuple[str | int, ...], line: int) -> None:
    assert Lines(TEXT).of(path) == line


def test_paths_count_from_one_and_come_back() -> None:
    path = ("wing", "panel", 1, "tip_chord_mm")
    assert path_text(path) == "wing.panel[2].tip_chord_mm"
    assert path_from_text("wing.panel[2].tip_chord_mm") == path


def test_broken_text_gives_what_was_understood() -> None:
    assert Lines('name = "a\n[wing').of(("name",)) in (0, 1)
