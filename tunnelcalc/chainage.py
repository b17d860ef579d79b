"""Chainage as people write it, and metres along the axis as the program counts them.

A written chainage is a plain number of metres or kilometres+metres (12+345.60), after an
optional prefix. It may fall along the axis, and it may jump where two values meet (a chainage
equation): then a number may occur twice, and is told apart by the stretch, 12+345.60@2.
"""

from __future__ import annotations

import re
from dataclasses import dataclass

import numpy as np

from tunnelcalc.arrays import SAME_PLACE_M, Array
from tunnelcalc.text import as_number

KM_PLUS_M = "km+m"
METRES = "m"
M_PER_KM = 1000.0
DECIMALS = 2
ROUNDED_M = 0.5 * 10**-DECIMALS + SAME_PLACE_M
"""A chainage rounded to its decimals still belongs to the stretch that ends this near. [m]"""
FURTHEST_M = 1e7
"""No chainage is larger, neither as written nor along the axis. [m]"""

_KM_PLUS_M = re.compile(r"([+-]?\d+)\+(\d{3}(?:\.\d*)?)", re.ASCII)
FORMS = "12345.6 or 12+345.60"


class ChainageError(ValueError):
    """A text that is no chainage of this alignment; the message says why."""


@dataclass(frozen=True, slots=True)
class Equation:
    """Where the chainage `back` of what lies behind meets `ahead` of what follows."""

    back: float
    ahead: float


@dataclass(frozen=True, slots=True)
class Notation:
    """How chainage is written on an alignment.

    `start` is the written chainage of axis metre 0; without it the first stretch is counted in
    its own chainage. `direction` is 1 where chainage grows along the axis, -1 where it falls.
    """

    form: str = METRES
    prefix: str = ""
    direction: int = 1
    start: float = 0.0
    equations: tuple[Equation, ...] = ()

    @property
    def is_plain(self) -> bool:
        """Whether a written chainage is the axis metre itself, in plain metres."""
        return self == Notation()

    def starts(self) -> tuple[tuple[float, float], ...]:
        """For each stretch: axis metre at which it begins, and its written chainage there."""
        begun = [(0.0, self.start)]
        for equation in self.equations:
            at, written = begun[-1]
            meets = at + self.direction * (equation.back - written)
            begun.append((meets, equation.ahead))
        return tuple(begun)

    def axis_m(self, text: str) -> float:
        """Metres along the axis of a written chainage. Raises `ChainageError`."""
        plain, at_sign, stretch = text.strip().partition("@")
        written = self._number(plain.strip())
        places = self._places(written, ROUNDED_M)
        if abs(written) > FURTHEST_M or any(abs(x) > FURTHEST_M for x in places.values()):
            raise ChainageError(f"is beyond {FURTHEST_M / M_PER_KM:g} km")
        if at_sign:
            chosen = as_number(stretch)
            places = {k: x for k, x in places.items() if k + 1 == chosen}
        if not places:
            raise ChainageError("lies on no stretch of the alignment")
        if max(places.values()) - min(places.values()) > SAME_PLACE_M:
            numbers = " or ".join(f"{text}@{k + 1}" for k in places)
            raise ChainageError(f"occurs twice: write {numbers}")
        return min(places.values())

    def written(self, axis_m: Array, arriving: bool = False) -> list[str]:
        """The chainage of places along the axis (n,), as it is written on this alignment.

        Where an equation stands, a place has two: `arriving` gives that of the stretch which ends
        there, as the end of an interval is written.
        """
        starts = self.starts()
        return [self._text(x, starts, arriving) for x in axis_m.tolist()]

    def ends(self, from_m: float, to_m: float) -> tuple[str, str]:
        """The chainages of the two ends of a stretch of the axis."""
        (start,), (end,) = (
            self.written(np.array([from_m])),
            self.written(np.array([to_m]), arriving=True),
        )
        return start, end

    def _places(self, written: float, tolerance: float) -> dict[int, float]:
        """Axis metre of a number on each stretch on which it lies."""
        starts = self.starts()
        places = {}
        for stretch, (begin, first) in enumerate(starts):
            x = begin + self.direction * (written - first)
            after = x >= begin - tolerance or stretch == 0
            end = starts[stretch + 1][0] if stretch + 1 < len(starts) else x
            if after and x <= end + tolerance:
                places[stretch] = x
        return places

    def _number(self, text: str) -> float:
        # With or without the blank that ends the prefix.
        text = text.removeprefix(self.prefix.strip()).strip()
        match = _KM_PLUS_M.fullmatch(text)
        if match:
            km, metres = float(match[1]), float(match[2])
            return km * M_PER_KM + (-metres if match[1].startswith("-") else metres)
        number = as_number(text)
        if number is None:
            raise ChainageError("is not a chainage")
        return number

    def _text(self, x: float, starts: tuple[tuple[float, float], ...], arriving: bool) -> str:
        reach = x - SAME_PLACE_M if arriving else x + SAME_PLACE_M
        stretch = sum(begin <= reach for begin, _ in starts[1:])
        begin, first = starts[stretch]
        # Rounded here, so that it is told apart as it will be read. Adding 0 drops the sign of -0.
        number = round(first + self.direction * (x - begin), DECIMALS) + 0.0
        text = f"{self.prefix}{self._form(number)}"
        twice = len(starts) > 1 and len(self._places(number, ROUNDED_M)) > 1
        return f"{text}@{stretch + 1}" if twice else text

    def _form(self, number: float) -> str:
        if self.form == METRES:
            return f"{number:.{DECIMALS}f}"
        hundredths = round(abs(number) * 10**DECIMALS)
        km, rest = divmod(hundredths, round(M_PER_KM) * 10**DECIMALS)
        sign = "-" if number < 0 and hundredths else ""
        return f"{sign}{km}+{rest / 10**DECIMALS:0{4 + DECIMALS}.{DECIMALS}f}"
