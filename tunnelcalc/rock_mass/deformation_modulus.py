"""Deformation modulus of a jointed rock mass.

Source of all formulas here: E. Hoek, M. S. Diederichs, Int. J. Rock Mech. Min. Sci. 43 (2006)
203-215.
"""

from __future__ import annotations

import numpy as np

from tunnelcalc.arrays import Array, same_length


def hoek_diederichs_simplified_mpa(gsi: Array, disturbance: Array) -> Array:
    """Modulus from the quality of the rock mass alone.

    Parameters
    ----------
    gsi : (n,) geological strength index, 0 < GSI <= 100. [-]
    disturbance : (n,) D, 0 <= D <= 1. [-]

    Returns
    -------
    (n,) Erm = 1e5 (1 - D/2) / (1 + exp((75 + 25 D - GSI) / 11)). [MPa]

    Raises
    ------
    ShapeError : the arrays differ in length.

    Limits
    ------
    Knows nothing of the stiffness of the intact rock: use the form with the intact modulus
    wherever that is known. In weak rock this form can exceed the intact modulus.

    Source
    ------
    Hoek & Diederichs (2006), simplified equation.
    """
    same_length(gsi=gsi, disturbance=disturbance)
    return 1e5 * (1 - disturbance / 2) / (1 + np.exp((75 + 25 * disturbance - gsi) / 11))


def hoek_diederichs_with_intact_modulus_mpa(
    gsi: Array, disturbance: Array, intact_modulus_mpa: Array
) -> Array:
    """Modulus as a share of the modulus of the intact rock.

    Parameters
    ----------
    gsi : (n,) geological strength index, 0 < GSI <= 100. [-]
    disturbance : (n,) D, 0 <= D <= 1. [-]
    intact_modulus_mpa : (n,) Ei, measured or modulus ratio times intact strength. [MPa]

    Returns
    -------
    (n,) Erm = Ei (0.02 + (1 - D/2) / (1 + exp((60 + 15 D - GSI) / 11))). [MPa]

    Raises
    ------
    ShapeError : the arrays differ in length.

    Source
    ------
    Hoek & Diederichs (2006), detailed equation.
    """
    same_length(gsi=gsi, disturbance=disturbance, intact_modulus_mpa=intact_modulus_mpa)
    share = (1 - disturbance / 2) / (1 + np.exp((60 + 15 * disturbance - gsi) / 11))
    return intact_modulus_mpa * (0.02 + share)
