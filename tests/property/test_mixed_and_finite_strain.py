"""What holds for every mixture of laws and every closure, by finite strain."""

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from reference.samples import curve_columns, random_ground

from tunnelcalc.ground_reaction.elastic import ElasticCurve
from tunnelcalc.ground_reaction.finite_strain import FiniteStrainCurve
from tunnelcalc.ground_reaction.hoek_brown import HoekBrownCurve
from tunnelcalc.ground_reaction.mixed import MixedCurve
from tunnelcalc.support.equilibrium import equilibrium

COUNT = 24
GROUND = random_ground(COUNT, seed=90)
COLUMNS = curve_columns(GROUND)
PRESSURE = np.random.default_rng(91).random(COUNT) ** 3 * GROUND["in_situ_stress_mpa"]
ELASTIC = ("in_situ_stress_mpa", "deformation_modulus_mpa", "poisson_ratio")


def of_law(law, rows):
    """The curves of the sections `rows` by one of three laws."""
    columns = {name: values[rows] for name, values in COLUMNS.items()}
    if law == 0:
        return HoekBrownCurve.of_ground(**columns)
    if law == 1:
        return ElasticCurve.of_ground(**{name: columns[name] for name in ELASTIC})
    inner = HoekBrownCurve.of_ground(**columns)
    return FiniteStrainCurve.of_curve(inner, columns["dilation_deg"])


def of_laws(laws, order):
    """A mixture; the sections of a part are told in the given order."""
    parts = ((law, order[laws[order] == law]) for law in np.unique(laws))
    return MixedCurve.of_parts([(of_law(law, rows), rows) for law, rows in parts])


laws = st.lists(st.integers(0, 2), min_size=COUNT, max_size=COUNT).map(np.array)
orders = st.permutations(range(COUNT)).map(np.array)
indices = st.lists(st.integers(0, COUNT - 1), max_size=2 * COUNT).map(
    lambda rows: np.array(rows, dtype=int)
)
masks = st.lists(st.booleans(), min_size=COUNT, max_size=COUNT).map(np.array)


@given(laws, orders)
def test_each_section_has_the_bits_that_its_law_gives_it_alone(law_of, order):
    found = of_laws(law_of, order).at(PRESSURE)
    for section in range(COUNT):
        row = np.array([section])
        alone = of_law(law_of[section], row).at(PRESSURE[row])
        for own, other in zip(found, alone, strict=True):
            assert own[row].tobytes() == other.tobytes()


@given(laws, orders, indices | masks)
def test_taken_sections_keep_their_bits(law_of, order, index):
    curves = of_laws(law_of, order)
    whole, taken = curves.at(PRESSURE), curves.take(index).at(PRESSURE[index])
    for own, other in zip(taken, whole, strict=True):
        assert own.tobytes() == other[index].tobytes()


@pytest.mark.parametrize("seed", [1, 2, 3])
def test_equilibrium_of_a_mixture_is_that_of_its_parts(seed):
    draw = np.random.default_rng(seed)
    law_of, order = draw.integers(0, 3, COUNT), draw.permutation(COUNT)
    radius = GROUND["radius_m"]
    stiffness = np.exp(draw.uniform(0, 7, (1, COUNT)))
    installed = np.zeros((1, COUNT))
    together = equilibrium(of_laws(law_of, order), radius, stiffness, installed)
    assert together.converged.sum() > COUNT / 2
    for law in range(3):
        rows = np.flatnonzero(law_of == law)
        alone = equilibrium(of_law(law, rows), radius[rows], stiffness[:, rows], installed[:, rows])
        for own, other in zip(together, alone, strict=True):
            assert own[..., rows].tobytes() == other.tobytes()


MANY = random_ground(300, seed=92)


@given(st.floats(0, 1), st.floats(0, 1))
def test_finite_strain_closure_is_less_than_the_radius_and_than_that_of_small_strains(one, other):
    """And falls as the pressure rises; only NaN where the inner closure is."""
    inner = HoekBrownCurve.of_ground(**curve_columns(MANY))
    curves = FiniteStrainCurve.of_curve(inner, MANY["dilation_deg"])
    low, high = (share * MANY["in_situ_stress_mpa"] for share in sorted([one, other]))
    small, finite, later = inner.at(low), curves.at(low), curves.at(high)
    known = ~np.isnan(small.closure_ratio)
    np.testing.assert_array_equal(np.isnan(finite.closure_ratio), ~known)
    assert np.all(finite.closure_ratio[known] < 1)
    rounding = 4 * np.finfo(float).eps
    assert np.all(finite.closure_ratio[known] <= small.closure_ratio[known] * (1 + rounding))
    assert np.all(finite.slope[known] < 0)
    quadrature = 3e-9  # what the closure of the inner curve may be wrong by
    most = finite.closure_ratio * (1 + quadrature)
    both = known & ~np.isnan(later.closure_ratio)
    assert np.all(later.closure_ratio[both] <= most[both])
