"""Random ground over the whole range that the program is meant for, ends of the range included."""

from __future__ import annotations

from collections.abc import Iterator, Mapping

import numpy as np
from numpy.typing import NDArray

from reference.ground_curve import GroundCurve
from reference.rock_mass import criterion

Columns = dict[str, NDArray[np.float64]]

RANGES: Mapping[str, tuple[float, float]] = {
    "gsi": (8, 100),
    "mi": (3, 33),
    "disturbance": (0, 1),
    "intact_strength_mpa": (1, 250),
    "in_situ_stress_mpa": (0.5, 60),
    "poisson_ratio": (0, 0.45),
    "dilation_deg": (0, 45),
    "deformation_modulus_mpa": (100, 60_000),
    "radius_m": (1, 12),
}
CURVE_COLUMNS = (
    "in_situ_stress_mpa",
    "intact_strength_mpa",
    "mb",
    "s",
    "a",
    "deformation_modulus_mpa",
    "poisson_ratio",
    "dilation_deg",
)
"""What a ground reaction curve follows from, in the order of `GroundCurve`."""
EVENLY_BY_LOGARITHM = ("intact_strength_mpa", "in_situ_stress_mpa", "deformation_modulus_mpa")
SHARE_AT_AN_END = 0.05


def random_ground(
    count: int, seed: int, ranges: Mapping[str, tuple[float, float]] = RANGES
) -> Columns:
    """(count,) columns of ground values, some of them exactly at an end of their range.

    With `mb`, `s` and `a` by the 2002 edition of the criterion.
    """
    draw = np.random.default_rng(seed)
    columns: Columns = {}
    for name, (low, high) in ranges.items():
        if name in EVENLY_BY_LOGARITHM:
            values = np.exp(draw.uniform(np.log(low), np.log(high), count))
        else:
            values = draw.uniform(low, high, count)
        at_end = draw.random(count) < SHARE_AT_AN_END
        columns[name] = np.where(at_end, draw.choice([low, high], count), values)
    rocks = [
        criterion(sci, mi, gsi, disturbance)
        for sci, mi, gsi, disturbance in zip(
            *(columns[n].tolist() for n in ("intact_strength_mpa", "mi", "gsi", "disturbance")),
            strict=True,
        )
    ]
    for name in ("mb", "s", "a"):
        columns[name] = np.array([getattr(rock, name) for rock in rocks])
    return columns


def curves(ground: Columns) -> Iterator[GroundCurve]:
    """The curve of each section, the slow way."""
    for values in zip(*(ground[name].tolist() for name in CURVE_COLUMNS), strict=True):
        yield GroundCurve(*values)


def curve_columns(ground: Columns) -> Columns:
    """Only what a ground reaction curve follows from."""
    return {name: ground[name] for name in CURVE_COLUMNS}
