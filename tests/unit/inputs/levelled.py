"""The small invented project with levels of terrain, tunnel, water and layers."""

from __future__ import annotations

from end_to_end.projects import Damage, all_of, replaced
from unit.inputs.arriving import ground, ground_key, opening, table

AXIS = "  radius_m: 3.0\n  axis: {table: axis.csv, level_of: axis}\n"
CROWN = AXIS.replace("level_of: axis", "level_of: crown")
AXIS_TABLE = ("chainage_m,level_m", "0,100", "150,103")
TERRAIN_TABLE = ("chainage_m,level_m", "0,160", "60,190", "150,170")
WATER_TABLE = ("chainage_m,level_m", "0,90", "150,150")
LAYERS_TABLE = (
    "chainage_m,ground_unit,base_level_m",
    "0,gouge,150",
    "150,gouge,150",
    "0,siltstone,120",
    "60,siltstone,120",
    "150,siltstone,150",
)


def levelled(level_of: str = AXIS, *more: Damage) -> Damage:
    """The project with terrain and axis in place of the cover."""
    return all_of(
        ground("", *[""] * 4),
        opening(level_of),
        ground_key("  terrain: terrain.csv\n"),
        table("axis.csv", *AXIS_TABLE),
        table("terrain.csv", *TERRAIN_TABLE),
        *more,
    )


WATERED = (
    replaced("project.yaml", "  terrain:", "  water_table: water.csv\n  terrain:"),
    table("water.csv", *WATER_TABLE),
)
LAYERED = (
    replaced("project.yaml", "  terrain:", "  layers: layers.csv\n  terrain:"),
    table("layers.csv", *LAYERS_TABLE),
)
