"""Ground reaction of a circular opening whose ground is strengthened in a ring, as by bolts.

Ring and mass are elastic, perfectly plastic, of one law and of the same moduli and dilation; they
differ in strength alone. States and formulas are those of `ring_zones` and `disturbed_ring`, which
hold for a ring of any strength. What is new beside a stronger ring: the mass may yield while the
ring is elastic, or while only the wall has yielded, and presses on the ring as it moves.

The state depends on the support pressure alone as long as what has yielded goes on yielding, which
it does while the pressure falls: k T = B(D) at the ring's edge lets D, and the edge, only grow.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from typing import Self

import numpy as np

from tunnelcalc.arrays import Array
from tunnelcalc.ground_reaction.curve import GroundCurve
from tunnelcalc.ground_reaction.disturbed_ring import RingCurve
from tunnelcalc.ground_reaction.elastic import ElasticCurve
from tunnelcalc.ground_reaction.finite_strain import FiniteStrainCurve
from tunnelcalc.ground_reaction.hoek_brown import HoekBrownCurve
from tunnelcalc.ground_reaction.mohr_coulomb import MohrCoulombCurve
from tunnelcalc.ground_reaction.ring_laws import MohrCoulombZones, StrongRingZones
from tunnelcalc.ground_reaction.ring_zones import AnyZones

FINITE_STRAIN = "_finite_strain"
HOEK_BROWN_LAWS = ("hoek_brown_perfectly_plastic", "hoek_brown_disturbed_ring")
MOHR_COULOMB_LAWS = ("mohr_coulomb_perfectly_plastic",)
LAWS = (*HOEK_BROWN_LAWS, *MOHR_COULOMB_LAWS)
DERIVED_LAWS = (*LAWS, *(law + FINITE_STRAIN for law in LAWS), "elastic")
"""Laws of the ground for which a strengthened ring is derived; of the disturbed ring those sections
that have none."""

ELASTIC = ("in_situ_stress_mpa", "deformation_modulus_mpa", "poisson_ratio")
SHARED = (*ELASTIC, "dilation_deg")


@dataclass(frozen=True, slots=True)
class ImprovedRingCurve(RingCurve):
    """Ground reaction curves of n sections with a ring of another strength. All fields are (n,)."""

    @classmethod
    def of_hoek_brown(
        cls,
        *,
        ring_ratio: Array,
        in_situ_stress_mpa: Array,
        intact_strength_mpa: Array,
        mb: Array,
        s: Array,
        a: Array,
        ring_mb: Array,
        ring_s: Array,
        ring_a: Array,
        deformation_modulus_mpa: Array,
        poisson_ratio: Array,
        dilation_deg: Array,
    ) -> Self:
        """Curves of Hoek-Brown ground, all (n,).

        `ring_ratio` is (R + t) / R >= 1 with t the thickness of the ring; those that begin with
        `ring_` belong to the ring, all others to both. Stresses, strength and modulus in MPa. A
        NaN row stays NaN and spoils no other; a row with a ratio below 1 is NaN.

        Source
        ------
        See the heads of this module, of `disturbed_ring` and of `ring_zones`.
        """
        mass, ring = (
            HoekBrownCurve.of_ground(
                in_situ_stress_mpa=in_situ_stress_mpa,
                intact_strength_mpa=intact_strength_mpa,
                mb=constants[0],
                s=constants[1],
                a=constants[2],
                deformation_modulus_mpa=deformation_modulus_mpa,
                poisson_ratio=poisson_ratio,
                dilation_deg=dilation_deg,
            )
            for constants in ((mb, s, a), (ring_mb, ring_s, ring_a))
        )
        valid = _known(mass, ring, ring_ratio)
        return cls._of_zones(StrongRingZones(mass, ring, _log_ratio(ring_ratio, valid)), valid)

    @classmethod
    def of_mohr_coulomb(
        cls,
        *,
        ring_ratio: Array,
        in_situ_stress_mpa: Array,
        friction_angle_deg: Array,
        cohesion_mpa: Array,
        ring_friction_angle_deg: Array,
        ring_cohesion_mpa: Array,
        deformation_modulus_mpa: Array,
        poisson_ratio: Array,
        dilation_deg: Array,
    ) -> Self:
        """Curves of Mohr-Coulomb ground, all (n,); conventions as in `of_hoek_brown`.

        Source
        ------
        See the heads of this module, of `disturbed_ring` and of `ring_zones`.
        """
        mass, ring = (
            MohrCoulombCurve.of_ground(
                in_situ_stress_mpa=in_situ_stress_mpa,
                cohesion_mpa=cohesion,
                friction_angle_deg=friction,
                deformation_modulus_mpa=deformation_modulus_mpa,
                poisson_ratio=poisson_ratio,
                dilation_deg=dilation_deg,
            )
            for friction, cohesion in (
                (friction_angle_deg, cohesion_mpa),
                (ring_friction_angle_deg, ring_cohesion_mpa),
            )
        )
        valid = _known(mass, ring, ring_ratio)
        return cls._of_zones(MohrCoulombZones(mass, ring, _log_ratio(ring_ratio, valid)), valid)

    @classmethod
    def _of_zones(cls, zones: AnyZones, valid: Array) -> Self:
        critical = np.where(valid, zones.mass.critical_pressure_mpa, np.nan)
        layered = np.flatnonzero(valid & (zones.log_ratio > 0))
        inside = zones.take(layered)
        # Beside an elastic mass of the same moduli the wall yields as in ground that is all ring.
        critical[layered] = inside.critical_pressure_mpa(inside.ring.critical_pressure_mpa)
        return cls(zones, critical)


def improved_curve(
    law: str, sections: Mapping[str, Array], thickness_m: Array, changed: Mapping[str, Array]
) -> GroundCurve:
    """Curves of sections of one law with a ring of other strength from the beginning.

    Parameters
    ----------
    law : name of the law of the ground, see `DERIVED_LAWS`.
    sections : columns (n,) of the ground that the law needs, and `radius_m`.
    thickness_m : (n,) of the ring from the wall, 0 or more. [m]
    changed : columns (n,) that hold inside it: mb and s, a too where it changes, for a
        Hoek-Brown law, friction_angle_deg and cohesion_mpa for a Mohr-Coulomb one. What the law
        does not use is passed over.

    Returns
    -------
    GroundCurve.  NaN for all sections where the law is not among `DERIVED_LAWS`, or `changed` does
    not hold what it needs; NaN for sections with a disturbed ring. Elastic ground is that of the
    law: its strength is of no account.

    Limits
    ------
    Perfectly plastic ground. In brittle and softening ground the ring would fall at its edge from
    a strengthened peak; that is not derived. With finite strain the ring keeps its (R + t) / R.

    Source
    ------
    See the head of this module.
    """
    if law.endswith(FINITE_STRAIN):
        inner = improved_curve(law.removesuffix(FINITE_STRAIN), sections, thickness_m, changed)
        return FiniteStrainCurve.of_curve(inner, sections["dilation_deg"])
    if law == "elastic":
        return ElasticCurve.of_ground(**{name: sections[name] for name in ELASTIC})
    ratio = 1 + thickness_m / sections["radius_m"]
    shared = {name: sections[name] for name in SHARED}
    if law in MOHR_COULOMB_LAWS and {"friction_angle_deg", "cohesion_mpa"} <= changed.keys():
        return ImprovedRingCurve.of_mohr_coulomb(
            ring_ratio=ratio,
            friction_angle_deg=sections["friction_angle_deg"],
            cohesion_mpa=sections["cohesion_mpa"],
            ring_friction_angle_deg=changed["friction_angle_deg"],
            ring_cohesion_mpa=changed["cohesion_mpa"],
            **shared,
        )
    if law in HOEK_BROWN_LAWS and {"mb", "s"} <= changed.keys():
        if law == "hoek_brown_disturbed_ring":
            ratio = np.where(sections["disturbed_thickness_m"] > 0, np.nan, ratio)
        return ImprovedRingCurve.of_hoek_brown(
            ring_ratio=ratio,
            intact_strength_mpa=sections["intact_strength_mpa"],
            mb=sections["mb"],
            s=sections["s"],
            a=sections["a"],
            ring_mb=changed["mb"],
            ring_s=changed["s"],
            ring_a=changed.get("a", sections["a"]),
            **shared,
        )
    return _refused(sections["in_situ_stress_mpa"])


def _refused(in_situ_stress_mpa: Array) -> GroundCurve:
    """NaN in all rows."""
    unknown = np.full(in_situ_stress_mpa.shape, np.nan)
    return ElasticCurve.of_ground(
        in_situ_stress_mpa=unknown, deformation_modulus_mpa=unknown, poisson_ratio=unknown
    )


def _known(
    mass: HoekBrownCurve | MohrCoulombCurve,
    ring: HoekBrownCurve | MohrCoulombCurve,
    ratio: Array,
) -> Array:
    """Whether a row has all that it takes."""
    elastic = mass.shear_modulus_mpa + mass.dilation + mass.poisson_ratio
    unknown = np.isnan(mass.critical_pressure_mpa + ring.critical_pressure_mpa + elastic)
    return (ratio >= 1) & ~unknown


def _log_ratio(ratio: Array, valid: Array) -> Array:
    return np.log(np.where(valid, ratio, 1))
