"""Our own kinds of support, by the very tests that a stranger's plugin runs."""

from __future__ import annotations

import numpy as np

from tunnelcalc import testing
from tunnelcalc.api import LinearSpring
from tunnelcalc.plugin.contract import SupportKind
from tunnelcalc.project import Element

OFFERS = testing.offers_of("tunnelcalc")


class TestOurKinds(testing.KindConformance):
    offers = OFFERS

    def test_its_own_modulus_makes_a_stiffer_spring(self, kind: SupportKind, element: Element):
        """Of ours no modulus is asked for in vain."""
        before = kind.reaction(testing.sections_of_ground(), element)
        if not isinstance(before, LinearSpring):
            return
        for name in element.values:
            if name.endswith("modulus_gpa"):
                more = {**element.values, name: element.number(name) * 1.5}
                stiffer = Element(element.kind, element.label, element.installed_at_m, more)
                after = kind.reaction(testing.sections_of_ground(), stiffer)
                assert np.all(after.stiffness_mpa_per_m > before.stiffness_mpa_per_m)
