"""Area, second moment of area and depth of a section that can belong together.

Of an area A between two faces h apart no section has more than I = A h^2 / 4 about its own
centroid: all of it at the faces. Of the convex outlines none has less than the rhombus with its
points at the faces, A h^2 / 24; rolled profiles spread their area towards the faces and lie well
above it (EN 10365 H and I sections, strong axis: A h^2 / 6.7 to A h^2 / 5.2).
"""

from __future__ import annotations

from collections.abc import Iterable, Mapping

from tunnelcalc import api

AREA, INERTIA, DEPTH = "section_area_mm2", "section_inertia_mm4", "section_depth_mm"
SECTION = (AREA, INERTIA, DEPTH)
LEAST_DIVISOR = 4.0
MOST_DIVISOR = 24.0
UNITS = "correct the units: area in mm2, depth in mm, second moment in mm4"


def section_misfits(values: Mapping[str, float]) -> Iterable[api.Misfit]:
    """A second moment of area that no profile of this area and depth has."""
    whole = values[AREA] * values[DEPTH] ** 2
    most, least = whole / LEAST_DIVISOR, whole / MOST_DIVISOR
    stated = f"is {values[INERTIA]:g} mm4"
    if values[INERTIA] > most:
        why = f"{stated}, more than this area and depth can have, {most:.6g} mm4"
        yield api.Misfit(INERTIA, why, UNITS)
    elif values[INERTIA] < least:
        why = f"{stated}, less than a rhombus of this area and depth has, {least:.6g} mm4"
        yield api.Misfit(INERTIA, why, UNITS)
