"""The house has floors: a room imports only what stands below it or beside it, never in a circle.

The import statements of the source are read; nothing is imported here.
"""

from __future__ import annotations

import sys

import pytest
from contract.source import all_imports, circles, plugin_folders, within

PLUGINS = tuple(folder.name for folder in plugin_folders())

FLOORS = (
    (
        "tunnelcalc",
        "errors",
        "arrays",
        "chainage",
        "text",
        "vocabulary",
        "validity",
        "verification",
        "root_finding",
        "limits_statement",
        "calculation",
        "rock_mass",
        "ground_reaction",
        "schedule",
    ),
    ("sections", "support"),
    ("project", "results", "section_curves", "trade_off"),
    ("plugin", "pipeline", "outputs"),
    ("inputs", "api"),
    (
        *("run", "curves", "one_section", "explain", "schema", "starter", "testing", "tune"),
        *("builtin", *PLUGINS),
    ),
    ("cli", "__main__"),
)
FLOOR_OF = {room: floor for floor, rooms in enumerate(FLOORS) for room in rooms}

NUMERICAL = ("rock_mass", "ground_reaction", "support", "schedule", "root_finding")
NOT_FOR_NUMBERS = {
    *("yaml", "rich", "pluggy", "pathlib", "csv", "json", "os", "io", "sys", "logging"),
    *("inputs", "outputs", "cli", "plugin", "pipeline", "run", "api"),
}

IMPORTS = all_imports()
ARROWS = {name: within(imported, set(IMPORTS)) for name, imported in IMPORTS.items()}


def room(module: str) -> str:
    """`tunnelcalc.cli.main` lies in `cli`; a plugin's package is a room of its own."""
    package, _, rest = module.partition(".")
    return package if package != "tunnelcalc" or not rest else rest.split(".")[0]


def outside(module: str) -> set[str]:
    """Top-level names of what a module imports from elsewhere."""
    tops = {name.partition(".")[0] for name in IMPORTS[module]}
    return {top for top in tops if top != "tunnelcalc" and top not in PLUGINS}


def test_every_room_has_a_floor():
    assert {room(module) for module in IMPORTS} == set(FLOOR_OF)


@pytest.mark.parametrize("module", sorted(IMPORTS))
def test_no_module_imports_from_a_higher_floor(module):
    own = FLOOR_OF[room(module)]
    higher = {other for other in ARROWS[module] if FLOOR_OF[room(other)] > own}
    assert higher == set()


def test_no_module_imports_itself_through_others():
    assert circles(ARROWS) == []


def test_no_room_imports_itself_through_others():
    rooms: dict[str, set[str]] = {}
    for module, others in ARROWS.items():
        rooms.setdefault(room(module), set()).update(room(other) for other in others)
    assert circles({name: others - {name} for name, others in rooms.items()}) == []


def test_nothing_of_the_program_imports_its_built_ins_or_a_plugin():
    above = {"builtin", *PLUGINS}
    found = {
        (module, other)
        for module, others in ARROWS.items()
        for other in others
        if room(other) in above and room(module) != room(other)
    }
    assert found == set()


@pytest.mark.parametrize("module", [name for name in sorted(IMPORTS) if room(name) in NUMERICAL])
def test_a_numerical_room_knows_no_file_screen_or_plugin(module):
    own_rooms = {room(other) for other in ARROWS[module]}
    assert (outside(module) | own_rooms) & NOT_FOR_NUMBERS == set()


@pytest.mark.parametrize(
    ("library", "rooms"),
    [
        pytest.param("rich", {"cli"}, id="rich"),
        pytest.param("yaml", {"inputs"}, id="yaml"),
        pytest.param("pluggy", {"plugin"}, id="pluggy"),
        pytest.param("matplotlib", {"tunnelcalc_report"}, id="matplotlib"),
        pytest.param("pytest", {"testing"}, id="pytest"),
    ],
)
def test_a_library_is_known_to_one_room_alone(library, rooms):
    assert {room(module) for module in IMPORTS if library in outside(module)} == rooms


@pytest.mark.parametrize("module", [name for name in sorted(IMPORTS) if room(name) in PLUGINS])
def test_a_plugin_imports_of_ours_the_api_and_its_own_package_alone(module):
    allowed = {"tunnelcalc.api"}
    others = {other for other in ARROWS[module] if room(other) != room(module)}
    assert others <= allowed
    named = {name for name in IMPORTS[module] if name.startswith("tunnelcalc.")}
    assert all(name == "tunnelcalc.api" or name.startswith("tunnelcalc.api.") for name in named)


def test_the_program_needs_no_library_beyond_those_it_declares():
    declared = {"matplotlib", "numpy", "openpyxl", "pluggy", "python_ags4", "rich", "scipy", "yaml"}
    # `tunnelcalc.testing` is for test suites, which have their pytest.
    needed = set().union(*(outside(module) for module in IMPORTS)) - {"pytest"}
    assert needed - sys.stdlib_module_names == declared
