"""A lining of shotcrete and steel as one section: stiffness and shares.

Parts share one centreline: equal hoop strain and equal change of curvature. Thrust then goes by
axial, moment by bending stiffness. Source of the whole: C. Carranza-Torres, M. Diederichs, Tunn.
Undergr. Space Technol. 24 (2009) 506-532 [from memory].
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import NamedTuple

import numpy as np

from tunnelcalc.api import Array


@dataclass(frozen=True, slots=True)
class Part:
    """A part of the section, of a metre of tunnel; arrays are (n,).

    Area [m2/m], second moment of area [m4/m], depth [m], Young's modulus [MPa], Poisson ratio
    [-], compressive and tensile strength [MPa], both as magnitudes; a tensile strength of 0 is a
    part that bears no tension.
    """

    name: str
    area_m2_per_m: Array
    inertia_m4_per_m: Array
    depth_m: float
    modulus_mpa: Array
    poisson_ratio: float
    compressive_strength_mpa: Array
    tensile_strength_mpa: Array

    @property
    def axial_stiffness_mn_per_m(self) -> Array:
        """(n,) CA = E A / (1 - nu^2). [MN/m]"""
        return self.modulus_mpa * self.area_m2_per_m / (1 - self.poisson_ratio**2)

    @property
    def bending_stiffness_mnm2_per_m(self) -> Array:
        """(n,) CI = E I / (1 - nu^2). [MN m2/m]"""
        return self.modulus_mpa * self.inertia_m4_per_m / (1 - self.poisson_ratio**2)


class EquivalentSection(NamedTuple):
    """A rectangle as stiff as the composite: thickness (n,) [m], plane-strain modulus (n,) [MPa];
    and its axial (n,) [MN/m] and bending stiffness (n,) [MN m2/m]."""

    thickness_m: Array
    modulus_mpa: Array
    axial_stiffness_mn_per_m: Array
    bending_stiffness_mnm2_per_m: Array


class Shares(NamedTuple):
    """Shares of thrust and of moment, one array (n,) a part. [-]"""

    thrust: tuple[Array, ...]
    moment: tuple[Array, ...]


def shotcrete_part(
    name: str,
    *,
    thickness_m: float,
    modulus_mpa: Array,
    poisson_ratio: float,
    compressive_strength_mpa: Array,
    tensile_strength_mpa: Array,
) -> Part:
    """Shotcrete as a rectangle of a metre of tunnel.

    Parameters
    ----------
    name : how it is called in results.
    thickness_m : t. [m]
    modulus_mpa : (n,) Young's modulus. [MPa]
    poisson_ratio : nu. [-]
    compressive_strength_mpa, tensile_strength_mpa : (n,) magnitudes. [MPa]

    Returns
    -------
    Part with A = t [m2/m] and I = t^3 / 12 [m4/m].

    Source
    ------
    Rectangle.
    """
    ones = np.ones_like(modulus_mpa, dtype=float)
    return Part(
        name,
        thickness_m * ones,
        thickness_m**3 / 12 * ones,
        thickness_m,
        modulus_mpa,
        poisson_ratio,
        compressive_strength_mpa,
        tensile_strength_mpa,
    )


def steel_part(
    name: str,
    *,
    area_m2: Array,
    inertia_m4: Array,
    depth_m: float,
    spacing_m: float,
    modulus_mpa: Array,
    poisson_ratio: float,
    yield_strength_mpa: Array,
) -> Part:
    """Steel sets or lattice girders, smeared over their spacing.

    Parameters
    ----------
    name : how it is called in results.
    area_m2, inertia_m4 : (n,) of one set. [m2] [m4]
    depth_m : of one set. [m]
    spacing_m : S along the drive. [m]
    modulus_mpa : (n,) Young's modulus. [MPa]
    poisson_ratio : nu; 0 leaves the sets in plane stress, as separate bars are. [-]
    yield_strength_mpa : (n,) in compression and tension. [MPa]

    Returns
    -------
    Part with A / S [m2/m] and I / S [m4/m].

    Source
    ------
    Carranza-Torres & Diederichs (2009).
    """
    return Part(
        name,
        area_m2 / spacing_m,
        inertia_m4 / spacing_m,
        depth_m,
        modulus_mpa,
        poisson_ratio,
        yield_strength_mpa,
        yield_strength_mpa,
    )


def equivalent_section(parts: Sequence[Part]) -> EquivalentSection:
    """Rectangle with the axial and the bending stiffness of all parts.

    Parameters
    ----------
    parts : of the section, one or more.

    Returns
    -------
    t = sqrt(12 sum CI / sum CA) [m], E = sum CA / t [MPa], sum CA [MN/m], sum CI [MN m2/m].
    NaN in thickness and modulus where nothing is stiff.

    Source
    ------
    Carranza-Torres & Diederichs (2009).
    """
    axial = _sum([part.axial_stiffness_mn_per_m for part in parts])
    bending = _sum([part.bending_stiffness_mnm2_per_m for part in parts])
    stiff = np.where(axial > 0, axial, np.nan)
    thickness = np.sqrt(12 * bending / stiff)
    return EquivalentSection(
        thickness, stiff / np.where(thickness > 0, thickness, np.nan), axial, bending
    )


def shares(parts: Sequence[Part]) -> Shares:
    """How thrust and moment divide between the parts.

    Parameters
    ----------
    parts : of the section, one or more.

    Returns
    -------
    CA over sum CA and CI over sum CI of each part. [-]  NaN where nothing is stiff.

    Limits
    ------
    One centreline, full bond, all parts placed and loaded together.

    Source
    ------
    Carranza-Torres & Diederichs (2009): equal strain, equal curvature.
    """
    axial = [part.axial_stiffness_mn_per_m for part in parts]
    bending = [part.bending_stiffness_mnm2_per_m for part in parts]
    all_axial, all_bending = _above_zero(_sum(axial)), _above_zero(_sum(bending))
    return Shares(
        tuple(one / all_axial for one in axial), tuple(one / all_bending for one in bending)
    )


def _sum(arrays: Sequence[Array]) -> Array:
    total = arrays[0]
    for array in arrays[1:]:
        total = total + array
    return total


def _above_zero(values: Array) -> Array:
    return np.where(values > 0, values, np.nan)
