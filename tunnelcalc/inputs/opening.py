"""The opening along the alignment: one profile, or several with their chainage limits."""

from __future__ import annotations

import math
from collections.abc import Iterator, Sequence
from dataclasses import dataclass

import numpy as np

from tunnelcalc.arrays import SAME_PLACE_M, Array
from tunnelcalc.errors import Where
from tunnelcalc.inputs.alignment import PROFILES, Piece, check_order, span
from tunnelcalc.inputs.values import Reader
from tunnelcalc.text import quoted
from tunnelcalc.vocabulary import QUANTITIES, Limits

CIRCLE = "circle"
EQUAL_AREA = "equal_area"
HALF_LARGER_DIMENSION = "half_larger_dimension"
RULES = (EQUAL_AREA, HALF_LARGER_DIMENSION)
DIMENSION = Limits(1, 60)
AREA = Limits(1, 3000)
LEAST_FILLING = 0.5
"""An opening fills at least half of the rectangle around it: less is a slip of the pen."""


NOWHERE = Where("")


@dataclass(frozen=True, slots=True)
class Profile:
    """One profile. `radius_m` is that of the circle that stands for it, by `rule`."""

    name: str
    radius_m: float
    span_m: float
    height_m: float
    rule: str
    from_m: float = -math.inf
    to_m: float = math.inf
    where: Where = NOWHERE


def read_profiles(reader: Reader, key: str) -> tuple[Profile, ...]:
    """The profiles by increasing chainage, listed under `key`, or the one profile that `reader`
    holds itself; what is wrong with them is told."""
    if not reader.has(key):
        reader.known[key] = None
        shape = _shape(reader)
        return () if shape is None else (Profile("", *shape),)
    profiles = []
    names: set[str] = set()
    for entry in reader.tables_of(key, may_be_empty=False):
        name = entry.text("name", "a name of its own")
        start, end = entry.chainage("from_m"), entry.chainage("to_m")
        shape = _shape(entry)
        entry.finish()
        if name in names:
            entry.complain("name", f"holds {quoted(name)}, which is taken", fix="change one")
        if name is None or start is None or end is None or shape is None:
            continue
        names.add(name)
        if end - start <= SAME_PLACE_M:
            entry.complain(
                "to_m", "is not beyond from_m", fix="write the end that comes first as from_m"
            )
            continue
        profiles.append(Profile(name, *shape, start, end, entry.where))
    return tuple(sorted(profiles, key=lambda profile: profile.from_m))


def _shape(reader: Reader) -> tuple[float, float, float, str] | None:
    """Radius, span, height and rule of a profile."""
    radius_range = QUANTITIES["radius_m"]
    dimensions = ("span_m", "height_m", "area_m2", "equivalent_radius")
    if not any(reader.has(name) for name in dimensions):
        radius = reader.number("radius_m", radius_range.limits, radius_range.unit)
        reader.known.update(dict.fromkeys(dimensions))
        return None if radius is None else (radius, 2 * radius, 2 * radius, CIRCLE)
    width = reader.number("span_m", DIMENSION, "m")
    height = reader.number("height_m", DIMENSION, "m")
    area = reader.number("area_m2", AREA, "m2")
    rule = reader.choice("equivalent_radius", RULES)
    if reader.has("radius_m"):
        reader.complain(
            "radius_m", "stands beside span, height and area", fix="keep one or the other"
        )
    reader.known["radius_m"] = None
    if width is None or height is None or area is None or rule is None:
        return None
    if not LEAST_FILLING * width * height <= area <= width * height:
        reader.complain(
            "area_m2",
            f"is {area:g} m2, which does not fit {width:g} m by {height:g} m",
            allowed=f"{LEAST_FILLING * width * height:g} to {width * height:g} m2",
            fix="correct one of the three",
        )
        return None
    by_area = math.sqrt(area / math.pi)
    radius = by_area if rule == EQUAL_AREA else max(width, height) / 2
    if not bool(radius_range.limits.contain(np.array(radius))):
        reader.complain(
            "area_m2",
            f"gives a radius of {radius:g} m",
            fix="correct the dimensions",
            allowed=radius_range.allowed(),
        )
        return None
    return radius, width, height, rule


def check_profiles(profiles: Sequence[Profile], from_m: Array, to_m: Array, reader: Reader) -> None:
    """Tell where profiles overlap, leave a stretch open, or do not reach the ends.

    `from_m`, `to_m` are (i,) the ends of the intervals.
    """
    if len(profiles) == 1 and math.isinf(profiles[0].from_m):
        return
    pieces = [Piece(p.from_m, p.to_m, p.where, False) for p in profiles]
    check_order(pieces, True, reader.problems, PROFILES)
    first, last = float(np.min(from_m)), float(np.max(to_m))
    for missing, start, end in (
        (profiles[0].from_m - first, first, profiles[0].from_m),
        (last - profiles[-1].to_m, profiles[-1].to_m, last),
    ):
        if missing > SAME_PLACE_M:
            reader.complain(
                "profiles" if reader.has("profiles") else "opening",
                f"leave {span(start, end)} without a profile",
                fix="extend a profile, or add one",
            )


def limits_inside(profiles: Sequence[Profile]) -> Iterator[float]:
    """Chainages at which the profile changes. [m]"""
    for profile in profiles[1:]:
        yield profile.from_m


def profile_of(profiles: Sequence[Profile], chainage_m: Array) -> Array:
    """Number (n,) of the profile at each chainage (n,). [m]"""
    starts = np.array([profile.from_m for profile in profiles[1:]])
    return np.searchsorted(starts, chainage_m, side="right")
