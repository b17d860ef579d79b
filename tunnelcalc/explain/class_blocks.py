"""Blocks of a sheet on the ground's reaction and a support class, in one stress case."""

from __future__ import annotations

import math
from collections.abc import Callable, Iterator, Sequence
from dataclasses import dataclass, field
from typing import Any

from tunnelcalc.calculation.line import SheetBlock, SheetLine
from tunnelcalc.calculation.working import Working
from tunnelcalc.explain.advance_block import AdvanceBlock, advance_positions
from tunnelcalc.explain.class_limits import limits_block
from tunnelcalc.explain.class_sums import (
    DEFINITION,
    add_capacities,
    add_water,
    manner,
    share_formula,
)
from tunnelcalc.explain.offered import Lines, differ, last, lines_of, method_lines, plugin_of
from tunnelcalc.explain.ring_blocks import RingedGround
from tunnelcalc.explain.section import ComputedSection, StressCase
from tunnelcalc.outputs.cells import number_text
from tunnelcalc.outputs.tables import OUTCOME_WORDS
from tunnelcalc.pipeline.class_evaluation import CheckRow, Evaluated
from tunnelcalc.pipeline.element_loads import (
    class_columns,
    element_columns,
    element_water_mpa,
)
from tunnelcalc.pipeline.ground_stages import MM_PER_M
from tunnelcalc.pipeline.plan import PlannedClass, PlannedElement
from tunnelcalc.plugin.contract import ClassCheck, SectionValues, SupportCheck

SPRINGS = (
    "elements in parallel, each from its own closure at installation: Hoek & Brown (1980), "
    "Carranza-Torres & Fairhurst (2000)"
)
ZERO_PRESSURE = 0.0


