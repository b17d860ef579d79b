"""Numbers by hand."""

import numpy as np
import pytest
from tunnelcalc_liner_plates import LinerPlates, SeamThrust

from tunnelcalc import api, testing

VALUES = {"plate_area_mm2": 5000.0, "plate_modulus_gpa": 200.0, "seam_strength_mpa": 100.0}
WITH_GAP = {**VALUES, "packing": "gap", "gap_mm": 10.0}


def element(values):
    return api.Element("liner_plates", "liner_plates", 1.0, values)


def test_a_grouted_ring_is_a_spring():
    reaction = LinerPlates().reaction(
        api.Sections({"radius_m": np.array([2.0])}), element({**VALUES, "packing": "grouted"})
    )
    assert reaction.stiffness_mpa_per_m[0] == pytest.approx(250.0)
    assert reaction.capacity_mpa[0] == pytest.approx(0.25)


def test_a_ring_behind_a_gap_waits_for_the_wall():
    sections = api.Sections({"radius_m": np.array([2.0, 2.0, 2.0])})
    reaction = LinerPlates().reaction(sections, element(WITH_GAP))
    pressure, slope = reaction.pressure_and_slope(np.array([0.0, 0.01, 0.011]))
    np.testing.assert_allclose(pressure, [0.0, 0.0, 0.25])
    np.testing.assert_allclose(slope, [0.0, 0.0, 250.0])


def test_thrust_is_pressure_times_radius():
    sections = testing.sections_at_rest(0.1, 0.25, 1.0)
    found = SeamThrust().evaluate(sections, element(WITH_GAP))
    np.testing.assert_allclose(found.demand, 100 * sections["radius_m"])
    np.testing.assert_allclose(found.capacity, 500.0)
