"""The support kind `shotcrete`."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from functools import partial

import numpy as np

from tunnelcalc import api
from tunnelcalc.api import Limits, Parameter
from tunnelcalc_shotcrete.early import early_misfits, early_parameters
from tunnelcalc_shotcrete.formulas import M_PER_MM, ring_volume_m3_per_m
from tunnelcalc_shotcrete.hardening import EUROCODE_COEFFICIENTS
from tunnelcalc_shotcrete.laws import EUROCODE, LAW_NAMES, NO_HARDENING, hardening_law
from tunnelcalc_shotcrete.lines import lines_at_age, reaction_lines
from tunnelcalc_shotcrete.ring import (
    AT_INSTALLATION,
    FROM_DISTANCE,
    THICK,
    THIN,
    acts_from_m,
    ring_of,
)

NOT_DECLARED, WITHOUT, MESH, FIBRE = "not_declared", "none", "mesh", "fibre"


class Shotcrete:
    """A closed ring of sprayed concrete, of one strength and stiffness or hardening with age."""

    name = "shotcrete"
    is_ring = True
    meaning = (
        "ring closed through the invert, thick-walled cylinder (Lame; Hoek & Brown (1980)) or "
        "thin ring, hard from the first or hardening with age; mesh or fibres add nothing to it"
    )
    parameters = (
        Parameter("thickness_mm", "thickness of the ring", "mm", Limits(10, 2000)),
        Parameter(
            "strength_mpa", "compressive strength, at 28 days", "MPa", Limits(0, 200, above=True)
        ),
        Parameter("modulus_gpa", "Young's modulus, at 28 days", "GPa", Limits(0, 100, above=True)),
        Parameter("poisson_ratio", "Poisson ratio", "", Limits(0, 0.5, below=True)),
        Parameter(
            "ring_theory",
            "first yield at the inner face of a thick ring, or of the whole thin ring",
            choices=(THICK, THIN),
            default=THICK,
        ),
        Parameter(
            "hardening",
            "law by which strength and stiffness grow with age; none: as at 28 days from the first",
            choices=(NO_HARDENING, *LAW_NAMES),
            default=NO_HARDENING,
        ),
        Parameter(
            "cement_class",
            "class of the cement: R rapid, N normal, S slow",
            choices=tuple(EUROCODE_COEFFICIENTS),
            only_if=("hardening", (EUROCODE,)),
        ),
        *early_parameters(),
        Parameter(
            "closed_ring",
            "from where the ring is closed and reacts",
            choices=(AT_INSTALLATION, FROM_DISTANCE),
            default=AT_INSTALLATION,
        ),
        Parameter(
            "closed_at_m",
            "distance behind the face at which the ring is closed through the invert",
            "m",
            Limits(0, 10000),
            only_if=("closed_ring", (FROM_DISTANCE,)),
        ),
        Parameter(
            "reinforcement",
            "what is sprayed in; told in the quantities, adds nothing to the ring",
            choices=(NOT_DECLARED, WITHOUT, MESH, FIBRE),
            default=NOT_DECLARED,
        ),
    )

    def misfits(self, element: api.Element, smallest_radius_m: float) -> Iterable[api.Misfit]:
        thickness = element.number("thickness_mm") * M_PER_MM
        if thickness >= smallest_radius_m:
            yield api.Misfit(
                "thickness_mm",
                f"is {thickness:g} m, not less than the radius, {smallest_radius_m:g} m",
                "correct the thickness, which is in mm, or the radius",
            )
        closed = acts_from_m(element)
        if "closed_at_m" in element.values and closed < element.installed_at_m:
            yield api.Misfit(
                "closed_at_m",
                f"is {closed:g} m, before the installation at {element.installed_at_m:g} m",
                "state where the invert is closed, at or behind the installation",
            )
        yield from early_misfits(element)

    def reaction_form(self, element: api.Element) -> str:
        hardens = hardening_law(element) is not None
        return api.AdvanceIncrements.form if hardens else api.LinearSpring.form

    def reaction(self, sections: api.Sections, element: api.Element) -> api.Reaction:
        radius, ring, law = sections["radius_m"], ring_of(element), hardening_law(element)
        from_m = acts_from_m(element)
        if law is None:
            return api.LinearSpring(*ring.spring(radius), acts_from_m=from_m)
        _, final = ring.spring(radius)
        at_age = partial(ring.at_age, radius, law)
        return api.AdvanceIncrements(at_age, final, from_m, law.first_age_days)

    def amounts(self, sections: api.Sections, element: api.Element) -> Iterable[api.Amount]:
        radius, thickness = sections["radius_m"], element.number("thickness_mm") * M_PER_MM
        reinforcement = element.values.get("reinforcement", NOT_DECLARED)
        item = "fibre_shotcrete" if reinforcement == FIBRE else "shotcrete"
        yield api.Amount(item, "m3", ring_volume_m3_per_m(radius, thickness))
        if reinforcement == MESH:
            yield api.Amount("mesh_per_layer", "m2", 2 * np.pi * (radius - thickness / 2))

    def ring_section(self, element: api.Element) -> api.RingSection:
        """Of a metre, hardened; its tensile strength is for the project to say."""
        ring = ring_of(element)
        return api.RingSection(
            area_m2_per_m=ring.thickness_m,
            inertia_m4_per_m=ring.thickness_m**3 / 12,
            depth_m=ring.thickness_m,
            modulus_mpa=ring.modulus_mpa,
            poisson_ratio=ring.poisson_ratio,
            compressive_strength_mpa=ring.strength_mpa,
        )

    def lines(self, values: api.SectionValues, element: api.Element) -> Sequence[api.SheetLine]:
        return reaction_lines(values, element)

    def lines_at_age(
        self, values: api.SectionValues, element: api.Element, age_days: float
    ) -> Sequence[api.SheetLine]:
        return lines_at_age(values, element, age_days)
