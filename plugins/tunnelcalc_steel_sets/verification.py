"""Sets, joints, girders and the table of profiles against values from outside."""

from __future__ import annotations

import csv
import io
import math
from collections.abc import Callable, Iterator
from functools import partial

import numpy as np

from tunnelcalc.api import Standing, VerificationCheck
from tunnelcalc_steel_sets.formulas import (
    Blocks,
    Profile,
    blocked_capacity_mpa,
    blocked_stiffness_mpa_per_m,
    hoop_capacity_mpa,
    hoop_stiffness_mpa_per_m,
)
from tunnelcalc_steel_sets.girders import LatticeGirders
from tunnelcalc_steel_sets.joints import Joints, SlidingSets
from tunnelcalc_steel_sets.kind import SteelSets
from tunnelcalc_steel_sets.lattice import Bar, lattice_girder
from tunnelcalc_steel_sets.profile import packaged_sections
from tunnelcalc_steel_sets.sections_table import (
    MM2_PER_CM2,
    MM4_PER_CM4,
    half_of_last_digit,
    packaged_text,
)

SET = Profile(4.3e-3, 1.45e-5, 0.14, 235.0, 200_000.0, 1.5)
RADIUS_M = 5.0
GYRATION = SET.inertia_m4 / (SET.area_m2 * RADIUS_M**2)
"""(radius of gyration / R)^2: by how much, as a share, the published stiffness of a set on blocks
may lie off that by energy, because it takes the thrust as that in the middle all along."""
STRIPS = 2000
STATICS = "statics and energy of the elastic ring between two blocks, by numerical integration"


def verification_checks() -> Iterator[VerificationCheck]:
    """All checks of this plugin."""
    yield from _blocked()
    yield from _close_blocks()
    yield from _sliding()
    yield from _girders()
    yield from _table()


def _blocked() -> Iterator[VerificationCheck]:
    for angle in (15.0, 22.5, 40.0):
        blocks = Blocks(math.radians(angle / 2), 0.075, 0.25, 10_000.0)
        near = GYRATION * _one(blocked_stiffness_mpa_per_m, blocks)
        for quantity, unit, tolerance, expected, computed in (
            ("capacity", "MPa", 1e-10, _yield_by_statics, blocked_capacity_mpa),
            ("stiffness", "MPa/m", near, _stiffness_by_energy, blocked_stiffness_mpa_per_m),
        ):
            yield VerificationCheck(
                SteelSets.name,
                f"blocks every {angle:g} deg, R 5 m: {quantity}",
                STATICS,
                Standing.INDEPENDENT,
                unit,
                tolerance,
                partial(expected, blocks),
                partial(_one, computed, blocks),
            )


def _close_blocks() -> Iterator[VerificationCheck]:
    """Very many blocks are full contact; few of them never carry more than it."""
    close = Blocks(math.radians(0.25), 0.0, 0.25, 10_000.0)
    hoop = np.array([RADIUS_M])
    for quantity, unit, share, full, blocked in (
        ("capacity", "MPa", 2e-3, hoop_capacity_mpa, blocked_capacity_mpa),
        ("stiffness", "MPa/m", 1e-5, hoop_stiffness_mpa_per_m, blocked_stiffness_mpa_per_m),
    ):
        limit = float(full(hoop, SET)[0])
        yield VerificationCheck(
            SteelSets.name,
            f"blocks every 0.5 deg tend to full contact: {quantity}",
            "statics of half a ring; thin elastic ring",
            Standing.EXACT,
            unit,
            share * limit,
            limit,
            partial(_one, blocked, close),
        )
    yield VerificationCheck(
        SteelSets.name,
        "most that blocked sets carry over full contact, angles from 1 to 120 deg, R 0.6 to 30 m",
        "statics: the block force is 2 N0 sin th",
        Standing.EXACT,
        "",
        0.0,
        0.0,
        _excess_over_hoop,
    )


def _sliding() -> Iterator[VerificationCheck]:
    """300 kN, sets 1 m apart, R 4 m: 0.075 MPa; three joints of 200 mm: 95.49 mm of closure."""
    for moved, pressure, where in (
        (5e-4, 0.0375, "before the joints slide"),
        (0.05, 0.075, "while they slide"),
        (0.6 / (2 * math.pi) + 0.002, 0.15, "when their travel is used up"),
    ):
        yield VerificationCheck(
            SteelSets.name,
            f"sliding joints, {where}: pressure",
            "statics of half a ring; circumference",
            Standing.EXACT,
            "MPa",
            1e-12,
            pressure,
            partial(_slid_pressure, moved),
        )


