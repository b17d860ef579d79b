"""The block of an element that hardens while the face moves on, step by step.

All steps are computed alike. Files hold every step; of the first ones, the one in which the element
is used most and the last they show every number, and so does the screen. States are counted from 0,
where the first element of the class begins to act; step k ends in state k.
"""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass, field, replace

import numpy as np

from tunnelcalc.arrays import Array
from tunnelcalc.calculation.formula import LONGEST, renamed
from tunnelcalc.calculation.line import SheetBlock, SheetLine
from tunnelcalc.calculation.working import Working
from tunnelcalc.explain.class_sums import share_formula
from tunnelcalc.explain.offered import differ, last, lines_of, method_lines, plugin_of
from tunnelcalc.explain.section import ComputedSection, StressCase
from tunnelcalc.pipeline.class_evaluation import Evaluated
from tunnelcalc.pipeline.element_loads import element_water_mpa
from tunnelcalc.pipeline.ground_stages import MM_PER_M
from tunnelcalc.pipeline.plan import PlannedClass
from tunnelcalc.pipeline.resting_state import Advanced
from tunnelcalc.support.reaction import AdvanceIncrements

SHOWN = 2
"""Steps shown from the first in which the element acts."""
ONE = np.array([0])
STIFFNESS, CAPACITY = ("K",), ("pmax",)

GRID = "steps by equal parts of the closure to come, shorter at both ends"
OF_STEPS = "dp = K(age) dw along the advance: Oreste & Peila (1997) [from memory]"
FACE = "pressure that stands for the face: Panet (1995) [from memory]"
TABLE = "table of the ground's reaction"
TABLE_NOTE = (
    "the table of the ground's reaction holds closure and slope by its law under the pressure of "
    "each node; slopes are limited so that cubics stay monotone: Fritsch & Carlson (1980)"
)
BEGINS = "of the wall with what acts before"
LIKE_SHOWN = "computed as in the steps shown"
CUBIC = (
    "q0_{e} + ({w} - c0_{e})/1000*(d0_{e} + ({w} - c0_{e})/(c1_{e} - c0_{e})*(3*S_{e} - 2*d0_{e}"
    " - d1_{e} + ({w} - c0_{e})/(c1_{e} - c0_{e})*(d0_{e} + d1_{e} - 2*S_{e})))"
)
"""Pressure at a closure w, by the cubic between two nodes of the table."""


