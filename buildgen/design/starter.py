"""`buildgen new`: a commented starter, and the JSON Schema that editors complete it by."""

from __future__ import annotations

import json
import re
from pathlib import Path
from typing import Any

from buildgen.design.schema import Definition
from buildgen.problems import DesignError, Problem

STARTER = Path(__file__).parent / "starter.toml"
SCHEMA = Path(__file__).parent / "definition.schema.json"
DIALECT = "https://json-schema.org/draft/2020-12/schema"
UNITS = {"_mm": "_in", "_g": "_oz"}


def definition_schema() -> dict[str, Any]:
    """JSON Schema of the definition, with the keys in inches and ounces beside the metric ones."""
    schema = Definition.model_json_schema(by_alias=True)
    for table in (schema, *schema.get("$defs", {}).values()):
        _with_inches(table)
    return {"$schema": DIALECT, **schema}


def _with_inches(table: dict[str, Any]) -> None:
    properties = table.get("properties", {})
    required = table.get("required", [])
    for key in list(properties):
        ending = next((e for e in UNITS if key.endswith(e)), None)
        if ending is None:
            continue
        other = key[: -len(ending)] + UNITS[ending]
        properties[other] = {
            "description": f"{key} in {'inches' if ending == '_mm' else 'ounces'}; fractions as"
            ' text, "3/32".',
            "anyOf": [{"type": "number"}, {"type": "string"},
                      {"type": "array", "items": {"type": ["number", "string"]}}],
        }
        if key in required:
            required.remove(key)
            table.setdefault("allOf", []).append(
                {"anyOf": [{"required": [key]}, {"required": [other]}]}
            )
    if not required:
        table.pop("required", None)


def schema_text() -> str:
    """The shipped schema file."""
    return json.dumps(definition_schema(), indent=1) + "\n"


def write_starter(path: Path) -> str:
    """Write a starter definition that builds as it stands; never over an existing file.

    Returns:
        What to do next.

    Raises:
        DesignError: the file is there already, or cannot be written.
    """
    if path.suffix != ".toml":
        path = path.with_name(path.name + ".toml")
    if path.exists():
        raise DesignError(Problem("", f"{path.name} is there already.",
                                  "Give another name; nothing was changed.", str(path)))
    name = re.sub(r"[^a-z0-9-]+", "-", path.stem.lower()).strip("-") or "aircraft"
    text = STARTER.read_text("utf-8").replace('"NAME"', f'"{name}"')
    text = text.replace("SCHEMA_FILE", SCHEMA.resolve().as_uri())
    try:
        path.write_text(text, "utf-8", newline="\n")
    except OSError as error:
        raise DesignError(
            Problem("", f"{path.name} cannot be written.", f"{error.strerror}.", str(path))
        ) from None
    return f"{path} written; build it with: buildgen packet {path}"
