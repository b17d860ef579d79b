"""Early strength that a project requires at some ages, and the strength that the law gives.

A requirement is a short list of ordinates, age and strength: those of an early-strength class of
EN 14487-1, or of a specification. They are the project's; the program knows none.
"""

from __future__ import annotations

from collections.abc import Iterable
from typing import NamedTuple

import numpy as np

from tunnelcalc import api
from tunnelcalc.api import Limits, Parameter
from tunnelcalc_shotcrete.hardening import HOURS_PER_DAY
from tunnelcalc_shotcrete.laws import LAW_NAMES, HardeningLaw, hardening_law

NOT_REQUIRED = "not_required"
AGES = ("at_one_age", "at_two_ages", "at_three_ages")
"""How many ordinates an element has: one, two, three."""


class Ordinate(NamedTuple):
    """The strength that is required at an age."""

    age_h: float
    required_mpa: float

    @property
    def age_days(self) -> float:
        return self.age_h / HOURS_PER_DAY


def age_name(number: int) -> str:
    """The parameter with the age of an ordinate."""
    return f"early_age_{number}_hours"


def strength_name(number: int) -> str:
    """The parameter with the strength required at that age."""
    return f"early_strength_{number}_mpa"


def early_parameters() -> Iterable[Parameter]:
    """The choice and the ordinates."""
    yield Parameter(
        "early_strength",
        "early strength required at some ages, such as that of a class of EN 14487-1",
        choices=(NOT_REQUIRED, *AGES),
        default=NOT_REQUIRED,
        only_if=("hardening", LAW_NAMES),
    )
    for number in range(1, len(AGES) + 1):
        when = ("early_strength", AGES[number - 1 :])
        yield Parameter(
            age_name(number),
            f"age {number} at which strength is required",
            "h",
            Limits(0, 672, above=True),
            only_if=when,
        )
        yield Parameter(
            strength_name(number),
            f"strength required at age {number}",
            "MPa",
            Limits(0, 200, above=True),
            only_if=when,
        )


def ordinates(element: api.Element) -> tuple[Ordinate, ...]:
    """The ordinates of an element; none where early strength is not required."""
    asked = element.values.get("early_strength", NOT_REQUIRED)
    if asked not in AGES or hardening_law(element) is None:
        return ()
    numbers = range(1, AGES.index(str(asked)) + 2)
    return tuple(
        Ordinate(element.number(age_name(i)), element.number(strength_name(i))) for i in numbers
    )


def early_misfits(element: api.Element) -> Iterable[api.Misfit]:
    """Ages that the law knows nothing of, and requirements that contradict each other."""
    law = hardening_law(element)
    if law is None:
        return
    asked = ordinates(element)
    first_h = law.first_age_days * HOURS_PER_DAY
    for number, ordinate in enumerate(asked, 1):
        if any(other.age_h == ordinate.age_h for other in asked[: number - 1]):
            yield api.Misfit(
                age_name(number),
                f"is {ordinate.age_h:g} h, for which a strength is required already",
                "state each age once, or lower early_strength to as many ages as there are",
            )
        if ordinate.age_days < law.first_age_days * (1 - 1e-12):
            yield api.Misfit(
                age_name(number),
                f"is {ordinate.age_h:g} h; {law.name} is trusted from {first_h:g} h on",
                "take another hardening law, or prove this strength by tests alone",
            )
        elder = (o for o in asked if o.age_h < ordinate.age_h)
        most = max((o.required_mpa for o in elder), default=0.0)
        if ordinate.required_mpa < most:
            yield api.Misfit(
                strength_name(number),
                f"is {ordinate.required_mpa:g} MPa, less than the {most:g} MPa of an earlier age",
                "correct the ordinates: ages in h, strengths in MPa",
            )


def strength_at_mpa(element: api.Element, law: HardeningLaw, age_days: float) -> float:
    """Strength by the law at an age [day]. [MPa]"""
    share = law.strength_ratio(np.array([age_days]))
    return element.number("strength_mpa") * float(share[0])


def governing(element: api.Element, law: HardeningLaw) -> tuple[Ordinate, float]:
    """The ordinate that the strength by the law exceeds by least, and that strength. [MPa]"""
    strengths = [(o, strength_at_mpa(element, law, o.age_days)) for o in ordinates(element)]
    return min(strengths, key=lambda pair: pair[1] / pair[0].required_mpa)
