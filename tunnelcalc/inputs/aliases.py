"""Reads what a project calls the columns of its tables, where they have names of their own."""

from __future__ import annotations

from tunnelcalc.inputs.values import Reader
from tunnelcalc.text import quoted, suggestion
from tunnelcalc.vocabulary import GROUND, ground_quantity

FRAME = ("from_m", "to_m", "ground_unit")
"""Columns of the tables besides the ground quantities."""


def read_aliases(reader: Reader) -> dict[str, str]:
    """Names of the vocabulary by the headers that the project states for them."""
    table = reader.table_of("aliases", required=False)
    found: dict[str, str] = {}
    for header in () if table is None else table.table.entries:
        assert table is not None
        name = table.text(header, "the name of a column")
        if name is None:
            continue
        if _is_column(header):
            table.complain(
                header,
                "is a column of the program's own",
                allowed="headers that have no meaning to the program",
                fix="remove the entry, or rename the column in the table",
            )
        elif _is_column(name):
            found[header] = name
        else:
            hint = suggestion(name, (*FRAME, *GROUND))
            table.complain(
                header,
                f"holds {quoted(name)}, which is no column of a ground or units table",
                allowed="the name of a column, such as intact_strength_mpa",
                fix=f"write {hint}" if hint else "write the name of a column",
            )
    return found


def _is_column(name: str) -> bool:
    return name in FRAME or ground_quantity(name) is not None
