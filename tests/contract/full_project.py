"""An invented project with every key that project.yaml can have, and its places in the schema.

Its paths name no files: what is wrong with it is known, and other faults are told beside it.
"""

from __future__ import annotations

import copy
from pathlib import Path
from typing import Any

import yaml
from jsonschema import Draft202012Validator

from tunnelcalc.errors import InputError, Problem
from tunnelcalc.inputs.project_file import read_project
from tunnelcalc.plugin.registry import load_plugins
from tunnelcalc.project import DEFAULT_METHODS
from tunnelcalc.schema import project_schema

REGISTRY = load_plugins()
SCHEMA = project_schema(REGISTRY)
KINDS = REGISTRY.names("support_kind")
SHAPE = {"span_m": 8, "height_m": 6, "area_m2": 40, "equivalent_radius": "equal_area"}

Place = tuple[str | int, ...]


def full_project(without_profiles: bool = False) -> dict[str, Any]:
    """A new copy. An opening has either profiles or a shape of its own."""
    profiles = [
        {"name": "drive", "from_m": 0, "to_m": "0+060.00", "radius_m": 4},
        {"name": "lay-by", "from_m": 60, "to_m": 120, **SHAPE},
    ]
    return copy.deepcopy(
        {
            "title": "Invented drive",
            "opening": {
                **({"radius_m": 4} if without_profiles else {"profiles": profiles}),
                "axis": {"table": "axis.csv", "level_of": "crown"},
            },
            "chainage": {
                "notation": "km+m",
                "prefix": "km ",
                "direction": "ascending",
                "start": "0+000.00",
                "equations": [{"back": 60, "ahead": "0+070.00"}],
            },
            "ground": {
                "table": "ground.csv",
                "units": "units.csv",
                "section_length_m": 10,
                "gaps": [{"from_m": 20, "to_m": "0+030.00", "reason": "invented"}],
                "other_columns": ["remark"],
                "aliases": {"overburden": "cover_m"},
                "terrain": "terrain.csv",
                "water_table": "water.csv",
                "layers": "layers.csv",
                "tests": "tests.csv",
                "estimates": {
                    "gsi": ["measured", "jcond89_rqd", "rmr89_dry", "q_prime", "block_volume"],
                    "intact_strength_mpa": ["laboratory", "point_load", "measured"],
                    "mi": ["measured", "laboratory"],
                    "residual_gsi": ["measured", "cai_2007"],
                },
                "drainage": "drained",
                "values": "cautious",
                "cautious_rule": "mean_95",
            },
            "methods": {
                **DEFAULT_METHODS,
                "strength": {"default": "hoek_brown_2002", "by_unit": {"clay": "mohr_coulomb"}},
            },
            "tables": {"steel_sets": {"profile": "profiles.csv"}},
            "plugins": [REGISTRY.sources[0].plugin],
            "support_classes": [
                {
                    "name": "all",
                    "installed_at_m": 2,
                    "elements": [element(kind) for kind in KINDS],
                }
            ],
            "criteria": {
                "factor_of_safety": 1.5,
                "closure_pct": 1,
                "crown_dead_weight": "yes",
                "composite_lining": "yes",
                "lining_interface": "full_slip",
                "lining_tensile_strength_mpa": 2,
            },
            "schedule": {"minimum_zone_m": 20, "carry_m": 5},
            "flags": {
                "not_assessed": "outside",
                "thresholds": {
                    "shallow_cover": {"advisory_below": 8, "outside_below": 3, "origin": "invented"}
                },
                "overrides": [
                    {
                        "flag": "portal",
                        "from_m": 0,
                        "to_m": "0+020.00",
                        "person": "A. Person",
                        "reason": "invented",
                    }
                ],
            },
        }
    )


def element(kind_name: str) -> dict[str, Any]:
    """An element at the middle of every range; the last choice is made that leaves room for
    further parameters. What has no use with the choices is left out."""
    made: dict[str, Any] = {"kind": kind_name, "installed_at_m": 1}
    for parameter in REGISTRY.support_kind(kind_name).parameters:
        if parameter.only_if is not None:
            made[parameter.only_if[0]] = parameter.only_if[1][-1]
        limits = parameter.limits
        made[parameter.name] = made.get(
            parameter.name,
            parameter.choices[-1]
            if parameter.choices
            else (max(limits.minimum, 0) + min(limits.maximum, 1e6)) / 2,
        )
    for parameter in REGISTRY.support_kind(kind_name).parameters:
        if parameter.only_if is not None:
            other, words = parameter.only_if
            if made.get(other) not in words:
                del made[parameter.name]
    return made


def changed(project: dict[str, Any], place: Place, value: object) -> dict[str, Any]:
    """The project with another value at a place."""
    *above, last = place
    inner: Any = project
    for step in above:
        inner = inner[step]
    inner[last] = value
    return project


def mappings(value: object, place: Place = ()) -> list[Place]:
    """Places of all mappings."""
    found = [place] if isinstance(value, dict) else []
    for step, below in _entries(value):
        found += mappings(below, (*place, step))
    return found


def leaves(value: object, place: Place = ()) -> list[Place]:
    """Places of all single values."""
    if not isinstance(value, dict | list):
        return [place]
    return [leaf for step, below in _entries(value) for leaf in leaves(below, (*place, step))]


def _entries(value: object) -> list[tuple[str | int, object]]:
    if isinstance(value, dict):
        return list(value.items())
    return list(enumerate(value)) if isinstance(value, list) else []


def schema_at(place: Place) -> dict[str, Any]:
    """The part of the schema that describes a place of the full project."""
    part = SCHEMA
    value: Any = full_project(without_profiles="profiles" not in place)
    for step in place:
        if isinstance(step, int):
            part = part["items"]
            part = part["allOf"][step]["then"] if "allOf" in part else part
        else:
            part = _branch(part, value)
            part = part.get("properties", {}).get(step) or part["additionalProperties"]
        value = value[step]
    return _branch(part, value)


def _branch(part: dict[str, Any], value: object) -> dict[str, Any]:
    """Where one of two things may stand, what holds for the one that does."""
    if "if" not in part or "properties" in part:
        return part
    holds = Draft202012Validator(part["if"]).is_valid(value)
    return part["then" if holds else "else"]


def problems_of(folder: Path, project: object) -> tuple[Problem, ...]:
    """What the program tells about a project that stands alone in a folder."""
    (folder / "project.yaml").write_text(yaml.safe_dump(project, sort_keys=False))
    try:
        read_project(folder, REGISTRY)
    except InputError as error:
        return error.problems
    return ()
