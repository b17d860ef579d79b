"""Each public formula says what goes in, in which unit, and where it comes from."""

from __future__ import annotations

import ast
import re

import pytest
from contract.source import (
    described_parameters,
    parts_of,
    product_files,
    public_functions,
)

ROOMS = ("rock_mass", "ground_reaction", "support", "schedule", "root_finding")

FUNCTIONS = {
    f"{module}.{function.name}": function
    for module, path in product_files().items()
    if module.split(".")[1:2] and module.split(".")[1] in (*ROOMS, "formulas", "pattern")
    for function in public_functions(path.read_text(encoding="utf-8"))
}

UNIT = re.compile(r"\[[^\[\]]+\]")
WITHOUT_UNIT = re.compile(r"\bbool\b|\bwhether\b|\bclass numbers?\b|\bnumbers of\b|\bin one unit\b")
"""What has no unit, or any: yes and no, the number of a class or stretch, a demand beside a
capacity."""
EXCEPTIONS = {
    # The unit of whatever the caller solves for.
    *(("tunnelcalc.root_finding.increasing_roots", n) for n in ("lower", "upper", "start")),
    # Codes: pass, fail, not evaluated.
    ("tunnelcalc.support.adequacy.class_outcome", "outcomes"),
}


def arguments(function: ast.FunctionDef) -> dict[str, str]:
    """Annotations by name."""
    spec = function.args
    every = (*spec.posonlyargs, *spec.args, *spec.kwonlyargs)
    return {a.arg: ast.unparse(a.annotation) if a.annotation else "" for a in every}


def is_measured(annotation: str) -> bool:
    """Whether an argument is an array or a number."""
    return bool(re.fullmatch(r"Array|float|Sequence\[(Array|float)\]", annotation))


def part(name: str, heading: str) -> str:
    return parts_of(ast.get_docstring(FUNCTIONS[name]) or "").get(heading, "")


def test_the_formulas_are_found():
    found = {name.rpartition(".")[2] for name in FUNCTIONS}
    assert {
        "hoek_brown_constants",
        "ground_reaction",
        "equilibrium",
        "zone_classes",
        "increasing_roots",
        "ring_stiffness_mpa_per_m",
        "least_length_by_span_m",
    } <= found


@pytest.mark.parametrize("name", sorted(FUNCTIONS))
def test_every_argument_is_described_and_nothing_else(name):
    assert set(described_parameters(part(name, "Parameters"))) == set(arguments(FUNCTIONS[name]))


@pytest.mark.parametrize("name", sorted(FUNCTIONS))
def test_every_array_and_number_has_a_unit(name):
    described = described_parameters(part(name, "Parameters"))
    without = {
        argument
        for argument, annotation in arguments(FUNCTIONS[name]).items()
        if is_measured(annotation)
        and not UNIT.search(described.get(argument, ""))
        and not WITHOUT_UNIT.search(described.get(argument, ""))
        and (name, argument) not in EXCEPTIONS
    }
    assert without == set()


@pytest.mark.parametrize("name", sorted(FUNCTIONS))
def test_every_formula_names_its_source(name):
    assert part(name, "Source").strip()


@pytest.mark.parametrize("name", sorted(FUNCTIONS))
def test_every_formula_begins_with_one_line_on_what_it_gives(name):
    first, _, rest = (ast.get_docstring(FUNCTIONS[name]) or "").partition("\n")
    assert first.endswith(".")
    assert rest.startswith("\n")


@pytest.mark.parametrize("name", sorted(FUNCTIONS))
def test_every_argument_has_a_type(name):
    assert all(arguments(FUNCTIONS[name]).values())
    assert FUNCTIONS[name].returns is not None
