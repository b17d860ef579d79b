"""What each ring of a lining bears: its own thrust, and its share of the moment.

A ring that acts later, or that was young when load came, does not have the thrust that a composite
would give it. Its thrust is therefore what it carries at rest, pressure times radius; rings that
act from the same distance and do not harden divide theirs by axial stiffness, as a composite, which
thick rings and springs at the wall do not quite (some per cent). The unequal
stress makes every part of the load unequal in the same way, as everywhere in this plugin; so

- a ring's moment is to its thrust as in the composite of all rings at their final stiffness. A ring
  alone, or young, has less: to its thrust the moment grows with the axial stiffness of what is
  there (over wide ranges of ground and rings never more than 1e-5 above, independent calculation).
- at rest a ring's moment is never taken less than its share, by bending stiffness, of the moment
  of a composite that was there from the first ring on. That is the cautious side for a later ring,
  of which the equilibrium may tell too small a load. For the first ring it alone would be none: the
  moment that came before the others was all its own.
- a ring's swing of thrust is that of the composite for the load that came to all rings together,
  and for the rest that of a soft lining, which is larger: bonded to the ground up to (3 - 2 nu)
  times. Together came the least hoop strain of all rings; where a ring hardens, nothing did.

Rings whose pressures are to each other as their axial stiffness are so the composite itself.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace
from typing import NamedTuple

import numpy as np

from tunnelcalc.api import Array
from tunnelcalc_composite_lining.composite_section import Part, shares
from tunnelcalc_composite_lining.einstein_schwartz import LiningForces, scaled_to_thrust


class RingLoad(NamedTuple):
    """Pressure (n,) of the ground and of water on a ring at rest [MPa], and the distance behind the
    face from which it acts (n,) [m].

    Where it hardens, `young_ground_mpa` (n,) and `young_water_mpa` (n,) when it is used most along
    the advance, and `young_strength_share` (n,), strength then over final strength [-].
    """

    ground_mpa: Array
    water_mpa: Array
    acts_from_m: Array
    young_ground_mpa: Array | None = None
    young_water_mpa: Array | None = None
    young_strength_share: Array | None = None

    @property
    def hardens(self) -> bool:
        """Whether there is a young state."""
        return self.young_strength_share is not None


class RingState(NamedTuple):
    """A ring with the strength that it has then, and its own forces; `number` among the rings."""

    number: int
    young: bool
    part: Part
    forces: LiningForces


SAME_DISTANCE_M = 1e-9


def act_together(one: RingLoad, other: RingLoad) -> Array:
    """Whether two rings are a composite from the first.

    Parameters
    ----------
    one, other : loads of two rings, or twice of the same.

    Returns
    -------
    (n,) true where they act from the same distance and neither hardens. [-]

    Source
    ------
    Definition.
    """
    apart = np.abs(one.acts_from_m - other.acts_from_m) > SAME_DISTANCE_M
    return ~apart if one is other or not (one.hardens or other.hardens) else apart & ~apart


def as_composites(parts: Sequence[Part], loads: Sequence[RingLoad]) -> tuple[RingLoad, ...]:
    """The loads, where rings that act together share what they carry by axial stiffness.

    Parameters
    ----------
    parts : rings, one or more.
    loads : of each ring. [MPa]

    Returns
    -------
    Loads with pressures CA_i sum p / sum CA over the rings that act with it. [MPa]

    Source
    ------
    Carranza-Torres & Diederichs (2009) [from memory]: equal strain.
    """
    found = []
    for part, load in zip(parts, loads, strict=True):
        stiffness, ground, water = (np.zeros_like(load.ground_mpa) for _ in range(3))
        for other, its in zip(parts, loads, strict=True):
            with_it = act_together(load, its)
            stiffness = stiffness + np.where(with_it, other.axial_stiffness_mn_per_m, 0)
            ground = ground + np.where(with_it, its.ground_mpa, 0)
            water = water + np.where(with_it, its.water_mpa, 0)
        share = part.axial_stiffness_mn_per_m / stiffness
        found.append(load._replace(ground_mpa=share * ground, water_mpa=share * water))
    return tuple(found)


def shared_thrust_mn_per_m(
    parts: Sequence[Part], loads: Sequence[RingLoad], radius_m: Array
) -> list[Array]:
    """Thrust of the ground that each ring took together with all others.

    Parameters
    ----------
    parts : rings, one or more.
    loads : of each ring.
    radius_m : (n,) R of the wall. [m]

    Returns
    -------
    (n,) of each ring, CA times the least p R / CA; 0 where a ring hardens. [MN/m]

    Source
    ------
    Equal hoop strain of all rings that are there.
    """
    if any(load.hardens for load in loads):
        return [np.zeros_like(radius_m) for _ in parts]
    strains = [
        load.ground_mpa * radius_m / part.axial_stiffness_mn_per_m
        for part, load in zip(parts, loads, strict=True)
    ]
    least = np.min(strains, axis=0)
    return [part.axial_stiffness_mn_per_m * least for part in parts]


class _Ring(NamedTuple):
    """What the forces of a ring follow from beside its pressure."""

    whole: LiningForces
    soft_swing: Array
    radius_m: Array
    shared_mn_per_m: Array
    moment_to_thrust: Array

    def forces(self, ground_mpa: Array, water_mpa: Array, bending_mpa: Array) -> LiningForces:
        """Forces under a pressure (n,) of the ground and of water, and a moment as of a pressure
        (n,) of the ground. [MPa]"""
        own = scaled_to_thrust(self.whole, ground_mpa * self.radius_m)
        mean = own.mean_thrust_mn_per_m
        bent = scaled_to_thrust(self.whole, bending_mpa * self.radius_m)
        before = mean - np.minimum(self.shared_mn_per_m, mean)
        more = larger_swing(self.whole, self.soft_swing) - _swing(self.whole)
        return own._replace(
            mean_thrust_mn_per_m=mean + water_mpa * self.radius_m,
            thrust_swing_mn_per_m=own.thrust_swing_mn_per_m + before * more,
            moment_swing_mnm_per_m=bent.moment_swing_mnm_per_m * self.moment_to_thrust,
        )


def ring_states(
    parts: Sequence[Part],
    loads: Sequence[RingLoad],
    radius_m: Array,
    whole: LiningForces,
    soft_swing: Array,
) -> tuple[RingState, ...]:
    """Each ring at rest, and each that hardens also where it is used most while young.

    Parameters
    ----------
    parts : rings at their final strength, one or more.
    loads : of each ring.
    radius_m : (n,) R of the wall. [m]
    whole : forces of the composite under the whole in-situ stress.
    soft_swing : (n,) swing of thrust over its mean of a soft lining. [-]

    Returns
    -------
    States, those at rest first of each ring. [-]

    Limits
    ------
    Tensile strength grows with age as the compressive one does. With water on the lining the age
    that counts is that of the highest thrust beside the strength.

    Source
    ------
    Head of this module: Einstein & Schwartz (1979), Carranza-Torres & Diederichs (2009) [from
    memory], statics.
    """
    split = shares(parts)
    shared = shared_thrust_mn_per_m(parts, loads, radius_m)
    together = np.sum([load.ground_mpa for load in loads], axis=0)
    found = []
    for number, (part, load) in enumerate(zip(parts, loads, strict=True)):
        ring = _Ring(whole, soft_swing, radius_m, shared[number],
                     split.moment[number] / split.thrust[number])  # fmt: skip
        bending = np.maximum(load.ground_mpa, split.thrust[number] * together)
        rest = ring.forces(load.ground_mpa, load.water_mpa, bending)
        found.append(RingState(number, False, part, rest))
        share = load.young_strength_share
        if share is not None:
            assert load.young_ground_mpa is not None
            assert load.young_water_mpa is not None
            young = replace(
                part,
                name=f"{part.name} while young",
                compressive_strength_mpa=part.compressive_strength_mpa * share,
                tensile_strength_mpa=part.tensile_strength_mpa * share,
            )
            state = ring.forces(load.young_ground_mpa, load.young_water_mpa, load.young_ground_mpa)
            found.append(RingState(number, True, young, state))
    return tuple(found)


def larger_swing(whole: LiningForces, soft_swing: Array) -> Array:
    """The larger of two swings of thrust over the mean.

    Parameters
    ----------
    whole : forces of the composite.
    soft_swing : (n,) of a soft lining. [-]

    Returns
    -------
    (n,) of equal sign. [-]

    Source
    ------
    Definition.
    """
    swing = _swing(whole)
    return np.where(np.abs(soft_swing) > np.abs(swing), soft_swing, swing)


def _swing(whole: LiningForces) -> Array:
    """(n,) T2 / T0 of the composite."""
    mean = whole.mean_thrust_mn_per_m
    return whole.thrust_swing_mn_per_m / np.where(mean > 0, mean, np.nan)
