"""Sliding joints of an element, and its reaction with them."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from tunnelcalc import api
from tunnelcalc.api import Array
from tunnelcalc_steel_sets.sliding import (
    sliding_pressure_and_slope,
    slip_closure_m,
    slip_pressure_mpa,
)

RIGID, SLIDING = "rigid", "sliding"
MM_PER_M = 1e3


@dataclass(frozen=True, slots=True)
class Joints:
    """Sliding joints of a set: how many in a ring, slip load, travel of each, spacing of sets."""

    count: int
    slip_load_kn: float
    travel_mm: float
    spacing_m: float

    def slip_pressure_mpa(self, radius_m: Array) -> Array:
        """(n,) at which the joints slide. [MPa]"""
        return slip_pressure_mpa(radius_m, self.slip_load_kn, self.spacing_m)

    @property
    def slip_closure_m(self) -> float:
        """Closure of the wall over which they slide. [m]"""
        return slip_closure_m(self.travel_mm, self.count)

    def slid_mm(self, moved_m: Array, stiffness_mpa_per_m: Array, radius_m: Array) -> Array:
        """(n,) by which each joint would have shortened if it could slide on, when the wall has
        moved by `moved_m` (n,) since the sets act. [mm]"""
        elastic = self.slip_pressure_mpa(radius_m) / stiffness_mpa_per_m
        return np.maximum(moved_m - elastic, 0) * MM_PER_M * 2 * np.pi / self.count


@dataclass(frozen=True, slots=True)
class SlidingSets:
    """Pressure and slope of sets with sliding joints, for the movement since they act.

    `stiffness_mpa_per_m` (n,) while the joints stand; `ceiling_mpa` (n,) is the pressure at
    which the sets yield and stay, infinite where nothing is declared beyond.
    """

    joints: Joints
    stiffness_mpa_per_m: Array
    slip_mpa: Array
    ceiling_mpa: Array

    def __call__(self, moved_m: Array) -> tuple[Array, Array]:
        pressure, slope = sliding_pressure_and_slope(
            moved_m,
            stiffness_mpa_per_m=self.stiffness_mpa_per_m,
            slip_pressure_mpa=self.slip_mpa,
            slip_closure_m=self.joints.slip_closure_m,
        )
        yields = pressure >= self.ceiling_mpa
        return np.where(yields, self.ceiling_mpa, pressure), np.where(yields, 0, slope)

    def turns_m(self) -> dict[str, Array]:
        """Movements (n,) since the sets act at which their joints begin to slide, and lock. [m]"""
        slides = self.slip_mpa / self.stiffness_mpa_per_m
        return {"joints_slide": slides, "joints_lock": slides + self.joints.slip_closure_m}


def joints_of(element: api.Element) -> Joints | None:
    """The joints of an element; None where they are rigid."""
    if element.values.get("joints", RIGID) == RIGID:
        return None
    return Joints(
        round(element.number("joint_count")),
        element.number("slip_load_kn"),
        element.number("joint_travel_mm"),
        element.number("spacing_m"),
    )
