"""What a parameter of a support class does where no class is adequate: plain data for figures."""

from __future__ import annotations

import re
from dataclasses import dataclass

from tunnelcalc.arrays import Array

UNSAFE = re.compile(r"[^\w-]+", re.ASCII)


@dataclass(frozen=True, slots=True)
class TradeOff:
    """A class on the n sections that no class satisfies, with k values of one parameter.

    `tried` holds the values, rising, or else the words; `now` is what the project states, None
    where it states none. `held` lists what else was changed, as NAME=VALUE. The tables are (k, n):
    what could not be computed is NaN, and never adequate. `governing` names the check that
    governs, `closure` where every check carries nothing.
    """

    title: str
    support_class: str
    element: str
    parameter: str
    unit: str
    tried: tuple[float | str, ...]
    now: float | str | None
    held: tuple[str, ...]
    required_factor: float
    closure_limit_pct: float
    length_m: Array
    factor_of_safety: Array
    closure_pct: Array
    missing_pressure_mpa: Array
    governing: Array
    adequate: Array
    evaluated: Array

    @property
    def name(self) -> str:
        """ELEMENT.PARAMETER, or the parameter alone where it is one of the class."""
        return full_name(self.element, self.parameter)

    @property
    def of_words(self) -> bool:
        return isinstance(self.tried[0], str)

    @property
    def file_name(self) -> str:
        """The name of a file about it, without the ending."""
        return "trade_off_" + UNSAFE.sub("_", self.name)


def full_name(element: str, parameter: str) -> str:
    """A parameter as the command line names it; that of the class has no element."""
    return f"{element}.{parameter}" if element else parameter
