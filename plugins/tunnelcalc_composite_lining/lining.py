"""From the rings of a class to the forces and stresses of their composite lining."""

from __future__ import annotations

from collections.abc import Sequence
from typing import NamedTuple

import numpy as np

from tunnelcalc import api
from tunnelcalc.api import Array
from tunnelcalc_composite_lining.composite_section import (
    EquivalentSection,
    Part,
    equivalent_section,
)
from tunnelcalc_composite_lining.einstein_schwartz import (
    LiningForces,
    RelativeStiffness,
    full_slip_forces,
    no_slip_forces,
    relative_stiffness,
    scaled_to_thrust,
)
from tunnelcalc_composite_lining.interaction import faces
from tunnelcalc_composite_lining.utilisation import worst_utilisation

FULL_SLIP, NO_SLIP = "full_slip", "no_slip"
NEEDED = (
    "radius_m",
    "effective_vertical_stress_mpa",
    "effective_horizontal_stress_mpa",
    "deformation_modulus_mpa",
    "poisson_ratio",
    "ring_pressure_mpa",
    "lining_water_mpa",
)
"""Columns of the sections that the forces follow from."""


class Lining(NamedTuple):
    """Parts of the lining, its stiffness, radius of its centreline (n,) [m], and its forces: under
    the whole in-situ stress, and at rest with the water."""

    parts: tuple[Part, ...]
    section: EquivalentSection
    centreline_m: Array
    stress_ratio: Array
    stiffness: RelativeStiffness
    whole: LiningForces
    at_rest: LiningForces


class Governing(NamedTuple):
    """Stress (n,) and strength (n,) [MPa] of the face that is used most, its angle from the
    springline (n,) [deg], and part and face (n,)."""

    stress_mpa: Array
    strength_mpa: Array
    angle_deg: Array
    face: Array


def parts_of(
    elements: Sequence[api.Element], tensile_strength_mpa: float, count: int
) -> tuple[Part, ...]:
    """The rings of a class as parts of one section, for `count` sections of the alignment.

    Parameters
    ----------
    elements : of the class; those without a section of a ring are none.
    tensile_strength_mpa : of the rings whose kind does not state one, 0 or more. [MPa]
    count : n.

    Returns
    -------
    One part a ring. [-]

    Source
    ------
    Definition of a metre of tunnel.
    """
    found = []
    for element in elements:
        ring = element.section
        if ring is None:
            continue
        own = ring.tensile_strength_mpa
        tensile = tensile_strength_mpa if own != own else own
        found.append(
            Part(
                element.label,
                np.full(count, ring.area_m2_per_m),
                np.full(count, ring.inertia_m4_per_m),
                ring.depth_m,
                np.full(count, ring.modulus_mpa),
                ring.poisson_ratio,
                np.full(count, ring.compressive_strength_mpa),
                np.full(count, tensile),
            )
        )
    return tuple(found)


def lining_at_rest(sections: api.Sections, parts: tuple[Part, ...], interface: str) -> Lining:
    """Forces of the lining at rest with the ground.

    Parameters
    ----------
    sections : with the columns `NEEDED`.
    parts : of the lining.
    interface : `full_slip` or `no_slip`.

    Returns
    -------
    Lining, its forces scaled so that the mean thrust is the pressure of the ground on the rings
    [MPa] times the radius of the wall [m]; the water pressure adds its thrust and no moment.

    Limits
    ------
    That the unequal part of the load falls as the mean does is an assumption. Thin-ring theory.

    Source
    ------
    H. H. Einstein, C. W. Schwartz (1979); statics of the mean thrust.
    """
    radius = sections["radius_m"]
    section = equivalent_section(parts)
    centreline = radius - max(part.depth_m for part in parts) / 2
    vertical = sections["effective_vertical_stress_mpa"]
    ratio = _over(sections["effective_horizontal_stress_mpa"], vertical)
    nu = sections["poisson_ratio"]
    stiffness = relative_stiffness(
        radius_m=centreline,
        ground_modulus_mpa=sections["deformation_modulus_mpa"],
        ground_poisson_ratio=nu,
        axial_stiffness_mn_per_m=section.axial_stiffness_mn_per_m,
        bending_stiffness_mnm2_per_m=section.bending_stiffness_mnm2_per_m,
    )
    forces_of = full_slip_forces if interface == FULL_SLIP else no_slip_forces
    whole = forces_of(vertical, ratio, centreline, nu, stiffness)
    water = sections["lining_water_mpa"]
    # The rings carry the ground and the water; only the ground presses unequally.
    ground = np.maximum(sections["ring_pressure_mpa"] - water, 0)
    scaled = scaled_to_thrust(whole, ground * radius)
    at_rest = scaled._replace(mean_thrust_mn_per_m=scaled.mean_thrust_mn_per_m + water * radius)
    return Lining(parts, section, centreline, ratio, stiffness, whole, at_rest)


def governing_stress(lining: Lining) -> Governing:
    """The stress that is greatest for its strength, around the whole lining.

    Parameters
    ----------
    lining : at rest.

    Returns
    -------
    Stress and strength [MPa], angle [deg], part and face. [-]

    Source
    ------
    Carranza-Torres & Diederichs (2009) [from memory]; crown or springline govern, see the module
    on utilisation.
    """
    worst = worst_utilisation(lining.at_rest, lining.parts, 1.0)
    thrust = lining.at_rest.thrust_mn_per_m(worst.angle_deg)
    moment = np.abs(lining.at_rest.moment_mnm_per_m(worst.angle_deg))
    stress = np.full(thrust.shape, np.nan)
    strength = np.full(thrust.shape, np.nan)
    for face in faces(lining.parts, 1.0):
        here = worst.governing == face.label
        stress = np.where(here, face.thrust * thrust + face.moment * moment, stress)
        strength = np.where(here, face.strength_mpa, strength)
    # Rounding may leave an unloaded lining an ulp below 0.
    return Governing(np.maximum(stress, 0), strength, worst.angle_deg, worst.governing)


def _over(top: Array, bottom: Array) -> Array:
    return np.where(bottom > 0, top, np.nan) / np.where(bottom > 0, bottom, 1)
