"""How far a composite lining is used, at every angle and at the worst.

Around the lining thrust and moment are both linear in cos 2 theta, and each limit of the section
is linear in thrust and in the size of the moment. On such a path a limit is convex in
cos 2 theta: it is largest at springline or crown, exactly. Nothing needs to be sampled.
"""

from __future__ import annotations

from collections.abc import Sequence
from typing import NamedTuple

import numpy as np

from tunnelcalc.api import Array
from tunnelcalc_composite_lining.composite_section import Part
from tunnelcalc_composite_lining.einstein_schwartz import LiningForces
from tunnelcalc_composite_lining.interaction import Face, faces

SPRINGLINE_DEG, CROWN_DEG = 0.0, 90.0


class Utilisation(NamedTuple):
    """Stress over strength (n,) [-], angle from the springline where it is found (n,) [deg], and
    the part and face that govern (n,), empty where the result is NaN."""

    utilisation: Array
    angle_deg: Array
    governing: Array


def utilisation_at(
    forces: LiningForces, parts: Sequence[Part], factor: float, angle_deg: Array
) -> Array:
    """Largest stress over strength at one angle.

    Parameters
    ----------
    forces : of the lining.
    parts : of the section.
    factor : of safety on the strengths, 1 or more. [-]
    angle_deg : (n,) or one, from the springline; 90 is crown and invert. [deg]

    Returns
    -------
    (n,) 1 at the limit with the factor. [-]  Infinite where a part without tensile strength is
    in tension.

    Source
    ------
    Carranza-Torres & Diederichs (2009) [from memory].
    """
    used, _ = _governing(
        forces.thrust_mn_per_m(angle_deg),
        forces.moment_mnm_per_m(angle_deg),
        faces(parts, factor),
    )
    return used


def worst_utilisation(forces: LiningForces, parts: Sequence[Part], factor: float) -> Utilisation:
    """Largest stress over strength around the lining, where, and of which part.

    Parameters
    ----------
    forces : of the lining.
    parts : of the section.
    factor : of safety on the strengths, 1 or more. [-]

    Returns
    -------
    Utilisation [-], angle [deg], governing part and face.  Of equal angles the springline, of
    equal faces the first.  A NaN row stays NaN and spoils no other.

    Source
    ------
    Head of this module; Carranza-Torres & Diederichs (2009) [from memory].
    """
    limits = faces(parts, factor)
    mean, swing = forces.mean_thrust_mn_per_m, forces.thrust_swing_mn_per_m
    moment = forces.moment_swing_mnm_per_m
    side, side_face = _governing(mean + swing, moment, limits)
    crown, crown_face = _governing(mean - swing, moment, limits)
    at_crown = crown > side
    worst = np.where(at_crown, crown, side)
    missing = np.isnan(worst)
    angle = np.where(at_crown, CROWN_DEG, SPRINGLINE_DEG)
    labels = np.array([*(face.label for face in limits), ""], dtype=object)
    governing = np.where(at_crown, crown_face, side_face)
    return Utilisation(
        worst,
        np.where(missing, np.nan, angle),
        labels[np.where(missing, len(limits), governing)],
    )


def _governing(thrust: Array, moment: Array, limits: Sequence[Face]) -> tuple[Array, Array]:
    """Largest utilisation and the number of its limit."""
    worst = _used(thrust, moment, limits[0])
    number = np.zeros(worst.shape, dtype=int)
    for index, limit in enumerate(limits[1:], start=1):
        used = _used(thrust, moment, limit)
        number = np.where(used > worst, index, number)
        worst = np.maximum(worst, used)
    return worst, number


def _used(thrust: Array, moment: Array, limit: Face) -> Array:
    stress = limit.thrust * thrust + limit.moment * np.abs(moment)
    strong = limit.strength_mpa > 0
    used = stress / np.where(strong, limit.strength_mpa, 1)
    weightless = np.where(stress > 0, np.inf, np.where(stress <= 0, 0, np.nan))
    none = np.where(np.isnan(limit.strength_mpa), np.nan, weightless)
    return np.where(strong, used, none)
