"""Strain-softening ground where the answer is known by hand, and what the curve promises."""

import numpy as np
import pytest
from unit.ground_reaction.softening_ground import PEAK_ONLY, SOFTENING, columns, softening

from tunnelcalc.ground_reaction.hoek_brown import HoekBrownCurve
from tunnelcalc.ground_reaction.softening import SofteningCurve
from tunnelcalc.ground_reaction.softening_workings import softening_workings
from tunnelcalc.rock_mass.hoek_brown import HoekBrownConstants


def perfectly_plastic(**changed):
    ground = columns(**changed)
    return HoekBrownCurve.of_ground(**{name: ground[name] for name in PEAK_ONLY})


def brittle(**changed):
    ground = columns(**changed)
    residual = HoekBrownConstants(*(ground[f"residual_{name}"] for name in ("mb", "s", "a")))
    peak = {name: ground[name] for name in PEAK_ONLY}
    return HoekBrownCurve.of_ground(**peak, residual=residual)


@pytest.mark.parametrize("share", [0.0, 0.25, 1.0])
def test_elastic_ground_moves_in_proportion_to_the_stress_taken_away(share):
    """u / R = (p0 - pi) / (2 G), with 2 G = E / (1 + nu)."""
    found = softening(intact_strength_mpa=400.0).at(np.array([8.0 * share]))
    expected = 8.0 * (1 - share) * 1.27 / 4000.0
    assert found.closure_ratio[0] == pytest.approx(expected, rel=1e-15)
    assert found.plastic_ratio[0] == 1.0
    assert found.slope[0] == pytest.approx(-1.27 / 4000, rel=1e-15)


PRESSURES = np.linspace(0, 8, 33)


@pytest.mark.parametrize("dilation", [0.0, 6.0, 30.0])
@pytest.mark.parametrize(
    "ground",
    [
        {"critical_shear_strain": np.inf},
        {"residual_mb": 1.8, "residual_s": 0.004, "residual_a": 0.506},
    ],
    ids=["never-softens", "residual-is-peak"],
)
@pytest.mark.parametrize("annuli", [2, 7, 200])
def test_ground_that_does_not_soften_is_perfectly_plastic(dilation, ground, annuli):
    """The plastic radius whatever the annuli, the closure too without dilation."""
    changed = {**ground, "dilation_deg": np.full(33, dilation)}
    found = softening(annuli=annuli, **changed).at(PRESSURES)
    expected = perfectly_plastic(**changed).at(PRESSURES)
    np.testing.assert_allclose(found.plastic_ratio, expected.plastic_ratio, rtol=2e-13)
    closure = 2e-12 if dilation == 0 else {2: 0.03, 7: 3e-4, 200: 1e-9}[annuli]
    np.testing.assert_allclose(found.closure_ratio, expected.closure_ratio, rtol=closure)


@pytest.mark.parametrize("dilation", [0.0, 6.0, 30.0])
@pytest.mark.parametrize("strain", [0.0, 1e-300, 1e-6])
def test_ground_that_softens_at_once_is_brittle(dilation, strain):
    changed = {"critical_shear_strain": strain, "dilation_deg": np.full(33, dilation)}
    found, expected = softening(**changed).at(PRESSURES), brittle(**changed).at(PRESSURES)
    np.testing.assert_allclose(found.plastic_ratio, expected.plastic_ratio, rtol=2e-13)
    np.testing.assert_allclose(found.closure_ratio, expected.closure_ratio, rtol=2e-8)
    np.testing.assert_allclose(found.slope, expected.slope, rtol=2e-8)


def test_both_limits_are_approached_smoothly():
    """Between the limits the closure falls without a step as the critical strain rises."""
    strain = np.geomspace(1e-5, 1e3, 4000)
    closure = softening(critical_shear_strain=strain).at(np.zeros(4000)).closure_ratio
    first, last = (law().at(np.zeros(1)).closure_ratio[0] for law in (brittle, perfectly_plastic))
    assert closure[0] == pytest.approx(first, rel=1e-8)
    assert closure[-1] == pytest.approx(last, rel=1e-5)
    assert np.all(np.diff(closure) <= 1e-9 * closure[1:])
    assert np.max(-np.diff(closure)) < 0.005 * (first - last)


DROPS_IN_PART = {
    "in_situ_stress_mpa": 0.3296,
    "intact_strength_mpa": 58.76,
    "mb": 0.9722,
    "s": 3.853e-5,
    "a": 0.5942,
    "residual_mb": 0.7816,
    "residual_s": 1.954e-5,
    "residual_a": 0.6417,
    "critical_shear_strain": 0.008414,
    "deformation_modulus_mpa": 97.04,
    "poisson_ratio": 0.3539,
    "dilation_deg": 23.68,
}


