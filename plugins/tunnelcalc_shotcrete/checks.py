"""Checks of the ring: hoop stress at rest and while young, and early strength."""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np

from tunnelcalc import api
from tunnelcalc_shotcrete.early import governing, ordinates
from tunnelcalc_shotcrete.kind import Shotcrete
from tunnelcalc_shotcrete.laws import HardeningLaw, hardening_law
from tunnelcalc_shotcrete.lines import early_lines, stress_lines, young_stress_lines
from tunnelcalc_shotcrete.ring import ring_of

APPLIES_TO = (Shotcrete.name,)


class HoopStress:
    """Largest hoop stress of a thick ring, mean stress of a thin one, against its strength."""

    name = "hoop_stress"
    meaning = (
        "hoop stress at rest against the strength at 28 days: at the inner face, Lame, "
        "thick-walled cylinder; mean of a thin ring, statics"
    )
    applies_to = APPLIES_TO
    unit = "MPa"
    carries_load = True

    def concerns(self, element: api.Element) -> bool:
        return True

    def evaluate(self, sections: api.Sections, element: api.Element) -> api.Evaluation:
        ring = ring_of(element)
        stress = ring.hoop_stress_mpa(sections["element_pressure_mpa"], sections["radius_m"])
        return api.Evaluation(stress, np.full(sections.count, ring.strength_mpa))

    def lines(self, values: api.SectionValues, element: api.Element) -> Sequence[api.SheetLine]:
        return stress_lines(values, element)


class YoungHoopStress:
    """Hoop stress along the advance where it is highest beside the strength of the same age."""

    name = "young_hoop_stress"
    meaning = (
        "hoop stress against the strength at the same age, where it is worst along the advance, "
        "from the first age on at which the hardening law is trusted, with what the ring carries "
        "then; where a law asks for tests up to days of age, load before is not evaluated"
    )
    applies_to = APPLIES_TO
    unit = "MPa"
    carries_load = True

    def concerns(self, element: api.Element) -> bool:
        return hardening_law(element) is not None

    def evaluate(self, sections: api.Sections, element: api.Element) -> api.Evaluation:
        ring, law = ring_of(element), hardening_law(element)
        assert law is not None
        pressure, age = sections["worst_pressure_mpa"], sections["worst_age_days"]
        stress = ring.hoop_stress_mpa(pressure, sections["radius_m"])
        # A ring that never carries anything has no worst age: its strength is the final one.
        unloaded = (pressure == 0) & np.isnan(age)
        share = law.compared_strength_ratio(np.where(unloaded, np.inf, age))
        early = (sections["early_pressure_mpa"] > 0) & law.tests_before
        return api.Evaluation(stress, ring.strength_mpa * share, early, loaded(law), younger(law))

    def lines(self, values: api.SectionValues, element: api.Element) -> Sequence[api.SheetLine]:
        found = self.evaluate(api.one_section(values), element)
        return young_stress_lines(values, element, found)


class EarlyStrength:
    """Strength that is required at early ages against that by the hardening law."""

    name = "early_strength"
    meaning = (
        "strength required at early ages (ordinates of the project, as of a class of EN 14487-1) "
        "against strength by the hardening law; the ordinate that is exceeded by least"
    )
    applies_to = APPLIES_TO
    unit = "MPa"
    carries_load = False

    def concerns(self, element: api.Element) -> bool:
        return bool(ordinates(element))

    def evaluate(self, sections: api.Sections, element: api.Element) -> api.Evaluation:
        law = hardening_law(element)
        assert law is not None
        ordinate, strength = governing(element, law)
        count = sections.count
        return api.Evaluation(np.full(count, ordinate.required_mpa), np.full(count, strength))

    def lines(self, values: api.SectionValues, element: api.Element) -> Sequence[api.SheetLine]:
        return early_lines(element)


def loaded(law: HardeningLaw) -> str:
    """Why a ring that carries load before the first age of a law is not evaluated."""
    return (
        f"the ring carries load before {law.first_age_words}, from which {law.name} is trusted: "
        "take another law, or close the ring later (closed_ring: from_distance)"
    )


def younger(law: HardeningLaw) -> str:
    """What the check leaves open where it is evaluated."""
    if law.tests_before:
        return ""
    return f"compared from {law.first_age_words} on, as {law.name} is trusted; not before"
