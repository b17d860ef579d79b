"""The schema has what plugins declare, ours or others', and does without any."""

from __future__ import annotations

from dataclasses import dataclass

import pytest
from jsonschema import Draft202012Validator

from tunnelcalc.plugin.parameter import Parameter
from tunnelcalc.plugin.registry import Offer, PluginSource, Registry
from tunnelcalc.schema import project_schema
from tunnelcalc.vocabulary import Limits


@dataclass(frozen=True)
class Kind:
    name: str
    meaning: str
    parameters: tuple[Parameter, ...]


LINING = Kind(
    "tubes/1",
    "invented tubes",
    (
        Parameter("wall_mm", "wall", "mm", Limits(1, 50)),
        Parameter("grade", "grade", choices=("25", "none")),
        Parameter("joint", "joint", choices=("welded", "bolted")),
        Parameter(
            "bolt_count", "bolts", "", Limits(2, 8, whole=True), only_if=("joint", ("bolted",))
        ),
    ),
)
SOUND = {"kind": "tubes/1", "wall_mm": 5, "grade": 25, "joint": "bolted", "bolt_count": 4}


def schema_with(*kinds: Kind) -> dict:
    registry = Registry()
    source = PluginSource("tubes", "tubes", "1")
    registry.sources.append(source)
    for kind in kinds:
        registry.add(Offer("support_kind", kind.name, kind, source))
    return project_schema(registry)


def classes(element: dict) -> list:
    return [{"name": "a", "installed_at_m": 1, "elements": [element]}]


@pytest.mark.parametrize(
    ("change", "holds"),
    [
        pytest.param({}, True, id="sound"),
        pytest.param({"installed_at_m": 2}, True, id="its-own-distance"),
        pytest.param({"wall_mm": 51}, False, id="out-of-range"),
        pytest.param({"bolt_count": 2.5}, False, id="not-whole"),
        pytest.param({"grade": "none"}, True, id="another-word"),
        pytest.param({"grade": 26}, False, id="no-such-word"),
        pytest.param({"joint": "welded"}, False, id="of-no-use"),
        pytest.param({"thickness_mm": 5}, False, id="of-another-kind"),
        pytest.param({"kind": "shotcrete"}, False, id="a-kind-that-is-not-installed"),
    ],
)
def test_the_kind_of_a_stranger_is_checked_by_what_it_declares(change, holds):
    part = schema_with(LINING)["properties"]["support_classes"]
    assert Draft202012Validator(part).is_valid(classes({**SOUND, **change})) is holds


@pytest.mark.parametrize("name", ["wall_mm", "grade", "joint", "bolt_count"])
def test_every_parameter_that_has_a_use_is_required(name):
    part = schema_with(LINING)["properties"]["support_classes"]
    left = {key: value for key, value in SOUND.items() if key != name}
    assert not Draft202012Validator(part).is_valid(classes(left))


def test_meanings_units_and_conditions_stand_in_the_descriptions():
    part = schema_with(LINING)["properties"]["support_classes"]
    element = part["items"]["properties"]["elements"]["items"]["allOf"][0]["then"]
    told = {name: schema["description"] for name, schema in element["properties"].items()}
    assert told["wall_mm"] == "wall; a number at least 1, at most 50, in mm"
    assert told["grade"] == "grade; 25 or none"
    assert told["bolt_count"].startswith("bolts; only if joint is bolted; a whole number")
    assert element["description"] == "invented tubes"


def test_without_any_plugin_the_schema_is_still_one():
    schema = project_schema(Registry())
    Draft202012Validator.check_schema(schema)
    part = schema["properties"]["support_classes"]
    assert not Draft202012Validator(part).is_valid(classes(SOUND))
