"""Strain-softening ground: arrays against the same scheme section by section.

Measures and prints; nothing is asserted. `python -m tests.benchmarks.softening [--quick]`.
"""

from __future__ import annotations

import argparse
import math
import sys
import time
from collections.abc import Callable
from pathlib import Path

import numpy as np

TESTS = Path(__file__).parents[1]
sys.path.insert(0, str(TESTS))

from reference.softening import random_softening_ground, softening_sections  # noqa: E402

from tunnelcalc.ground_reaction.closure_profile import (  # noqa: E402
    vlachopoulos_diederichs_2009,
)
from tunnelcalc.ground_reaction.softening import SofteningCurve  # noqa: E402
from tunnelcalc.support.equilibrium import equilibrium  # noqa: E402

CHUNK = 2048
ANNULI = 200
REPEATS = 7
RADIUS_M = 5.2
STIFFNESS_MPA_PER_M = (2.0, 80.0, 30.0)
DISTANCES_M = (3.0, 2.0, 8.0)
STEEPEST = 1000.0


def slopes(
    constants: tuple[float, ...],
    w: float,
    drive: float,
    x: float,
    fall: float,
    number: float,
    log_number: float,
    strength: float,
) -> tuple[float, float]:
    """1 + kappa dH/dx, and -dx / dw."""
    a, da, m, dm, pcr, kappa, growing, dilating = constants
    power = a + da * x
    stiffness = 1 + kappa * strength * (da * log_number - power * fall / number)
    if stiffness <= 0:
        return stiffness, STEEPEST
    rise = pcr * (growing * drive / strength - dilating)
    rise += power * (m - dm * x) * strength / number
    return stiffness, min(2 * w * kappa * rise / stiffness, STEEPEST)


def drive_inside(
    z: float,
    dilating: float,
    drive: float,
    thickness: float,
    fall: float,
    outer: float,
    inner: float,
) -> float:
    """V at the inner face of an annulus."""
    if z <= 0.25:
        q = math.exp(0.5 * z)
        end = dilating * thickness * (q * outer - inner) / 6
        return q * (q * drive - dilating * fall - end) + end
    weight = math.exp(z)
    bend = 6 * fall - 3 * thickness * (outer + inner)
    integral = thickness * inner * (weight - 1) / z
    integral += thickness * (outer - inner) * (weight * (z - 1) + 1) / z**2
    integral += bend * (weight * (z - 2) + z + 2) / z**3
    return weight * drive - dilating * integral


def plain_section(ground: dict[str, float], critical: float, annuli: int) -> tuple[float, float]:
    """Rp / R and u / R without support, by the scheme of the program in plain Python.

    `critical` is pcr, known beforehand: its root is not part of the comparison.
    """
    sine = math.sin(math.radians(ground["dilation_deg"]))
    dilation = (1 + sine) / (1 - sine)
    p0, sci, nu = (
        ground[n] for n in ("in_situ_stress_mpa", "intact_strength_mpa", "poisson_ratio")
    )
    modulus = ground["deformation_modulus_mpa"] / (1 + nu)
    s, a, da = ground["s"], ground["a"], ground["residual_a"] - ground["a"]
    ds = s - ground["residual_s"]
    pcr = critical / sci
    m, dm = ground["mb"] * pcr, (ground["mb"] - ground["residual_mb"]) * pcr
    kappa = (1 + dilation) * (1 - nu) * sci / modulus / ground["critical_shear_strain"]
    growing, dilating = dilation + 1, dilation - 1
    constants = (a, da, m, dm, pcr, kappa, growing, dilating)
    log, exp = math.log, math.exp

    drive = 2 * (p0 - critical) / sci
    w, x, depth = 1.0, 0.0, 0.0
    number = m + s
    log_number = log(number)
    log_strength = a * log_number
    strength = exp(log_strength)
    stiffness, rate = slopes(constants, w, drive, x, dm + ds, number, log_number, strength)
    if stiffness <= 0:
        x = 1.0
        number = m - dm + s - ds
        log_number = log(number)
        log_strength = (a + da) * log_number
        strength = exp(log_strength)
    if x >= 1:
        rate = 0.0
    for annulus in range(annuli):
        left = w + min(rate * w, 1 - x)
        inside = max(w - left / (annuli - annulus) / (1 + rate), 0.0)
        if annulus == annuli - 1:
            inside = 0.0
        fall = pcr * (w * w - inside * inside)
        # Strength of the inner face by the tangent.
        ahead = min(x + rate * (w - inside), 1.0)
        share = inside * inside
        drop = dm * share + ds
        number_2 = m * share + s - drop * ahead
        log_number_2 = log(number_2)
        log_strength_2 = (a + da * ahead) * log_number_2
        strength_2 = exp(log_strength_2)
        # Across the annulus.
        d_number = log_number - log_number_2
        if d_number > 1e-7:
            across = number / strength - number_2 / strength_2
            d_quotient = d_number - (log_strength - log_strength_2)
            thickness = fall * across * d_number / (d_quotient * (number - number_2))
        else:
            thickness = fall * 0.5 * (1 / strength + 1 / strength_2)
        drive = drive_inside(
            growing * thickness, dilating, drive, thickness, fall, strength, strength_2
        )
        depth += thickness
        # Softening of the inner face.
        if x < 1:
            stiffness, rate = slopes(
                constants, inside, drive, ahead, drop, number_2, log_number_2, strength_2
            )
            if stiffness <= 0:
                corrected = 1.0 if kappa * (drive - strength_2) > ahead else x
            else:
                corrected = ahead + (kappa * (drive - strength_2) - ahead) / stiffness
            x = max(min(corrected, 1.0), x)
            if x >= 1:
                rate = 0.0
            number_2 = m * share + s - drop * x
            log_number_2 = log(number_2)
            log_strength_2 = (a + da * x) * log_number_2
            strength_2 = exp(log_strength_2)
        w, number, strength = inside, number_2, strength_2
        log_number, log_strength = log_number_2, log_strength_2
    closure = (1 - nu) * drive * sci - (1 - 2 * nu) * p0
    return exp(depth), closure / modulus


