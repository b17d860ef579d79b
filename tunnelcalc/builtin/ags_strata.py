"""Strata of the boreholes of an AGS 4 file, and which of them holds a test."""

from __future__ import annotations

from dataclasses import dataclass, field

from tunnelcalc import api
from tunnelcalc.builtin.ags_groups import Group
from tunnelcalc.text import few

DEPTH = api.Limits(-1e4, 1e5)


@dataclass(frozen=True, slots=True)
class Stratum:
    """A stretch of a borehole with one geology code, which may be empty."""

    top_m: float
    base_m: float
    code: str


@dataclass(slots=True)
class Strata:
    """Strata by location, and the line on which each geology code stands first."""

    of: dict[str, list[Stratum]] = field(default_factory=dict)
    lines: dict[str, int] = field(default_factory=dict)
    head: int = 0

    def code(self, location: str, top_m: float | None, base_m: float | None) -> str:
        """The code of the one stratum that holds a stretch, or a depth if its ends are one."""
        if top_m is None or base_m is None:
            return ""
        fits = [
            stratum.code
            for stratum in self.of.get(location, ())
            if stratum.top_m <= top_m < stratum.base_m and base_m <= stratum.base_m
        ]
        return fits[0] if len(fits) == 1 else ""


def strata_of(name: str, group: Group | None, problems: api.Problems) -> Strata:
    """Strata with depths; raises InputError where the file has none."""
    strata = Strata()
    needed = ("LOCA_ID", "GEOL_TOP", "GEOL_BASE", "GEOL_GEOL")
    absent = [h for h in needed if group is None or not group.has(h)]
    if group is None or absent:
        problems.add(
            api.Where(name, 0 if group is None else group.head),
            "has no group GEOL" if group is None else f"lacks GEOL {few(absent)}",
            allowed="strata with depths and geology codes",
            fix="have the file written with the group GEOL and geology codes",
        )
        problems.raise_if_any()
    assert group is not None
    strata.head = group.head
    for heading in ("GEOL_TOP", "GEOL_BASE"):
        group.check_unit(heading, ("m",), problems)
    for row, line in enumerate(group.lines):
        top = group.number("GEOL_TOP", row, DEPTH, problems)
        base = group.number("GEOL_BASE", row, DEPTH, problems)
        code = group.text("GEOL_GEOL", row)
        if top is not None and base is not None:
            strata.of.setdefault(group.text("LOCA_ID", row), []).append(Stratum(top, base, code))
        if code:
            strata.lines.setdefault(code, line)
    return strata
