"""The plastic ring of strain-softening Hoek-Brown ground, from its edge to zero stress.

One pass over the annuli of `softening_annulus` fills the tables from which the wall under any
support pressure is found. Annuli are thin where softening is fast and towards zero stress, where
strength goes: with w = sqrt(sr / pcr) their length in -w + x is what is left of it, by the
tangent, over the number of annuli left. So a thin softening zone has as many annuli as a thick
one.
"""

from __future__ import annotations

from typing import NamedTuple

import numpy as np

from tunnelcalc.arrays import Array
from tunnelcalc.ground_reaction.softening_annulus import (
    LEAST_STIFFNESS,
    SofteningGround,
    correct_softening,
    cross_annulus,
    empty_face,
    fill_face,
    predict_softening,
)

DROP_STEPS = 40
"""Newton steps from the residual towards the root of a drop that stops short of it."""


class RingStates(NamedTuple):
    """Tables of the states of the faces from the edge to zero stress, (annuli + 1, n) each.

    `root` is w = sqrt(sr / pcr), `depth` ln(Rp / r), `drive` V, `softening` x, `rate` -dx / dw, at
    most `STEEPEST`.
    """

    root: Array
    depth: Array
    drive: Array
    softening: Array
    rate: Array


def edge_softening(ground: SofteningGround, drive: Array) -> tuple[Array, Array]:
    """Softening just inside the edge of the ring.

    Parameters
    ----------
    ground : of n sections.
    drive : (n,) V / sci at the edge. [-]

    Returns
    -------
    x and -dx / dw, (n,) each: x = 0, or where that is unstable the largest root. [-]

    Source
    ------
    Derivation at the head of `softening_annulus`.
    """
    count = drive.size
    softening, rate = np.zeros(count), np.zeros(count)
    steep = np.arange(count)
    for start in (0.0, 1.0):
        part, drives = ground.take(steep), drive[steep]
        face, work, out = empty_face(steep.size), *np.empty((2, 2, steep.size))
        edge, least = np.ones(steep.size), np.zeros(steep.size)
        face.softening[:] = start
        for _ in range(DROP_STEPS if start and steep.size else 1):
            fill_face(face, part, edge)
            correct_softening(part, face, edge, drives, least, (out[0], out[1]), work)
            face.softening[:] = out[0] if start else 0
        softening[steep], rate[steep] = face.softening, out[1]
        steep = steep[work[1] <= LEAST_STIFFNESS] if not start else steep
    return softening, rate


def ring_states(ground: SofteningGround, drive: Array, states: RingStates) -> None:
    """Fill the tables of n sections; the loop is over annuli.

    Parameters
    ----------
    ground : of n sections.
    drive : (n,) V / sci at the edge of the ring. [-]
    states : tables, filled from the edge to zero stress.

    Source
    ------
    Derivation at the head of `softening_annulus`.
    """
    count, annuli = drive.size, len(states.depth) - 1
    outer, inner, work = empty_face(count), empty_face(count), np.empty((2, count))
    stress_fall, thickness, fall = np.empty((3, count))
    roots, depths, drives, softenings, rates = states
    roots[0], depths[0], drives[0] = 1, 0, drive
    softenings[0], rates[0] = edge_softening(ground, drive)
    outer.softening[:] = softenings[0]
    fill_face(outer, ground, roots[0])
    for annulus in range(annuli):
        root, inside, rate = roots[annulus], roots[annulus + 1], rates[annulus]
        # The length left, in -w + x, over the annuli left; then what of it is -w.
        np.multiply(rate, root, out=fall)
        np.subtract(1, outer.softening, out=inside)
        np.minimum(fall, inside, out=fall)
        np.add(fall, root, out=fall)
        np.multiply(fall, 1 / (annuli - annulus), out=fall)
        np.add(rate, 1, out=inside)
        np.divide(fall, inside, out=fall)
        np.minimum(fall, root, out=fall)
        if annulus == annuli - 1:
            fall[:] = root
        np.subtract(root, fall, out=inside)
        np.add(root, inside, out=stress_fall)
        np.multiply(stress_fall, fall, out=stress_fall)
        np.multiply(stress_fall, ground.critical, out=stress_fall)
        predict_softening(outer, rate, fall, inner.softening)
        fill_face(inner, ground, inside)
        drive_inside = drives[annulus + 1]
        out = (thickness, drive_inside)
        cross_annulus(ground, outer, inner, stress_fall, drives[annulus], out, work)
        np.add(depths[annulus], thickness, out=depths[annulus + 1])
        corrected = (softenings[annulus + 1], rates[annulus + 1])
        correct_softening(ground, inner, inside, drive_inside, outer.softening, corrected, work)
        inner.softening[:] = corrected[0]
        fill_face(inner, ground, inside)
        outer, inner = inner, outer
