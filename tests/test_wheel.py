"""A real wheel, outside the checkout: sections, shelf, schema and shipped designs come along."""

from __future__ import annotations

import os
import subprocess
import sys
from pathlib import Path

import pytest

ROOT = Path(__file__).resolve().parents[1]


@pytest.fixture(scope="module")
def installed(tmp_path_factory: pytest.TempPathFactory) -> Path:
    room = tmp_path_factory.mktemp("wheel")
    pip = [sys.executable, "-m", "pip", "-q", "--disable-pip-version-check"]
    subprocess.run([*pip, "wheel", str(ROOT), "--no-deps", "--no-build-isolation", "-w",
                    str(room)], check=True, capture_output=True)
    wheel = next(room.glob("buildgen-*.whl"))
    subprocess.run([*pip, "install", "--no-deps", "--target", str(room / "site"), str(wheel)],
                   check=True, capture_output=True)
    return room


def out(installed: Path, *argv: str) -> str:
    env = {**os.environ, "PYTHONPATH": str(installed / "site")}
    found = subprocess.run([sys.executable, "-m", "buildgen", *argv], cwd=installed, env=env,
                           capture_output=True, text=True, check=True)
    return found.stdout


def test_the_wheel_is_the_one_that_runs(installed: Path) -> None:
    env = {**os.environ, "PYTHONPATH": str(installed / "site")}
    code = "import buildgen; print(buildgen.__file__)"
    found = subprocess.run([sys.executable, "-c", code], cwd=installed, env=env,
                           capture_output=True, text=True, check=True)
    assert found.stdout.startswith(str(installed))


def test_shipped_sections_come_along(installed: Path) -> None:
    assert "Clark Y" in out(installed, "section", "clarky")


def test_a_shipped_design_balances(installed: Path) -> None:
    assert "static margin" in out(installed, "balance", "sedge")


def test_a_starter_points_at_its_schema(installed: Path) -> None:
    out(installed, "new", "tern.toml")
    first = (installed / "tern.toml").read_text().splitlines()[0]
    schema = first.removeprefix("#:schema file://")
    assert Path(schema).is_file()
    assert "PASS" in out(installed, "check", "tern.toml")


def test_fonts_of_the_packet_come_along(installed: Path) -> None:
    assert list((installed / "site" / "buildgen" / "packet" / "fonts").glob("*.ttf"))
