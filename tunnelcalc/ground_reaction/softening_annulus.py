"""One annulus of the plastic ring in strain-softening Hoek-Brown ground.

Stresses are divided by sci; t = -ln r runs inwards. mb, s and a fall in proportion to the
softening x, 0 at the peak and 1 at the residual strength. With H = N^a, N = mb sr + s, and V for
(2 G u / r + (1 - 2 nu) (p0 - sr)) / (1 - nu), the ring obeys

    d sr / dt = -H                          equilibrium
    d V / dt  = (K + 1) V - (K - 1) H       compatibility, flow rule, Hooke's law
    x = kappa (V - H(sr, x)), at most 1     eta = (1 + K) ep_th = critical shear strain times x

kappa = (1 + K) (1 - nu) sci / (2 G critical shear strain). At the edge V = 2 (p0 - pcr) = H and
x = 0. Nothing depends on the radius of the wall: the ring is one curve of sr, from pcr to 0, and
the wall stands where sr is the support pressure.

An annulus lies between two radial stresses. Inside, N runs straight with the stress from face to
face, and H is the power of N that has the right value at both faces. Then t is a closed form,

    t = dsr (Q1 - Q2) dln N / ((dln N - dln H) (N1 - N2)),   Q = N / H

exactly that of constant strength where nothing softens, and V follows by Simpson's rule over t,
with the middle value of H that gives the annulus its stress difference dsr. Where (K + 1) t is
large, the parabola through the same three values of H is integrated exactly. The softening of
the inner face is first predicted by the tangent at the outer one, then corrected by one Newton
step: second order in the thickness. Where 1 + kappa dH/dx falls to 0 strength falls faster than the
ground outside can follow: a drop at once, u and sr unchanged, to the next root, as a rule x = 1.

Source: K. Lee, S. Pietruszczak, Tunn. Undergr. Space Technol. 23 (2008) 588-599, for annuli of
equal stress and the linear fall; L. R. Alejano and others, Tunn. Undergr. Space Technol. 24
(2009) 689-711. The form above is derived here.
"""

from __future__ import annotations

from typing import NamedTuple

import numpy as np

from tunnelcalc.arrays import Array

LEAST_NUMBER = 1e-300
"""In place of N = 0, at zero stress without cohesion: its logarithm is needed, its size is not."""
LEAST_STIFFNESS = 1e-200
"""In place of 0 or less where softening is unstable: the step then passes any limit."""
NEAR = 1e-7
"""Faces whose ln N differ by less take the mean of 1 / H: the closed form would be 0 / 0."""
THIN = 0.25
"""(K + 1) t up to which Simpson's rule serves: its error is 1e-6 of the annulus there."""
STEEPEST = 1000.0
"""Largest -dx / dw that annuli are made thinner for: near a drop it goes to infinity."""


class SofteningGround(NamedTuple):
    """What the ring depends on, (n,) each; stresses divided by sci. [-]

    `number`, `number_fall` : mb pcr and its fall from peak to residual.
    `cohesion`, `cohesion_fall` : s and its fall.
    `power`, `power_rise` : a, and by how much it is larger at the residual.
    `yielding`, `holding` : kappa / (1 + kappa) and 1 / (1 + kappa), finite for any kappa.
    `growing`, `dilating` : K + 1 and K - 1.
    `critical` : pcr / sci.
    """

    number: Array
    number_fall: Array
    cohesion: Array
    cohesion_fall: Array
    power: Array
    power_rise: Array
    yielding: Array
    holding: Array
    growing: Array
    dilating: Array
    critical: Array

    def take(self, index: Array) -> SofteningGround:
        """The ground of the sections at `index`."""
        return SofteningGround(*(values[index] for values in self))


class Face(NamedTuple):
    """A circle in the ring, (n,) each: softening x, by how much N falls with x, N, H, N / H,
    ln N, ln H. [-]"""

    softening: Array
    fall: Array
    number: Array
    strength: Array
    quotient: Array
    log_number: Array
    log_strength: Array


