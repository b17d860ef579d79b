"""Lines of every method on random ground: each formula gives what the method computed."""

from __future__ import annotations

import math
from dataclasses import replace

import numpy as np
import pytest
from unit.plugin.strangers import own_points

from tunnelcalc.api import one_section
from tunnelcalc.plugin.registry import load_plugins

REGISTRY = load_plugins(own_points())
SHARES = (0.0, 0.3, 0.97, 1.0, 1.05)
"""Of the critical pressure."""
SEEDS = range(6)


def of_sort(sort):
    return [pytest.param(offer.thing, id=offer.name) for offer in REGISTRY.of_sort(sort)]


def ground(seed: int) -> dict[str, float]:
    """One section of ground that every law can compute, from strong to weak."""
    draw = np.random.default_rng(seed)
    gsi = draw.uniform(15, 90)
    radius = draw.uniform(2, 6)
    modulus = 2000 * math.exp(gsi / 30)
    friction = draw.choice([0.0, draw.uniform(15, 45)])
    values = {
        "radius_m": radius,
        "plastic_radius_m": radius * draw.uniform(1, 4),
        "in_situ_stress_mpa": draw.uniform(0.5, 20),
        "effective_vertical_stress_mpa": draw.uniform(0.5, 20),
        "effective_horizontal_stress_mpa": draw.uniform(0.5, 20),
        "intact_strength_mpa": draw.uniform(3, 150),
        "mi": draw.uniform(4, 28),
        "gsi": gsi,
        "residual_gsi": draw.choice([np.nan, 0.6 * gsi]),
        "mass_disturbance": draw.choice([0.0, 0.5]),
        "poisson_ratio": draw.uniform(0.1, 0.4),
        "dilation_deg": draw.choice([0.0, draw.uniform(0, 15)]),
        "intact_modulus_mpa": draw.choice([np.nan, 20000.0]),
        "deformation_modulus_mpa": modulus,
        "rmr89": draw.uniform(20, 50),
        "q": draw.uniform(0.1, 10),
        "friction_angle_deg": friction,
        "cohesion_mpa": draw.uniform(0.3, 2),
        "residual_friction_angle_deg": 0.8 * friction,
        "residual_cohesion_mpa": draw.uniform(0.05, 0.3),
        "critical_shear_strain": 10 ** draw.uniform(-4, -1),
        "disturbed_thickness_m": draw.choice([np.nan, 0.0, draw.uniform(0.3, 4)]),
    }
    by_quality = REGISTRY.method("strength", "hoek_brown_2002")
    for prefix, own in (
        ("", {}),
        ("residual_", {"gsi": 0.6 * gsi}),
        ("ring_", {"mass_disturbance": 0.8}),
    ):
        constants = by_quality.compute(one_section({**values, **own}))
        values |= {f"{prefix}{name}": float(constants[name][0]) for name in ("mb", "s", "a")}
    values["ring_modulus_mpa"] = draw.uniform(0.3, 1) * modulus
    return values


def disagreeing(lines):
    return [line for line in lines if line.disagrees()]


@pytest.mark.parametrize("law", of_sort("ground_reaction"))
def test_the_lines_of_a_law_give_its_curve(law):
    shown = 0
    for seed in SEEDS:
        values = ground(seed)
        curve = law.curve(one_section(values))
        critical = float(curve.critical_pressure_mpa[0])
        for share in SHARES:
            pressure = share * critical if critical > 0 else share * 0.1
            if pressure > values["in_situ_stress_mpa"]:
                continue
            lines = law.lines(values, pressure)
            assert disagreeing(lines) == []
            point = curve.at(np.array([pressure]))
            found = {line.symbol: line.result for line in lines}
            assert found["u_R"] == point.closure_ratio[0]
            assert found["X"] == point.plastic_ratio[0]
            assert lines[-1].symbol == "u_R"
            shown += 1
    assert shown > 3 * len(SEEDS)


@pytest.mark.parametrize("method", of_sort("strength"))
def test_the_lines_of_a_strength_give_its_columns(method):
    for seed in SEEDS:
        values = ground(seed)
        given = method.compute(one_section(values))
        values |= {name: float(column[0]) for name, column in given.items()}
        assert disagreeing(method.lines(values)) == []


@pytest.mark.parametrize("method", of_sort("deformation_modulus"))
def test_the_lines_of_a_modulus_give_it(method):
    for seed in SEEDS:
        values = ground(seed)
        if method.name == "bieniawski_1978":
            values["rmr89"] += 38  # it holds above 50 only
        (line,) = method.lines(values)
        assert disagreeing([line]) == []
        assert line.symbol == "E_est"
        assert line.result == method.modulus_mpa(one_section(values))[0] > 0


@pytest.mark.parametrize("method", of_sort("closure_profile"))
@pytest.mark.parametrize("distance_m", [0.0, 0.4, 6.0, 60.0])
def test_the_lines_of_a_profile_give_its_share(method, distance_m):
    for seed in SEEDS:
        values = ground(seed)
        (line,) = method.lines(values, distance_m)
        assert disagreeing([line]) == []
        assert line.symbol == "share"
        assert line.result == method.share(one_section(values), np.array([distance_m]))[0]


def test_a_wrong_digit_of_any_line_shows():
    """The comparison is no formality: a change of one part in a million is told."""
    law = REGISTRY.method("ground_reaction", "hoek_brown_softening")
    values = ground(3)
    lines = [line for line in law.lines(values, 0.0) if line.formula and line.result]
    told = [replace(line, result=line.result * (1 + 1e-6)).disagrees() for line in lines]
    assert all(told)
    assert len(told) > 30
