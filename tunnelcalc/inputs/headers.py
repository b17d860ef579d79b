"""Headers as people write them: aliases of the project, units in brackets, capitals and spaces.

`Cover (m)` is `cover_m`. A name whose unit is not stated stays unknown, and one whose unit is
another is refused: values are never converted.
"""

from __future__ import annotations

import re
from collections.abc import Iterable, Mapping
from dataclasses import dataclass, replace

from tunnelcalc.errors import Problems
from tunnelcalc.plugin.raw_table import RawTable
from tunnelcalc.text import quoted
from tunnelcalc.vocabulary import DEVIATION_SUFFIX, GROUND, UNIT_SUFFIXES, ground_quantity

_WITH_UNIT = re.compile(r"(.*\S)\s*[(\[]([^()\[\]]*)[)\]]", re.DOTALL)
_AFTER_UNIT = ("sd", *(suffix.strip("_") for suffix in UNIT_SUFFIXES))
_SUFFIXES = (DEVIATION_SUFFIX, *UNIT_SUFFIXES)

_SAME_UNIT = {
    "": ("", "-", "\u2013", "\u2014", "1"),
    "m": ("m", "metre", "metres", "meter", "meters"),
    "MPa": ("mpa", "n/mm2", "mn/m2"),
    "kN/m3": ("kn/m3",),
    "deg": ("deg", "\u00b0", "degree", "degrees"),
    "%": ("%", "pct", "percent"),
    "cm3": ("cm3",),
    "L/min/10m": ("l/min/10m",),
}
"""How people write the units of the vocabulary, squeezed; none of these needs a factor."""


@dataclass(frozen=True, slots=True)
class _Name:
    """A name of the vocabulary, its unit, and the name without the unit."""

    name: str
    unit: str
    bare: str


def understood(
    table: RawTable,
    aliases: Mapping[str, str],
    units: Mapping[str, str],
    kept: Iterable[str],
    problems: Problems,
) -> RawTable:
    """The table with the program's own names in its header wherever they are meant for certain.

    Parameters
    ----------
    aliases : names of the vocabulary by header, as the project states them.
    units : units of the columns that this table has besides the ground quantities, by name.
    kept : headers that mean what the project says, and nothing to the program.

    A column about whose unit a problem was told keeps its meaning, so that it is not told again
    as unknown; one whose meaning is not clear leaves the table.
    """
    names = _names(units)
    as_written = {*names, *kept}
    spaced = {_spaces(header): name for header, name in aliases.items()}
    header: list[str] = []
    left_out: set[int] = set()
    for column, written in enumerate(table.header):
        found = (
            written if written in as_written else _meaning(table, column, spaced, names, problems)
        )
        if found is None:
            left_out.add(column)
        header.append(found or written)
    stay = [column for column in range(len(header)) if column not in left_out]
    return replace(
        table,
        header=tuple(header[column] for column in stay),
        columns=tuple(table.columns[column] for column in stay),
        column_numbers=tuple(table.number_of(column) for column in stay),
    )


def _names(units: Mapping[str, str]) -> dict[str, _Name]:
    plain = {quantity.name: quantity.unit for quantity in GROUND.values()} | dict(units)
    names = {name: _Name(name, unit, _bare(name, unit)) for name, unit in plain.items()}
    for name in list(names.values()):
        for suffix in _SUFFIXES:
            quantity = ground_quantity(name.name + suffix) if name.name in GROUND else None
            if quantity is not None:
                names[quantity.name] = _Name(quantity.name, quantity.unit, name.bare + suffix)
    return names


def _bare(name: str, unit: str) -> str:
    """A name without its unit: `cover` of `cover_m`."""
    words = {"%": "pct", "": ""}.get(unit, _key(unit.replace("/", "_")))
    return name.removesuffix(f"_{words}") if words else name


def _meaning(
    table: RawTable,
    column: int,
    aliases: Mapping[str, str],
    names: Mapping[str, _Name],
    problems: Problems,
) -> str | None:
    """The name that a header means; as it is where it means none; None where it is not clear."""
    written = table.header[column]
    whole = _spaces(written)
    label, unit = _parts(whole)
    alias = aliases.get(whole) or aliases.get(label)
    if alias is not None and alias in names:
        fits = [names[alias]]
    else:
        fits = [name for name in names.values() if _key(label) in (name.name, name.bare)]
    if len(fits) == 1:
        return _with_unit_checked(table, column, fits[0], unit, alias is not None, problems)
    plain = [name for name in names.values() if not name.name.endswith(_SUFFIXES)]
    partial = [name.name for name in plain if unit and _is_part(label, name, unit)]
    if len(fits) < 2 and len(partial) < 2:
        return written
    candidates = [name.name for name in fits] or partial
    problems.add(
        table.head(column),
        "may mean several quantities",
        name=f"column {quoted(written)}",
        allowed=", ".join(candidates),
        fix="write the one that is meant, or name it in the project under ground: aliases",
    )
    return None


def _with_unit_checked(
    table: RawTable,
    column: int,
    name: _Name,
    unit: str | None,
    is_alias: bool,
    problems: Problems,
) -> str | None:
    written = table.header[column]
    if unit is None and name.unit and not is_alias and _key(_spaces(written)) != name.name:
        problems.add(
            table.head(column),
            "states no unit",
            name=f"column {quoted(written)}",
            allowed=f"{name.name}, in {name.unit}",
            fix=f"if the values are in {name.unit}, write {name.name}",
        )
    elif unit is not None and _squeezed(unit) not in _SAME_UNIT.get(name.unit, (name.unit,)):
        wanted = f"in {name.unit}" if name.unit else "without unit"
        problems.add(
            table.head(column),
            f"states {quoted(unit)}, and {name.name} is {wanted}",
            name=f"column {quoted(written)}",
            allowed=f"values {wanted}",
            fix=f"convert the values, and write {name.name}"
            if name.unit
            else f"write {name.name}, if the values have no unit",
        )
    return name.name


def _parts(header: str) -> tuple[str, str | None]:
    """Label and unit: of `Cover (m)` and of `Intact strength (MPa) sd`, too."""
    first, _, last = header.rpartition(" ")
    if last.lower() in _AFTER_UNIT and _WITH_UNIT.fullmatch(first):
        label, unit = _parts(first)
        return f"{label} {last}", unit
    found = _WITH_UNIT.fullmatch(header)
    return (found[1], found[2].strip()) if found else (header, None)


def _is_part(label: str, name: _Name, unit: str) -> bool:
    """`modulus (MPa)` is part of several names; such a header is refused, and never guessed."""
    words = set(_key(label).split("_")) - {""}
    same_unit = _squeezed(unit) in _SAME_UNIT.get(name.unit, ())
    return bool(words) and same_unit and words < set(name.bare.split("_"))


def _spaces(text: str) -> str:
    return " ".join(text.split())


def _key(text: str) -> str:
    return re.sub(r"[\s_-]+", "_", text.strip()).lower()


def _squeezed(unit: str) -> str:
    plain = "".join(unit.split()).lower().replace("^", "")
    return plain.replace("\u00b2", "2").replace("\u00b3", "3")
