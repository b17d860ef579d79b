"""Support by rock mass classification: cross-checks, never the only basis of a class.

Outside the range of a system the result is NaN.
"""

from __future__ import annotations

import numpy as np

from tunnelcalc.api import Array

THREE_JOINT_SETS = 9.0
"""Jn of three joint sets; fewer sets have less."""
Q_RANGE = (0.001, 1000.0)
JOINT_NUMBER_RANGE = (0.5, 20.0)
JOINT_ROUGHNESS_RANGE = (0.5, 5.0)
"""Up to 4 in the table, and 1 more where the joints lie more than 3 m apart."""
ESR_RANGE = (0.5, 5.0)
RMR_RANGE = (0.0, 100.0)
MPA_PER_KPA = 1e-3


def q_support_pressure_mpa(q: Array, joint_number: Array, joint_roughness: Array) -> Array:
    """Permanent pressure on the roof by the Q system.

    Parameters
    ----------
    q : (n,) the full Q, with Jw and SRF, 0.001 to 1000; never Q'. [-]
    joint_number : (n,) Jn, 0.5 to 20. [-]
    joint_roughness : (n,) Jr, 0.5 to 5. [-]

    Returns
    -------
    (n,) 0.2 / (Jr Q^(1/3)), with fewer than three joint sets (Jn < 9) times sqrt(Jn) / 3, which
    joins it at Jn = 9. [MPa]  NaN outside the ranges.

    Limits
    ------
    Printed in kgf/cm2, with 0.1 MPa for 1 kgf/cm2, 2 % on the safe side.

    Source
    ------
    N. Barton, R. Lien, J. Lunde, Rock Mechanics 6 (1974) 189-236.
    """
    sound = _within(q, Q_RANGE) & _within(joint_number, JOINT_NUMBER_RANGE)
    sound &= _within(joint_roughness, JOINT_ROUGHNESS_RANGE)
    pressure = 0.2 / (np.where(sound, joint_roughness, 1) * np.cbrt(np.where(sound, q, 1)))
    few = joint_number < THREE_JOINT_SETS
    sets = np.sqrt(np.where(sound & few, joint_number, THREE_JOINT_SETS)) / 3
    return np.where(sound, pressure * sets, np.nan)


def q_bolt_length_m(span_m: Array, excavation_support_ratio: Array) -> Array:
    """Length of roof bolts by the Q system.

    Parameters
    ----------
    span_m : (n,) B, width of the opening, above 0. [m]
    excavation_support_ratio : (n,) ESR by the use of the opening, 0.5 to 5. [-]

    Returns
    -------
    (n,) 2 + 0.15 B / ESR. [m]  NaN outside the ranges.

    Source
    ------
    N. Barton, R. Lien, J. Lunde, Rock Mechanics 6 (1974) 189-236.
    """
    sound = (span_m > 0) & _within(excavation_support_ratio, ESR_RANGE)
    length = 2 + 0.15 * span_m / np.where(sound, excavation_support_ratio, 1)
    return np.where(sound, length, np.nan)


def rmr_support_pressure_mpa(rmr89: Array, unit_weight_kn_m3: Array, span_m: Array) -> Array:
    """Load of loosened rock on the roof by the rock mass rating.

    Parameters
    ----------
    rmr89 : (n,) RMR with its actual water rating, 0 to 100. [-]
    unit_weight_kn_m3 : (n,) gamma of the rock, above 0. [kN/m3]
    span_m : (n,) B, width of the opening, above 0. [m]

    Returns
    -------
    (n,) (100 - RMR) / 100 gamma B. [MPa]  NaN outside the ranges.

    Limits
    ------
    From openings in coal measures; says nothing of squeezing or of depth.

    Source
    ------
    E. Unal, thesis, Pennsylvania State University (1983) [from memory].
    """
    sound = _within(rmr89, RMR_RANGE) & (unit_weight_kn_m3 > 0) & (span_m > 0)
    load = (100 - rmr89) / 100 * unit_weight_kn_m3 * span_m * MPA_PER_KPA
    return np.where(sound, load, np.nan)


def _within(values: Array, limits: tuple[float, float]) -> Array:
    return (values >= limits[0]) & (values <= limits[1])