def _girders() -> Iterator[VerificationCheck]:
    """Bars of 20 mm, 100 mm apart: I = 4 (pi 20^4 / 64 + 100 pi 50^2)."""
    four = [Bar(20.0, 0.0)] * 2 + [Bar(20.0, 100.0)] * 2
    inertia = 4 * (math.pi * 20**4 / 64 + 100 * math.pi * 50**2)
    for quantity, unit, expected in (
        ("area_mm2", "mm2", 400 * math.pi),
        ("inertia_mm4", "mm4", inertia),
        ("depth_mm", "mm", 120.0),
    ):
        yield VerificationCheck(
            LatticeGirders.name,
            f"four bars of 20 mm, layers 100 mm apart: {quantity}",
            "circles, by the parallel axis theorem",
            Standing.EXACT,
            unit,
            1e-9 * expected,
            expected,
            partial(_girder, four, quantity),
        )


def _table() -> Iterator[VerificationCheck]:
    """Every row: area and second moment of area as printed, and as the dimensions give them."""
    for row in csv.DictReader(io.StringIO(packaged_text())):
        for column, unit, name, scale in (
            ("area_cm2", "cm2", "area_mm2", MM2_PER_CM2),
            ("inertia_cm4", "cm4", "inertia_mm4", MM4_PER_CM4),
        ):
            yield VerificationCheck(
                SteelSets.name,
                f"{row['designation']}: {column} from the dimensions",
                row["source"],
                Standing.FROM_MEMORY,
                unit,
                half_of_last_digit(row[column]) * (1 + 1e-9),
                float(row[column]),
                partial(_of_table, row["designation"], name, scale),
            )


def _of_table(designation: str, name: str, scale: float) -> float:
    return float(getattr(packaged_sections()[designation], name)) / scale


def _girder(bars: list[Bar], quantity: str) -> float:
    return float(getattr(lattice_girder(bars), quantity))


def _slid_pressure(moved_m: float) -> float:
    joints, radius = Joints(3, 300.0, 200.0, 1.0), np.array([4.0])
    ceiling = np.array([np.inf])
    sets = SlidingSets(joints, np.array([75.0]), joints.slip_pressure_mpa(radius), ceiling)
    return float(sets(np.array([moved_m]))[0][0])


def _one(function: Callable[..., np.ndarray], blocks: Blocks) -> float:
    return float(function(np.array([RADIUS_M]), SET, blocks)[0])


def _excess_over_hoop() -> float:
    radii = np.array([0.6, 2.0, 5.0, 15.0, 30.0])
    most = 0.0
    for angle in (1.0, 5.0, 15.0, 30.0, 60.0, 90.0, 120.0):
        blocks = Blocks(math.radians(angle / 2), 0.0, 0.25, 10_000.0)
        share = blocked_capacity_mpa(radii, SET, blocks) / hoop_capacity_mpa(radii, SET)
        most = max(most, float(np.max(share)) - 1)
    return max(most, 0.0)


def _middles(half_angle: float) -> tuple[np.ndarray, float]:
    """Angles in the middle of strips from the middle between two blocks to one, and their width."""
    width = half_angle / STRIPS
    return (np.arange(STRIPS) + 0.5) * width, width


def _moment(angle: np.ndarray, half_angle: float, axis_m: float) -> np.ndarray:
    """For a thrust of 1 in the middle: no end turns, so that the mean moment is 0."""
    middles, width = _middles(half_angle)
    mean = float(np.sum(axis_m * (1 - np.cos(middles)))) * width / half_angle
    return axis_m * (1 - np.cos(angle)) - mean


def _middle_thrust(half_angle: float) -> float:
    """Per unit pressure: two thrusts hold the block on its piece of the wall. [MN/MPa]"""
    return half_angle * RADIUS_M * SET.spacing_m / math.sin(half_angle)


def _yield_by_statics(blocks: Blocks) -> float:
    """Pressure at which the largest stress anywhere between two blocks is the yield strength."""
    half = blocks.half_angle_rad
    axis = RADIUS_M - blocks.thickness_m - SET.depth_m / 2
    angles = np.linspace(0, half, STRIPS + 1)
    # The mean moment in closed form: strips would leave an error of their width squared.
    moment = axis * (math.sin(half) / half - np.cos(angles))
    stress = np.cos(angles) / SET.area_m2
    stress = stress + np.abs(moment) * SET.depth_m / (2 * SET.inertia_m4)
    return SET.yield_strength_mpa / (float(np.max(stress)) * _middle_thrust(half))


def _stiffness_by_energy(blocks: Blocks) -> float:
    """Force times movement of a block is twice the energy of ring and block. [MPa/m]

    The ring's axis is at R, where the published stiffness has it.
    """
    half, thrust = blocks.half_angle_rad, _middle_thrust(blocks.half_angle_rad)
    angles, width = _middles(half)
    axial = np.cos(angles) ** 2 / (SET.modulus_mpa * SET.area_m2)
    moment = _moment(angles, half, RADIUS_M)
    bending = moment**2 / (SET.modulus_mpa * SET.inertia_m4)
    energy = 2 * float(np.sum(axial + bending)) * width * RADIUS_M * thrust**2
    force = 2 * half * RADIUS_M * SET.spacing_m
    squeezed = force * blocks.thickness_m / (blocks.modulus_mpa * blocks.width_m**2)
    return 1 / (energy / force + squeezed)
