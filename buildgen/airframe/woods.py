"""Every material that a definition names, looked up before anything is made."""

from __future__ import annotations

from collections.abc import Iterator

from buildgen.airframe.shop import Shop
from buildgen.design.schema import Definition, Wing
from buildgen.problems import DesignError, Problem


def named_materials(d: Definition) -> Iterator[tuple[str, str, str]]:
    """(key, material, form it must come as) of the whole definition."""
    yield from _wing(d.wing)
    if d.power:
        yield "power.mount.material", d.power.mount.material, "print"
        yield "power.mount.rib_material", d.power.mount.rib_material, "sheet"
    if d.fuselage:
        for part in ("side", "deck", "former", "firewall"):
            yield f"fuselage.{part}_material", getattr(d.fuselage, f"{part}_material"), "sheet"
    if d.tail:
        yield "tail.material", d.tail.material, "sheet"
        yield "tail.block_material", d.tail.block_material, ""
    for table, name in ((d.fuselage, "fuselage"), (d.tail, "tail")):
        if table is not None and table.covering:
            yield f"{name}.covering", table.covering, "cover"


def _wing(wing: Wing) -> Iterator[tuple[str, str, str]]:
    yield "wing.ribs.material", wing.ribs.material, "sheet"
    if wing.ribs.root_material:
        yield "wing.ribs.root_material", wing.ribs.root_material, "sheet"
    yield from _spars(wing)
    if wing.leading_edge.kind != "none":
        yield "wing.leading_edge.material", wing.leading_edge.material, ""
    if wing.trailing_edge.kind != "none":
        yield "wing.trailing_edge.material", wing.trailing_edge.material, ""
    for n, control in enumerate(wing.control, start=1):
        key = f"wing.control[{n}]"
        yield f"{key}.material", control.material, ""
        yield f"{key}.spar_material", control.spar_material, "sheet"
        yield f"{key}.horn_material", control.horn_material, "sheet"
        if control.drive == "servo":
            yield f"{key}.servo.material", control.servo.material, "sheet"
            yield f"{key}.servo.rib_material", control.servo.rib_material, "sheet"
    if wing.jig:
        yield "wing.jig.material", wing.jig.material, "sheet"
    if wing.tip_fin:
        yield "wing.tip_fin.material", wing.tip_fin.material, "sheet"
    if wing.gusset:
        yield "wing.gusset.material", wing.gusset.material, "sheet"
    if wing.covering:
        yield "wing.covering", wing.covering, "cover"


def _spars(wing: Wing) -> Iterator[tuple[str, str, str]]:
    for n, spar in enumerate(wing.spar, start=1):
        yield f"wing.spar[{n}].material", spar.material, ""
        if spar.kind == "capped":
            yield f"wing.spar[{n}].web_material", spar.web_material, "sheet"
            if spar.brace_mm:
                yield f"wing.spar[{n}].brace_material", spar.brace_material, "sheet"


def check_materials(shop: Shop) -> None:
    """Raise DesignError with every name that the shelf does not have, or not in that form."""
    problems: list[Problem] = []
    for key, name, form in named_materials(shop.definition):
        try:
            shop.material(name, key, form)
        except DesignError as error:
            problems += error.problems
    if problems:
        raise DesignError(*problems)
