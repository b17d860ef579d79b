"""Many roots at once: each by itself, wherever the bracket and the first estimate lie."""

import numpy as np
import pytest

from tunnelcalc.root_finding import increasing_roots


def cubes(targets):
    """x^3 = target."""
    return lambda x, index: (x**3 - targets[index], 3 * x**2)


def test_cube_roots_known_by_hand():
    targets = np.array([8.0, 27.0, 1e-9, 1e9])
    found = increasing_roots(cubes(targets), np.zeros(4), np.full(4, 2000.0), np.full(4, 1000.0))
    assert found.converged.all()
    np.testing.assert_allclose(found.value, [2, 3, 1e-3, 1e3], rtol=1e-12)


@pytest.mark.parametrize("start", [0.0, 1e-9, 1.0, 2.0, 5.0])
def test_root_is_found_from_any_start_in_the_bracket(start):
    found = increasing_roots(
        cubes(np.array([8.0])), np.zeros(1), np.full(1, 5.0), np.full(1, start)
    )
    assert found.converged[0]
    assert found.value[0] == pytest.approx(2, rel=1e-12)


@pytest.mark.parametrize("end", ["lower", "upper"])
def test_root_at_an_end_of_the_bracket(end):
    lower, upper = (2.0, 9.0) if end == "lower" else (0.0, 2.0)
    found = increasing_roots(
        cubes(np.array([8.0])), np.array([lower]), np.array([upper]), np.array([lower])
    )
    assert found.converged[0]
    assert found.value[0] == pytest.approx(2, rel=1e-12)


def test_first_estimate_that_is_the_root_stays():
    found = increasing_roots(cubes(np.array([8.0])), np.zeros(1), np.full(1, 5.0), np.full(1, 2.0))
    assert found.converged[0]
    assert found.value[0] == 2.0


def test_kink_and_flat_part_are_halved_through():
    """max(0, x - 1) + max(0, 1000 (x - 3)) = 500: flat to 1, steep from 3. Root by hand: the
    slopes add to 1001, so x = (500 + 1 + 3000) / 1001."""

    def function(x, index):
        value = np.maximum(0, x - 1) + np.maximum(0, 1000 * (x - 3)) - 500
        return value, 1.0 * (x > 1) + 1000 * (x > 3)

    found = increasing_roots(function, np.zeros(1), np.full(1, 10.0), np.full(1, 0.5))
    assert found.converged[0]
    assert found.value[0] == pytest.approx(3501 / 1001, rel=1e-12)


def test_step_from_below_to_above_is_found_by_halving_alone():
    """No slope anywhere: sign(x - pi)."""

    def function(x, index):
        return np.sign(x - np.pi), np.zeros_like(x)

    found = increasing_roots(function, np.zeros(1), np.full(1, 8.0), np.full(1, 1.0))
    assert found.converged[0]
    assert found.value[0] == pytest.approx(np.pi, rel=1e-11)


def test_infinite_value_only_says_on_which_side_the_root_lies():
    def function(x, index):
        value = np.where(x < 6, -np.inf, x - 7)
        return value, np.ones_like(x)

    found = increasing_roots(function, np.zeros(1), np.full(1, 8.0), np.full(1, 1.0))
    assert found.converged[0]
    assert found.value[0] == pytest.approx(7, rel=1e-12)


def test_nan_is_not_converged_and_spoils_no_other():
    targets = np.array([8.0, np.nan, 27.0])
    found = increasing_roots(cubes(targets), np.zeros(3), np.full(3, 9.0), np.full(3, 4.0))
    np.testing.assert_array_equal(found.converged, [True, False, True])
    alone = increasing_roots(cubes(targets[[0]]), np.zeros(1), np.full(1, 9.0), np.full(1, 4.0))
    assert found.value[0] == alone.value[0]


def test_a_jump_beside_zero_ends_the_search_instead_of_using_up_its_steps():
    """Rounding turns a very steep closure into steps: the function jumps at 3e-19 of its bracket,
    and has no slope that tells where."""

    def staircase(x, index):
        return np.where(x < 3e-19, -1e5, x), np.ones_like(x)

    found = increasing_roots(staircase, np.zeros(1), np.ones(1), np.full(1, 0.5))
    assert found.converged[0]
    assert found.value[0] == pytest.approx(3e-19, abs=2e-24)


def test_what_is_not_known_in_the_middle_of_the_bracket_is_not_a_root():
    def unknown(x, index):
        return np.full_like(x, np.nan), np.ones_like(x)

    found = increasing_roots(unknown, np.zeros(1), np.ones(1), np.full(1, 0.5))
    assert not found.converged[0]


def test_no_roots_to_find():
    found = increasing_roots(cubes(np.empty(0)), np.empty(0), np.empty(0), np.empty(0))
    assert found.value.shape == found.converged.shape == (0,)


def test_root_does_not_depend_on_what_is_solved_beside_it():
    targets = np.random.default_rng(8).uniform(1e-3, 1e3, 200)
    together = increasing_roots(
        cubes(targets), np.zeros(200), np.full(200, 11.0), np.full(200, 1.0)
    )
    for position in range(0, 200, 17):
        alone = increasing_roots(
            cubes(targets[[position]]), np.zeros(1), np.full(1, 11.0), np.full(1, 1.0)
        )
        assert alone.value[0] == together.value[position]
