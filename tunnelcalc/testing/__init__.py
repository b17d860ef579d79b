"""Tests that every support kind and check keeps to, for the test suite of a plugin.

They need pytest. In a test file of your own:

    from tunnelcalc import testing

    OFFERS = testing.offers_of("name-of-your-distribution")


    class TestKinds(testing.KindConformance):
        offers = OFFERS


    class TestChecks(testing.CheckConformance):
        offers = OFFERS


    class TestClassChecks(testing.ClassCheckConformance):
        offers = OFFERS

Each test is made for every kind, parameter, check and element of yours. The elements are made
from what your parameters declare; where their values hang together too closely, give your own as
`elements`. This distribution tests its own kinds and checks by the same classes.
"""

import pytest

pytest.register_assert_rewrite(
    "tunnelcalc.testing.checks", "tunnelcalc.testing.class_checks", "tunnelcalc.testing.kinds"
)

from tunnelcalc.testing.checks import CheckConformance  # noqa: E402
from tunnelcalc.testing.class_checks import ClassCheckConformance  # noqa: E402
from tunnelcalc.testing.elements import elements_of  # noqa: E402
from tunnelcalc.testing.kinds import KindConformance  # noqa: E402
from tunnelcalc.testing.offers import Offers, offers_of, offers_of_file  # noqa: E402
from tunnelcalc.testing.sections import sections_at_rest, sections_of_ground  # noqa: E402

__all__ = [
    "CheckConformance",
    "ClassCheckConformance",
    "KindConformance",
    "Offers",
    "elements_of",
    "offers_of",
    "offers_of_file",
    "sections_at_rest",
    "sections_of_ground",
]
