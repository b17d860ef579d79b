"""The projects that come with the program, checked by a validator that is not ours."""

from __future__ import annotations

import copy
import json
import re
from importlib.metadata import distribution
from pathlib import Path

import pytest
import yaml
from jsonschema import Draft202012Validator

from tunnelcalc.plugin.hooks import ENTRY_POINT_GROUP
from tunnelcalc.plugin.registry import load_plugins
from tunnelcalc.schema import schema_text

PROJECTS = Path(__file__).parents[2] / "projects"
SCHEMA_FILE = PROJECTS / "project.schema.json"
FOLDERS = sorted(path.parent for path in PROJECTS.glob("*/project.yaml"))
MODELINE = re.compile(r"# yaml-language-server: \$schema=(\S+)\n")


@pytest.fixture(scope="module")
def validator() -> Draft202012Validator:
    schema = json.loads(SCHEMA_FILE.read_text(encoding="utf-8"))
    Draft202012Validator.check_schema(schema)
    return Draft202012Validator(schema)


def content(folder: Path) -> dict:
    return yaml.safe_load((folder / "project.yaml").read_text(encoding="utf-8"))


def test_the_schema_that_stands_there_is_that_of_the_built_ins():
    own = distribution("tunnelcalc").entry_points.select(group=ENTRY_POINT_GROUP)
    assert SCHEMA_FILE.read_text(encoding="utf-8") == schema_text(load_plugins(own)), (
        "renew it: tunnelcalc schema --out projects/project.schema.json"
    )


def test_there_are_projects():
    assert {"demo", "small"} <= {folder.name for folder in FOLDERS}


@pytest.mark.parametrize("folder", FOLDERS, ids=lambda folder: folder.name)
def test_a_project_points_to_the_schema_and_meets_it(folder, validator):
    text = (folder / "project.yaml").read_text(encoding="utf-8")
    named = MODELINE.match(text)
    assert named is not None
    assert (folder / named[1]).resolve() == SCHEMA_FILE
    assert [error.message for error in validator.iter_errors(content(folder))] == []


def set_at(*place_and_value):
    *place, last, value = place_and_value

    def damage(project):
        for step in place:
            project = project[step]
        project[last] = value

    return damage


def removed(*place):
    *above, last = place

    def damage(project):
        for step in above:
            project = project[step]
        del project[last]

    return damage


