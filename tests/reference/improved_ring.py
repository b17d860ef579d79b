"""Random ground with a ring of another strength, mostly stronger, for `reference.disturbed_ring`.

Mohr-Coulomb ground is told to the reference as Hoek-Brown ground of a = 1, which it is: mb is then
k - 1, and s times sci is q.
"""

from __future__ import annotations

from collections.abc import Iterator

import numpy as np

from reference.disturbed_ring import DisturbedRing
from reference.ground_curve import GroundCurve
from reference.samples import RANGES, Columns, curve_columns, random_ground

SHARE_WEAKER = 0.1


def random_hoek_brown(count: int, seed: int) -> Columns:
    """(count,) columns: mb and s of the ring from a little to four times those of the mass."""
    moderate = {"gsi": (25, 70), "dilation_deg": (0, 30), "in_situ_stress_mpa": (1, 30)}
    ground = curve_columns(random_ground(count, seed, {**RANGES, **moderate}))
    factor, ratio = _factor_and_ratio(count, seed + 1)
    ring = {"ring_mb": ground["mb"] * factor, "ring_s": np.minimum(ground["s"] * factor, 1)}
    draw = np.random.default_rng(seed + 2)
    ring["ring_a"] = np.where(draw.random(count) < 0.3, 0.5, ground["a"])
    return {**ground, **ring, "ring_ratio": ratio}


def random_mohr_coulomb(count: int, seed: int) -> Columns:
    """(count,) columns: slope and unconfined strength of the ring as in Hoek-Brown ground."""
    draw = np.random.default_rng(seed)
    stress = np.exp(draw.uniform(np.log(1), np.log(30), count))
    friction = np.where(draw.random(count) < 0.15, 0, draw.uniform(5, 45, count))
    cohesion = stress * np.exp(draw.uniform(np.log(0.03), np.log(0.4), count))
    factor, ratio = _factor_and_ratio(count, seed + 1)
    return {
        "in_situ_stress_mpa": stress,
        "friction_angle_deg": friction,
        "cohesion_mpa": cohesion,
        "ring_friction_angle_deg": np.where(friction == 0, 0, np.minimum(friction + 4, 60)),
        "ring_cohesion_mpa": cohesion * factor,
        "deformation_modulus_mpa": np.exp(draw.uniform(np.log(200), np.log(20_000), count)),
        "poisson_ratio": draw.uniform(0.1, 0.4, count),
        "dilation_deg": draw.choice([0.0, 8.0, 20.0], count),
        "ring_ratio": ratio,
    }


def _factor_and_ratio(count: int, seed: int) -> tuple[np.ndarray, np.ndarray]:
    draw = np.random.default_rng(seed)
    factor = np.exp(draw.uniform(0, np.log(4), count))
    factor = np.where(draw.random(count) < SHARE_WEAKER, 0.7, factor)
    return factor, 1 + np.exp(draw.uniform(np.log(0.02), np.log(1), count))


def slow_rings(columns: Columns) -> Iterator[DisturbedRing]:
    """The slow curve of each section, of either law."""
    count = columns["ring_ratio"].size
    for row in range(count):
        v = {name: float(values[row]) for name, values in columns.items()}
        elastic = (v["deformation_modulus_mpa"], v["poisson_ratio"], v["dilation_deg"])
        p0, sci = v["in_situ_stress_mpa"], v.get("intact_strength_mpa", 1.0)
        grounds = []
        for prefix in ("", "ring_"):
            if "mb" in v:
                constants = tuple(v[prefix + name] for name in ("mb", "s", "a"))
            else:
                phi = np.radians(v[prefix + "friction_angle_deg"])
                sine, cosine = float(np.sin(phi)), float(np.cos(phi))
                unconfined = 2 * v[prefix + "cohesion_mpa"] * cosine / (1 - sine)
                constants = (2 * sine / (1 - sine), unconfined, 1.0)
            grounds.append(GroundCurve(p0, sci, *constants, *elastic))
        yield DisturbedRing(*grounds, v["ring_ratio"])
