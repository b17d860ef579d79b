"""Flags on validity that come with the distribution."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass

from tunnelcalc import api
from tunnelcalc.api import Array, Sections
from tunnelcalc.rock_mass.in_situ_stress import largest_wall_stress_mpa

DEEP_COVER_IN_RADII = 10
STRESS_RATIO_RANGE = (0.8, 1.25)
SPALLING_RATIO = 0.4
LARGE_CLOSURE_PCT = 10
SMALL_STRAIN_END_PCT = 100
DEEP_RING_IN_RADII = 20

PRACTICE = "common practice, no source"


@dataclass(frozen=True, slots=True)
class Flag:
    """One flag; `test` gives the mask of the sections where it is raised."""

    name: str
    meaning: str
    threshold: str
    origin: str
    remedy: str
    needs: tuple[str, ...]
    test: Callable[[Sections], Array]

    def raised(self, sections: Sections) -> Array:
        return self.test(sections)


def _is_set(name: str) -> Callable[[Sections], Array]:
    return lambda sections: sections[name].astype(bool)


def _outside_stress_ratio(sections: Sections) -> Array:
    lowest, highest = STRESS_RATIO_RANGE
    return (sections["stress_ratio"] < lowest) | (sections["stress_ratio"] > highest)


def _spalling(sections: Sections) -> Array:
    stress = largest_wall_stress_mpa(sections["vertical_stress_mpa"], sections["stress_ratio"])
    return stress / sections["intact_strength_mpa"] > SPALLING_RATIO


FLAGS = (
    Flag(
        "shallow_cover",
        "the opening is not deep: stress differs from crown to invert and may reach the surface",
        f"cover under {DEEP_COVER_IN_RADII} R",
        PRACTICE,
        "check the section by a method for shallow tunnels, and the settlement of the surface",
        ("cover_m", "radius_m"),
        lambda sections: sections["cover_m"] < DEEP_COVER_IN_RADII * sections["radius_m"],
    ),
    Flag(
        "stress_ratio",
        "the mean stress stands for an unequal field and understates the stress at the wall",
        "stress_ratio outside 0.8 to 1.25",
        PRACTICE,
        "rerun with vertical_stress_mpa set to the larger stress and stress_ratio 1, take the "
        "heavier class, and check the lining for bending",
        ("stress_ratio",),
        _outside_stress_ratio,
    ),
    Flag(
        "spalling",
        "the stress at the wall is high for the intact strength: massive rock may spall or burst, "
        "which this strength criterion does not describe",
        f"(3 s1 - s3) / intact_strength_mpa above {SPALLING_RATIO}",
        "Martin, Kaiser & McCreath (1999), Can. Geotech. J. 36, 136-151",
        "judge brittle failure separately; retain loose rock instead of relying on a ring",
        ("vertical_stress_mpa", "stress_ratio", "intact_strength_mpa"),
        _spalling,
    ),
    Flag(
        "disturbance_whole_mass",
        "D above 0 weakens the whole rock mass, not only the ring that blasting disturbs",
        "disturbance above 0",
        "Hoek & Brown (2019), J. Rock Mech. Geotech. Eng. 11, 445-463",
        "take D = 0 for the mass, or accept that the result is on the heavy side",
        ("disturbance",),
        lambda sections: sections["disturbance"] > 0,
    ),
    Flag(
        "modulus_capped",
        "the estimated modulus was above that of the intact rock and was set to it",
        "estimate above intact_modulus_mpa",
        PRACTICE,
        "check gsi and the intact modulus",
        ("modulus_capped",),
        _is_set("modulus_capped"),
    ),
    Flag(
        "modulus_above_intact",
        "the measured modulus is above that of the intact rock; it was used as it is",
        "rock_mass_modulus_mpa above intact_modulus_mpa",
        PRACTICE,
        "check both measurements and their units",
        ("modulus_above_intact",),
        _is_set("modulus_above_intact"),
    ),
    Flag(
        "stress_ratio_assumed",
        "no stress ratio is given: 1 was taken",
        "stress_ratio absent",
        "assumption of this program",
        "state stress_ratio",
        ("stress_ratio_assumed",),
        _is_set("stress_ratio_assumed"),
    ),
    Flag(
        "dilation_assumed",
        "no dilation angle is given: 0 was taken",
        "dilation_deg absent",
        "assumption of this program",
        "state dilation_deg",
        ("dilation_assumed",),
        _is_set("dilation_assumed"),
    ),
    Flag(
        "large_closure",
        "the unsupported closure is so large that small-strain theory overstates it",
        f"closure above {LARGE_CLOSURE_PCT} % of the radius",
        "Vrakas & Anagnostou (2014), Int. J. Numer. Anal. Methods Geomech. 38, 1131-1148",
        "treat the closure as an upper bound; consider a finite-strain analysis",
        ("closure_pct",),
        lambda sections: sections["closure_pct"] > LARGE_CLOSURE_PCT,
    ),
    Flag(
        "beyond_small_strain",
        "the unsupported closure is larger than the radius: it has no meaning as a movement",
        f"closure above {SMALL_STRAIN_END_PCT} % of the radius",
        PRACTICE,
        "read it as ground that does not stand without support",
        ("closure_pct",),
        lambda sections: sections["closure_pct"] > SMALL_STRAIN_END_PCT,
    ),
    Flag(
        "deep_plastic_zone",
        "the plastic zone is deeper than the solution was proved for",
        f"plastic_radius_m above {DEEP_RING_IN_RADII} R",
        PRACTICE,
        "read it as ground that does not stand without support",
        ("plastic_radius_m", "radius_m"),
        lambda sections: sections["plastic_radius_m"] > DEEP_RING_IN_RADII * sections["radius_m"],
    ),
    Flag(
        "water_pressure_left_out",
        "water pressure is left out: stresses and strength are total, the lining is drained",
        "water_head_m above 0",
        "assumption of this program",
        "check effective stress, seepage and the water pressure on a watertight lining separately",
        ("water_head_m",),
        lambda sections: sections["water_head_m"] > 0,
    ),
    Flag(
        "equivalent_radius",
        "the opening is not a circle: a circle of the stated rule stands for it",
        "profile given by span, height and area",
        PRACTICE,
        "check the lining and the ground at flat parts of the profile separately",
        ("equivalent_radius",),
        _is_set("equivalent_radius"),
    ),
    Flag(
        "estimates_differ",
        "sources of quality or strength give different values; the preferred one was taken",
        "two sources of gsi, intact_strength_mpa or mi differ",
        "assumption of this program",
        "find out why they differ: the spread stands in sections.csv",
        ("estimates_differ",),
        _is_set("estimates_differ"),
    ),
    Flag(
        "tests_below_confinement",
        "the triaxial tests did not reach the confinement that matters at this depth",
        "greatest minor stress tested below confinement_mpa",
        "Hoek, Carranza-Torres & Corkum (2002), relation for tunnels",
        "test at higher confinement, or take mi with care",
        ("tested_confinement_mpa", "confinement_mpa"),
        lambda sections: sections["tested_confinement_mpa"] < sections["confinement_mpa"],
    ),
    Flag(
        "rule_not_applied",
        "a zoning rule had no adequate class to give: the section keeps its class",
        "no adequate class as heavy as the rule asks for",
        "assumption of this program",
        "decide the zone by hand, or add a class that is adequate there",
        ("rule_not_applied",),
        _is_set("rule_not_applied"),
    ),
)


@api.hookimpl
def tunnelcalc_register_validity_flags(register: Callable[[api.ValidityFlag], None]) -> None:
    for flag in FLAGS:
        register(flag)
