"""Ground reaction the other way round, pressure as a function of closure, from a table.

Following a support along the advance asks for the ground's pressure hundreds of times a section.
The curve is evaluated some 100 times and interpolated by monotone cubics. In this direction even
a curve that is vertical at zero pressure has a finite slope, 0; a kink costs accuracy only in its
own cell.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import NamedTuple

import numpy as np

from tunnelcalc.arrays import Array
from tunnelcalc.ground_reaction.curve import GroundCurve
from tunnelcalc.support.equilibrium import pressure_at_closure

COARSE = 32
"""Cells of the first table, evenly in the cube root of the pressure: only to place the nodes of
the second. A power of 2."""
CELLS = 64
"""Cells of the table; a power of 2. One for the elastic part, which is a straight line, one of no
width at the kink that some laws have where the ground yields, then evenly in the logarithm of the
closure."""
BEYOND_KINK = 1 - 1e-9
"""Of the critical pressure: already in the yielding branch."""


class Cell(NamedTuple):
    """A cubic between two nodes, (k,) each: closures [m], pressures [MPa] and the slopes that keep
    it monotone [MPa/m]."""

    start_m: Array
    end_m: Array
    start_mpa: Array
    end_mpa: Array
    start_mpa_per_m: Array
    end_mpa_per_m: Array
    secant_mpa_per_m: Array


@dataclass(frozen=True, slots=True)
class PressureTable:
    """Nodes (m, n): closure rising [m], pressure falling to 0 [MPa], d pressure / d closure
    [MPa/m]."""

    closure_m: Array
    pressure_mpa: Array
    slope_mpa_per_m: Array

    @property
    def free_closure_m(self) -> Array:
        """(n,) closure without support. [m]"""
        return self.closure_m[-1]

    def pressure_and_slope(self, closure_m: Array, index: Array) -> tuple[Array, Array]:
        """Pressure (k,) [MPa] and its slope (k,) [MPa/m] at closures (k,) [m] of the sections at
        `index`; outside the table the cubics of its ends."""
        cell = self.cell(closure_m, index)
        width, fall = cell.end_m - cell.start_m, cell.end_mpa - cell.start_mpa
        first, last, secant = cell.start_mpa_per_m, cell.end_mpa_per_m, cell.secant_mpa_per_m
        wide = width > 0
        part = np.divide(closure_m - cell.start_m, width, out=np.zeros_like(fall), where=wide)
        curved = (first + last - 2 * secant) * part
        bent = 3 * secant - 2 * first - last
        rise = width * part * (first + part * (bent + curved))
        return cell.start_mpa + rise, first + part * (2 * bent + 3 * curved)

    def cell(self, closure_m: Array, index: Array) -> Cell:
        """The cell of closures (k,) [m] of the sections at `index`."""
        cell = locate(self.closure_m, closure_m, index)
        start, end = self.closure_m[cell, index], self.closure_m[cell + 1, index]
        above, below = self.pressure_mpa[cell, index], self.pressure_mpa[cell + 1, index]
        width, fall = end - start, below - above
        wide = width > 0
        secant = np.divide(fall, width, out=np.zeros_like(fall), where=wide)
        # Slopes within 0 and three secants keep the cubic monotone (Fritsch & Carlson 1980).
        first, last = (
            np.minimum(np.maximum(self.slope_mpa_per_m[at, index], 3 * secant), 0)
            for at in (cell, cell + 1)
        )
        return Cell(start, end, above, below, first, last, secant)


def pressure_table(curve: GroundCurve, radius_m: Array, least_closure_m: Array) -> PressureTable:
    """Table of the ground's pressure from a closure, such as that at the face, to the last.

    Parameters
    ----------
    curve : ground reaction curves of n sections.
    radius_m : (n,) R. [m]
    least_closure_m : (n,) where the table begins, above 0 and less than the unsupported closure.
        [m]

    Returns
    -------
    PressureTable. Sections whose unsupported closure cannot be computed are NaN.

    Limits
    ------
    Nodes are exact; between them, in Hoek-Brown ground within small strain, at most 6e-6 of the
    in-situ stress (measured, random ground).

    Source
    ------
    Monotone cubics: F. N. Fritsch, R. E. Carlson, SIAM J. Numer. Anal. 17 (1980) 238-246.
    """
    count = radius_m.size
    every = np.arange(count)
    free = curve.at(np.zeros(count)).closure_ratio * radius_m
    highest = pressure_at_closure(curve, radius_m, least_closure_m)
    yielding = np.minimum(curve.critical_pressure_mpa, highest)
    roots = np.arange(COARSE, -1, -1)[:, None] / COARSE
    coarse = [curve.at(yielding * root**3).closure_ratio * radius_m for root in roots]
    logarithms = np.log(np.stack(coarse))
    to_come = np.log(free) - logarithms[0]
    nodes = np.empty((CELLS + 1, count))
    nodes[:3] = highest, yielding, yielding * BEYOND_KINK
    nodes[-1] = np.where(np.isfinite(free), 0, np.nan)
    roots = np.broadcast_to(roots, logarithms.shape)
    for k in range(3, CELLS):
        wanted = logarithms[0] + to_come * ((k - 2) / (CELLS - 2))
        nodes[k] = yielding * interpolated(logarithms, roots, wanted, every) ** 3
    nodes = np.minimum.accumulate(nodes, axis=0)
    points = [curve.at(pressure) for pressure in nodes]
    slopes = np.stack([point.slope for point in points]) * radius_m
    closures = np.stack([point.closure_ratio for point in points]) * radius_m
    return PressureTable(np.maximum.accumulate(closures, axis=0), nodes, 1 / slopes)


def interpolated(nodes: Array, values: Array, at: Array, index: Array) -> Array:
    """Value between the nodes of each section, by straight lines.

    Parameters
    ----------
    nodes : (m, n) rising along the first axis, m - 1 a power of 2, in one unit.
    values : (m, n) in one unit.
    at : (k,) where, in one unit with the nodes.
    index : (k,) numbers of the sections.

    Returns
    -------
    (k,) values; beyond the ends, those of the ends.

    Source
    ------
    Definition.
    """
    cell = locate(nodes, at, index)
    start, width = nodes[cell, index], nodes[cell + 1, index] - nodes[cell, index]
    part = np.divide(at - start, width, out=np.zeros_like(start), where=width > 0)
    part = np.minimum(np.maximum(part, 0), 1)
    return values[cell, index] + part * (values[cell + 1, index] - values[cell, index])


def locate(nodes: Array, at: Array, index: Array) -> Array:
    """Cell of each value between the rising nodes of its section, by halving.

    Parameters
    ----------
    nodes : (m, n) rising along the first axis, m - 1 a power of 2, in one unit.
    at : (k,) values, in one unit with the nodes.
    index : (k,) numbers of the sections.

    Returns
    -------
    (k,) c with nodes[c] <= value < nodes[c + 1]; the first or last cell beyond the ends.

    Source
    ------
    Definition.
    """
    cell = np.zeros(at.shape, dtype=np.intp)
    step = (len(nodes) - 1) // 2
    while step:
        cell = np.where(nodes[cell + step, index] <= at, cell + step, cell)
        step //= 2
    return cell
