"""Any valid definition gives a kit that fits."""

from __future__ import annotations

import tempfile
from pathlib import Path

from hypothesis import HealthCheck, assume, given, settings
from hypothesis import strategies as st

from buildgen import build, load
from buildgen.checks.fit import fit_of
from buildgen.problems import DesignError

TEXT = """
name = "tern"
[wing]
section = "{section}"
incidence_deg = {incidence}
rib_spacing_mm = {spacing}
[wing.ribs]
edges = "{edges}"
{edge}
[[wing.panel]]
span_mm = {span}
root_chord_mm = {root}
tip_chord_mm = {tip}
sweep_mm = {sweep}
dihedral_deg = {dihedral}
twist_deg = {twist}
{more}
{spar}
[laser]
slip_mm = {slip}
{power}
[fuselage]
side_thickness_mm = {side}
station = [
  {{ x_mm = -140, width_mm = {nose}, top_mm = 14, bottom_mm = -44 }},
  {{ x_mm = -10, width_mm = {body}, top_mm = 14, bottom_mm = {belly} }},
  {{ x_mm = 190, width_mm = {body}, top_mm = 14, bottom_mm = {belly} }},
  {{ x_mm = 640, width_mm = 20, top_mm = {end}, bottom_mm = -10 }},
]
[tail]
arm_mm = {arm}
thickness_mm = {tail}
tailplane = {{ span_mm = 380, root_chord_mm = 105, sweep_mm = {tail_sweep} }}
fin = {{ span_mm = 130, root_chord_mm = 105, tip_chord_mm = 80 }}
"""
SPARS = (
    "[[wing.spar]]\nouter_mm = 8\ninner_mm = 6\nat_chord = 0.3",
    "[[wing.spar]]\nkind = \"rod\"\nmaterial = \"carbon-rod\"\nouter_mm = 5\nat_chord = 0.3",
    "[[wing.spar]]\nkind = \"strip\"\nmaterial = \"spruce\"\nwidth_mm = 6\nheight_mm = 3\n"
    "place = \"top\"\n[[wing.spar]]\nkind = \"strip\"\nmaterial = \"spruce\"\nwidth_mm = 6\n"
    "height_mm = 3\nplace = \"bottom\"",
    "[[wing.spar]]\nouter_mm = 10\ninner_mm = 8\nat_chord = 0.28\n[[wing.spar]]\nouter_mm = 5\n"
    "inner_mm = 3\nat_chord = 0.6",
    "[[wing.spar]]\nkind = \"capped\"\nmaterial = \"spruce\"\nwidth_mm = 6\nheight_mm = 3\n"
    "web_mm = [2, 1.5]\nto_mm = 460",
    "[[wing.spar]]\nkind = \"capped\"\nmaterial = \"spruce\"\nwidth_mm = 8\nheight_mm = 3\n"
    "web = \"both\"\nat_tip_chord = 0.33",
)
STRIP = "[wing.leading_edge]\nkind = \"strip\"\nsize_mm = 6\n"
EDGES = (
    "", "[wing.leading_edge]\nkind = \"round\"\nmaterial = \"dowel\"\nsize_mm = 6",
    "[wing.leading_edge]\nsize_mm = 8\n[wing.trailing_edge]\nwidth_mm = 30",
    "[wing.trailing_edge]\nkind = \"none\"", STRIP,
    STRIP + "[wing.sheeting]\n[wing.trailing_edge]\nkind = \"sheet\"\nwidth_mm = 28",
    STRIP + "[wing.sheeting]\ncapstrip_mm = 8",
    "[wing.trailing_edge]\nkind = \"blocks\"\nwidth_mm = 24\n[wing.tip]\nkind = \"sheet\"",
)
MOTOR = 'motor = { mass_g = 24, pattern = "16x16" }\n' \
        'propeller = { diameter_mm = 127, pitch_mm = 76 }'
POWERS = (
    "", f"[power]\nmotors = 2\nfirst_mm = 170\n{MOTOR}",
    f"[power]\nmotors = 2\nfirst_mm = 190\ndown_deg = 3\nside_deg = 2\n{MOTOR}",
    f'[power]\nplace = "nose"\nmotors = 1\ndown_deg = 2\n{MOTOR}',
    f'[power]\nmotors = 2\nfirst_mm = 180\nmount = {{ edge = "trailing" }}\n{MOTOR}',
)
PANELS = (
    "", "[[wing.panel]]\nspan_mm = 180\ntip_chord_mm = 120\ndihedral_deg = {up}\nsweep_mm = 25",
)


def size(low: float, high: float) -> st.SearchStrategy[float]:
    return st.floats(low, high).map(lambda v: round(v, 1))


DEFINITIONS = st.fixed_dictionaries({
    "section": st.sampled_from(("naca2412", "naca0012", "clarky", "sd8020")),
    "incidence": size(-2, 4), "spacing": size(40, 80),
    "edges": st.sampled_from(("smaller", "larger")), "edge": st.sampled_from(EDGES),
    "span": size(330, 520), "root": size(170, 230), "tip": size(140, 170), "sweep": size(-20, 90),
    "dihedral": st.sampled_from((0.0, 0.0, 2.5, 6.0)), "twist": size(-3, 1),
    "panel": st.sampled_from(PANELS), "up": size(-6, 12), "spar": st.sampled_from(SPARS),
    "slip": size(0.1, 0.3), "power": st.sampled_from(POWERS), "side": st.sampled_from((2.0, 3.0)),
    "nose": size(40, 56), "body": size(46, 70), "belly": size(-60, -36), "end": size(4, 20),
    "arm": size(400, 470), "tail": st.sampled_from((3.0, 4.0)), "tail_sweep": size(0, 40),
})


def text_of(given_: dict[str, object]) -> str:
    """As TOML; the second panel brings its own dihedral."""
    more = str(given_["panel"]).format(up=given_["up"])
    return TEXT.format(**{k: v for k, v in given_.items() if k not in ("panel", "up")}, more=more)


@settings(max_examples=12,
          suppress_health_check=[HealthCheck.too_slow, HealthCheck.filter_too_much])
@given(DEFINITIONS)
def test_a_valid_definition_gives_a_kit_that_fits(given_: dict[str, object]) -> None:
    with tempfile.TemporaryDirectory() as folder:
        path = Path(folder) / "tern.toml"
        path.write_text(text_of(given_))
        try:
            kit = build(load(path))
        except DesignError:
            assume(False)
        fit = fit_of(kit)
    assert len(fit.joints) > 30
    assert [f.says for f in fit.findings] == []
