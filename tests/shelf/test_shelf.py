"""A shelf of one's own over the shipped one."""

from __future__ import annotations

from pathlib import Path

import pytest

from buildgen.problems import DesignError
from buildgen.shelf import load_shelf


def test_an_own_entry_wins(tmp_path: Path) -> None:
    path = tmp_path / "mine.toml"
    path.write_text('[material.balsa]\nkind = "sheet"\ndensity_kg_m3 = 111\n'
                    "sheets = [[900, 100]]\nsource = 'own scale'\nseen = 'measured'\n")
    assert load_shelf((path,)).material("balsa").density_kg_m3 == 111
    assert load_shelf().material("balsa").density_kg_m3 != 111
    assert load_shelf((path,)).material("spruce").density_kg_m3 > 300


@pytest.mark.parametrize(
    ("text", "words"),
    [("[material.x]\ndensty_kg_m3 = 3\n", "densty_kg_m3"), ("[wood.x]\na = 1\n", "wood"),
     ('[material.x]\nkind = "plank"\n', "plank")],
)
def test_a_slip_in_an_own_shelf_is_told(text: str, words: str, tmp_path: Path) -> None:
    path = tmp_path / "mine.toml"
    path.write_text(text)
    with pytest.raises(DesignError) as error:
        load_shelf((path,)).material("x")
    assert words in str(error.value)
    assert "mine.toml" in str(error.value)


def test_an_unknown_name_offers_the_nearest() -> None:
    with pytest.raises(DesignError, match="balsa-light") as error:
        load_shelf().material("balsa-lite", "tail.material")
    assert error.value.problems[0].path == "tail.material"


def test_a_material_in_the_wrong_form_is_refused() -> None:
    with pytest.raises(DesignError, match="does not come as sheet"):
        load_shelf().material("music-wire", "wing.ribs.material", "sheet")


def test_what_must_not_go_under_a_laser_says_why() -> None:
    for name in ("carbon-tube", "abs", "polycarbonate", "xps"):
        material = load_shelf().material(name)
        assert material.laser == "no"
        assert len(material.laser_note) > 10


def test_a_weighed_wood_is_as_much_stronger_as_denser() -> None:
    balsa = load_shelf().material("balsa")
    assert balsa.bending_mpa is not None
    heavy = balsa.at_density(2 * balsa.density_kg_m3)
    assert heavy.bending_mpa == pytest.approx(2 * balsa.bending_mpa)
