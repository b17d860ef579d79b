"""Shotcrete as a ring closed through the invert: a support kind with its check."""

from __future__ import annotations

from collections.abc import Callable, Iterable, Sequence

import numpy as np

from tunnelcalc import api
from tunnelcalc.api import Limits, Parameter
from tunnelcalc_shotcrete.formulas import (
    M_PER_MM,
    MPA_PER_GPA,
    inner_hoop_stress_mpa,
    ring_capacity_mpa,
    ring_stiffness_mpa_per_m,
    ring_volume_m3_per_m,
)
from tunnelcalc_shotcrete.lines import reaction_lines, stress_lines
from tunnelcalc_shotcrete.verification import RING_CHECKS


class Shotcrete:
    """A closed ring of sprayed concrete of one strength and stiffness."""

    name = "shotcrete"
    is_ring = True
    meaning = "ring closed through the invert, thick-walled cylinder; Lame; Hoek & Brown (1980)"
    parameters = (
        Parameter("thickness_mm", "thickness of the ring", "mm", Limits(10, 2000)),
        Parameter("strength_mpa", "compressive strength", "MPa", Limits(0, 200, above=True)),
        Parameter("modulus_gpa", "Young's modulus", "GPa", Limits(0, 100, above=True)),
        Parameter("poisson_ratio", "Poisson ratio", "", Limits(0, 0.5, below=True)),
    )

    def misfits(self, element: api.Element, smallest_radius_m: float) -> Iterable[api.Misfit]:
        thickness = element.number("thickness_mm") * M_PER_MM
        if thickness >= smallest_radius_m:
            yield api.Misfit(
                "thickness_mm",
                f"is {thickness:g} m, not less than the radius, {smallest_radius_m:g} m",
                "correct the thickness, which is in mm, or the radius",
            )

    def reaction_form(self, element: api.Element) -> str:
        return api.LinearSpring.form

    def reaction(self, sections: api.Sections, element: api.Element) -> api.Reaction:
        radius = sections["radius_m"]
        thickness = element.number("thickness_mm") * M_PER_MM
        return api.LinearSpring(
            ring_stiffness_mpa_per_m(
                radius,
                thickness,
                element.number("modulus_gpa") * MPA_PER_GPA,
                element.number("poisson_ratio"),
            ),
            ring_capacity_mpa(radius, thickness, element.number("strength_mpa")),
        )

    def amounts(self, sections: api.Sections, element: api.Element) -> Iterable[api.Amount]:
        thickness = element.number("thickness_mm") * M_PER_MM
        volume = ring_volume_m3_per_m(sections["radius_m"], thickness)
        yield api.Amount("shotcrete", "m3", volume)

    def lines(self, values: api.SectionValues, element: api.Element) -> Sequence[api.SheetLine]:
        return reaction_lines(values, element)


class HoopStress:
    """Largest hoop stress of the ring, at its inner face, against its strength."""

    name = "hoop_stress"
    meaning = "hoop stress at the inner face against the strength; Lame, thick-walled cylinder"
    applies_to = (Shotcrete.name,)
    unit = "MPa"
    carries_load = True

    def concerns(self, element: api.Element) -> bool:
        return True

    def evaluate(self, sections: api.Sections, element: api.Element) -> api.Evaluation:
        stress = inner_hoop_stress_mpa(
            sections["element_pressure_mpa"],
            sections["radius_m"],
            element.number("thickness_mm") * M_PER_MM,
        )
        return api.Evaluation(stress, np.full(sections.count, element.number("strength_mpa")))

    def lines(self, values: api.SectionValues, element: api.Element) -> Sequence[api.SheetLine]:
        return stress_lines(values, element)


@api.hookimpl
def tunnelcalc_register_support_kinds(register: Callable[[api.SupportKind], None]) -> None:
    register(Shotcrete())


@api.hookimpl
def tunnelcalc_register_support_checks(register: Callable[[api.SupportCheck], None]) -> None:
    register(HoopStress())


@api.hookimpl
def tunnelcalc_register_verification_checks(
    register: Callable[[api.VerificationCheck], None],
) -> None:
    for check in RING_CHECKS:
        register(check)
