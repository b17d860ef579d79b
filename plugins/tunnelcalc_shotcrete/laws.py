"""Hardening laws by the names that a project may write, and the age from which each is trusted.

Stiffness follows the law from age 0 on, so that young shotcrete takes its load. Strength is
compared with the load from the first age of the law on. The load never falls while the face moves
away, so that what was carried before is carried at the first age too, and is compared there. But
the ring was weaker before, and by how much the law does not say. A law that is trusted from hours
on is used so, and the rows of the check tell it. One whose source asks for tests up to an age of
days says nothing about a ring that carries load before: there the check is not evaluated.
Capacities of the reaction before the first age are that of the first age, and never 0.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from functools import partial

import numpy as np

from tunnelcalc import api
from tunnelcalc.api import Array
from tunnelcalc_shotcrete.hardening import (
    EUROCODE_COEFFICIENTS,
    EUROCODE_FIRST_DAYS,
    HOURS_PER_DAY,
    REFERENCE_AGE_DAYS,
    chang_stille_modulus_ratio,
    chang_stille_strength_ratio,
    eurocode_strength_ratio,
    meschke_modulus_ratio,
    meschke_strength_ratio,
)

NO_HARDENING = "none"
CHANG_STILLE = "chang_stille_1993"
MESCHKE = "meschke_1996"
EUROCODE = "en_1992_1_1"
LAW_NAMES = (CHANG_STILLE, MESCHKE, EUROCODE)
CHANG_FIRST_DAYS = 0.25
"""Below it the fit of strength falls away from that of stiffness: at 1 h it gives 0.001 of the one
and 0.05 of the other. From 6 h: common practice, no source."""
MESCHKE_FIRST_DAYS = 0.1 / HOURS_PER_DAY
"""6 min: the age at which early strength begins to be required, EN 14487-1 [from memory]."""


@dataclass(frozen=True, slots=True)
class HardeningLaw:
    """Strength and stiffness at an age as shares of those at 28 days.

    Both functions take ages (n,) [day] and return shares (n,) [-]; that of strength holds from
    `first_age_days` on, that of stiffness at any age. `coefficient` is s of EN 1992-1-1.
    `tests_before` says that the source asks for tests at younger ages.
    """

    name: str
    source: str
    first_age_days: float
    strength_ratio: Callable[[Array], Array]
    modulus_ratio: Callable[[Array], Array]
    coefficient: float = float("nan")
    tests_before: bool = False

    @property
    def first_age_words(self) -> str:
        """The first age in a unit that reads well."""
        hours = self.first_age_days * HOURS_PER_DAY
        if hours < 1:
            return f"{hours * 60:g} min"
        return f"{hours:g} h" if hours < HOURS_PER_DAY else f"{self.first_age_days:g} days"

    def compared_age_days(self, age_days: Array) -> Array:
        """Age (n,) of the strength that a load at an age (n,) is compared with. [day]"""
        return np.maximum(age_days, self.first_age_days)

    def compared_strength_ratio(self, age_days: Array) -> Array:
        """Share (n,) of the strength that a load at an age (n,) [day] is compared with. [-]"""
        return self.strength_ratio(self.compared_age_days(age_days))


def hardening_law(element: api.Element) -> HardeningLaw | None:
    """The law that an element names; None for shotcrete that is hard from the first."""
    name = element.values.get("hardening", NO_HARDENING)
    if name == CHANG_STILLE:
        return HardeningLaw(
            CHANG_STILLE,
            "Chang & Stille (1993)",
            CHANG_FIRST_DAYS,
            chang_stille_strength_ratio,
            chang_stille_modulus_ratio,
        )
    if name == MESCHKE:
        return HardeningLaw(
            MESCHKE,
            "Meschke, Kropik & Mang (1996)",
            MESCHKE_FIRST_DAYS,
            meschke_strength_ratio,
            meschke_modulus_ratio,
        )
    if name == EUROCODE:
        coefficient = EUROCODE_COEFFICIENTS[element.choice("cement_class")]
        return HardeningLaw(
            EUROCODE,
            "EN 1992-1-1:2004, 3.1.2(6)",
            EUROCODE_FIRST_DAYS,
            partial(eurocode_strength_ratio, cement_coefficient=coefficient),
            partial(continued_eurocode_modulus_ratio, cement_coefficient=coefficient),
            coefficient,
            tests_before=True,
        )
    return None


def continued_eurocode_modulus_ratio(age_days: Array, cement_coefficient: float) -> Array:
    """Young's modulus over that at 28 days, for cured concrete, at any age.

    Parameters
    ----------
    age_days : (n,) t, 0 or more. [day]
    cement_coefficient : s, by the class of the cement. [-]

    Returns
    -------
    (n,) exp(0.3 s (1 - sqrt(28 / t))), at most 1; 0 at age 0. [-]

    Limits
    ------
    Below 3 days the code asks for tests. There the formula is continued: a ring without
    stiffness would be told too small a load.

    Source
    ------
    EN 1992-1-1:2004, 3.1.2(6) and 3.1.3(3).
    """
    age = np.where(age_days >= 0, age_days, np.nan)
    positive = np.where(age == 0, 1, age)
    exponent = 0.3 * cement_coefficient * (1 - np.sqrt(REFERENCE_AGE_DAYS / positive))
    return np.where(age == 0, 0, np.minimum(np.exp(exponent), 1))
