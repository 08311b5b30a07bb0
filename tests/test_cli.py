"""The commands as a person types them: messages, exit status, nothing half written."""

from __future__ import annotations

import json
from pathlib import Path

import pytest

from buildgen.cli import run
from buildgen.design.load import SHIPPED

SEDGE = (SHIPPED / "sedge.toml").read_text()


def said(capsys: pytest.CaptureFixture[str], *argv: str) -> tuple[int, str, str]:
    status = run(list(argv))
    out, err = capsys.readouterr()
    return status, out, err


@pytest.mark.parametrize(
    ("old", "new", "line", "words"),
    [
        ("tip_chord_mm = 140", "tip_cord_mm = 140", 14, 'Did you mean "tip_chord_mm"?'),
        ("tip_chord_mm = 140", "tip_chord_cm = 14", 14, 'Write "tip_chord_mm"'),
        ("root_chord_mm = 165", "root_chord_mm = -165", 13, "above 0"),
        ('section = "clarky"', 'section = "clarkx"', 7, 'Did you mean "clarky"?'),
        ("height_mm = 2", "height_mm = 40", 23, "does not lie inside the section"),
        ("span_mm = 450", 'span_mm = "450"', 12, "without quotes"),
        ('kind = "capped"', 'kind = "caped"', 19, 'Did you mean "capped"?'),
        ("dihedral_deg = 5", "dihedral_deg = 5\n[[wing.panel]]\nspan_mm = 99\nroot_chord_mm = 99",
         19, "do not meet"),
        ('pattern = "16x16"', 'pattern = "17x17"', 46, '"17x17"'),
        ('material = "balsa-light"', 'material = "balsa-lite"', 79, "balsa-light"),
    ],
)
def test_a_slip_in_a_definition_is_told_with_its_line(
    old: str, new: str, line: int, words: str, tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    assert old in SEDGE
    path = tmp_path / "slip.toml"
    path.write_text(SEDGE.replace(old, new, 1))
    status, out, err = said(capsys, "packet", str(path), "-o", str(tmp_path / "out"))
    assert status == 2
    assert words in err
    assert f"slip.toml:{line}: " in err
    assert len(err.strip().splitlines()) == 1
    assert "Traceback" not in err
    assert out == ""
    assert sorted(p.name for p in tmp_path.iterdir()) == ["slip.toml"]


def test_all_faults_are_told_at_once(
    tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    path = tmp_path / "many.toml"
    path.write_text(
        SEDGE.replace("tip_chord_mm = 140", "tip_cord_mm = 140", 1)
        .replace("height_mm = 2", 'height_mm = "2"').replace("arm_mm = 395", "arm_mm = 0")
    )
    status, _, err = said(capsys, "check", str(path))
    assert status == 2
    assert [row.split(":")[1] for row in err.strip().splitlines()] == ["14", "22", "78"]


@pytest.mark.parametrize("kind", ["missing", "folder", "not toml", "binary", "unknown name"])
def test_what_is_no_definition(
    kind: str, tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    path = tmp_path / "thing.toml"
    if kind == "folder":
        path.mkdir()
    elif kind == "not toml":
        path.write_text("a wing of 900 mm")
    elif kind == "binary":
        path.write_bytes(bytes(range(128, 255)))
    name = "mararm" if kind == "unknown name" else str(path)
    status, out, err = said(capsys, "balance", name)
    assert status == 2
    assert len(err.strip().splitlines()) == 1
    assert "Traceback" not in err
    assert out == ""
    if kind == "unknown name":
        assert 'Did you mean "marram"?' in err


def test_balance_speaks_json(capsys: pytest.CaptureFixture[str]) -> None:
    status, out, _ = said(capsys, "balance", "sedge", "--json")
    data = json.loads(out)
    assert status == 0
    assert data["mass_g"] > 100
    assert len(data["cg_mm"]) == 3
    assert data["target_cg_x_mm"][0] < data["cg_mm"][0] < data["target_cg_x_mm"][1]


def test_check_speaks_json_and_status(
    tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    path = tmp_path / "nose-heavy.toml"
    path.write_text(SEDGE.replace("range_mm = [-95, 30]", "range_mm = [-95, -90]")
                    .replace("mass_g = 52", "mass_g = 180"))
    status, out, _ = said(capsys, "check", str(path), "--json")
    verdicts = {c["id"]: c["verdict"] for c in json.loads(out)}
    assert verdicts["balance"] == "fail"
    assert status == 1


def test_a_starter_builds_as_it_stands(
    tmp_path: Path, capsys: pytest.CaptureFixture[str], monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.chdir(tmp_path)
    status, out, _ = said(capsys, "new", "tern.toml")
    assert status == 0
    assert "buildgen packet tern.toml" in out
    status, out, err = said(capsys, "check", "tern.toml")
    assert (status, err) == (0, "")
    status, _, err = said(capsys, "new", "tern.toml")
    assert status == 2
    assert "is there already" in err


def test_the_shipped_schema_is_the_models(tmp_path: Path) -> None:
    from buildgen.design.starter import SCHEMA, schema_text

    assert SCHEMA.read_text() == schema_text()


@pytest.mark.parametrize("name", ["marram", "samphire", "sedge", "starter"])
def test_the_schema_accepts_what_the_loader_accepts(name: str) -> None:
    import tomllib

    import jsonschema

    from buildgen.design.starter import STARTER, definition_schema

    path = STARTER if name == "starter" else SHIPPED / f"{name}.toml"
    data = tomllib.loads(path.read_text().replace('"NAME"', '"tern"'))
    jsonschema.Draft202012Validator(definition_schema()).validate(data)
    broken = {**data, "wing": {**data["wing"], "sektion": "clarky"}}
    assert not jsonschema.Draft202012Validator(definition_schema()).is_valid(broken)


def test_section_prints_and_writes(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    goal = tmp_path / "s.svg"
    status, out, _ = said(capsys, "section", "naca2412", "--write", str(goal))
    assert status == 0
    assert "thickness" in out
    assert goal.read_text().startswith("<svg")
    status, _, err = said(capsys, "section", "naca2412", "--write", str(tmp_path / "s.gif"))
    assert status == 2
    assert ".dat" in err


def test_balance_and_cut_do_not_load_the_cad_kernel(tmp_path: Path) -> None:
    import subprocess
    import sys

    code = (
        "import sys; from buildgen.cli import run\n"
        f"run(['balance', 'sedge']); run(['cut', 'sedge', '-o', {str(tmp_path)!r}])\n"
        "print([m for m in sys.modules if m.split('.')[0] in ('cadquery', 'OCP')])"
    )
    found = subprocess.run([sys.executable, "-c", code], capture_output=True, text=True, check=True)
    assert found.stdout.strip().splitlines()[-1] == "[]"
