"""Shotcrete that hardens along the advance: whole runs, and the ratio to scipy per section.

`python -m tests.benchmarks.hardening [--quick]`. Nothing is asserted.
"""

from __future__ import annotations

import argparse
import sys
import time
from pathlib import Path

import numpy as np

TESTS = Path(__file__).parents[1]
sys.path.insert(0, str(TESTS))

from reference.samples import curve_columns, curves, random_ground  # noqa: E402
from verification import test_advance_by_integration as by_scipy  # noqa: E402

from benchmarks.__main__ import best_of, whole_run  # noqa: E402
from tunnelcalc.ground_reaction.closure_profile import (  # noqa: E402
    vlachopoulos_diederichs_2009,
)
from tunnelcalc.ground_reaction.hoek_brown import HoekBrownCurve  # noqa: E402
from tunnelcalc.support.advance import Begins, advance  # noqa: E402
from tunnelcalc.support.advance_step import Ageing, Constant  # noqa: E402
from tunnelcalc.support.element_reactions import Spring  # noqa: E402
from tunnelcalc.support.pressure_table import pressure_table  # noqa: E402

SECTIONS = 2048
STEPS = 64
BOLTS_MPA_PER_M = 30.0
DISTANCES_M = (3.0, 10.0, 60.0)


def core(ground: dict[str, np.ndarray]) -> np.ndarray:
    """Pressure at rest of a hardening ring and a spring, for all sections at once."""
    count = len(ground["radius_m"])
    radius = ground["radius_m"]
    curve = HoekBrownCurve.of_ground(**curve_columns(ground))
    free = curve.at(np.zeros(count))
    reach = free.plastic_ratio * radius

    def share(distance: np.ndarray) -> np.ndarray:
        return vlachopoulos_diederichs_2009(distance, radius, reach)

    def full(value: float) -> np.ndarray:
        return np.full(count, value)

    elements = [
        Ageing(by_scipy.hardening, full(by_scipy.SPRAYED), full(by_scipy.CLOSED)),
        Constant(Spring(full(BOLTS_MPA_PER_M), full(100.0)), full(by_scipy.BOLTED)),
    ]
    table = pressure_table(curve, radius, share(full(0.0)) * free.closure_ratio * radius)
    found = advance(curve, radius, table, share, elements, full(by_scipy.RATE), Begins.WALL, STEPS)
    return found.support_pressure_mpa


def main() -> None:
    """All measurements, on this machine, in this run."""
    parser = argparse.ArgumentParser(description=__doc__)
    parser.add_argument("--quick", action="store_true", help="fewer and smaller cases")
    quick = parser.parse_args().quick
    ground = random_ground(SECTIONS, seed=5, ranges=by_scipy.GROUND)
    ours = best_of(3, lambda: core(ground)) / SECTIONS
    count = 2 if quick else 6
    alone = list(curves(ground))[: 2 if quick else 6]
    start = time.perf_counter()
    for number in range(count):
        radius = float(ground["radius_m"][number])
        by_scipy.load_by_integration(alone[number], radius, BOLTS_MPA_PER_M, DISTANCES_M)
    theirs = (time.perf_counter() - start) / count
    print("a hardening ring and bolts along the advance, one core")
    print(f"  reference, per section by scipy   {theirs * 1e6:12.0f} us a section")
    print(f"  core, arrays, {STEPS} steps            {ours * 1e6:12.1f} us a section")
    print(f"  ratio                             {theirs / ours:12.0f}")
    print("whole run with hardening shotcrete in every class: reading, computing, writing")
    for sections, classes in ((1_000, 5), (10_000, 5))[: 1 if quick else 2]:
        seconds, memory = whole_run(sections, classes, hardening=True)
        print(f"  {sections:6d} sections x {classes} classes   {seconds:6.2f} s  {memory:5.0f} MB")


if __name__ == "__main__":
    main()