def test_drop_at_the_edge_may_stop_short_of_the_residual():
    """With an exponent that rises, strength may fall steeply at first and less so later. The drop
    goes to the largest root of x = kappa (2 (p0 - pcr) - H(x)), found here by a scan."""
    ground, curve = DROPS_IN_PART, softening(**DROPS_IN_PART)
    critical, p0 = curve.critical_pressure_mpa[0], ground["in_situ_stress_mpa"]
    sine = np.sin(np.radians(ground["dilation_deg"]))
    strain = 2 / (1 - sine) * (1 - 0.3539) * 1.3539 / 97.04
    x = np.linspace(0, 1, 100_001)
    mb, s, a = (ground[n] + x * (ground[f"residual_{n}"] - ground[n]) for n in ("mb", "s", "a"))
    strength = 58.76 * (mb * critical / 58.76 + s) ** a
    surplus = x - strain / ground["critical_shear_strain"] * (2 * (p0 - critical) - strength)
    roots = np.flatnonzero((surplus[:-1] < 0) & (surplus[1:] >= 0))
    assert surplus[1] < 0
    assert curve.states.softening[0, 0] == pytest.approx(x[roots[-1]], abs=1e-4)
    assert 0.2 < x[roots[-1]] < 0.8


def test_critical_pressure_is_that_of_the_peak():
    expected = perfectly_plastic().critical_pressure_mpa
    np.testing.assert_array_equal(softening().critical_pressure_mpa, expected)


def test_wall_held_by_the_in_situ_stress_does_not_move():
    found = softening().at(np.array([8.0]))
    assert (found.closure_ratio[0], found.plastic_ratio[0]) == (0.0, 1.0)


def test_curve_has_no_step_where_the_wall_begins_to_yield():
    """Even where strength drops there."""
    ground = softening(critical_shear_strain=[1e-4, 0.006, 1.0])
    critical = ground.critical_pressure_mpa
    just_above, just_below = ground.at(critical), ground.at(critical * (1 - 1e-9))
    np.testing.assert_allclose(just_below.closure_ratio, just_above.closure_ratio, rtol=1e-7)
    assert np.all(just_below.plastic_ratio >= 1)
    assert np.all(just_below.plastic_ratio < 1 + 1e-8)


def test_ring_that_is_only_just_there():
    """ln(Rp / R) = (pcr - pi) / H, with H = 2 (p0 - pcr) at the edge, where ln N differs by less
    than the closed form can tell."""
    ground = softening()
    critical = ground.critical_pressure_mpa[0]
    depth = ground.at(np.array([critical * (1 - 1e-8)])).plastic_ratio[0] - 1
    assert depth == pytest.approx(1e-8 * critical / (2 * (8.0 - critical)), rel=1e-5)


@pytest.mark.parametrize("strain", [0.0008, 0.006])
def test_curve_has_no_step_at_the_faces_of_the_annuli(strain):
    """The faces of a coarse grid, just above and just below; with a late drop and without."""
    ground = softening(annuli=12, critical_shear_strain=strain)
    faces = ground.critical_pressure_mpa[0] * ground.states.root[1:-1, 0] ** 2
    many = ground.take(np.zeros(faces.size, dtype=int))
    above, below = many.at(faces * (1 + 1e-10)), many.at(faces * (1 - 1e-10))
    np.testing.assert_allclose(above.closure_ratio, below.closure_ratio, rtol=1e-8)
    np.testing.assert_allclose(above.plastic_ratio, below.plastic_ratio, rtol=1e-8)


def test_slope_is_the_derivative_of_the_closure():
    """Against central differences; it is that of the exact curve, so annuli must be many."""
    pressure = np.linspace(0.05, 2.0, 40)
    ground = softening(annuli=1600, in_situ_stress_mpa=np.full(40, 8.0))
    step = 1e-5
    up, down = ground.at(pressure + step), ground.at(pressure - step)
    difference = (up.closure_ratio - down.closure_ratio) / (2 * step)
    # Where the residual strength is reached the slope bends: one pressure may be there.
    error = np.abs(ground.at(pressure).slope / difference - 1)
    assert np.sort(error)[-2] < 1e-4


def test_ground_without_any_strength_at_zero_stress():
    """Residual s = 0 and no support: the ring ends, its closure is finite, its slope is not."""
    changed = {"residual_s": 0.0, "critical_shear_strain": 0.0}
    found, expected = softening(**changed).at(np.zeros(1)), brittle(**changed).at(np.zeros(1))
    assert found.plastic_ratio[0] == pytest.approx(expected.plastic_ratio[0], rel=1e-12)
    assert found.closure_ratio[0] == pytest.approx(expected.closure_ratio[0], rel=1e-8)
    assert found.slope[0] == -np.inf


