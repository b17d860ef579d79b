"""Measures and prints; nothing is asserted. `python -m tests.benchmarks [--quick]`."""

from __future__ import annotations

import argparse
import os
import resource
import subprocess
import sys
import tempfile
import time
from collections.abc import Callable
from pathlib import Path

import numpy as np

TESTS = Path(__file__).parents[1]
sys.path.insert(0, str(TESTS))

from reference import GroundCurve, Spring, state_at_rest  # noqa: E402

from benchmarks.samples import RADIUS_M, curve, random_ground, write_project  # noqa: E402
from tunnelcalc.ground_reaction.closure_profile import (  # noqa: E402
    vlachopoulos_diederichs_2009,
)
from tunnelcalc.support.equilibrium import equilibrium  # noqa: E402

SECTIONS = 20_000
CHUNK = 2048
REFERENCE_SECTIONS = 60
STIFFNESS_MPA_PER_M = (2.0, 80.0, 30.0)
DISTANCES_M = (3.0, 2.0, 8.0)
REPEATS = 5


def best_of(repeats: int, call: Callable[[], object]) -> float:
    """Least time of several calls. [s]"""
    times = []
    for _ in range(repeats):
        start = time.perf_counter()
        call()
        times.append(time.perf_counter() - start)
    return min(times)


def one_class(ground: dict[str, np.ndarray]) -> tuple[np.ndarray, np.ndarray]:
    """Ground reaction and the equilibrium of one class, in chunks as a run takes them."""
    pressures, closures = [], []
    for start in range(0, len(ground["s"]), CHUNK):
        part = {name: values[start : start + CHUNK] for name, values in ground.items()}
        count = len(part["s"])
        curves = curve(part)
        free = curves.at(np.zeros(count))
        radius = np.full(count, RADIUS_M)
        final = free.closure_ratio * radius
        installed = np.array(
            [
                final
                * vlachopoulos_diederichs_2009(
                    np.full(count, distance), radius, free.plastic_ratio * radius
                )
                for distance in DISTANCES_M
            ]
        )
        stiffness = np.array([np.full(count, value) for value in STIFFNESS_MPA_PER_M])
        rest = equilibrium(curves, radius, stiffness, installed)
        pressures.append(rest.support_pressure_mpa)
        closures.append(rest.closure_m)
    return np.concatenate(pressures), np.concatenate(closures)


def reference_sections(ground: dict[str, np.ndarray], count: int) -> list[tuple[float, float]]:
    """The same for the first sections, one by one, by adaptive integration and scalar roots."""
    results = []
    for number in range(count):
        one = {name: float(values[number]) for name, values in ground.items()}
        section = GroundCurve(
            p0=one["in_situ_stress_mpa"],
            sci=one["intact_strength_mpa"],
            mb=one["mb"],
            s=one["s"],
            a=one["a"],
            modulus=one["deformation_modulus_mpa"],
            nu=one["poisson_ratio"],
            psi_deg=one["dilation_deg"],
        )
        plastic_ratio, closure_ratio = section.at(0.0)
        springs = []
        for stiffness, distance in zip(STIFFNESS_MPA_PER_M, DISTANCES_M, strict=True):
            at_face = np.exp(-0.15 * plastic_ratio) / 3
            share = 1 - (1 - at_face) * np.exp(-1.5 * distance / RADIUS_M / plastic_ratio)
            springs.append(Spring(stiffness, float(share * closure_ratio * RADIUS_M)))
        state = state_at_rest(section, RADIUS_M, springs)
        results.append((state.pressure, state.closure))
    return results


def ground_and_one_class(quick: bool) -> float:
    """Speed of the numerical core, as a ratio to the reference, whose time [s] it returns."""
    ground = random_ground(SECTIONS)
    ours = best_of(REPEATS, lambda: one_class(ground)) / SECTIONS
    alone = best_of(REPEATS, lambda: curve(ground).at(np.zeros(SECTIONS))) / SECTIONS
    count = REFERENCE_SECTIONS // 4 if quick else REFERENCE_SECTIONS
    start = time.perf_counter()
    expected = np.array(reference_sections(ground, count))
    theirs = (time.perf_counter() - start) / count
    pressure, closure = one_class(ground)
    loaded = expected[:, 0] > 0
    difference = np.abs(pressure[:count] / np.where(loaded, expected[:, 0], 1) - 1)[loaded]
    print("ground reaction and one class of three elements, one core")
    print(f"  reference, per section by scipy   {theirs * 1e6:12.1f} us a section")
    print(f"  core, arrays                      {ours * 1e6:12.2f} us a section")
    print(f"  ratio                             {theirs / ours:12.0f}")
    print(f"  ground reaction alone             {alone * 1e6:12.2f} us a section")
    print(f"  largest difference of pressure    {difference.max():12.1e}")
    print(f"  largest difference of closure     {largest(closure[:count], expected[:, 1]):12.1e}")
    return theirs


def largest(values: np.ndarray, expected: np.ndarray) -> float:
    """Largest relative difference."""
    return float(np.max(np.abs(values / expected - 1)))


def whole_run(sections: int, classes: int, hardening: bool = False) -> tuple[float, float]:
    """Time [s] and peak memory [MB] of the command line on a project, files written."""
    with tempfile.TemporaryDirectory() as folder:
        project = Path(folder) / "project"
        write_project(project, sections, classes, hardening)
        command = [sys.executable, "-m", "tunnelcalc", "run", str(project)]
        start = time.perf_counter()
        with subprocess.Popen(command, stdout=subprocess.DEVNULL) as process:
            _, status, usage = os.wait4(process.pid, 0)
            process.returncode = os.waitstatus_to_exitcode(status)
        if process.returncode:
            raise SystemExit(f"the run ended with {process.returncode}")
        return time.perf_counter() - start, usage.ru_maxrss / 1024


def pipeline(quick: bool, reference_s: float) -> None:
    """The whole command, start to end, against the reference for each section and class."""
    print("whole run: reading, computing, writing, printing")
    print("   sections  classes  time s   sections/s  peak MB  times the reference")
    cases = [(1_000, 1), (10_000, 1), (10_000, 5), (100_000, 1), (1_000_000, 1)]
    for sections, classes in cases[: 3 if quick else None]:
        seconds, memory = whole_run(sections, classes)
        ratio = reference_s * sections * classes / seconds
        print(
            f"  {sections:9d}  {classes:7d}  {seconds:6.2f}  {sections / seconds:11.0f}"
            f"  {memory:7.0f}  {ratio:19.0f}"
        )


def main() -> None:
    """All measurements, on this machine, in this run."""
    parser = argparse.ArgumentParser(description=__doc__)
    parser.add_argument("--quick", action="store_true", help="fewer and smaller cases")
    quick = parser.parse_args().quick
    usage = resource.getrusage(resource.RUSAGE_SELF).ru_maxrss / 1024
    print(f"numpy {np.__version__}, {os.cpu_count()} cores, {usage:.0f} MB at start")
    reference_s = ground_and_one_class(quick)
    pipeline(quick, reference_s)


if __name__ == "__main__":
    main()