def empty_face(count: int) -> Face:
    """Room for the faces of `count` sections.

    Parameters
    ----------
    count : how many.

    Source
    ------
    None: no formula.
    """
    return Face(*np.empty((len(Face._fields), count)))


def fill_face(face: Face, ground: SofteningGround, root: Array) -> None:
    """Strength of a face whose softening is known.

    Parameters
    ----------
    face : filled in place, but for its softening.
    ground : of the same sections.
    root : (n,) w = sqrt(sr / pcr). [-]

    Source
    ------
    Derivation at the head of this module.
    """
    softening, fall, number, strength, quotient, log_number, log_strength = face
    np.multiply(root, root, out=quotient)
    np.multiply(ground.number_fall, quotient, out=fall)
    np.add(fall, ground.cohesion_fall, out=fall)
    np.multiply(ground.number, quotient, out=number)
    np.add(number, ground.cohesion, out=number)
    np.multiply(fall, softening, out=quotient)
    np.subtract(number, quotient, out=number)
    np.maximum(number, LEAST_NUMBER, out=number)
    np.log(number, out=log_number)
    np.multiply(ground.power_rise, softening, out=log_strength)
    np.add(log_strength, ground.power, out=log_strength)
    np.multiply(log_strength, log_number, out=log_strength)
    np.exp(log_strength, out=strength)
    np.divide(number, strength, out=quotient)


def cross_annulus(
    ground: SofteningGround,
    outer: Face,
    inner: Face,
    stress_fall: Array,
    drive: Array,
    out: tuple[Array, Array],
    work: Array,
) -> None:
    """From the outer to the inner face of an annulus.

    Parameters
    ----------
    ground, outer, inner : of the same sections.
    stress_fall : (n,) dsr / sci. [-]
    drive : (n,) V / sci at the outer face. [-]
    out : ln(r1 / r2) and V / sci at the inner face are put here, (n,) each.
    work : (2, n) overwritten. [-]

    Source
    ------
    Derivation at the head of this module.
    """
    thickness, drive_inside = out
    one, two = work
    np.subtract(outer.log_number, inner.log_number, out=one)
    np.subtract(outer.log_strength, inner.log_strength, out=two)
    np.subtract(one, two, out=two)
    thin = ~(one > NEAR)
    np.subtract(outer.quotient, inner.quotient, out=thickness)
    np.multiply(thickness, one, out=thickness)
    np.subtract(outer.number, inner.number, out=one)
    np.multiply(two, one, out=two)
    np.divide(thickness, two, out=thickness)
    if thin.any():
        np.copyto(thickness, 0.5 * (1 / outer.strength + 1 / inner.strength), where=thin)
    np.multiply(thickness, stress_fall, out=thickness)
    # With q = exp((K + 1) t / 2) and w = (K - 1) t (q H1 - H2) / 6, Simpson's rule is
    # V2 = q (q V1 - (K - 1) dsr - w) + w.
    np.multiply(ground.growing, thickness, out=one)
    thick = np.flatnonzero(one > THIN)
    np.multiply(one, 0.5, out=one)
    np.exp(one, out=one)
    np.multiply(one, outer.strength, out=two)
    np.subtract(two, inner.strength, out=two)
    np.multiply(two, thickness, out=two)
    np.multiply(two, ground.dilating, out=two)
    np.multiply(two, 1 / 6, out=two)
    np.multiply(one, drive, out=drive_inside)
    np.subtract(drive_inside, two, out=drive_inside)
    np.multiply(drive_inside, one, out=drive_inside)
    np.add(drive_inside, two, out=drive_inside)
    np.multiply(one, stress_fall, out=one)
    np.multiply(one, ground.dilating, out=one)
    np.subtract(drive_inside, one, out=drive_inside)
    if thick.size:
        known = (ground.growing, ground.dilating, drive, thickness, stress_fall)
        faces = (outer.strength, inner.strength)
        drive_inside[thick] = _across_thick(*(values[thick] for values in (*known, *faces)))


