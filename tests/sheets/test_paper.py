"""Sheets at 1:1 on paper, read back by an independent PDF reader."""

from __future__ import annotations

from pathlib import Path

import numpy as np
import pypdfium2 as pdfium
import pytest

from buildgen.design.schema import Laser
from buildgen.sheets.paper import FOOT_MM, MARGIN_MM, OVERLAP_MM, tiles, write_paper
from tests.sheets.conftest import small_kit, small_sheets


def test_pages_cover_the_sheet_and_overlap() -> None:
    found = tiles(1000.0, 300.0)
    assert {(t.row, t.column) for t in found} == {(r, c) for r in (1, 2) for c in (1, 2, 3, 4)}
    last = found[-1]
    assert last.x_mm + last.width_mm >= 1000
    assert last.y_mm + last.height_mm >= 300
    assert found[0].x_mm + found[0].width_mm - found[1].x_mm == pytest.approx(OVERLAP_MM)
    assert len(tiles(200.0, 100.0)) == 1


def test_it_prints_in_true_size(tmp_path: Path) -> None:
    """The frame of 90 x 80 mm measured on a rendering of 10 pixels a millimetre."""
    path = tmp_path / "p.pdf"
    ply = small_sheets()[1]
    frame = next(n for n, p in enumerate(ply.placements) if p.part == "F1")
    alone = type(ply)(ply.file, ply.material, 3.0, 600.0, 300.0, 0.2, False,
                      (ply.placements[frame],), (ply.parts[frame],), (0.0, 0.0, 0.0, 0.0))
    write_paper([alone], small_kit(), Laser(), path)
    document = pdfium.PdfDocument(path)
    assert len(document) == len(tiles(
        alone.placed_shapes()[0].bounds[2] + 10.0, 300.0))
    scale = 10 * 25.4 / 72
    image = np.asarray(document[0].render(scale=scale).to_pil().convert("L"))
    shape = alone.placed_shapes()[0]
    x0, y0, x1, y1 = shape.bounds
    high = image.shape[0] / 10
    row = image[int((high - MARGIN_MM - FOOT_MM - (y0 + y1) / 2 - 33) * 10)]
    dark = np.nonzero(row < 128)[0] / 10 - MARGIN_MM
    assert np.abs(dark - x0).min() < 0.15
    assert np.abs(dark - x1).min() < 0.15
    assert not np.any((dark > x0 + 1) & (dark < x0 + 7)), "the frame's side is clear"


def test_equal_bytes(tmp_path: Path) -> None:
    for name in ("a.pdf", "b.pdf"):
        write_paper(small_sheets(), small_kit(), Laser(), tmp_path / name)
    assert (tmp_path / "a.pdf").read_bytes() == (tmp_path / "b.pdf").read_bytes()