@dataclass(slots=True)
class AdvanceBlock:
    """Writes the block of the element at a position of a class."""

    section: ComputedSection
    case: StressCase
    planned: PlannedClass
    found: Evaluated
    advanced: Advanced
    position: int
    work: Working = field(init=False)
    notes: dict[str, None] = field(default_factory=dict)
    differences: list[str] = field(default_factory=list)

    def block(self, title: str) -> SheetBlock:
        """The steps, their sum, and the greatest use."""
        path, states = self.found.rest.paths[self.position], self.advanced.states
        item = self.planned.elements[self.position]
        water = element_water_mpa(self.planned, self.found.responses, self.case.sections)
        known = {
            "x_i": item.element.installed_at_m,
            "v": self.planned.support_class.advance_m_per_day,
            "u_f": float(self.advanced.table.free_closure_m[0]) * MM_PER_M,
            "w_p": float(water[self.position, 0]),
        }
        self.work = Working(known, "definition")
        end = len(states.distance_m) - 1
        acts = float(states.begins_at_m[self.position, 0])
        begin = int(np.flatnonzero(states.closure_m[:, 0] == acts)[0])
        self.work.add("x_i", "distance of installation", "", known["x_i"], "m", "project")
        meaning = "closure of the wall without pressure, with the ring of bolts if there is one"
        self.work.add("u_f", meaning, "", known["u_f"], "mm", "ground reaction")
        meaning = "share of the water pressure: see equilibrium"
        self.work.add("w_p", meaning, "", known["w_p"], "MPa")
        self.work.add("v", "advance of the face", "", known["v"], "m/day", "project")
        self.work.add(
            f"w_{begin}", "closure where it begins to act", "", acts * MM_PER_M, "mm", BEGINS
        )
        self.work.add(f"p_{begin}", "pressure there", "0", 0.0, "MPa")
        worst = int(path.worst_state(water[self.position])[0])
        shown = {*range(begin + 1, begin + 1 + SHOWN), worst, end}
        for state in range(begin + 1, end + 1):
            before = len(self.work.lines)
            self._add_step(state, end, whole=state in shown)
            if state not in shown:
                new = self.work.lines[before:]
                self.work.lines[before:] = [replace(line, on_screen=False) for line in new]
        steps = range(begin + 1, end + 1)
        self._add_sums(steps, float(path.pressure_mpa[-1, 0]), worst)
        in_full = ", ".join(str(k) for k in steps if k in shown)
        note = (
            f"steps {steps[0]} to {end}; in full: {in_full}"
            "; the others stand in the files of --out, closure and stiffness by their result"
        )
        return SheetBlock(title, tuple(self.work.lines), (*self.notes, TABLE_NOTE, note))

    def _add_step(self, k: int, end: int, *, whole: bool) -> None:
        """From state k - 1 to state k."""
        states, path = self.advanced.states, self.found.rest.paths[self.position]
        o = k - 1
        self.work.add(
            f"x_{k}", f"distance behind the face, step {k}", "", path.distance_m[k, 0], "m", GRID
        )
        self._add_age(f"{k}", f"x_{k}", float(path.age_days[k, 0]))
        self._add_stiffness(k, whole)
        closure = float(states.closure_m[k, 0]) * MM_PER_M
        if whole and k < end:
            self._add_wall(k, closure)
        else:
            how = "at rest: see equilibrium" if k == end else LIKE_SHOWN
            self.work.add(f"w_{k}", f"closure of the wall, {how}", "", closure, "mm")
        moved = closure - self.work.known[f"w_{o}"]
        self.work.add(f"dw_{k}", "increment of closure", f"w_{k} - w_{o}", moved, "mm")
        pressure = float(path.pressure_mpa[k, 0])
        # From the closures: of a tiny increment rounding leaves fewer digits than of them.
        formula, gained = f"Km_{k}*(w_{k} - w_{o})/1000", pressure - self.work.known[f"p_{o}"]
        self.work.add(f"dp_{k}", "increment of pressure", formula, gained, "MPa", OF_STEPS)
        self.work.add(f"p_{k}", "pressure on the element", f"p_{o} + dp_{k}", pressure, "MPa")
        self._add_use(k, whole, float(path.capacity_mpa[k, 0]))

    def _add_age(self, ending: str, distance: str, age: float) -> None:
        self.work.add(f"age_{ending}", "age", f"max({distance} - x_i, 0)/v", age, "day")

    def _add_stiffness(self, k: int, whole: bool) -> None:
        """Mean stiffness over the step, of the ages at its two Gauss points. [MPa/m]"""
        states = self.advanced.states
        found = []
        for point, ending in enumerate((f"{k}a", f"{k}b")):
            distance = float(states.within_m[point, k - 1, 0])
            age = max(distance - self.work.known["x_i"], 0) / self.work.known["v"]
            stiffness, _ = self._at_age(age)
            found.append(stiffness)
            if whole:
                meaning = "distance within the step, Gauss point of the unsupported closure"
                self.work.add(f"x_{ending}", meaning, "", distance, "m", GRID)
                self._add_age(ending, f"x_{ending}", age)
                self._add_law(ending, age, STIFFNESS)
        mean = 0.5 * (found[0] + found[1])
        formula = f"(K_{k}a + K_{k}b)/2" if whole else ""
        meaning = "mean stiffness over the step" + ("" if whole else f", {LIKE_SHOWN}")
        self.work.add(f"Km_{k}", meaning, formula, mean, "MPa/m")

    def _at_age(self, age: float) -> tuple[float, float]:
        """Stiffness [MPa/m] and capacity [MPa] as the run took them."""
        reaction = self.found.responses[self.position].reaction
        assert isinstance(reaction, AdvanceIncrements)
        stiffness, capacity = reaction.at_age(np.array([age]))
        return float(stiffness[0]), float(capacity[0])

    def _add_law(self, ending: str, age: float, wanted: tuple[str, ...]) -> None:
        """What is wanted at an age, by the lines of the kind where it has any."""
        item = self.planned.elements[self.position]
        kind, values = item.kind, self.case.values
        who = f"plugin {plugin_of(self.section, 'support_kind', kind.name)}, {kind.meaning}"
        lines, notes = lines_of(
            kind, who, lambda thing: thing.lines_at_age(values, item.element, age), "lines_at_age"
        )
        self.notes |= dict.fromkeys(notes)
        symbols = [line.symbol for line in lines]
        if wanted == STIFFNESS and "K" in symbols:
            lines = lines[: symbols.index("K") + 1]
        self._put(lines, ending, "age")
        for symbol, value, unit in zip(
            ("K", "pmax"), self._at_age(age), ("MPa/m", "MPa"), strict=True
        ):
            said = last(lines, symbol)
            if symbol not in wanted:
                continue
            if said is None:
                self.work.add(f"{symbol}_{ending}", "at that age", "", value, unit, who)
            elif differ(said, value):
                self.differences.append(
                    f"{item.element.label} at an age of {age!r} days: the line {symbol} says "
                    f"{said!r}, the run computed {value!r}"
                )

    def _put(self, lines: Sequence[SheetLine], ending: str, asked: str) -> None:
        """Lines of a plugin, their symbols and the one that was asked with an ending."""
        names = {name: f"{name}_{ending}" for name in (asked, *(line.symbol for line in lines))}
        for line in lines:
            self.work.lines.append(line.with_names(names))
            self.work.known[names[line.symbol]] = line.result

    def _add_wall(self, k: int, closure_mm: float) -> None:
        """Where the wall is, under what stands for the face and the pressure of the elements."""
        states, o = self.advanced.states, k - 1
        profile = self.section.method(self.section.steps.closure_profile)
        distance = float(states.distance_m[k, 0])
        lines, notes = method_lines(
            self.section, "closure_profile", profile, self.case.values, distance
        )
        self.notes |= dict.fromkeys(notes)
        self._put(lines, f"{k}", "x")
        free = self._free_m(distance)
        formula = f"share_{k}*u_f" if f"share_{k}" in self.work.known else ""
        self.work.add(f"u_{k}", "closure there without support", formula, free * MM_PER_M, "mm")
        self._add_cell(f"{k}u", free)
        formula = CUBIC.format(e=f"{k}u", w=f"u_{k}")
        face = float(states.fictitious_pressure_mpa[k, 0])
        self.work.add(f"pf_{k}", "pressure that stands for the face", formula, face, "MPa", FACE)
        self.work.known[f"w_{k}"] = closure_mm
        others = " + ".join(["", *self._add_others(k)])
        self._add_cell(f"{k}w", closure_mm / MM_PER_M)
        formula = (
            f"{CUBIC.format(e=f'{k}w', w=f'w_{k}')}"
            f" = pf_{k} + p_{o} + Km_{k}*(w_{k} - w_{o})/1000{others}"
        )
        self.work.add(f"w_{k}", "closure of the wall, root of", formula, closure_mm, "mm")

    def _free_m(self, distance_m: float) -> float:
        profile = self.section.method(self.section.steps.closure_profile)
        share = float(profile.share(self.case.sections, np.array([distance_m]))[0])
        return float(self.advanced.table.free_closure_m[0]) * share

    def _add_cell(self, ending: str, closure_m: float) -> None:
        """The nodes of the table beside a closure."""
        cell = [float(column[0]) for column in self.advanced.table.cell(np.array([closure_m]), ONE)]
        start, end, above, below, first, final, secant = cell
        for symbol, meaning, value, unit in (
            ("c0", "closure, node before", start * MM_PER_M, "mm"),
            ("c1", "closure, node behind", end * MM_PER_M, "mm"),
            ("q0", "pressure, node before", above, "MPa"),
            ("q1", "pressure, node behind", below, "MPa"),
            ("d0", "slope, node before", first, "MPa/m"),
            ("d1", "slope, node behind", final, "MPa/m"),
        ):
            self.work.add(f"{symbol}_{ending}", meaning, "", value, unit, TABLE)
        formula = f"1000*(q1_{ending} - q0_{ending})/(c1_{ending} - c0_{ending})"
        self.work.add(f"S_{ending}", "slope between them", formula, secant, "MPa/m", TABLE)

    def _add_others(self, k: int) -> Iterator[str]:
        """The pressure on each other element that carries any in a state; its symbol."""
        states = self.advanced.states
        for position, response in enumerate(self.found.responses):
            pressure = float(states.element_pressure_mpa[position, k, 0])
            if position == self.position or pressure == 0:
                continue
            own, label = f"_el{position + 1}", self.planned.elements[position].element.label
            begins = float(states.begins_at_m[position, 0]) * MM_PER_M
            self.work.known |= {
                f"K{own}": float(response.stiffness_mpa_per_m[0]),
                f"pmax{own}": float(response.capacity_mpa[0]),
                f"u_i{own}": begins,
            }
            formula = renamed(share_formula(response, own), {"us": f"w_{k}"})
            symbol = f"p{own}_{k}"
            self.work.add(symbol, f"pressure on {label}", formula, pressure, "MPa")
            yield symbol

    def _add_use(self, k: int, whole: bool, capacity: float) -> None:
        if whole:
            self._add_law(f"{k}", self.work.known[f"age_{k}"], STIFFNESS + CAPACITY)
        else:
            meaning = f"capacity at that age, {LIKE_SHOWN}"
            self.work.add(f"pmax_{k}", meaning, "", capacity, "MPa")
        pressure, water = self.work.known[f"p_{k}"], self.work.known["w_p"]
        use = (pressure + water) / capacity if pressure > 0 else 0.0
        formula = f"(p_{k} + w_p)/pmax_{k}" if pressure > 0 else "0"
        meaning = "use: pressure with water over the capacity of that age"
        self.work.add(f"use_{k}", meaning, formula, use, "", "definition")

    def _add_sums(self, steps: range, pressure: float, worst: int) -> None:
        """The sum over all steps, and the step of greatest use."""
        total = " + ".join(f"dp_{k}" for k in steps)
        most = f"max({', '.join(f'use_{k}' for k in steps)}, 0)"
        end = steps[-1]
        self.work.add(
            "p_n",
            "pressure at rest: sum over all steps",
            _short(total, f"p_{end}"),
            pressure,
            "MPa",
        )
        use = max(self.work.known[f"use_{k}"] for k in steps)
        meaning = f"greatest use, in state {worst}" if use > 0 else "greatest use"
        self.work.add("use", meaning, _short(most, ""), use, "", "definition")


def _short(formula: str, other: str) -> str:
    """The formula, or another where it is too long for a sheet."""
    return formula if len(formula) <= LONGEST else other


def advance_positions(found: Evaluated) -> Array:
    """Positions of the elements that harden, where the class comes to rest."""
    resting = found.rest.advanced is not None and bool(found.rest.converged[0])
    return np.array(sorted(found.rest.paths) if resting else [], dtype=np.intp)