def _across_thick(
    growing: Array,
    dilating: Array,
    drive: Array,
    thickness: Array,
    stress_fall: Array,
    outer: Array,
    inner: Array,
) -> Array:
    """V inside an annulus in which exp((K + 1) t) is far from straight, (k,).

    With y from 0 inside to 1 outside, H = H2 + (H1 - H2) y + c y (1 - y), and integrals over y of
    1, y, y (1 - y) times exp(z y), z = (K + 1) t.
    """
    z = growing * thickness
    weight = np.exp(z)
    bend = 6 * stress_fall - 3 * thickness * (outer + inner)
    integral = thickness * inner * (weight - 1) / z
    integral += thickness * (outer - inner) * (weight * (z - 1) + 1) / z**2
    integral += bend * (weight * (z - 2) + z + 2) / z**3
    return weight * drive - dilating * integral


def predict_softening(outer: Face, rate: Array, fall: Array, out: Array) -> None:
    """Softening x of the inner face by the tangent at the outer one, at most 1.

    Parameters
    ----------
    outer : the outer face.
    rate : (n,) -dx / dw there. [-]
    fall : (n,) by how much w is lower inside. [-]
    out : (n,) x is put here. [-]

    Source
    ------
    Derivation at the head of this module.
    """
    np.multiply(rate, fall, out=out)
    np.add(out, outer.softening, out=out)
    np.minimum(out, 1, out=out)


def correct_softening(
    ground: SofteningGround,
    face: Face,
    root: Array,
    drive: Array,
    least: Array,
    out: tuple[Array, Array],
    work: Array,
) -> None:
    """One Newton step of x = kappa (V - H(x)) from the face's softening, and the rate there.

    From below the step never passes the next root where H is concave in x; where there is none up
    to 1, it ends at 1.

    Parameters
    ----------
    ground, face : of the same sections.
    root : (n,) w = sqrt(sr / pcr) at the face. [-]
    drive : (n,) V / sci at the face. [-]
    least : (n,) x is not below it, since softening is never undone, nor above 1. [-]
    out : x, and -dx / dw before the step, are put here, (n,) each.
    work : (2, n) overwritten. [-]

    Source
    ------
    Derivation at the head of this module.
    """
    softening, rate = out
    one, stiffness = work
    # rate: a; stiffness: 1 + kappa dH/dx, over 1 + kappa.
    np.multiply(ground.power_rise, face.softening, out=rate)
    np.add(rate, ground.power, out=rate)
    np.multiply(rate, face.fall, out=one)
    np.divide(one, face.number, out=one)
    np.multiply(ground.power_rise, face.log_number, out=stiffness)
    np.subtract(stiffness, one, out=stiffness)
    np.multiply(stiffness, face.strength, out=stiffness)
    np.multiply(stiffness, ground.yielding, out=stiffness)
    np.add(stiffness, ground.holding, out=stiffness)
    np.maximum(stiffness, LEAST_STIFFNESS, out=stiffness)
    np.divide(ground.yielding, stiffness, out=one)
    # -dx / dw = 2 w kappa / (1 + kappa dH/dx) (pcr dV / dsr + a mb pcr H / N), all inwards.
    np.multiply(ground.number_fall, face.softening, out=softening)
    np.subtract(ground.number, softening, out=softening)
    np.multiply(rate, softening, out=rate)
    np.divide(rate, face.quotient, out=rate)
    np.divide(drive, face.strength, out=softening)
    np.multiply(softening, ground.growing, out=softening)
    np.subtract(softening, ground.dilating, out=softening)
    np.multiply(softening, ground.critical, out=softening)
    np.add(rate, softening, out=rate)
    np.multiply(rate, root, out=rate)
    np.multiply(rate, one, out=rate)
    np.multiply(rate, 2, out=rate)
    np.minimum(rate, STEEPEST, out=rate)

    np.multiply(face.softening, ground.holding, out=softening)
    np.subtract(drive, face.strength, out=one)
    np.multiply(one, ground.yielding, out=one)
    np.subtract(one, softening, out=one)
    np.divide(one, stiffness, out=one)
    np.add(face.softening, one, out=softening)
    np.minimum(softening, 1, out=softening)
    np.maximum(softening, least, out=softening)
    np.less(softening, 1, out=one)
    np.multiply(rate, one, out=rate)
