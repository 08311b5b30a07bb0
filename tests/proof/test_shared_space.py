"""The script that looks for shared space in a written model sees what is there."""

from __future__ import annotations

from pathlib import Path

import pytest

from buildgen import Build
from buildgen.prints.model import glb
from tests.airframe.test_tail import TAILS, made
from tests.proof.shared_space import main, overlaps, solids_of


def written(kit: Build, folder: Path) -> Path:
    path = folder / "model" / "airframe.glb"
    path.parent.mkdir()
    path.write_bytes(glb(kit))
    return path


@pytest.mark.parametrize("name", sorted(TAILS))
def test_every_tail_is_clean_in_the_written_model(
    name: str, tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    path = written(made(TAILS[name]), tmp_path)
    assert main([str(tmp_path)]) == 0
    assert "0 share more than" in capsys.readouterr().out
    solids = solids_of(path)
    tail = {n: s for n, s in solids.items() if n.startswith(("T", "FT", "V1"))}
    planted = next(n for n in tail if n.startswith("T1"))
    tail[planted] = tail[planted].translate((0.0, -2.0, 0.0))  # glTF: y is up
    _, found = overlaps(tail)
    assert any(planted in pair for *pair, _ in found)
