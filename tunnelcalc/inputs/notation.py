"""Reads how chainage is written on an alignment: the `chainage` part of a project."""

from __future__ import annotations

from tunnelcalc.chainage import KM_PLUS_M, METRES, Equation, Notation
from tunnelcalc.inputs.values import Reader
from tunnelcalc.text import quoted

ASCENDING, DESCENDING = "ascending", "descending"


def read_notation(reader: Reader) -> Notation:
    """The notation of a project; plain metres that are axis metres where it states none."""
    table = reader.table_of("chainage", required=False)
    if table is None:
        return Notation()
    form = table.choice("notation", (METRES, KM_PLUS_M), required=False) or METRES
    prefix = _prefix(table)
    direction = table.choice("direction", (ASCENDING, DESCENDING), required=False) or ASCENDING
    sign = -1 if direction == DESCENDING else 1
    table.notation = Notation(form, prefix)
    start = table.chainage("start", required=sign < 0)
    equations = []
    for entry in table.tables_of("equations", required=False):
        back, ahead = entry.chainage("back"), entry.chainage("ahead")
        entry.finish()
        if back is not None and ahead is not None:
            equations.append((entry, Equation(back, ahead)))
    table.finish()
    _check_order(equations, sign, start)
    return Notation(form, prefix, sign, start or 0.0, tuple(e for _, e in equations))


def _prefix(table: Reader) -> str:
    """What stands before a chainage, with the blank after it if one is written."""
    prefix = table.text("prefix", required=False)
    if prefix is None:
        return ""
    if prefix[0] in "+-.0123456789" or "@" in prefix:
        table.complain(
            "prefix",
            f"holds {quoted(prefix)}, which may be taken for a part of the number",
            allowed="text that begins with no digit, sign or point, and holds no @",
            fix="correct the prefix, or leave it out",
        )
        return ""
    return f"{prefix} " if table.ends_in_blank("prefix") else prefix


def _check_order(equations: list[tuple[Reader, Equation]], sign: int, start: float | None) -> None:
    """Along the axis, each equation lies beyond the one before."""
    before = start if start is not None else -float("inf") * sign
    for entry, equation in equations:
        if sign * (equation.back - before) <= 0:
            entry.complain(
                "back",
                f"is {equation.back:.10g}, not beyond {before:.10g}, where its stretch begins",
                allowed="equations in the order in which the axis meets them",
                fix="sort the equations along the axis",
            )
        before = equation.ahead