def test_closure_in_very_deep_dilating_rings():
    """Rings of 1e23 and 1e37 radii, whose closures no small strain describes: annuli with growth
    of several e-folds each still follow the perfectly plastic solution."""
    changed = {
        "in_situ_stress_mpa": [10.0, 36.0],
        "intact_strength_mpa": 1.5,
        "mb": 0.0291,
        "residual_mb": 0.0291,
        "s": 1.67e-5,
        "residual_s": 1.67e-5,
        "a": 0.6557,
        "residual_a": 0.6557,
        "dilation_deg": 45.0,
    }
    found, expected = (law(**changed).at(np.zeros(2)) for law in (softening, perfectly_plastic))
    assert np.all(expected.plastic_ratio > 1e23)
    np.testing.assert_allclose(found.plastic_ratio, expected.plastic_ratio, rtol=1e-10)
    np.testing.assert_allclose(found.closure_ratio, expected.closure_ratio, rtol=1e-6)


def test_closure_beyond_a_double_is_nan_and_no_warning():
    found = softening(
        in_situ_stress_mpa=60.0, intact_strength_mpa=0.5, mb=0.01, residual_mb=0.004
    ).at(np.zeros(1))
    assert np.isnan(found.closure_ratio[0])


@pytest.mark.parametrize("spoiled", SOFTENING)
def test_section_with_nan_stays_nan_and_spoils_no_other(spoiled):
    ground = columns(in_situ_stress_mpa=np.full(3, 8.0))
    pressure = np.array([0.0, 0.1, 0.3])
    sound = SofteningCurve.of_ground(**ground).at(pressure)
    ground[spoiled][1] = np.nan
    found = SofteningCurve.of_ground(**ground).at(pressure)
    np.testing.assert_array_equal(np.isnan(found.closure_ratio), [False, True, False])
    for ours, theirs in zip(found, sound, strict=True):
        np.testing.assert_array_equal(ours[[0, 2]], theirs[[0, 2]])


@pytest.mark.parametrize(
    "changed",
    [
        {"residual_mb": 1.9},
        {"residual_s": 0.005},
        {"residual_a": 0.5},
        {"residual_a": 1.0},
        {"residual_mb": -0.1},
        {"residual_s": -1e-9},
        {"critical_shear_strain": -1e-9},
        # N above 1 at the edge: there a larger exponent is a larger strength.
        {"in_situ_stress_mpa": 300.0, "residual_mb": 1.8, "residual_s": 0.004, "residual_a": 0.6},
    ],
)
def test_ground_that_gains_strength_or_has_none_is_nan(changed):
    found = softening(**changed)
    assert np.isnan(found.critical_pressure_mpa[0])
    assert np.isnan(found.at(np.zeros(1)).closure_ratio[0])


def test_pressure_that_is_nan_gives_nan_in_elastic_ground_too():
    found = softening(intact_strength_mpa=[400.0, 400.0]).at(np.array([np.nan, 0.0]))
    for values in found:
        np.testing.assert_array_equal(np.isnan(values), [True, False])


def test_pressure_that_is_nan_gives_nan():
    found = softening(critical_shear_strain=[0.006, 0.006]).at(np.array([np.nan, 0.0]))
    np.testing.assert_array_equal(np.isnan(found.closure_ratio), [True, False])


def test_no_sections_at_all():
    empty = SofteningCurve.of_ground(**{name: np.empty(0) for name in SOFTENING})
    assert empty.at(np.empty(0)).closure_ratio.shape == (0,)


def test_fewer_than_two_annuli_are_refused():
    with pytest.raises(ValueError, match="annuli must be at least 2"):
        softening(annuli=1)


def test_taken_sections_share_the_tables():
    ground = softening(in_situ_stress_mpa=[1.0, 8.0, 20.0])
    taken = ground.take(np.array([2, 1]))
    assert taken.states.depth is ground.states.depth
    whole, part = ground.at(np.zeros(3)), taken.at(np.zeros(2))
    for ours, theirs in zip(part, whole, strict=True):
        np.testing.assert_array_equal(ours, theirs[[2, 1]])


DILATING = {"dilation_deg": 12.0, "in_situ_stress_mpa": 9.0}


