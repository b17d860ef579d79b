"""Reads statistics of the tests on each geology code from an AGS 4 file, as a units table.

The format carries observations by borehole and depth, and no chainages: it cannot be a ground
table. Each core run, point load and uniaxial test is given the geology code of the stratum in
which it lies. The mean is never taken as the value of a unit: the project says how values follow
from statistics.
"""

from __future__ import annotations

import math
from collections.abc import Callable
from dataclasses import dataclass, field

from tunnelcalc import api
from tunnelcalc.builtin.ags_groups import Group, breaches, groups_of
from tunnelcalc.builtin.ags_strata import DEPTH, Strata, strata_of
from tunnelcalc.builtin.table_text import text_of
from tunnelcalc.text import few

LARGEST_BYTES = 32 * 1024 * 1024
_STRESS_UNITS = ("MPa", "MN/m2", "N/mm2")


@dataclass(frozen=True, slots=True)
class _Source:
    """Where a quantity stands: its group, heading, and the headings of depth, the best first."""

    column: str
    group: str
    heading: str
    units: tuple[str, ...]
    limits: api.Limits
    depths: tuple[str, ...]
    what: str
    base: str = ""
    """Heading of the lower end of what was observed over a length."""


SOURCES = (
    _Source(
        "rqd_pct",
        "CORE",
        "CORE_RQD",
        ("%",),
        api.Limits(0, 100),
        ("CORE_TOP",),
        "core runs",
        "CORE_BASE",
    ),
    _Source(
        "point_load_mpa",
        "RPLT",
        "RPLT_PLSI",
        _STRESS_UNITS,
        api.Limits(1e-6, 100),
        ("SPEC_DPTH", "SAMP_TOP"),
        "point load tests",
    ),
    _Source(
        "intact_strength_mpa",
        "RUCS",
        "RUCS_UCS",
        _STRESS_UNITS,
        api.Limits(1e-6, 1000),
        ("SPEC_DPTH", "SAMP_TOP"),
        "uniaxial tests",
    ),
)
"""Headings and units as the standard dictionary of AGS 4.1.1 has them; MPa, MN/m2 and N/mm2 are
one unit."""


class AgsReader:
    """AGS 4: mean, deviation and number of RQD, point load and uniaxial tests by geology code."""

    name = "ags"
    suffixes = (".ags",)

    def read(self, name: str, content: bytes) -> api.RawTable:
        problems = api.Problems()
        if len(content) > LARGEST_BYTES:
            size, most = f"has {len(content) / 1e6:.0f} MB", f"{LARGEST_BYTES / 1e6:.0f} MB"
            fix = "have the groups GEOL, CORE, RPLT and RUCS written alone"
            problems.add(api.Where(name), size, allowed=f"at most {most}", fix=fix)
        text = None if len(problems) else text_of(name, content, problems)
        problems.raise_if_any()
        assert text is not None
        groups = groups_of(name, text, problems)
        strata = strata_of(name, groups.get("GEOL"), problems)
        found = [
            _observed(strata, groups[s.group], s, problems)
            for s in SOURCES
            if s.group in groups and groups[s.group].has(s.heading)
        ]
        problems.raise_if_any()
        notes = [note for each in found for note in each.notes(name)]
        used = {"GEOL", *(source.group for source in SOURCES)}
        idle = sorted(set(groups) - used)
        if idle:
            notes.append(f"{name}: groups that are not read: {few(idle)}")
        return _table(name, strata, found, (*notes, *breaches(name, text)), problems)


@dataclass(slots=True)
class _Observed:
    """Values of one quantity by geology code, and how many lie in no single coded stratum."""

    source: _Source
    values: dict[str, list[float]] = field(default_factory=dict)
    outside: int = 0

    def notes(self, name: str) -> list[str]:
        source = self.source
        count = sum(map(len, self.values.values()))
        notes = [
            f"{name}: {source.column} from {count} {source.what} ({source.group})"
            + (", each counted once whatever its length" if source.base else "")
        ]
        if self.outside:
            notes.append(
                f"{name}: {self.outside} of {count + self.outside} {source.what} left out, in no "
                "single stratum with a geology code"
            )
        return notes


def _observed(strata: Strata, group: Group, source: _Source, problems: api.Problems) -> _Observed:
    found = _Observed(source)
    group.check_unit(source.heading, source.units, problems)
    for heading in (*source.depths, *filter(None, (source.base,))):
        group.check_unit(heading, ("m",), problems)
    for row in range(len(group.lines)):
        value = group.number(source.heading, row, source.limits, problems)
        depths = [group.number(heading, row, DEPTH, problems) for heading in source.depths]
        top = next((depth for depth in depths if depth is not None), None)
        base = group.number(source.base, row, DEPTH, problems) if source.base else top
        if value is None:
            continue
        code = strata.code(group.text("LOCA_ID", row), top, base)
        if code:
            found.values.setdefault(code, []).append(value)
        else:
            found.outside += 1
    return found


def _table(
    name: str,
    strata: Strata,
    found: list[_Observed],
    notes: tuple[str, ...],
    problems: api.Problems,
) -> api.RawTable:
    codes = sorted({code for each in found for code in each.values})
    if not codes:
        problems.add(
            api.Where(name),
            "has no core run, point load or uniaxial test in a stratum with a geology code",
            allowed="values of CORE_RQD, RPLT_PLSI or RUCS_UCS",
            fix="have the file written with these groups, or enter the values in a units table",
        )
        problems.raise_if_any()
    header, columns = ["ground_unit"], [codes]
    for each in found:
        statistics = [_statistics(each.values.get(code, [])) for code in codes]
        for suffix, cells in zip(
            ("mean", "sd", "tests"), zip(*statistics, strict=True), strict=True
        ):
            header.append(f"{each.source.column}_{suffix}")
            columns.append(list(cells))
    return api.RawTable(
        name,
        tuple(header),
        strata.head,
        tuple(columns),
        [strata.lines[code] for code in codes],
        column_numbers=(0,) * len(header),  # the columns stand nowhere in the file
        notes=notes,
    )


def _statistics(values: list[float]) -> tuple[str, str, str]:
    """Mean, standard deviation with n - 1 in its denominator, and number, as text."""
    count = len(values)
    if not count:
        return "", "", ""
    mean = math.fsum(values) / count
    if count == 1:
        return repr(mean), "", "1"
    deviation = math.sqrt(math.fsum((value - mean) ** 2 for value in values) / (count - 1))
    return repr(mean), repr(deviation), str(count)


@api.hookimpl
def tunnelcalc_register_ground_readers(register: Callable[[api.GroundReader], None]) -> None:
    register(AgsReader())
