"""The section of a ring comes from its kind, whatever that does."""

from __future__ import annotations

import pytest
from unit.plugin.strangers import Kind

from tunnelcalc import api
from tunnelcalc.plugin.ring_sections import with_section

ELEMENT = api.Element("props", "props", 1.0, {"amount_m": 0.2})


class Ring(Kind):
    is_ring = True


class Told(Ring):
    def ring_section(self, element: api.Element) -> api.RingSection:
        return api.RingSection(area_m2_per_m=element.number("amount_m"))


class Failing(Ring):
    def ring_section(self, element: api.Element) -> api.RingSection:
        raise SystemExit("not today")


def test_a_kind_that_is_no_ring_has_no_section():
    assert with_section(Kind(), ELEMENT).section is None


def test_a_ring_tells_the_section_of_the_values_that_it_has_now():
    old = with_section(Told(), ELEMENT)
    new = api.Element("props", "props", 1.0, {"amount_m": 0.3}, old.section)
    assert old.section.area_m2_per_m == 0.2
    assert with_section(Told(), new).section.area_m2_per_m == 0.3
    assert not old.section.acts_alone


@pytest.mark.parametrize(
    ("kind", "why"), [(Ring(), "the plugin of props tells no section"), (Failing(), "not today")]
)
def test_a_ring_of_unknown_section_acts_alone_and_says_why(kind, why):
    assert why in with_section(kind, ELEMENT).section.acts_alone
