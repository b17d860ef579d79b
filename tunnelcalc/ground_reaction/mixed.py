"""Curves of different laws as one set of sections, in the order of the sections."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import Self

import numpy as np

from tunnelcalc.arrays import Array, same_length
from tunnelcalc.ground_reaction.curve import CurvePoint, GroundCurve


@dataclass(frozen=True, slots=True)
class MixedCurve:
    """Ground reaction curves of n sections, each by the law of the part that it belongs to.

    Made by `of_parts`. The result of a section is, bit by bit, what its part alone gives.
    """

    parts: tuple[GroundCurve, ...]
    positions: tuple[Array, ...]
    """of each part, where its sections stand among the n"""
    part_of: Array
    """(n,) number of the part that a section belongs to"""
    place: Array
    """(n,) where a section stands in its part"""

    @classmethod
    def of_parts(cls, parts: Sequence[tuple[GroundCurve, Array]]) -> GroundCurve:
        """One set of curves out of parts.

        Parameters
        ----------
        parts : of each part its curves of m sections, and (m,) int, their positions among the n.
            Parts may be empty.

        Returns
        -------
        The curves of the n sections: the part itself where there is one that holds all of them
        in order.

        Raises
        ------
        ValueError : no part at all; positions that are not whole numbers, not as many as the
            curves of their part, or not together 0 to n - 1, each once.
        """
        for curve, positions in parts:
            _check(curve, positions)
        if not parts:
            raise ValueError("no parts: there must be at least one curve")
        every = np.concatenate([positions for _, positions in parts])
        count = every.size
        if not np.array_equal(np.sort(every), np.arange(count)):
            raise ValueError(f"positions of the parts must together be 0 to {count - 1}, each once")
        for curve, positions in parts:
            if np.array_equal(positions, np.arange(count)):
                return curve
        part_of, place = np.empty(count, dtype=np.intp), np.empty(count, dtype=np.intp)
        for number, (_, positions) in enumerate(parts):
            part_of[positions] = number
            place[positions] = np.arange(positions.size)
        # Copies: the caller's arrays may change later.
        own = tuple(np.array(positions, dtype=np.intp) for _, positions in parts)
        return cls(tuple(curve for curve, _ in parts), own, part_of, place)

    @property
    def in_situ_stress_mpa(self) -> Array:
        """(n,) p0 of each section. [MPa]"""
        return self._in_place([part.in_situ_stress_mpa for part in self.parts])

    @property
    def critical_pressure_mpa(self) -> Array:
        """(n,) critical pressure of each section by its own law. [MPa]"""
        return self._in_place([part.critical_pressure_mpa for part in self.parts])

    def take(self, index: Array) -> Self:
        """The curves of the sections at `index`: (k,) positions in any order, or (n,) bool.

        Parts of which nothing is taken are left out.
        """
        part_of, place = self.part_of[index], self.place[index]
        chosen = [np.flatnonzero(part_of == number) for number in range(len(self.parts))]
        kept = [number for number, positions in enumerate(chosen) if positions.size]
        number_after = np.zeros(len(self.parts), dtype=np.intp)
        number_after[kept] = np.arange(len(kept))
        place_after = np.empty(part_of.size, dtype=np.intp)
        for number in kept:
            place_after[chosen[number]] = np.arange(chosen[number].size)
        return type(self)(
            tuple(self.parts[number].take(place[chosen[number]]) for number in kept),
            tuple(chosen[number] for number in kept),
            number_after[part_of],
            place_after,
        )

    def at(self, support_pressure_mpa: Array) -> CurvePoint:
        """State of the wall under a pressure (n,), each section by its own law.

        Parameters
        ----------
        support_pressure_mpa : (n,) pi, 0 <= pi <= p0. [MPa]

        Returns
        -------
        CurvePoint, each (n,).

        Raises
        ------
        ShapeError : pressures and sections differ in number.
        """
        same_length(support_pressure_mpa=support_pressure_mpa, sections=self.part_of)
        points = [
            part.at(support_pressure_mpa[positions])
            for part, positions in zip(self.parts, self.positions, strict=True)
        ]
        return CurvePoint(
            self._in_place([point.plastic_ratio for point in points]),
            self._in_place([point.closure_ratio for point in points]),
            self._in_place([point.slope for point in points]),
        )

    def _in_place(self, values: Sequence[Array]) -> Array:
        """(n,) the values of the parts, each put back where its section stands."""
        together = np.empty(self.part_of.shape)
        for positions, own in zip(self.positions, values, strict=True):
            together[positions] = own
        return together


def _check(curve: GroundCurve, positions: Array) -> None:
    """Raise ValueError unless there is one whole number for each section of the curve."""
    if positions.ndim != 1 or not np.issubdtype(positions.dtype, np.integer):
        raise ValueError("positions must be one row of whole numbers")
    sections = np.shape(curve.in_situ_stress_mpa)[0]
    if positions.size != sections:
        raise ValueError(f"a part of {sections} sections has {positions.size} positions")
