"""Lattice girders from the bars that the project declares."""

from __future__ import annotations

import math
from collections.abc import Sequence
from typing import NamedTuple


class Bar(NamedTuple):
    """A longitudinal bar: diameter [mm] and height of its centre above any one level [mm]."""

    diameter_mm: float
    height_mm: float


class LatticeGirder(NamedTuple):
    """Area [mm2], second moment of area [mm4] and depth over the bars [mm] of a girder, and the
    height of its centroid above the level that the bars are measured from [mm]."""

    area_mm2: float
    inertia_mm4: float
    depth_mm: float
    centroid_mm: float


def lattice_girder(bars: Sequence[Bar]) -> LatticeGirder:
    """Section of a lattice girder from its longitudinal bars.

    Parameters
    ----------
    bars : diameter [mm] and height of the centre [mm] of each longitudinal bar, one or more.

    Returns
    -------
    A = sum of pi d^2 / 4 [mm2], I = sum of pi d^4 / 64 + area (height - centroid)^2 [mm4], depth
    from the lowest to the highest face of a bar [mm], and centroid [mm].

    Raises
    ------
    ValueError : no bar, or a diameter that is not positive.

    Limits
    ------
    The bars act as one section: the diagonals count for nothing in A and I, and are taken to be
    stiff in shear. Without shotcrete around it a girder is softer in bending than this.

    Source
    ------
    Circles, by the parallel axis theorem.
    """
    if not bars or not all(bar.diameter_mm > 0 for bar in bars):
        raise ValueError("a lattice girder needs bars with diameters above 0")
    areas = [math.pi * bar.diameter_mm**2 / 4 for bar in bars]
    area = math.fsum(areas)
    moments = (a * bar.height_mm for a, bar in zip(areas, bars, strict=True))
    centroid = math.fsum(moments) / area
    inertia = math.fsum(
        a * (bar.diameter_mm**2 / 16 + (bar.height_mm - centroid) ** 2)
        for a, bar in zip(areas, bars, strict=True)
    )
    top = max(bar.height_mm + bar.diameter_mm / 2 for bar in bars)
    bottom = min(bar.height_mm - bar.diameter_mm / 2 for bar in bars)
    return LatticeGirder(area, inertia, top - bottom, centroid)
