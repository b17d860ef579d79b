"""Laws of the ground around a circular opening."""

from __future__ import annotations

from collections.abc import Callable, Mapping, Sequence
from dataclasses import dataclass
from functools import partial
from typing import Any

import numpy as np

from tunnelcalc import api
from tunnelcalc.api import Limits, Sections, SectionValues, SheetLine
from tunnelcalc.builtin.methods.lines import (
    disturbed_ring,
    finite_strain,
    improved_ring,
    mohr_coulomb,
    softening,
)
from tunnelcalc.builtin.methods.lines import hoek_brown as perfectly_plastic
from tunnelcalc.builtin.methods.lines.symbols import arrays
from tunnelcalc.ground_reaction.disturbed_ring import DisturbedRingCurve
from tunnelcalc.ground_reaction.elastic import ElasticCurve
from tunnelcalc.ground_reaction.finite_strain import FiniteStrainCurve
from tunnelcalc.ground_reaction.hoek_brown import HoekBrownCurve
from tunnelcalc.ground_reaction.mohr_coulomb import MohrCoulombCurve
from tunnelcalc.ground_reaction.softening import SofteningCurve
from tunnelcalc.rock_mass import hoek_brown
from tunnelcalc.vocabulary import UNLIMITED

ELASTIC = ("in_situ_stress_mpa", "deformation_modulus_mpa", "poisson_ratio")
FLOW = (*ELASTIC, "dilation_deg")
HOEK_BROWN = (*FLOW, "intact_strength_mpa", "mb", "s", "a")
MOHR_COULOMB = (*FLOW, "friction_angle_deg", "cohesion_mpa")
RESIDUAL = ("residual_mb", "residual_s", "residual_a")
RESIDUAL_LINE = ("residual_friction_angle_deg", "residual_cohesion_mpa")
RING = ("ring_mb", "ring_s", "ring_a", "ring_modulus_mpa")
POISSON: Mapping[str, Limits] = {"poisson_ratio": UNLIMITED}
HOOKE = "elastic strains in the plastic zone by Hooke's law from the actual stresses"


@dataclass(frozen=True, slots=True)
class Law:
    """A law of the ground; `curve_of` makes the curves of sections."""

    name: str
    source: str
    needs: tuple[str, ...]
    requires: Mapping[str, Limits]
    curve_of: Callable[[Sections], api.GroundCurve]
    lines_of: Callable[[SectionValues, float, str], Sequence[SheetLine]]
    finite_strain: bool = False

    def curve(self, sections: Sections) -> api.GroundCurve:
        return self.curve_of(sections)

    def lines(self, values: SectionValues, pressure_mpa: float) -> Sequence[SheetLine]:
        return self.lines_of(values, pressure_mpa, self.source)

    def lines_with_ring(
        self, values: SectionValues, ring: api.GroundRing, pressure_mpa: float
    ) -> Sequence[SheetLine]:
        return improved_ring.wall_lines(self.name, values, ring, pressure_mpa, self.source)


def _named(sections: Sections, names: tuple[str, ...]) -> dict[str, Any]:
    return {name: sections[name] for name in names}


def _perfectly_plastic(sections: Sections) -> api.GroundCurve:
    return HoekBrownCurve.of_ground(**_named(sections, HOEK_BROWN))


def _brittle(sections: Sections) -> api.GroundCurve:
    residual = hoek_brown.HoekBrownConstants(*(sections[name] for name in RESIDUAL))
    return HoekBrownCurve.of_ground(**_named(sections, HOEK_BROWN), residual=residual)


def _softening(sections: Sections) -> api.GroundCurve:
    names = (*HOEK_BROWN, *RESIDUAL, "critical_shear_strain")
    return SofteningCurve.of_ground(**_named(sections, names))


def _disturbed_ring(sections: Sections) -> api.GroundCurve:
    thickness = sections["disturbed_thickness_m"]
    # Without a stated thickness the disturbance weakens the whole mass: there is no ring.
    ring_ratio = 1 + np.where(np.isnan(thickness), 0.0, thickness) / sections["radius_m"]
    names = (*HOEK_BROWN, *RING)
    return DisturbedRingCurve.of_ground(ring_ratio=ring_ratio, **_named(sections, names))


def _mohr_coulomb(sections: Sections) -> api.GroundCurve:
    return MohrCoulombCurve.of_ground(**_named(sections, MOHR_COULOMB))


