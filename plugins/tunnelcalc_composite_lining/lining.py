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
    FULL_SLIP,
    LiningForces,
    RelativeStiffness,
    full_slip_forces,
    no_slip_forces,
    relative_stiffness,
    swing_of_soft_lining,
)
from tunnelcalc_composite_lining.interaction import faces
from tunnelcalc_composite_lining.rings import RingLoad, RingState, as_composites, ring_states
from tunnelcalc_composite_lining.utilisation import worst_utilisation

NEEDED = (
    "radius_m",
    "effective_vertical_stress_mpa",
    "effective_horizontal_stress_mpa",
    "deformation_modulus_mpa",
    "poisson_ratio",
)
"""Columns of the sections that the forces follow from, beside the pressure on each ring."""


class Lining(NamedTuple):
    """Parts of the lining, the load of each, the same where rings that act together share theirs
    as a composite, its stiffness as a composite, radius of its
    centreline (n,) [m], forces under the whole in-situ stress, swing of thrust of a soft lining
    (n,) [-], and the states of its rings, with the water."""

    parts: tuple[Part, ...]
    loads: tuple[RingLoad, ...]
    composites: tuple[RingLoad, ...]
    section: EquivalentSection
    centreline_m: Array
    stress_ratio: Array
    stiffness: RelativeStiffness
    whole: LiningForces
    soft_swing: Array
    states: tuple[RingState, ...]


class Governing(NamedTuple):
    """Stress (n,) and strength (n,) [MPa] of the face that is used most, its angle from the
    springline (n,) [deg], number of its state (n,), and part and face (n,)."""

    stress_mpa: Array
    strength_mpa: Array
    angle_deg: Array
    state: Array
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


def loads_of(sections: api.Sections, elements: Sequence[api.Element]) -> tuple[RingLoad, ...]:
    """The pressure on each ring of a class.

    Parameters
    ----------
    sections : with the state of each element [MPa], under `api.of_element`.
    elements : of the class; those without a section of a ring are none.

    Returns
    -------
    One load a ring. [-]

    Limits
    ------
    The strength of a ring that hardens grows with its capacity in pressure.

    Source
    ------
    Definition.
    """
    found = []
    for position, element in enumerate(elements):
        if element.section is None:
            continue
        water = sections[api.of_element("element_water_mpa", position)]
        ground = sections[api.of_element("element_pressure_mpa", position)] - water
        acts = sections[api.of_element("element_acts_from_m", position)]
        load = RingLoad(np.maximum(ground, 0), water, acts)
        worst = api.of_element("worst_pressure_mpa", position)
        if worst in sections:
            pressure = sections[worst]
            young_water = np.minimum(water, pressure)
            capacity = sections[api.of_element("worst_capacity_mpa", position)]
            final = sections[api.of_element("element_capacity_mpa", position)]
            load = load._replace(
                young_ground_mpa=pressure - young_water,
                young_water_mpa=young_water,
                young_strength_share=_over(capacity, final),
            )
        found.append(load)
    return tuple(found)


def lining_of(
    sections: api.Sections,
    parts: tuple[Part, ...],
    loads: tuple[RingLoad, ...],
    interface: str,
) -> Lining:
    """Forces of the rings of a lining.

    Parameters
    ----------
    sections : with the columns `NEEDED`.
    parts : of the lining.
    loads : of each part. [MPa]
    interface : `full_slip` or `no_slip`.

    Returns
    -------
    Lining: of each ring a mean thrust of its pressure times the radius of the wall [m], and swing
    of thrust and moment as the unequal stress makes them; water adds its thrust and no moment.

    Limits
    ------
    That the unequal part of the load falls as the mean does is an assumption. Thin-ring theory.

    Source
    ------
    H. H. Einstein, C. W. Schwartz (1979); statics of the mean thrust; module `rings`.
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
    soft = swing_of_soft_lining(interface, ratio, nu, stiffness)
    composites = as_composites(parts, loads)
    states = ring_states(parts, composites, radius, whole, soft)
    return Lining(
        parts, loads, composites, section, centreline, ratio, stiffness, whole, soft, states
    )


def governing_stress(lining: Lining) -> Governing:
    """The stress that is greatest for its strength, around the whole lining.

    Parameters
    ----------
    lining : with the states of its rings.

    Returns
    -------
    Stress and strength [MPa], angle [deg], state, part and face. [-]  NaN where one ring is not
    known.

    Source
    ------
    Carranza-Torres & Diederichs (2009) [from memory]; crown or springline govern, see the module
    on utilisation.
    """
    found = [_governing_of(number, state) for number, state in enumerate(lining.states)]
    worst, most = found[0]
    for other, used in found[1:]:
        # A ring that is not known leaves the lining unknown, whatever the others are.
        more = ~(used <= most) & ~np.isnan(most)
        worst = Governing(*(np.where(more, b, a) for a, b in zip(worst, other, strict=True)))
        most = np.where(more, used, most)
    return worst


def _governing_of(number: int, state: RingState) -> tuple[Governing, Array]:
    """Of one ring, and its utilisation (n,)."""
    worst = worst_utilisation(state.forces, [state.part], 1.0)
    thrust = state.forces.thrust_mn_per_m(worst.angle_deg)
    moment = np.abs(state.forces.moment_mnm_per_m(worst.angle_deg))
    stress = np.full(thrust.shape, np.nan)
    strength = np.full(thrust.shape, np.nan)
    for face in faces([state.part], 1.0):
        here = worst.governing == face.label
        stress = np.where(here, face.thrust * thrust + face.moment * moment, stress)
        strength = np.where(here, face.strength_mpa, strength)
    # Rounding may leave an unloaded lining an ulp below 0.
    stress = np.maximum(stress, 0)
    place = np.full(thrust.shape, number)
    return Governing(stress, strength, worst.angle_deg, place, worst.governing), worst.utilisation


def _over(top: Array, bottom: Array) -> Array:
    return np.where(bottom > 0, top, np.nan) / np.where(bottom > 0, bottom, 1)
