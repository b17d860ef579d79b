"""The ring of one section of strain-softening ground, laid open for a calculation sheet."""

from __future__ import annotations

from typing import NamedTuple

import numpy as np

from tunnelcalc.arrays import Array
from tunnelcalc.ground_reaction.softening import SofteningCurve


class Workings(NamedTuple):
    """The ring of one section, a row a face, from the edge of the ring to the wall, (k,) each.

    Row 0 is the edge; an annulus lies between a row and the next. Each row follows from the one
    before by the formulas at the head of `softening_annulus`:

    `radial_stress_mpa`, `root` : sr, and w = sqrt(sr / pcr).
    `predicted_softening` : x + rate dw from the row before, at most 1. The annulus is crossed with
        it: `thickness` is ln(r1 / r2), `drive_mpa` V.
    `softening` : x after one Newton step from the predicted one; `mb`, `s`, `a` and `strength_mpa`
        H are those of x.
    `rate` : -dx / dw at the predicted x, for the next row.
    `radius_ratio`, `closure_ratio` : r / R and u / r.
    `plastic_shear_strain` : eta = (1 + K) (1 - nu) (V - H) / (2 G), beyond its critical value too.
    """

    radial_stress_mpa: Array
    root: Array
    predicted_softening: Array
    thickness: Array
    drive_mpa: Array
    softening: Array
    mb: Array
    s: Array
    a: Array
    strength_mpa: Array
    rate: Array
    radius_ratio: Array
    closure_ratio: Array
    plastic_shear_strain: Array


def softening_workings(
    curve: SofteningCurve, section: int, support_pressure_mpa: float
) -> Workings:
    """The ring of one section under a support pressure, face by face.

    Parameters
    ----------
    curve : ground reaction curves of n sections.
    section : number of the section among those of the curve, from 0. [-]
    support_pressure_mpa : pi, 0 <= pi <= pcr. [MPa]

    Returns
    -------
    Workings of the whole annuli outside the wall and the partial one that ends there.

    Raises
    ------
    ValueError : the wall does not yield under this pressure, or the section has NaN.

    Source
    ------
    See the head of `softening_annulus`.
    """
    one = curve.take(np.array([section]))
    if not support_pressure_mpa < one.critical_pressure_mpa[0]:
        raise ValueError("the wall does not yield: there is no ring to show")
    wall = one.wall_face(np.array([float(support_pressure_mpa)]))
    columns = curve.states.root.shape[1]
    last, column = divmod(int(wall.above[0]), columns)
    own = (wall.root, wall.depth, wall.drive, wall.face.softening, wall.rate)
    root, depth, drive, softening, rate = (
        np.append(table[: last + 1, column], inner[0])
        for table, inner in zip(curve.states, own, strict=True)
    )
    every = np.zeros(root.size, dtype=np.intp)
    part, ground = one.take(every), one.ground.take(every)
    predicted = softening.copy()
    predicted[1:] = np.minimum(softening[:-1] - rate[:-1] * np.diff(root), 1)
    number = ground.number - ground.number_fall * softening
    s = ground.cohesion - ground.cohesion_fall * softening
    a = ground.power + ground.power_rise * softening
    strength = part.intact_strength_mpa * (number * root**2 + s) ** a
    stress, nu = part.critical_pressure_mpa * root**2, part.poisson_ratio
    drive = drive * part.intact_strength_mpa
    elastic = (1 - 2 * nu) * (part.in_situ_stress_mpa - stress)
    strain = ground.growing * (1 - nu) * (drive - strength)
    return Workings(
        radial_stress_mpa=stress,
        root=root,
        predicted_softening=predicted,
        thickness=np.diff(depth, prepend=0),
        drive_mpa=drive,
        softening=softening,
        mb=number / ground.critical,
        s=s,
        a=a,
        strength_mpa=strength,
        rate=rate,
        radius_ratio=np.exp(depth[-1] - depth),
        closure_ratio=((1 - nu) * drive - elastic) / part.double_modulus_mpa,
        plastic_shear_strain=strain / part.double_modulus_mpa,
    )