def _mohr_coulomb_brittle(sections: Sections) -> api.GroundCurve:
    residual = hoek_brown.MohrCoulomb(*(sections[name] for name in RESIDUAL_LINE))
    return MohrCoulombCurve.of_ground(**_named(sections, MOHR_COULOMB), residual=residual)


def _elastic(sections: Sections) -> api.GroundCurve:
    return ElasticCurve.of_ground(**_named(sections, ELASTIC))


def _lines_of_ring(values: SectionValues, pressure: float, source: str) -> Sequence[SheetLine]:
    names = (*HOEK_BROWN, *RING, "disturbed_thickness_m", "radius_m")
    curve = _disturbed_ring(Sections(arrays(values, names)))
    assert isinstance(curve, DisturbedRingCurve)
    return disturbed_ring.wall_lines(values, pressure, source, curve)


PLASTIC = (
    Law(
        "hoek_brown_perfectly_plastic",
        f"Carranza-Torres (2004), Int. J. Rock Mech. Min. Sci. 41, stresses; {HOOKE}",
        HOEK_BROWN,
        POISSON,
        _perfectly_plastic,
        perfectly_plastic.wall_lines,
    ),
    Law(
        "hoek_brown_brittle",
        "Brown, Bray, Ladanyi & Hoek (1983), J. Geotech. Eng. 109, 15-39, stresses; " + HOOKE,
        (*HOEK_BROWN, *RESIDUAL),
        POISSON,
        _brittle,
        partial(perfectly_plastic.wall_lines, brittle=True),
    ),
    Law(
        "hoek_brown_softening",
        "Lee & Pietruszczak (2008), Tunn. Undergr. Space Technol. 23, 588-599, strength falling "
        f"with plastic shear strain, by 200 annuli; {HOOKE}",
        (*HOEK_BROWN, *RESIDUAL, "critical_shear_strain"),
        {**POISSON, "critical_shear_strain": UNLIMITED},
        _softening,
        softening.wall_lines,
    ),
    Law(
        "hoek_brown_disturbed_ring",
        "perfectly plastic Hoek-Brown ground as in Carranza-Torres (2004), with a ring of lower "
        f"strength and modulus around the opening; {HOOKE}",
        (*HOEK_BROWN, *RING, "disturbed_thickness_m", "radius_m"),
        {**POISSON, "disturbed_thickness_m": UNLIMITED},
        _disturbed_ring,
        _lines_of_ring,
    ),
    Law(
        "mohr_coulomb_perfectly_plastic",
        "Duncan Fama (1993), Comprehensive Rock Engineering 2, ch. 5, with dilation; " + HOOKE,
        MOHR_COULOMB,
        POISSON,
        _mohr_coulomb,
        mohr_coulomb.wall_lines,
    ),
    Law(
        "mohr_coulomb_brittle",
        "Brady & Brown, Rock Mechanics for Underground Mining, stresses; " + HOOKE,
        (*MOHR_COULOMB, *RESIDUAL_LINE),
        POISSON,
        _mohr_coulomb_brittle,
        partial(mohr_coulomb.wall_lines, brittle=True),
    ),
)


def _of_finite_strain(law: Law) -> Law:
    def curve_of(sections: Sections) -> api.GroundCurve:
        return FiniteStrainCurve.of_curve(law.curve(sections), sections["dilation_deg"])

    def lines_of(values: SectionValues, pressure: float, source: str) -> Sequence[SheetLine]:
        curve = curve_of(Sections(arrays(values, law.needs)))
        return finite_strain.corrected(law.lines(values, pressure), curve, pressure)

    return Law(
        f"{law.name}_finite_strain",
        f"{law.source}; closure corrected for finite strain after Vrakas & Anagnostou (2014), "
        "Int. J. Numer. Anal. Methods Geomech. 38, 1131-1148",
        law.needs,
        law.requires,
        curve_of,
        lines_of,
        finite_strain=True,
    )


REACTIONS: tuple[api.GroundReactionMethod, ...] = (
    *PLASTIC,
    *(_of_finite_strain(law) for law in PLASTIC),
    Law(
        "elastic",
        "Kirsch (1898), Z. VDI 42, 797-807; Lame",
        ELASTIC,
        POISSON,
        _elastic,
        mohr_coulomb.elastic_lines,
    ),
)
