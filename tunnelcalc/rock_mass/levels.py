"""Cover, water head and vertical stress from levels along the alignment."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from tunnelcalc.arrays import SAME_PLACE_M, Array

KPA_PER_MPA = 1000.0


@dataclass(frozen=True, slots=True)
class Line:
    """A level along the alignment: chainages (k,) increasing, and levels (k,). [m]"""

    chainage_m: Array
    level_m: Array

    def at(self, chainage_m: Array) -> Array:
        """Level (n,) by interpolation; NaN outside the line: nothing is extrapolated. [m]"""
        first, last = self.chainage_m[0] - SAME_PLACE_M, self.chainage_m[-1] + SAME_PLACE_M
        inside = (chainage_m >= first) & (chainage_m <= last)
        level = np.interp(chainage_m, self.chainage_m, self.level_m)
        return np.where(inside, level, np.nan)


@dataclass(frozen=True, slots=True)
class Layer:
    """A layer of one ground unit, from the base of the layer above (or the terrain) down."""

    unit_weight_kn_m3: float
    base: Line
    unit: str = ""


def layered_stress_mpa(
    layers: tuple[Layer, ...],
    terrain_m: Array,
    axis_m: Array,
    unit_weight_kn_m3: Array,
    chainage_m: Array,
) -> Array:
    """Vertical stress at the axis under a column of layers.

    Below the base of the lowest layer the ground has the section's own weight.

    Parameters
    ----------
    layers : from the top down.
    terrain_m, axis_m : (n,) levels of terrain and tunnel axis. [m]
    unit_weight_kn_m3 : (n,) of the section's own ground. [kN/m3]
    chainage_m : (n,) where the levels of the layers are taken. [m]

    Returns
    -------
    (n,) sum of unit weight times thickness above the axis. [MPa]  NaN where a level is missing.

    Source
    ------
    Weight of the overburden: Hoek & Brown, Underground Excavations in Rock (1980), ch. 5.
    """
    top = terrain_m
    stress = np.zeros(chainage_m.shape)
    for layer in layers:
        base = np.maximum(np.minimum(layer.base.at(chainage_m), top), axis_m)
        stress = stress + layer.unit_weight_kn_m3 * (top - base)
        top = base
    return (stress + unit_weight_kn_m3 * (top - axis_m)) / KPA_PER_MPA
