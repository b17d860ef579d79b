"""Parts of the small invented project that let its ground arrive as it comes."""

from __future__ import annotations

from end_to_end.projects import Damage, content, replaced

INTERVALS = ("0,45,sandstone", "45,70,siltstone", "70,120,sandstone", "120,150,gouge")
"""Ends and unit of the intervals, without the cover."""


def table(file: str, *lines: str) -> Damage:
    """A whole table."""
    return content(file, ("\n".join(lines) + "\n").encode())


def project_key(text: str) -> Damage:
    """One more part of the project."""
    return replaced("project.yaml", "support_classes:\n", text + "support_classes:\n")


def opening(text: str) -> Damage:
    """Another opening."""
    return replaced("project.yaml", "  radius_m: 3.0\n", text)


def ground_key(text: str) -> Damage:
    """One more key of the ground, indented."""
    return replaced("project.yaml", "  units: units.csv\n", "  units: units.csv\n" + text)


def ground(header: str, *cells: str) -> Damage:
    """The ground table with other columns: of each interval what follows its unit."""
    rows = [f"{ends}{more}" for ends, more in zip(INTERVALS, cells, strict=True)]
    return table("ground.csv", "from_m,to_m,ground_unit" + header, *rows)


def observed(header: str, *cells: str) -> Damage:
    """Cover and observations by interval; the cover is 100 m everywhere."""
    return ground(",cover_m," + header, *(",100," + cell for cell in cells))