def elastic_section(ground: dict[str, float]) -> tuple[float, float]:
    """Rp / R and u / R of elastic ground without support."""
    modulus = ground["deformation_modulus_mpa"] / (1 + ground["poisson_ratio"])
    return 1.0, ground["in_situ_stress_mpa"] / modulus


def best_of(call: Callable[[], object], repeats: int = REPEATS) -> float:
    """Least time of several calls. [s]"""
    times = []
    for _ in range(repeats):
        start = time.perf_counter()
        call()
        times.append(time.perf_counter() - start)
    return min(times)


def part_of(ground: dict[str, np.ndarray], index: slice) -> dict[str, np.ndarray]:
    return {name: values[index] for name, values in ground.items()}


def difference(found: np.ndarray, expected: list[float]) -> float:
    """Largest relative difference; both beyond the range of a double is none."""
    pairs = zip(found.tolist(), expected, strict=True)
    return max(abs(one / other - 1) for one, other in pairs if math.isfinite(one))


def curves_of(ground: dict[str, np.ndarray], sections: int, ones: int, exact: int) -> None:
    """Curve and unsupported state: arrays, plain Python, arrays of one, adaptive integration."""

    def arrays() -> None:
        for start in range(0, sections, CHUNK):
            part = part_of(ground, slice(start, start + CHUNK))
            curve = SofteningCurve.of_ground(**part, annuli=ANNULI)
            curve.at(np.zeros(len(part["s"])))

    ours = best_of(arrays) / sections
    curve = SofteningCurve.of_ground(**part_of(ground, slice(CHUNK)), annuli=ANNULI)
    critical = curve.critical_pressure_mpa.tolist()
    rows = [
        {name: float(values[i]) for name, values in ground.items()} for i in range(len(critical))
    ]
    start = time.perf_counter()
    plain = [
        plain_section(row, pcr, ANNULI) if pcr > 0 else elastic_section(row)
        for row, pcr in zip(rows, critical, strict=True)
    ]
    python = (time.perf_counter() - start) / len(rows)
    start = time.perf_counter()
    for i in range(ones):
        one = SofteningCurve.of_ground(**part_of(ground, slice(i, i + 1)), annuli=ANNULI)
        one.at(np.zeros(1))
    alone = (time.perf_counter() - start) / ones
    start = time.perf_counter()
    for section in softening_sections(part_of(ground, slice(exact))):
        section.at(0.0)
    adaptive = (time.perf_counter() - start) / exact
    found = curve.at(np.zeros(len(rows)))
    print(f"ground reaction curve of strain-softening ground, {ANNULI} annuli, one core")
    for label, seconds in (
        ("arrays", ours),
        ("the same scheme in plain Python", python),
        ("the same arrays, a section each", alone),
        ("adaptive integration by scipy", adaptive),
    ):
        ratio = seconds / ours
        print(f"  {label:34s}{seconds * 1e6:12.2f} us a section {ratio:9.0f} times the arrays")
    radius = difference(found.plastic_ratio, [ratio for ratio, _ in plain])
    closure = difference(found.closure_ratio, [ratio for _, ratio in plain])
    print(f"  largest difference of arrays and plain Python: radius {radius:.1e}", end="")
    print(f", closure {closure:.1e}")


def after_the_curve(ground: dict[str, np.ndarray]) -> None:
    """One state under support, and the equilibrium of one class of three elements."""
    part = part_of(ground, slice(CHUNK))
    curve = SofteningCurve.of_ground(**part, annuli=ANNULI)
    count = len(part["s"])
    pressure = 0.02 * part["in_situ_stress_mpa"]
    radius, free = np.full(count, RADIUS_M), curve.at(np.zeros(count))
    installed = np.array(
        [
            free.closure_ratio
            * radius
            * vlachopoulos_diederichs_2009(
                np.full(count, distance), radius, free.plastic_ratio * radius
            )
            for distance in DISTANCES_M
        ]
    )
    stiffness = np.array([np.full(count, value) for value in STIFFNESS_MPA_PER_M])
    at = best_of(lambda: curve.at(pressure)) / count
    rest = best_of(lambda: equilibrium(curve, radius, stiffness, installed)) / count
    found = equilibrium(curve, radius, stiffness, installed)
    print(f"  state under one support pressure  {at * 1e6:12.2f} us a section")
    print(f"  equilibrium of one class          {rest * 1e6:12.2f} us a section", end="")
    print(f", {np.mean(found.converged):.1%} of the sections at rest")


def main() -> None:
    """All measurements, on this machine, in this run."""
    parser = argparse.ArgumentParser(description=__doc__)
    parser.add_argument("--quick", action="store_true", help="fewer sections")
    quick = parser.parse_args().quick
    ground = random_softening_ground(5 * CHUNK, seed=5)
    print(f"numpy {np.__version__}, Python {sys.version.split()[0]}")
    curves_of(ground, (1 if quick else 5) * CHUNK, 20 if quick else 100, 20 if quick else 100)
    after_the_curve(ground)


if __name__ == "__main__":
    main()
