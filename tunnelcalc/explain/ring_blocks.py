"""Blocks on ground that bolts change in a ring: as it is where they are installed, and with it."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass

import numpy as np

from tunnelcalc.calculation.line import SheetBlock, SheetLine
from tunnelcalc.calculation.working import Working
from tunnelcalc.explain.offered import Lines, Notes, last, lines_of, method_lines, plugin_of
from tunnelcalc.explain.section import ComputedSection, StressCase
from tunnelcalc.ground_reaction.later_ring import LaterRingCurve
from tunnelcalc.pipeline.class_evaluation import Evaluated
from tunnelcalc.pipeline.dispatch import curves
from tunnelcalc.pipeline.ground_stages import MM_PER_M
from tunnelcalc.pipeline.plan import PlannedClass
from tunnelcalc.pipeline.ring_curves import curve_of_class
from tunnelcalc.support.reaction import GroundRing

LATER = "what moves after installation moves as with the ring: derived for this program"
BEFORE, RINGED, AT_START = "_b", "_s", "_sb"
"""Endings of the state without the ring at installation, with it at rest, and at installation."""


@dataclass(frozen=True, slots=True)
class RingedGround:
    """The ground of a class with a ring, in one stress case."""

    section: ComputedSection
    case: StressCase
    ring: GroundRing
    curve: LaterRingCurve
    installed_mm: float

    @classmethod
    def of_class(
        cls, section: ComputedSection, case: StressCase, found: Evaluated
    ) -> RingedGround | None:
        """None for a class without a ring."""
        for position, response in enumerate(found.responses):
            if isinstance(response.reaction, GroundRing):
                reaction = section.steps.ground_reaction
                ground = curve_of_class(
                    curves(reaction, case.sections),
                    reaction,
                    case.sections,
                    found.responses,
                    found.installed_m,
                ).curve
                assert isinstance(ground, LaterRingCurve)
                installed = float(found.installed_m[position, 0]) * MM_PER_M
                return cls(section, case, response.reaction, ground, installed)
        return None

    @property
    def installation_mpa(self) -> float:
        """Pressure at which the ground without the ring has moved as at installation."""
        return float(self.curve.installation_pressure_mpa[0])

    def blocks(self, planned: PlannedClass, title: str, *, advances: bool) -> Iterator[SheetBlock]:
        """The state at installation, without the ring and as if it had been there before; that
        without pressure where an element of the class `advances` with the face."""
        name, pressure = planned.support_class.name, self.installation_mpa
        before, notes = self._law(pressure)
        work = Working(_results(before) | {"R": float(self.case.values["radius_m"])}, LATER)
        work.known |= {"u_i": self.installed_mm, "p_i": pressure}
        if last(before, "u_R") is not None:
            meaning = "closure before installation, by which p_i was found"
            work.add("u_i", meaning, "u_i = 1000*R*u_R", self.installed_mm, "mm")
        sought = SheetLine(
            "p_i", "pressure that stands for the face there", "", {}, pressure, "MPa", LATER
        )
        first = f"Class {name}: ground where its ring is installed{title}"
        second = f"Class {name}: the same with the ring from the beginning{title}"
        ringed, more = self._with_ring(pressure)
        yield SheetBlock(first, (sought, *before, *work.lines), notes)
        yield SheetBlock(second, (sought, *ringed), more)
        if advances:
            free, notes = self.at_rest(0.0)
            third = f"Class {name}: ground with its ring, without pressure{title}"
            yield SheetBlock(third, (*free, self._free_closure(free)), notes)

    def _free_closure(self, lines: Lines) -> SheetLine:
        ratio = float(self.curve.at(np.zeros(1)).closure_ratio[0])
        radius = float(self.case.values["radius_m"])
        put_in = {"R": radius, "u_R": last(lines, "u_R") or ratio}
        closure, meaning = ratio * radius * MM_PER_M, "closure of the wall"
        return SheetLine("u_f", meaning, "1000*R*u_R", put_in, closure, "mm", "definition")

    def at_rest(self, pressure_mpa: float) -> tuple[Lines, Notes]:
        """The wall under a pressure, X and u_R the last lines."""
        if not pressure_mpa < self.installation_mpa:
            return self._law(pressure_mpa)
        ringed, notes = self._with_ring(pressure_mpa)
        before, _ = self._law(self.installation_mpa)
        start, _ = self._with_ring(self.installation_mpa)
        names = {"u_R": f"u_R{RINGED}", "X": f"X{RINGED}"}
        lines = [line.with_names(names) for line in ringed]
        at = np.array([pressure_mpa])
        point, work = self.curve.at(at), Working({}, LATER)
        with_ring, earlier = self.curve.improved.at(at), self.curve.installed
        begun = self.curve.improved.at(self.curve.installation_pressure_mpa)
        known = {
            f"u_R{RINGED}": (ringed, "u_R", with_ring.closure_ratio),
            f"X{RINGED}": (ringed, "X", with_ring.plastic_ratio),
            f"u_R{BEFORE}": (before, "u_R", earlier.closure_ratio),
            f"X{BEFORE}": (before, "X", earlier.plastic_ratio),
            f"u_R{AT_START}": (start, "u_R", begun.closure_ratio),
        }
        for symbol, (found, name, computed) in known.items():
            said = last(found, name)
            work.known[symbol] = float(computed[0]) if said is None else said
        meaning = "yielded radius over the radius, as deep as at installation at least"
        formula = f"max(X{RINGED}, X{BEFORE})"
        work.add("X", meaning, formula, float(point.plastic_ratio[0]))
        formula = f"u_R{RINGED} + u_R{BEFORE} - u_R{AT_START}"
        meaning = "closure over the radius: with the ring, and what it had moved more before"
        work.add("u_R", meaning, formula, float(point.closure_ratio[0]))
        return (*lines, *work.lines), notes

    def _law(self, pressure_mpa: float) -> tuple[Lines, Notes]:
        method = self.section.method(self.section.steps.ground_reaction)
        return method_lines(self.section, "ground_reaction", method, self.case.values, pressure_mpa)

    def _with_ring(self, pressure_mpa: float) -> tuple[Lines, Notes]:
        method = self.section.method(self.section.steps.ground_reaction)
        who = f"plugin {plugin_of(self.section, 'ground_reaction', method.name)}, {method.source}"
        values, ring = self.case.values, self.ring
        return lines_of(
            method,
            who,
            lambda thing: thing.lines_with_ring(values, ring, pressure_mpa),
            "lines_with_ring",
        )


def _results(lines: Sequence[SheetLine]) -> dict[str, float]:
    return {line.symbol: line.result for line in lines}
