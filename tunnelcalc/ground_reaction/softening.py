"""Ground reaction of a circular opening in strain-softening Hoek-Brown ground.

mb, s and a change in a straight line from peak to residual as the plastic shear strain
eta = ep_th - ep_r grows from 0 to its critical value; dilation is constant. The ring is solved by
annuli, once a section for all pressures: see `softening_annulus` for the equations,
`softening_ring` for the pass through the ring.
"""

from __future__ import annotations

from dataclasses import dataclass, replace
from typing import NamedTuple, Self

import numpy as np

from tunnelcalc.arrays import Array
from tunnelcalc.ground_reaction.curve import CurvePoint
from tunnelcalc.ground_reaction.flow_rule import dilation_coefficient, ring_exponent
from tunnelcalc.ground_reaction.hoek_brown import critical_number
from tunnelcalc.ground_reaction.softening_annulus import (
    LEAST_NUMBER,
    Face,
    SofteningGround,
    correct_softening,
    cross_annulus,
    empty_face,
    fill_face,
    predict_softening,
)
from tunnelcalc.ground_reaction.softening_ring import RingStates, ring_states

ROUNDING = 1e-12
"""Of the peak strength: a residual strength that is above by no more is equal to it."""
BLOCK = 2048
"""Sections integrated together: long enough for numpy, short enough for the cache."""


class WallFace(NamedTuple):
    """Innermost face of the ring under given pressures, (n,) each. `above` is the place in the flat
    tables of the face that the last annulus starts from; the rest as in `RingStates`."""

    above: Array
    root: Array
    face: Face
    depth: Array
    drive: Array
    rate: Array


