"""Roots of increasing functions, also where doubles make steps of them."""

from __future__ import annotations

import numpy as np
import pytest

from tunnelcalc.root_finding import increasing_roots


def test_a_root_is_found_to_twelve_digits():
    roots = increasing_roots(
        lambda x, _: (x**3 - 2, 3 * x**2), np.zeros(1), np.full(1, 2.0), np.full(1, 1.0)
    )
    assert roots.converged[0]
    assert roots.value[0] == pytest.approx(2 ** (1 / 3), rel=1e-12)


def test_a_jump_beside_zero_ends_the_search_instead_of_using_up_its_steps():
    """Rounding turns a very steep closure into steps: the function jumps at 3e-19 of its bracket,
    and has no slope that tells where."""

    def staircase(x, _):
        return np.where(x < 3e-19, -1e5, x), np.ones(x.size)

    roots = increasing_roots(staircase, np.zeros(1), np.ones(1), np.full(1, 0.5))
    assert roots.converged[0]
    assert roots.value[0] == pytest.approx(3e-19, abs=2e-24)


def test_a_value_that_is_not_known_is_not_a_root():
    roots = increasing_roots(
        lambda x, _: (np.full(x.size, np.nan), np.ones(x.size)),
        np.zeros(2),
        np.ones(2),
        np.full(2, 0.5),
    )
    assert not roots.converged.any()
