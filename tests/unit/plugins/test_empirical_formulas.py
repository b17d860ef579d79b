"""Empirical cross-checks by hand and at the ends of their ranges."""

import numpy as np
import pytest
from tunnelcalc_empirical.formulas import (
    q_bolt_length_m,
    q_support_pressure_mpa,
    rmr_support_pressure_mpa,
)


def pressure(q, jn, jr):
    return q_support_pressure_mpa(np.array([q]), np.array([jn]), np.array([jr]))[0]


def test_q_of_one_with_three_sets():
    """Jr 2: 0.2 / 2 = 0.1 MPa."""
    assert pressure(1.0, 9.0, 2.0) == pytest.approx(0.1, rel=1e-14)
    assert pressure(0.001, 12.0, 1.0) == pytest.approx(2.0, rel=1e-14)


def test_fewer_sets_join_at_three():
    """Jn 4: sqrt(4) / 3 of the pressure; no step just below Jn 9."""
    assert pressure(8.0, 4.0, 1.0) == pytest.approx(0.2 / 2 * 2 / 3, rel=1e-14)
    assert pressure(8.0, np.nextafter(9.0, 0), 1.0) == pytest.approx(pressure(8.0, 9.0, 1.0))


def test_crusher_chamber():
    """Q 4.5, Jn 4, Jr 3: 0.0269 MPa; span 15 m, ESR 1.6: 3.41 m (follow-on values of the example
    in E. Hoek, Practical Rock Engineering, rock mass classification; independent calculation)."""
    assert pressure(4.5, 4.0, 3.0) == pytest.approx(0.0269, abs=5e-5)
    assert q_bolt_length_m(np.array([15.0]), np.array([1.6]))[0] == pytest.approx(3.41, abs=5e-3)


@pytest.mark.parametrize(
    ("q", "jn", "jr"),
    [
        pytest.param(0.00099, 9.0, 1.0, id="q-low"),
        pytest.param(1001.0, 9.0, 1.0, id="q-high"),
        pytest.param(1.0, 0.4, 1.0, id="jn-low"),
        pytest.param(1.0, 20.1, 1.0, id="jn-high"),
        pytest.param(1.0, 9.0, 0.0, id="jr-zero"),
        pytest.param(1.0, 9.0, 5.1, id="jr-high"),
        pytest.param(np.nan, 9.0, 1.0, id="q-nan"),
        pytest.param(0.0, 9.0, 1.0, id="q-zero"),
        pytest.param(-1.0, -9.0, 1.0, id="negative"),
    ],
)
def test_outside_its_ranges_q_says_nothing(q, jn, jr):
    assert np.isnan(pressure(q, jn, jr))


@pytest.mark.parametrize(("span", "esr"), [(0.0, 1.0), (10.0, 0.4), (10.0, 5.1), (10.0, 0.0)])
def test_outside_its_ranges_there_is_no_bolt_length(span, esr):
    assert np.isnan(q_bolt_length_m(np.array([span]), np.array([esr]))[0])


def test_load_of_unal():
    """RMR 40, 26 kN/m3, 10 m: 0.6 x 0.26 = 0.156 MPa; nothing at RMR 100."""
    found = rmr_support_pressure_mpa(np.array([40.0, 100.0]), np.full(2, 26.0), np.full(2, 10.0))
    np.testing.assert_allclose(found, [0.156, 0.0], rtol=1e-14)


@pytest.mark.parametrize(
    ("rmr", "weight", "span"),
    [(-1.0, 26.0, 10.0), (101.0, 26.0, 10.0), (40.0, 0.0, 10.0), (40.0, 26.0, 0.0)],
)
def test_outside_its_ranges_rmr_says_nothing(rmr, weight, span):
    found = rmr_support_pressure_mpa(np.array([rmr]), np.array([weight]), np.array([span]))
    assert np.isnan(found[0])
