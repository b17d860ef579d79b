"""Interaction of thrust and moment in a composite lining: its limits, corners and shear.

Each part stays elastic up to its strength at a face, divided by the factor of safety. In thrust
and size of moment each limit is a straight line, and what the section bears is what all of them
leave. Source of the whole: C. Carranza-Torres, M. Diederichs, Tunn. Undergr. Space Technol. 24
(2009) 506-532 [from memory].
"""

from __future__ import annotations

from collections.abc import Sequence
from typing import NamedTuple

import numpy as np

from tunnelcalc.api import Array
from tunnelcalc_composite_lining.composite_section import Part, shares


class Face(NamedTuple):
    """A limit of a part: sign (thrust) + slope |moment| <= capacity, in the section's own thrust
    and moment. Each (n,): `thrust` [1/m2], `moment` [1/m3], so that the sum is a stress, and the
    strength over the factor [MPa]."""

    label: str
    thrust: Array
    moment: Array
    strength_mpa: Array


class InteractionDiagram(NamedTuple):
    """Polyline (n, k) of thrust [MN/m], rising, and of the moment it leaves room for [MN m/m];
    the diagram is symmetric in the moment. Corners may stand twice."""

    thrust_mn_per_m: Array
    moment_mnm_per_m: Array


def faces(parts: Sequence[Part], factor: float) -> tuple[Face, ...]:
    """The straight limits of the section: compression and tension at the faces of each part.

    Parameters
    ----------
    parts : of the section, one or more.
    factor : of safety on the strengths, 1 or more. [-]

    Returns
    -------
    Two limits a part, a N / A + b |M| h / (2 I) <= sc / factor and b |M| h / (2 I) - a N / A <=
    st / factor, with a and b the part's shares of thrust and moment.

    Raises
    ------
    ValueError : a factor below 1.

    Source
    ------
    Carranza-Torres & Diederichs (2009), compression and tension.
    """
    if not factor >= 1:
        raise ValueError("the factor of safety must be 1 or more")
    found: list[Face] = []
    split = shares(parts)
    for part, thrust, moment in zip(parts, split.thrust, split.moment, strict=True):
        axial = thrust / part.area_m2_per_m
        bending = moment * part.depth_m / (2 * part.inertia_m4_per_m)
        compression = part.compressive_strength_mpa / factor
        tension = part.tensile_strength_mpa / factor
        found.append(Face(f"{part.name}, compression", axial, bending, compression))
        found.append(Face(f"{part.name}, tension", -axial, bending, tension))
    return tuple(found)


def moment_capacity_mnm_per_m(
    thrust_mn_per_m: Array, parts: Sequence[Part], factor: float
) -> Array:
    """Moment at which the first part reaches its strength under a thrust.

    Parameters
    ----------
    thrust_mn_per_m : (n,) or (n, k), compression positive. [MN/m]
    parts : of the section.
    factor : of safety, 1 or more. [-]

    Returns
    -------
    Capacity in the shape of the thrust. [MN m/m]  NaN where the thrust alone is too much.

    Source
    ------
    `faces`.
    """
    room = _room(thrust_mn_per_m, faces(parts, factor))
    return np.where(room >= 0, room, np.nan)


def interaction_diagram(parts: Sequence[Part], factor: float) -> InteractionDiagram:
    """The whole interaction of thrust and moment, by its corners.

    Parameters
    ----------
    parts : of the section.
    factor : of safety, 1 or more. [-]

    Returns
    -------
    Corners from the pure tension [MN/m] to the pure thrust that the section bears, with the
    moment at each [MN m/m]; straight between them.

    Source
    ------
    `faces`: the least of straight lines is exact between their crossings.
    """
    limits = faces(parts, factor)
    highest = _least([_over(f.strength_mpa, f.thrust) for f in limits[0::2]])
    lowest = -_least([_over(f.strength_mpa, -f.thrust) for f in limits[1::2]])
    crossings = [_crossing(one, other) for i, one in enumerate(limits) for other in limits[i + 1 :]]
    inside = [np.minimum(np.maximum(thrust, lowest), highest) for thrust in crossings]
    thrust = np.sort(np.stack([lowest, *inside, highest], axis=-1), axis=-1)
    # At the two ends rounding may leave a moment of an ulp below 0.
    return InteractionDiagram(thrust, np.maximum(_room(thrust, limits), 0))


def shear_capacity_mn_per_m(part: Part, thrust_mn_per_m: Array, factor: float) -> Array:
    """Shear force at which the middle of a rectangular part reaches its strength.

    Parameters
    ----------
    part : rectangular.
    thrust_mn_per_m : (n,) of this part, compression positive. [MN/m]
    factor : of safety, 1 or more. [-]

    Returns
    -------
    (n,) the less of A / 1.5 sqrt((s / factor)^2 - (N / A)(s / factor)) for the compressive
    strength and the tensile one, taken negative. [MN/m]  NaN where the thrust alone is too much.

    Source
    ------
    Carranza-Torres & Diederichs (2009): principal stresses where shear is 1.5 times its mean.
    """
    stress = thrust_mn_per_m / part.area_m2_per_m
    compression = part.compressive_strength_mpa / factor
    tension = part.tensile_strength_mpa / factor
    least = np.minimum(compression * (compression - stress), tension * (tension + stress))
    sound = np.where((stress <= compression) & (stress >= -tension), np.maximum(least, 0), np.nan)
    return part.area_m2_per_m / 1.5 * np.sqrt(sound)


def _room(thrust: Array, limits: Sequence[Face]) -> Array:
    def along(values: Array) -> Array:
        return values if np.ndim(thrust) < 2 else values[:, np.newaxis]

    return _least(
        [_over(along(f.strength_mpa) - along(f.thrust) * thrust, along(f.moment)) for f in limits]
    )


def _crossing(one: Face, other: Face) -> Array:
    """Thrust at which two limits leave room for the same moment; the first's end if none."""
    slope = one.thrust * other.moment - other.thrust * one.moment
    lift = one.strength_mpa * other.moment - other.strength_mpa * one.moment
    parallel = slope == 0
    end = _over(one.strength_mpa, one.thrust)
    return np.where(parallel, end, lift / np.where(parallel, 1, slope))


def _over(room: Array, share: Array) -> Array:
    """Room for a part that takes a share; no limit where it takes none."""
    return np.where(share == 0, np.inf, room / np.where(share == 0, 1, share))


def _least(arrays: Sequence[Array]) -> Array:
    least = arrays[0]
    for array in arrays[1:]:
        least = np.minimum(least, array)
    return least