class TestWorkings:
    """Every number of a face from the face before, in scalar arithmetic."""

    @pytest.fixture(params=[0.0008, 0.006, 0.05])
    def case(self, request):
        changed = DILATING | {"critical_shear_strain": request.param}
        curve = softening(annuli=20, **changed)
        return SOFTENING | changed, curve, softening_workings(curve, 0, 0.07)

    def test_wall_is_that_of_the_curve(self, case):
        _, curve, rows = case
        wall = curve.at(np.array([0.07]))
        assert rows.radial_stress_mpa[-1] == pytest.approx(0.07, rel=1e-14)
        assert 1 / rows.radius_ratio[0] == pytest.approx(1 / wall.plastic_ratio[0], rel=1e-14)
        assert rows.closure_ratio[-1] == pytest.approx(wall.closure_ratio[0], rel=1e-14)

    def test_edge_is_that_of_the_elastic_ground(self, case):
        _, curve, rows = case
        critical = curve.critical_pressure_mpa[0]
        expected = (9.0 - critical) * 1.27 / 4000.0
        assert rows.radial_stress_mpa[0] == critical
        assert rows.closure_ratio[0] == pytest.approx(expected, rel=1e-13)
        assert rows.drive_mpa[0] == pytest.approx(2 * (9.0 - critical), rel=1e-13)

    def test_each_annulus_by_hand(self, case):
        """Hold N straight in the stress and H a power of N; integrate 1 / H and H r^(K + 1)."""
        ground, _, rows = case
        sci, sine = ground["intact_strength_mpa"], np.sin(np.radians(12.0))
        growing, dilating = 2 / (1 - sine), 2 * sine / (1 - sine)

        def number_and_strength(stress, x):
            mb, s, a = (
                ground[n] + x * (ground[f"residual_{n}"] - ground[n]) for n in ("mb", "s", "a")
            )
            number = mb * stress / sci + s
            return number, sci * number**a

        for i in range(1, len(rows.root)):
            outer, inner = rows.radial_stress_mpa[i - 1 : i + 1]
            x = rows.softening[i - 1]
            ahead = min(x + rows.rate[i - 1] * (rows.root[i - 1] - rows.root[i]), 1)
            assert rows.predicted_softening[i] == pytest.approx(ahead, rel=1e-12)
            n1, h1 = number_and_strength(outer, x)
            n2, h2 = number_and_strength(inner, ahead)
            power = np.log(h1 / h2) / np.log(n1 / n2)
            slope = (n1 - n2) / (outer - inner)
            factor = h1 / n1**power
            thickness = (n1 ** (1 - power) - n2 ** (1 - power)) / ((1 - power) * slope * factor)
            assert rows.thickness[i] == pytest.approx(thickness, rel=1e-9)
            q = np.exp(growing * thickness / 2)
            middle = (outer - inner) * 6 / thickness - h1 - h2
            # Simpson's rule, or the parabola by 30 Gauss points where the annulus is thick.
            integral = thickness / 6 * (h2 + q * middle + q * q * h1)
            if growing * thickness > 0.25:
                nodes, weights = np.polynomial.legendre.leggauss(30)
                y = 0.5 * (1 + nodes)
                parabola = h2 + (h1 - h2) * y + (middle - 2 * h1 - 2 * h2) * y * (1 - y)
                values = parabola * np.exp(growing * thickness * y)
                integral = thickness * np.sum(0.5 * weights * values)
            drive = q * q * rows.drive_mpa[i - 1] - dilating * integral
            assert rows.drive_mpa[i] == pytest.approx(drive, rel=1e-9)

    def test_strain_is_that_of_the_softening(self, case):
        """x times the critical strain, but for what one Newton step leaves."""
        ground, _, rows = case
        inside = rows.softening < 1
        expected = rows.softening * ground["critical_shear_strain"]
        error = np.abs(rows.plastic_shear_strain - expected)
        assert error[inside].max(initial=0) < 1e-3 * ground["critical_shear_strain"]
        assert np.all(rows.plastic_shear_strain[~inside] >= expected[~inside] * (1 - 1e-9))
        assert np.all(np.diff(rows.plastic_shear_strain) > 0)

    def test_closure_and_radius_follow(self, case):
        _, _, rows = case
        elastic = (1 - 2 * 0.27) * (9.0 - rows.radial_stress_mpa)
        closure = ((1 - 0.27) * rows.drive_mpa - elastic) * 1.27 / 4000.0
        np.testing.assert_allclose(rows.closure_ratio, closure, rtol=1e-13)
        ratio = np.exp(rows.thickness[::-1].cumsum()[::-1] - rows.thickness)
        np.testing.assert_allclose(rows.radius_ratio, ratio, rtol=1e-13)

    def test_wall_that_does_not_yield_has_no_ring(self):
        with pytest.raises(ValueError, match="does not yield"):
            softening_workings(softening(), 0, 7.9)
