"""The ring that an element describes, by the theory that it names, thick or thin."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from tunnelcalc import api
from tunnelcalc.api import Array
from tunnelcalc_shotcrete.formulas import (
    M_PER_MM,
    MPA_PER_GPA,
    inner_hoop_stress_mpa,
    ring_capacity_mpa,
    ring_stiffness_mpa_per_m,
)
from tunnelcalc_shotcrete.laws import HardeningLaw
from tunnelcalc_shotcrete.rings import (
    thick_ring_capacity_mpa,
    thick_ring_stiffness_mpa_per_m,
    thin_ring_capacity_mpa,
    thin_ring_hoop_stress_mpa,
    thin_ring_stiffness_mpa_per_m,
)

THICK, THIN = "thick", "thin"
AT_INSTALLATION, FROM_DISTANCE = "at_installation", "from_distance"


@dataclass(frozen=True, slots=True)
class Ring:
    """A ring at 28 days: `thickness_m`, `modulus_mpa`, `poisson_ratio`, `strength_mpa`."""

    thickness_m: float
    modulus_mpa: float
    poisson_ratio: float
    strength_mpa: float
    thin: bool

    def spring(self, radius_m: Array) -> tuple[Array, Array]:
        """Stiffness (n,) [MPa/m] and capacity (n,) [MPa] of the hardened ring."""
        if self.thin:
            return self.at_shares(radius_m, np.ones_like(radius_m), np.ones_like(radius_m))
        return (
            ring_stiffness_mpa_per_m(
                radius_m, self.thickness_m, self.modulus_mpa, self.poisson_ratio
            ),
            ring_capacity_mpa(radius_m, self.thickness_m, self.strength_mpa),
        )

    def at_age(self, radius_m: Array, law: HardeningLaw, age_days: Array) -> tuple[Array, Array]:
        """Stiffness (n,) [MPa/m], and the capacity (n,) that a load is compared with [MPa], at an
        age (n,). [day]"""
        return self.at_shares(
            radius_m, law.modulus_ratio(age_days), law.compared_strength_ratio(age_days)
        )

    def at_shares(
        self, radius_m: Array, modulus_ratio: Array, strength_ratio: Array
    ) -> tuple[Array, Array]:
        """Stiffness (n,) [MPa/m] and capacity (n,) [MPa] at shares (n,) of modulus and strength."""
        modulus, strength = self.modulus_mpa * modulus_ratio, self.strength_mpa * strength_ratio
        stiffness_of = (
            thin_ring_stiffness_mpa_per_m if self.thin else thick_ring_stiffness_mpa_per_m
        )
        capacity_of = thin_ring_capacity_mpa if self.thin else thick_ring_capacity_mpa
        return (
            stiffness_of(radius_m, self.thickness_m, modulus, self.poisson_ratio),
            capacity_of(radius_m, self.thickness_m, strength),
        )

    def hoop_stress_mpa(self, pressure_mpa: Array, radius_m: Array) -> Array:
        """(n,) at the inner face of a thick ring, mean over the thickness of a thin one. [MPa]"""
        stress_of = thin_ring_hoop_stress_mpa if self.thin else inner_hoop_stress_mpa
        return stress_of(pressure_mpa, radius_m, self.thickness_m)


def ring_of(element: api.Element) -> Ring:
    """The ring of an element."""
    return Ring(
        element.number("thickness_mm") * M_PER_MM,
        element.number("modulus_gpa") * MPA_PER_GPA,
        element.number("poisson_ratio"),
        element.number("strength_mpa"),
        element.values.get("ring_theory", THICK) == THIN,
    )


def acts_from_m(element: api.Element) -> float:
    """Distance behind the face from which the ring reacts; 0: from its installation. [m]"""
    closed = element.values.get("closed_ring", AT_INSTALLATION)
    return element.number("closed_at_m") if closed == FROM_DISTANCE else 0.0
