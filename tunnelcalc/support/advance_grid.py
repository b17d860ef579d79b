"""Where along the advance the state of a section is computed."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from itertools import pairwise

import numpy as np

from tunnelcalc.arrays import Array
from tunnelcalc.support.pressure_table import interpolated

SAMPLES = 64
"""Cells of the table that turns shares into distances, a power of 2: it only places the steps."""
NEAREST, FARTHEST = 1e-3, 1e6
"""Of the radius: the first and last sampled distance behind the face."""
FAR_SHARE = 1 - 1e-6
"""Share of the closure at the last distance; the rest is taken to be over there."""
NOTHING_LEFT = 1e-15
"""Of the closure: below what doubles tell from none."""
GAUSS_POINTS = (0.5 - 1 / np.sqrt(12), 0.5 + 1 / np.sqrt(12))
"""Of a step: where a rule of two points takes its values, each with half the weight."""


def distances_along(
    share: Callable[[Array], Array],
    radius_m: Array,
    starts_m: Sequence[Array],
    graded: Sequence[bool],
    steps: int,
) -> tuple[Array, Array]:
    """Distances behind the face, rising, at which to follow the support of each section.

    Parameters
    ----------
    share : share (n,) of the final closure for distances (n,) behind the face [m].
    radius_m : (n,) R. [m]
    starts_m : one or more, (n,) where an element begins to act, or a state is asked for besides,
        0 or more. [m]
    graded : for each start, whether steps are laid from there on.
    steps : how many from each of these.

    Returns
    -------
    (k, n) from the first start to a distance where all closure is over, through every start;
    after each graded start, steps by the part of the closure still to come, short at its
    beginning, where the element is young, and at its end, where much time goes by. k does not
    depend on the sections. And (2, k - 1, n) distances within the steps, at the Gauss points of
    the closure of a step. [m]

    Source
    ------
    Definition.
    """
    every = np.arange(radius_m.size)
    ratios = np.concatenate([[0], np.geomspace(NEAREST, FARTHEST, SAMPLES)])
    samples = ratios[:, None] * radius_m
    shares = np.maximum.accumulate(np.stack([share(x) for x in samples]), axis=0)
    left = _logarithm_left(shares)
    far = interpolated(left, samples, _logarithm_left(np.full(radius_m.size, FAR_SHARE)), every)
    rows = list(starts_m)
    for start, lays in zip(starts_m, graded, strict=True):
        far = np.maximum(far, start + radius_m)
        if not lays:
            continue
        reached = share(start)
        even = np.arange(1, steps) / steps
        for part in even**2 * (3 - 2 * even):
            wanted = _logarithm_left(reached + (1 - reached) * part)
            rows.append(np.maximum(interpolated(left, samples, wanted, every), start))
    distance = np.sort(np.stack([*rows, far]), axis=0)
    reached = np.stack([share(x) for x in distance])
    within = np.empty((len(GAUSS_POINTS), len(distance) - 1, radius_m.size))
    for row, point in enumerate(GAUSS_POINTS):
        for k, (start, end) in enumerate(pairwise(reached)):
            there = _logarithm_left(start + point * (end - start))
            found = interpolated(left, samples, there, every)
            within[row, k] = np.minimum(np.maximum(found, distance[k]), distance[k + 1])
    return distance, within


def _logarithm_left(share: Array) -> Array:
    """-ln(1 - share): profiles are nearly straight in it, which keeps the interpolation true."""
    return -np.log(np.maximum(1 - share, NOTHING_LEFT))
