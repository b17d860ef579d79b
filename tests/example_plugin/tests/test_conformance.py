"""What every plugin of tunnelcalc keeps to: the tests come with tunnelcalc."""

from tunnelcalc import testing

OFFERS = testing.offers_of("tunnelcalc-liner-plates")


class TestKinds(testing.KindConformance):
    offers = OFFERS


class TestChecks(testing.CheckConformance):
    offers = OFFERS