@dataclass(frozen=True, slots=True)
class SofteningCurve:
    """Ground reaction curves of n sections; the ring of each is integrated once.

    The tables of the rings are shared by all curves that `take` cuts out of one: fields are (n,),
    and `column` says where in the tables a section stands.
    """

    in_situ_stress_mpa: Array
    critical_pressure_mpa: Array
    intact_strength_mpa: Array
    poisson_ratio: Array
    double_modulus_mpa: Array
    column: Array
    ground: SofteningGround
    states: RingStates

    @classmethod
    def of_ground(
        cls,
        *,
        in_situ_stress_mpa: Array,
        intact_strength_mpa: Array,
        mb: Array,
        s: Array,
        a: Array,
        residual_mb: Array,
        residual_s: Array,
        residual_a: Array,
        critical_shear_strain: Array,
        deformation_modulus_mpa: Array,
        poisson_ratio: Array,
        dilation_deg: Array,
        annuli: int = 200,
    ) -> Self:
        """Curves from the ground's properties, all (n,).

        Stresses, strength and modulus in MPa. `critical_shear_strain` is the plastic shear strain
        at which the residual strength is reached: 0 is brittle ground, infinite is perfectly
        plastic ground. NaN where mb or s rises from peak to residual, where a falls or
        reaches 1, where the residual strength is above the peak at the edge, or any is negative.
        A NaN row stays NaN and spoils no other. The 200 annuli leave errors of about 1e-5 of the
        closure, up to 2e-4 where softening is almost a drop; the error falls with the square of
        the annuli. Tables take 5 (annuli + 1) numbers a section.

        Raises
        ------
        ValueError : fewer than two annuli.

        Source
        ------
        See the head of `softening_annulus`; critical pressure: `critical_number`.
        """
        if annuli < 2:
            raise ValueError("annuli must be at least 2")
        p0, sci, nu = in_situ_stress_mpa, intact_strength_mpa, poisson_ratio
        number = critical_number(p0, sci, mb, s, a)
        critical = np.maximum(sci * (number - s) / mb, 0)
        softens = (residual_mb <= mb) & (residual_s <= s) & (residual_a >= a)
        softens &= (residual_mb >= 0) & (residual_s >= 0) & (residual_a < 1)
        softens &= critical_shear_strain >= 0
        at_edge = np.where(softens, residual_mb * critical / sci + residual_s, 0) ** residual_a
        softens &= at_edge <= number**a * (1 + ROUNDING)
        critical = np.where(softens, critical, np.nan)
        double_modulus = deformation_modulus_mpa / (1 + nu)
        dilation = dilation_coefficient(dilation_deg)
        strain = (1 + dilation) * (1 - nu) * sci / double_modulus
        with np.errstate(divide="ignore", over="ignore"):
            yielding = 1 / (1 + critical_shear_strain / strain)
            holding = 1 / (1 + strain / critical_shear_strain)
        scaled = critical / sci
        ground = SofteningGround(
            number=mb * scaled,
            number_fall=(mb - residual_mb) * scaled,
            cohesion=s,
            cohesion_fall=s - residual_s,
            power=a,
            power_rise=residual_a - a,
            yielding=yielding,
            holding=holding,
            growing=dilation + 1,
            dilating=dilation - 1,
            critical=scaled,
        )
        rings = np.flatnonzero(~(critical <= 0))
        column = np.zeros(critical.size, dtype=np.intp)
        column[rings] = np.arange(rings.size)
        drive = 2 * (p0 - critical) / sci
        return cls(
            in_situ_stress_mpa=p0,
            critical_pressure_mpa=critical,
            intact_strength_mpa=sci,
            poisson_ratio=nu,
            double_modulus_mpa=double_modulus,
            column=column,
            ground=ground,
            states=_states(ground.take(rings), drive[rings], annuli),
        )

    def take(self, index: Array) -> Self:
        """The curves of the sections at `index`; the tables are shared."""
        return replace(
            self,
            in_situ_stress_mpa=self.in_situ_stress_mpa[index],
            critical_pressure_mpa=self.critical_pressure_mpa[index],
            intact_strength_mpa=self.intact_strength_mpa[index],
            poisson_ratio=self.poisson_ratio[index],
            double_modulus_mpa=self.double_modulus_mpa[index],
            column=self.column[index],
            ground=self.ground.take(index),
        )

    def at(self, support_pressure_mpa: Array) -> CurvePoint:
        """Plastic radius, closure and slope of the curve under a support pressure.

        Parameters
        ----------
        support_pressure_mpa : (n,) pi, 0 <= pi <= p0. [MPa]

        Returns
        -------
        CurvePoint.  Where the closure leaves the range of a double it is NaN, never a number.
        At a yielding wall without any strength the slope is -infinity, all else finite.
        The slope is that of the differential equation at the wall: it differs from the slope of
        the solution by annuli as the solution differs from the exact one.

        Source
        ------
        See the head of `softening_annulus`. One partial annulus is added inside the last whole one.
        """
        p0 = self.in_situ_stress_mpa
        pressure = np.asarray(support_pressure_mpa, float)
        # Asked this way round, a section with NaN does not pass for elastic.
        yields = ~(pressure >= self.critical_pressure_mpa)
        closure = (p0 - pressure) / self.double_modulus_mpa
        slope = np.broadcast_to(-1 / self.double_modulus_mpa, closure.shape).copy()
        ratio = np.ones(closure.shape)
        rings = np.flatnonzero(yields)
        if rings.size:
            every = rings.size == pressure.size
            found = (self if every else self.take(rings))._ring_at(pressure[rings])
            ratio[rings], closure[rings], slope[rings] = found
        return CurvePoint(ratio, closure, slope)

    def _ring_at(self, pressure: Array) -> CurvePoint:
        """The state where every section yields."""
        p0, nu, sci = self.in_situ_stress_mpa, self.poisson_ratio, self.intact_strength_mpa
        wall = self.wall_face(pressure)
        growing = self.ground.growing
        sound = ~np.isnan(ring_exponent(wall.depth, growing - 1))
        drive = np.where(sound, wall.drive, np.nan)
        ratio = np.exp(ring_exponent(wall.depth, np.zeros(pressure.size)))
        closure = (1 - nu) * drive * sci - (1 - 2 * nu) * (p0 - pressure)
        none = wall.face.number <= LEAST_NUMBER
        with np.errstate(divide="ignore", over="ignore"):
            # d V / d sr = ((K - 1) H - (K + 1) V) / H
            change = self.ground.dilating - growing * drive / np.where(none, 0, wall.face.strength)
        slope = (1 - nu) * change + (1 - 2 * nu)
        return CurvePoint(ratio, closure / self.double_modulus_mpa, slope / self.double_modulus_mpa)

    def wall_face(self, pressure: Array) -> WallFace:
        """One partial annulus from the face of the grid under the next higher stress."""
        count = pressure.size
        with np.errstate(divide="ignore", invalid="ignore", over="ignore", under="ignore"):
            root = np.sqrt(pressure / self.critical_pressure_mpa)
            place = self._face_above(root)
            outside, depth, drive, softening, rate = (
                table.ravel().take(place) for table in self.states
            )
            outer, inner = empty_face(count), empty_face(count)
            outer.softening[:] = softening
            fall = outside - root
            predict_softening(outer, rate, fall, inner.softening)
            fill_face(outer, self.ground, outside)
            fill_face(inner, self.ground, root)
            fall *= self.ground.critical * (outside + root)
            work = np.empty((2, count))
            thickness, inside, corrected, wall_rate = np.empty((4, count))
            cross_annulus(self.ground, outer, inner, fall, drive, (thickness, inside), work)
            out = (corrected, wall_rate)
            correct_softening(self.ground, inner, root, inside, softening, out, work)
            inner.softening[:] = corrected
            fill_face(inner, self.ground, root)
        return WallFace(place, root, inner, depth + thickness, inside, wall_rate)

    def _face_above(self, root: Array) -> Array:
        """Place in the flat tables of the innermost face, the last one apart, with w >= `root`."""
        rows, columns = self.states.root.shape
        flat = self.states.root.ravel()
        place, most = self.column, self.column + (rows - 2) * columns
        step = 1 << (rows - 2).bit_length()
        while step := step >> 1:
            further = place + step * columns
            inside = further <= most
            further = np.minimum(further, most)
            inside &= flat.take(further) >= root
            place = np.where(inside, further, place)
        return place


def _states(ground: SofteningGround, drive: Array, annuli: int) -> RingStates:
    """Tables for all sections, block by block."""
    count = drive.size
    # One column at least: there is something to look up even where no section yields.
    shape = (annuli + 1, max(count, 1))
    states = RingStates(*(np.full(shape, np.nan) for _ in RingStates._fields))
    # Beyond the range of a double, and in sections with NaN, numbers are NaN or infinite; `at`
    # gives them up.
    with np.errstate(divide="ignore", invalid="ignore", over="ignore", under="ignore"):
        for start in range(0, count, BLOCK):
            block = slice(start, min(start + BLOCK, count))
            part = SofteningGround(*(np.ascontiguousarray(values[block]) for values in ground))
            ring_states(part, drive[block], RingStates(*(table[:, block] for table in states)))
    return states