C4, BOLTS, SETS = ("support_classes", 3), 0, 2
BLOCKED = ("support_classes", 4, "elements", 1)
BROKEN = {
    "no-title": removed("title"),
    "blank-title": set_at("title", "  "),
    "no-criteria": removed("criteria"),
    "unknown-key": set_at("notes", "x"),
    "unknown-key-of-ground": set_at("ground", "tabel", "x.csv"),
    "unknown-parameter": set_at(*C4, "elements", BOLTS, "thickness_mm", 100),
    "unknown-kind": set_at(*C4, "elements", BOLTS, "kind", "rock_bolt"),
    "parameter-missing": removed(*C4, "elements", BOLTS, "length_m"),
    "parameter-too-small": set_at(*C4, "elements", BOLTS, "length_m", 0.4),
    "parameter-at-an-end-that-is-outside": set_at(*C4, "elements", BOLTS, "capacity_kn", 0),
    "parameter-of-text": set_at(*C4, "elements", BOLTS, "length_m", "4,0"),
    "parameter-of-a-list": set_at(*C4, "elements", BOLTS, "length_m", [4]),
    "choice-misspelt": set_at(*C4, "elements", SETS, "contact", "embeded"),
    "parameter-without-use": set_at(*C4, "elements", SETS, "block_width_mm", 200),
    "conditional-parameter-missing": removed(*BLOCKED, "block_width_mm"),
    "installed-nowhere": removed("support_classes", 0, "installed_at_m"),
    "reserved-name": set_at(*C4, "name", "none_adequate"),
    "no-classes": set_at("support_classes", []),
    "classes-by-name": set_at("support_classes", {"C1": {}}),
    "radius-too-large": set_at("opening", "radius_m", 300),
    "radius-beside-span": set_at("opening", "span_m", 9),
    "opening-empty": set_at("opening", {}),
    "opening-without-profiles": set_at("opening", []),
    "half-an-opening": set_at("opening", {"span_m": 9, "height_m": 6, "area_m2": 44}),
    "profile-without-end": set_at("opening", [{"name": "a", "from_m": 0, "radius_m": 4}]),
    "profiles-beside-radius": set_at(
        "opening", "profiles", [{"name": "a", "from_m": 0, "to_m": 9, "radius_m": 4}]
    ),
    "axis-of-what": set_at("opening", "axis", {"table": "axis.csv"}),
    "gap-without-reason": set_at("ground", "gaps", [{"from_m": 0, "to_m": 9}]),
    "gap-empty": set_at("ground", "gaps", None),
    "cautious-by-no-rule": set_at("ground", "values", "cautious"),
    "source-twice": set_at("ground", "estimates", {"gsi": ["measured", "measured"]}),
    "source-of-another": set_at("ground", "estimates", {"gsi": ["point_load"]}),
    "descending-from-nowhere": set_at("chainage", {"direction": "descending"}),
    "equation-by-half": set_at("chainage", {"equations": [{"back": 5}]}),
    "method-unknown": set_at("methods", "strength", "hoek_brown_1980"),
    "threshold-of-no-flag": set_at("flags", {"thresholds": {"deep": {"advisory_above": 1}}}),
    "threshold-of-no-side": set_at("flags", {"thresholds": {"low_gsi": {"outside_below": 1}}}),
    "threshold-of-yes-or-no": set_at("flags", {"thresholds": {"creep": {"advisory_above": 1}}}),
    "threshold-without-value": set_at("flags", {"thresholds": {"low_gsi": {"origin": "x"}}}),
    "not-assessed-as-clear": set_at("flags", {"not_assessed": "clear"}),
    "override-by-nobody": set_at(
        "flags", {"overrides": [{"flag": "portal", "from_m": 0, "to_m": 9, "reason": "x"}]}
    ),
    "method-of-unit-unknown": set_at("methods", {"strength": {"by_unit": {"clay": "clayey"}}}),
    "method-default-unknown": set_at(
        "methods", {"strength": {"default": "x", "by_unit": {"clay": "mohr_coulomb"}}}
    ),
    "method-without-units": set_at("methods", {"strength": {"default": "mohr_coulomb"}}),
    "method-of-units-with-more": set_at(
        "methods", {"strength": {"by_unit": {"clay": "mohr_coulomb"}, "by": "me"}}
    ),
    "method-of-a-list": set_at("methods", {"strength": ["mohr_coulomb"]}),
    "drainage-of-another-sort": set_at("ground", "drainage", "partly"),
    "dead-weight-perhaps": set_at("criteria", "crown_dead_weight", "perhaps"),
    "lining-without-its-options": set_at("criteria", "composite_lining", "yes"),
    "options-of-a-lining-that-is-not-chosen": set_at("criteria", "lining_interface", "no_slip"),
    "water-on-lining-by-choice": set_at("criteria", "water_on_lining", "yes"),
    "residual-of-another": set_at("ground", "estimates", {"residual_gsi": ["rmr89_dry"]}),
    "plugin-unknown": set_at("plugins", ["no_such_plugin"]),
}


@pytest.mark.parametrize("damage", BROKEN.values(), ids=BROKEN.keys())
def test_a_broken_project_is_refused(damage, validator):
    project = copy.deepcopy(content(PROJECTS / "demo"))
    assert validator.is_valid(project)
    damage(project)
    assert not validator.is_valid(project)


def installed_by_each_element(project):
    one_class = project["support_classes"][4]
    del one_class["installed_at_m"]
    for element in one_class["elements"]:
        element["installed_at_m"] = 2


SOUND = {
    "number-in-quotes": set_at("opening", "radius_m", "5.2"),
    "exponent-that-yaml-takes-for-text": set_at("opening", "radius_m", "52e-1"),
    "title-of-a-number": set_at("title", 2030),
    "installed-by-each-element": installed_by_each_element,
    "no-methods": removed("methods"),
    "methods-by-unit": set_at(
        "methods",
        {"strength": {"by_unit": {"clay": "mohr_coulomb"}}, "closure_profile": "panet_1995"},
    ),
    "drained": set_at("ground", "drainage", "drained"),
    "dead-weight-that-yaml-takes-for-a-truth": set_at("criteria", "crown_dead_weight", True),
    "dead-weight-no": set_at("criteria", "crown_dead_weight", "no"),
    "residual-estimated": set_at("ground", "estimates", {"residual_gsi": ["cai_2007"]}),
    "list-of-profiles": set_at(
        "opening",
        [
            {"name": "a", "from_m": 0, "to_m": "1+850.00", "radius_m": 4},
            {
                "name": "b",
                "from_m": "1+850.00",
                "to_m": 4000,
                "span_m": 9,
                "height_m": 7,
                "area_m2": 50,
                "equivalent_radius": "half_larger_dimension",
            },
        ],
    ),
}


@pytest.mark.parametrize("change", SOUND.values(), ids=SOUND.keys())
def test_what_the_program_takes_is_not_refused(change, validator):
    project = content(PROJECTS / "demo")
    change(project)
    assert [error.message for error in validator.iter_errors(project)] == []
