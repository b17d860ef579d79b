"""Bolted steel liner plates: a closed thin ring, in contact at once or after a gap has closed."""

from __future__ import annotations

from collections.abc import Callable, Iterable, Sequence
from functools import partial

import numpy as np

from tunnelcalc import api
from tunnelcalc.api import Array, Limits, Parameter

SOURCE = "thin elastic ring under uniform pressure"
GROUTED, GAP = "grouted", "gap"


def ring_stiffness_mpa_per_m(radius_m: Array, area_mm2_per_m: float, modulus_gpa: float) -> Array:
    """(n,) K = E A / R^2 of a thin ring; A in m2 a metre of tunnel. [MPa/m]"""
    return modulus_gpa * 1e3 * area_mm2_per_m * 1e-6 / radius_m**2


def ring_capacity_mpa(radius_m: Array, area_mm2_per_m: float, seam_strength_mpa: float) -> Array:
    """(n,) pmax = s A / R, where a seam gives way. [MPa]"""
    return seam_strength_mpa * area_mm2_per_m * 1e-6 / radius_m


def after_a_gap(stiffness: Array, gap_m: float, closure_m: Array) -> tuple[Array, Array]:
    """Pressure (n,) [MPa] and its slope (n,) [MPa/m]: nothing until the gap has closed."""
    touching = closure_m > gap_m
    pressure = np.where(touching, stiffness * (closure_m - gap_m), 0.0)
    return pressure, np.where(touching, stiffness, 0.0)


class LinerPlates:
    """The kind of support."""

    name = "liner_plates"
    is_ring = True
    meaning = f"closed ring of bolted steel plates; {SOURCE}"
    parameters = (
        Parameter(
            "plate_area_mm2", "cross-section of the plates, of a metre of tunnel", "mm2",
            Limits(500, 1e5),
        ),
        Parameter("plate_modulus_gpa", "Young's modulus of the plates", "GPa", Limits(10, 300)),
        Parameter("seam_strength_mpa", "stress of the plates at which a seam fails", "MPa",
                  Limits(10, 500)),
        Parameter("packing", "what is between plates and ground", choices=(GROUTED, GAP)),
        Parameter("gap_mm", "gap that the wall has to close", "mm", Limits(1, 200),
                  only_if=("packing", (GAP,))),
    )  # fmt: skip

    def misfits(self, element: api.Element, smallest_radius_m: float) -> Iterable[api.Misfit]:
        if element.choice("packing") == GAP and element.number("gap_mm") > 20 * smallest_radius_m:
            yield api.Misfit(
                "gap_mm",
                f"is more than 2 % of the radius, {smallest_radius_m:g} m",
                "correct the gap, which is in mm",
            )

    def reaction_form(self, element: api.Element) -> str:
        gap = element.choice("packing") == GAP
        return api.PressureOfClosure.form if gap else api.LinearSpring.form

    def reaction(self, sections: api.Sections, element: api.Element) -> api.Reaction:
        radius, area = sections["radius_m"], element.number("plate_area_mm2")
        stiffness = ring_stiffness_mpa_per_m(radius, area, element.number("plate_modulus_gpa"))
        capacity = ring_capacity_mpa(radius, area, element.number("seam_strength_mpa"))
        if element.choice("packing") == GROUTED:
            return api.LinearSpring(stiffness, capacity)
        gap_m = element.number("gap_mm") / 1e3
        return api.PressureOfClosure(partial(after_a_gap, stiffness, gap_m), capacity)

    def amounts(self, sections: api.Sections, element: api.Element) -> Iterable[api.Amount]:
        around = 2 * np.pi * sections["radius_m"]
        yield api.Amount("liner_plates", "m3", around * element.number("plate_area_mm2") * 1e-6)

    def lines(self, values: api.SectionValues, element: api.Element) -> Sequence[api.SheetLine]:
        """The calculation sheet shows how the result comes about."""
        work = api.Working(
            {
                "R": float(values["radius_m"]),
                "A_mm2": element.number("plate_area_mm2"),
                "E_gpa": element.number("plate_modulus_gpa"),
                "s": element.number("seam_strength_mpa"),
            }
        )
        radius = np.array([values["radius_m"]], dtype=float)
        area, modulus = element.number("plate_area_mm2"), element.number("plate_modulus_gpa")
        strength = element.number("seam_strength_mpa")
        stiffness = float(ring_stiffness_mpa_per_m(radius, area, modulus)[0])
        capacity = float(ring_capacity_mpa(radius, area, strength)[0])
        meaning = "stiffness" if element.choice("packing") == GROUTED else "stiffness in contact"
        work.add("K", meaning, "E_gpa*1000*A_mm2*1e-6/R^2", stiffness, "MPa/m", SOURCE)
        work.add("pmax", "capacity", "s*A_mm2*1e-6/R", capacity, "MPa", SOURCE)
        return work.lines


class SeamThrust:
    """The load check: thrust of the ring against that of its seams."""

    name = "seam_thrust"
    meaning = f"thrust of the ring against the strength of its seams; {SOURCE}"
    applies_to = (LinerPlates.name,)
    unit = "kN/m"
    carries_load = True

    def concerns(self, element: api.Element) -> bool:
        return True

    def evaluate(self, sections: api.Sections, element: api.Element) -> api.Evaluation:
        strength = element.number("seam_strength_mpa") * element.number("plate_area_mm2") * 1e-3
        thrust = sections["element_pressure_mpa"] * sections["radius_m"] * 1e3
        return api.Evaluation(thrust, np.full(sections.count, strength))

    def lines(self, values: api.SectionValues, element: api.Element) -> Sequence[api.SheetLine]:
        found = self.evaluate(api.one_section(values), element)
        work = api.Working(
            {
                "pe": float(values["element_pressure_mpa"]),
                "R": float(values["radius_m"]),
                "A_mm2": element.number("plate_area_mm2"),
                "s": element.number("seam_strength_mpa"),
            }
        )
        demand, capacity = float(found.demand[0]), float(found.capacity[0])
        work.add("demand", "thrust", "pe*R*1000", demand, "kN/m", SOURCE)
        work.add("capacity", "strength of a seam", "s*A_mm2*0.001", capacity, "kN/m", SOURCE)
        return work.lines


class GapCloses:
    """A rule: plates that the wall never touches support nothing."""

    name = "gap_closes"
    meaning = "movement of the wall since installation against the gap; geometry"
    applies_to = (LinerPlates.name,)
    unit = "mm"
    carries_load = False

    def concerns(self, element: api.Element) -> bool:
        return element.choice("packing") == GAP

    def evaluate(self, sections: api.Sections, element: api.Element) -> api.Evaluation:
        gap = np.full(sections.count, element.number("gap_mm"))
        return api.Evaluation(gap, sections["element_moved_mm"])


@api.hookimpl
def tunnelcalc_register_support_kinds(register: Callable[[api.SupportKind], None]) -> None:
    register(LinerPlates())


@api.hookimpl
def tunnelcalc_register_support_checks(register: Callable[[api.SupportCheck], None]) -> None:
    register(SeamThrust())
    register(GapCloses())


@api.hookimpl
def tunnelcalc_register_verification_checks(
    register: Callable[[api.VerificationCheck], None],
) -> None:
    radius = np.array([2.0])
    register(
        api.VerificationCheck(
            LinerPlates.name,
            "stiffness of 5000 mm2/m with E 200 GPa at R 2 m",
            SOURCE,
            api.Standing.EXACT,
            "MPa/m",
            1e-9,
            lambda: 250.0,
            lambda: float(ring_stiffness_mpa_per_m(radius, 5000.0, 200.0)[0]),
        )
    )
