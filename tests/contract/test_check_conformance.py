"""Our own checks, by the very tests that a stranger's plugin runs."""

from __future__ import annotations

from tunnelcalc import testing

OFFERS = testing.offers_of("tunnelcalc")


class TestOurChecks(testing.CheckConformance):
    offers = OFFERS

    def test_a_check_names_its_unit(self, check):
        assert check.unit


class TestOurClassChecks(testing.ClassCheckConformance):
    offers = OFFERS