@dataclass(slots=True)
class CaseBlocks:
    """Writes the blocks of one stress case, and collects what does not agree with the run."""

    section: ComputedSection
    case: StressCase
    title: str
    differences: list[str] = field(default_factory=list)

    def ground(self) -> SheetBlock:
        """The opening without support."""
        values = self.case.values
        lines, notes = self._law(ZERO_PRESSURE, "without support")
        work = Working({"R": _number(values, "radius_m"), **_results(lines)})
        ratio = _number(values, "plastic_radius_m") / work.known["R"]
        closure = _number(values, "closure_mm")
        self._add_state(work, ratio, closure, ("Rp", "u"))
        percent = _number(values, "closure_pct")
        work.add("u_pct", "closure of the wall", "100*u_R", percent, "%", DEFINITION)
        name = self.section.method(self.section.steps.ground_reaction).name
        title = f"Ground reaction without support{self.title}: {name}"
        stress = _number(values, "in_situ_stress_mpa")
        p0 = SheetLine("p0", "in-situ stress of this case", "", {}, stress, "MPa", "see stress")
        return SheetBlock(title, (p0, *lines, *work.lines), notes)

    def blocks(self, planned: PlannedClass) -> Iterator[SheetBlock]:
        """A class: elements, equilibrium, checks, adequacy."""
        found = self.section.evaluated(self.case, planned)
        for position, item in enumerate(planned.elements):
            yield self._element(planned, item, found, position)
        ringed = RingedGround.of_class(self.section, self.case, found)
        if ringed is not None and bool(found.rest.converged[0]):
            advances = found.rest.advanced is not None
            yield from ringed.blocks(planned, self.title, advances=advances)
        yield from self._advance(planned, found)
        yield self._equilibrium(planned, found, ringed)
        yield from self._checks(planned, found)
        radius = _number(self.case.values, "radius_m")
        yield limits_block(planned, found, self.section.project.criteria, radius, self.title)
        yield self._adequacy(planned, found)

    def _law(self, pressure_mpa: float, where: str) -> tuple[Lines, tuple[str, ...]]:
        method = self.section.method(self.section.steps.ground_reaction)
        values = self.case.values
        lines, notes = method_lines(self.section, "ground_reaction", method, values, pressure_mpa)
        critical = _number(values, "critical_pressure_mpa")
        self._compare(lines, "pcr", critical, f"critical pressure {where}")
        return lines, notes

    def _compare(self, lines: Sequence[SheetLine], symbol: str, value: float, what: str) -> None:
        """Tell where a line says another number than the run computed."""
        said = last(lines, symbol)
        if said is not None and differ(said, value):
            self.differences.append(
                f"{what}{self.title}: the line {symbol} says {said!r}, the run computed {value!r}"
            )

    def _add_state(
        self, work: Working, ratio: float, closure_mm: float, symbols: tuple[str, str]
    ) -> None:
        """Plastic radius and closure from X and u_R of the law's lines."""
        radius = work.known["R"]
        plastic, moved = symbols
        by_law = "X" in work.known and "u_R" in work.known
        if not by_law:
            work.known |= {"X": ratio, "u_R": closure_mm / MM_PER_M / radius}
        formulas = ("R*X", "1000*R*u_R") if by_law else ("", "")
        work.add(
            plastic, "radius of the plastic zone", formulas[0], ratio * radius, "m", DEFINITION
        )
        work.add(moved, "closure of the wall", formulas[1], closure_mm, "mm", DEFINITION)

    def _element(
        self, planned: PlannedClass, item: PlannedElement, found: Evaluated, position: int
    ) -> SheetBlock:
        """Closure at installation, stiffness, capacity."""
        element, values = item.element, self.case.values
        profile = self.section.method(self.section.steps.closure_profile)
        x = SheetLine("x", "distance from the face", "", {}, element.installed_at_m, "m", "project")
        share_lines, notes = method_lines(
            self.section, "closure_profile", profile, values, element.installed_at_m
        )
        closure = _number(values, "closure_mm")
        installed = float(found.installed_m[position, 0]) * MM_PER_M
        work = Working({"u": closure, **_results(share_lines)}, DEFINITION)
        formula = "share*u" if "share" in work.known else ""
        work.add("u_i", "closure before installation", formula, installed, "mm")
        kind = item.kind
        who = f"plugin {plugin_of(self.section, 'support_kind', kind.name)}, {kind.meaning}"
        lines, more = lines_of(kind, who, lambda thing: thing.lines(values, element))
        stiffness, capacity = (
            float(row[0])
            for row in (
                found.responses[position].stiffness_mpa_per_m,
                found.responses[position].capacity_mpa,
            )
        )
        what = f"{planned.support_class.name}, {element.label}"
        if math.isfinite(stiffness):
            self._compare(lines, "K", stiffness, f"stiffness of {what}")
        self._compare(lines, "pmax", capacity, f"capacity of {what}")
        shown = [*lines]
        for symbol, meaning, value, unit in (
            ("K", "stiffness", stiffness, "MPa/m"),
            ("pmax", "capacity", capacity, "MPa"),
        ):
            if last(lines, symbol) is None and math.isfinite(value):
                shown.append(SheetLine(symbol, meaning, "", {}, value, unit, who))
        reason = str(found.responses[position].reason[0])
        notes = (*notes, *more, *((reason,) if reason else ()))
        title = f"Class {what}, installed {number_text(element.installed_at_m)} m behind the face"
        return SheetBlock(title + self.title, (x, *share_lines, *work.lines, *shown), notes)

    def _advance(self, planned: PlannedClass, found: Evaluated) -> Iterator[SheetBlock]:
        """The steps of each element that hardens while the face moves on."""
        for position in advance_positions(found):
            assert found.rest.advanced is not None
            written = AdvanceBlock(
                self.section, self.case, planned, found, found.rest.advanced, int(position)
            )
            label = planned.elements[position].element.label
            title = f"Class {planned.support_class.name}, {label}, along the advance of the face"
            yield written.block(f"{title}{self.title}")
            self.differences += written.differences

    def _equilibrium(
        self, planned: PlannedClass, found: Evaluated, ringed: RingedGround | None
    ) -> SheetBlock:
        """Pressure at which ground and elements are at rest."""
        rest, values = found.rest, self.case.values
        pressure = float(rest.support_pressure_mpa[0])
        title = f"Class {planned.support_class.name}: equilibrium{self.title}"
        if not math.isfinite(pressure):
            return SheetBlock(
                title, (), ("ground and support have no equilibrium that can be computed",)
            )
        if ringed is None:
            lines, notes = self._law(pressure, "at rest")
        else:
            lines, notes = ringed.at_rest(pressure)
        start = SheetLine(
            "p_i",
            "support pressure at rest, root of the last line",
            "",
            {},
            pressure,
            "MPa",
            SPRINGS,
        )
        work = Working(
            {"R": _number(values, "radius_m"), **_results(lines), "p": pressure}, SPRINGS
        )
        closure = float(rest.closure_m[0]) * MM_PER_M
        self._add_state(work, float(rest.plastic_ratio[0]), closure, ("Rps", "us"))
        terms = []
        for position, item in enumerate(planned.elements):
            own = f"_{position + 1}"
            acting = float(found.acting_m[position, 0]) * MM_PER_M
            formula = share_formula(found.responses[position], own)
            work.known |= {
                f"K{own}": float(found.responses[position].stiffness_mpa_per_m[0]),
                f"pmax{own}": float(found.responses[position].capacity_mpa[0]),
                f"u_i{own}": acting,
            }
            share = float(rest.element_pressure_mpa[position, 0])
            meaning = f"pressure on {item.element.label}, which {manner(found, position)}"
            work.add(f"p{own}", meaning, formula, share, "MPa")
            terms.append(f"p{own}")
        equation = f"p = {' + '.join(terms)}" if terms else "p = 0"
        work.add("p", "equilibrium: ground and elements, root p", equation, pressure, "MPa")
        add_water(work, planned, found, self.case.sections)
        add_capacities(work, planned, found)
        return SheetBlock(title, (start, *lines, *work.lines), notes)

    def _checks(self, planned: PlannedClass, found: Evaluated) -> Iterator[SheetBlock]:
        rows = iter(found.checks)
        supported = self._supported(found)
        water = element_water_mpa(planned, found.responses, self.case.sections)
        for position, item in enumerate(planned.elements):
            columns = element_columns(
                found.rest, found.responses[position], position, water[position]
            )
            values = supported | {name: float(column[0]) for name, column in columns.items()}
            for check in item.checks:
                element = item.element
                yield self._check(
                    planned,
                    f"{element.label}:{check.name}",
                    check,
                    ("support_check", next(rows)),
                    lambda thing, v=values, e=element: thing.lines(v, e),  # type: ignore[misc]
                    float(water[position, 0]),
                )
        columns = class_columns(planned, found.responses, found.rest, found.credited_mpa, water)
        values = supported | {name: float(row[0]) for name, row in columns.items()}
        members = tuple(item.element for item in planned.elements)
        for class_check in planned.class_checks:
            yield self._check(
                planned,
                f"class:{class_check.name}",
                class_check,
                ("class_check", next(rows)),
                lambda thing, v=values, e=members: thing.lines(v, e),  # type: ignore[misc]
                0.0,
            )

    def _supported(self, found: Evaluated) -> dict[str, float | str]:
        radius = _number(self.case.values, "radius_m")
        return {
            **self.case.values,
            "support_pressure_mpa": float(found.rest.support_pressure_mpa[0]),
            "supported_closure_mm": float(found.rest.closure_m[0]) * MM_PER_M,
            "supported_plastic_radius_m": float(found.rest.plastic_ratio[0]) * radius,
        }

    def _check(
        self,
        planned: PlannedClass,
        label: str,
        check: SupportCheck | ClassCheck,
        sort_and_row: tuple[str, CheckRow],
        call: Callable[[Any], Sequence[SheetLine]],
        water_mpa: float,
    ) -> SheetBlock:
        """Demand, capacity, factor of safety, outcome."""
        sort, row = sort_and_row
        demand, capacity, factor = (
            float(x[0]) for x in (row.demand, row.capacity, row.factor_of_safety)
        )
        reason = str(row.reason[0])
        lines: Lines = ()
        notes: tuple[str, ...] = ()
        if math.isfinite(demand):
            who = f"plugin {plugin_of(self.section, sort, check.name)}, {check.meaning}"
            lines, notes = lines_of(check, who, call)
            what = f"{planned.support_class.name}, {label}"
            self._compare(lines, "demand", demand, f"demand of {what}")
            self._compare(lines, "capacity", capacity, f"capacity of {what}")
        work = Working({"demand": demand, "capacity": capacity}, check.meaning)
        if last(lines, "demand") is None:
            work.add("demand", "what is asked for", "", demand, check.unit)
        if last(lines, "capacity") is None:
            work.add("capacity", "what is there", "", capacity, check.unit)
        if check.carries_load and math.isfinite(factor):
            meaning = "factor of safety: at least factor_of_safety of the project"
            work.add("FS", meaning, "capacity/demand", factor, "", DEFINITION)
        outcome = OUTCOME_WORDS[int(row.outcome[0])]
        told = [f"outcome: {outcome}{f', {reason}' if reason else ''}"]
        if not bool(row.counts[0]):
            told.append("does not count against the class")
        if water_mpa:
            told.append(f"p includes {number_text(water_mpa)} MPa, its share of the water pressure")
        title = f"Class {planned.support_class.name}, check {label}{self.title}"
        return SheetBlock(title, (*lines, *work.lines), (*notes, *told))

    def _adequacy(self, planned: PlannedClass, found: Evaluated) -> SheetBlock:
        row, criteria = found.row, self.section.project.criteria
        work = Working({"R": _number(self.case.values, "radius_m")}, DEFINITION)
        work.known["us"] = float(row.closure_mm[0])
        percent = float(row.closure_pct[0])
        if math.isfinite(percent):
            work.add("us_pct", "supported closure", "100*us/(1000*R)", percent, "%")
        limit = SheetLine("limit", "largest closure", "", {}, criteria.closure_pct, "%", "project")
        least = SheetLine(
            "FS_req", "least factor of safety", "", {}, criteria.factor_of_safety, "", "project"
        )
        factor = SheetLine(
            "FS",
            "least factor of the load checks",
            "",
            {},
            float(row.factor_of_safety[0]),
            "",
            "checks",
        )
        word = "adequate" if bool(row.adequate[0]) else "not adequate"
        title = f"Class {planned.support_class.name}: adequacy{self.title}"
        return SheetBlock(title, (*work.lines, limit, factor, least), (f"the class is {word}",))


def _number(values: SectionValues, name: str) -> float:
    return float(values[name])


def _results(lines: Sequence[SheetLine]) -> dict[str, float]:
    return {line.symbol: line.result for line in lines}
