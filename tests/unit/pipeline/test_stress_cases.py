"""The second run where stresses are far from equal, against two separate runs.

The independent way is what was done by hand before: one run with the mean stress and one with the
larger one, each stated as a measured vertical stress with equal stresses all around.
"""

from __future__ import annotations

import numpy as np
import pytest
from unit.pipeline.grounds import evaluated, sections_of
from unit.pipeline.projects import BOLTS, SHOTCRETE, STEEL_SETS, element

from tunnelcalc.pipeline.stress_cases import LARGER, MEAN
from tunnelcalc.pipeline.support_stages import CHECK_COLUMNS, CLASS_COLUMNS

BOLTED = {**BOLTS, "length_m": 8.0, "pattern_rules": "none"}
CLASSES = {
    "light": [element("rock_bolts", BOLTED)],
    "middle": [
        element("rock_bolts", BOLTED),
        element("shotcrete", SHOTCRETE, installed_at_m=8.0),
    ],
    "heavy": [
        element("shotcrete", {**SHOTCRETE, "thickness_mm": 300.0}, installed_at_m=2.0),
        element("steel_sets", STEEL_SETS, installed_at_m=2.0),
    ],
}
GSI = np.repeat([18.0, 24.0, 30.0, 37.0, 45.0, 55.0, 70.0], 8)
RATIOS = np.tile([0.5, 2.0, 0.8, 1.25, 0.3, 3.0, 1.0, np.nextafter(0.8, 0)], 7)
COUNT = GSI.size
VERTICAL = 5.0
HORIZONTAL = VERTICAL * RATIOS
UNEQUAL = (RATIOS < 0.8) | (RATIOS > 1.25)
YES = {"crown_dead_weight": True}


def both():
    """Each section with its own stress ratio."""
    return evaluated(sections_of(COUNT, gsi=GSI, stress_ratio=RATIOS), CLASSES, chosen_checks=YES)


def alone(stress):
    """The remedy: this stress all around."""
    ground = sections_of(COUNT, gsi=GSI, stress_ratio=1.0, vertical_stress_mpa=stress)
    return evaluated(ground, CLASSES, chosen_checks=YES)


@pytest.fixture(scope="module")
def found():
    return both()


@pytest.fixture(scope="module")
def mean():
    return alone((VERTICAL + HORIZONTAL) / 2)


@pytest.fixture(scope="module")
def larger():
    return alone(np.maximum(VERTICAL, HORIZONTAL))


def as_strength(required):
    """No class is heavier than any class."""
    return np.where(required < 0, len(CLASSES), required)


def test_a_class_is_adequate_where_it_is_in_both_runs(found, mean, larger):
    second = np.where(UNEQUAL[:, None], larger["class_adequate"], True)
    np.testing.assert_array_equal(found["class_adequate"], mean["class_adequate"] & second)
    # Else the two runs would say nothing of each other.
    assert np.any(mean["class_adequate"] & ~larger["class_adequate"] & UNEQUAL[:, None])


def test_the_required_class_is_the_heavier_of_both_runs(found, mean, larger):
    one, two = (as_strength(run["required_class"]) for run in (mean, larger))
    expected = np.where(UNEQUAL, np.maximum(one, two), one)
    np.testing.assert_array_equal(as_strength(found["required_class"]), expected)
    assert set(expected.tolist()) == {0, 1, 2, 3}
    assert np.any(one != two)


def test_the_rows_of_a_class_are_those_of_one_run(found, mean, larger):
    case = found["class_stress_case"]
    assert {MEAN, LARGER} == set(np.unique(case).tolist())
    for name in CLASS_COLUMNS:
        expected = np.where(case == LARGER, larger[name], mean[name])
        assert found[name].tobytes() == expected.astype(found[name].dtype).tobytes(), name


def test_the_checks_of_a_class_are_those_of_the_same_run(found, mean, larger):
    # Lines: tension, length; tension, length, hoop; hoop, yield; and the weight of each class.
    owner = [0, 0, 0, 1, 1, 1, 1, 2, 2, 2]
    case = found["class_stress_case"][:, owner]
    for name in CHECK_COLUMNS:
        expected = np.where(case == LARGER, larger[name], mean[name])
        np.testing.assert_array_equal(found[name], expected, err_msg=name)


def test_the_case_told_is_the_one_that_asks_more(found, mean, larger):
    """First the one that is not adequate, then the lower factor, then the larger closure."""
    worse = ~larger["class_adequate"] & mean["class_adequate"]
    alike = larger["class_adequate"] == mean["class_adequate"]
    lower = larger["class_factor_of_safety"] < mean["class_factor_of_safety"]
    expected = UNEQUAL[:, None] & (worse | (alike & lower))
    np.testing.assert_array_equal(found["class_stress_case"] == LARGER, expected)


@pytest.mark.parametrize("ratio", [0.8, 1.25, 1.0])
def test_at_the_ends_of_the_range_the_mean_stands_for_both(found, ratio):
    at = ratio == RATIOS
    assert np.all(np.isnan(found["larger_stress_mpa"][at]))
    assert np.all(found["class_stress_case"][at] == MEAN)


def test_the_pressure_needed_is_the_larger_of_both_runs(found, mean, larger):
    none = found["required_class"] < 0
    assert np.any(none & UNEQUAL)
    first, second = (np.nan_to_num(run["needed_pressure_mpa"], nan=0.0) for run in (mean, larger))
    # A run in which some class was adequate tells no pressure: there it needs less.
    expected = np.where(UNEQUAL, np.maximum(first, second), first)
    assert found["needed_pressure_mpa"][none].tobytes() == expected[none].tobytes()
    assert np.all(np.isnan(found["needed_pressure_mpa"][~none]))


def test_what_is_told_without_support_is_that_of_the_mean(found, mean):
    for name in ("in_situ_stress_mpa", "critical_pressure_mpa", "plastic_radius_m", "closure_mm"):
        assert found[name].tobytes() == mean[name].tobytes()


def test_a_failing_check_is_marked_in_whichever_run_it_fails(found, mean, larger):
    for name in ("fails_tension", "fails_hoop_stress", "fails_crown_dead_weight"):
        np.testing.assert_array_equal(
            found[name], mean[name] | (larger[name] & UNEQUAL), err_msg=name
        )


def test_no_section_depends_on_those_beside_it(found):
    """Alone, each section is what it is among all: whether or not others are run twice."""
    for row in range(0, COUNT, 5):
        single = evaluated(
            sections_of(1, gsi=GSI[row], stress_ratio=RATIOS[row]), CLASSES, chosen_checks=YES
        )
        for name in (*CLASS_COLUMNS, "needed_pressure_mpa", "required_class", "class_stress_case"):
            assert single[name][0].tobytes() == found[name][row].tobytes(), name
