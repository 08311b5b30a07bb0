"""The definition's own rules."""

from __future__ import annotations

import pytest
from pydantic import ValidationError

from buildgen.design.meeting import meeting_faults
from buildgen.design.schema import Definition

LEAST = {"name": "tern", "wing": {"panel": [{"span_mm": 400.0, "root_chord_mm": 180.0}]}}


def test_the_least_definition_has_a_default_for_everything_else() -> None:
    made = Definition.model_validate(LEAST)
    assert made.wing.section == "clarky"
    assert list(meeting_faults(made)) == []


@pytest.mark.parametrize(
    ("wing", "words"),
    [
        ({"panel": [{"span_mm": 400.0}]}, "root"),
        ({"panel": [{"span_mm": 400.0, "root_chord_mm": 180.0},
                    {"span_mm": 200.0, "root_chord_mm": 150.0}]}, "do not meet"),
        ({"panel": [{"span_mm": 400.0, "root_chord_mm": 180.0, "rib_count": 4,
                     "rib_spacing_mm": 50.0}]}, "Leave one out"),
    ],
)
def test_faults_between_keys(wing: dict, words: str) -> None:  # type: ignore[type-arg]
    made = Definition.model_validate({**LEAST, "wing": wing})
    found = list(meeting_faults(made))
    assert len(found) == 1
    assert words in str(found[0])


def test_models_are_frozen_and_refuse_unknown_keys() -> None:
    made = Definition.model_validate(LEAST)
    with pytest.raises(ValidationError):
        made.name = "other"  # type: ignore[misc]
    with pytest.raises(ValidationError):
        Definition.model_validate({**LEAST, "colour": "red"})


@pytest.mark.parametrize("value", ["180", True, float("nan"), float("inf"), -1.0, 0.0, None, [1.0]])
def test_a_length_is_a_number_above_zero(value: object) -> None:
    wing = {"panel": [{"span_mm": value, "root_chord_mm": 180.0}]}
    with pytest.raises(ValidationError):
        Definition.model_validate({**LEAST, "wing": wing})
