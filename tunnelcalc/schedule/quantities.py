"""Theoretical quantities, unrounded, for the full ring."""

from __future__ import annotations

import numpy as np

from tunnelcalc.arrays import Array, same_length


def excavation_m3_per_m(radius_m: Array) -> Array:
    """Theoretical excavation a metre of tunnel.

    Parameters
    ----------
    radius_m : (n,) R. [m]

    Returns
    -------
    (n,) pi R^2. [m3/m]

    Source
    ------
    Area of a circle.
    """
    return np.pi * radius_m**2


def totals_by_class(per_metre: Array, length_m: Array, classes: Array, numbers: Array) -> Array:
    """Amount of one item over the sections of each class.

    Parameters
    ----------
    per_metre : (n,) amount a metre on each section. [unit/m]
    length_m : (n,) length of each section. [m]
    classes : (n,) class number of each section.
    numbers : (k,) the class numbers wanted.

    Returns
    -------
    (k,) sums. [unit]

    Raises
    ------
    ShapeError : the arrays differ in length.

    Source
    ------
    Definition.
    """
    same_length(per_metre=per_metre, length_m=length_m, classes=classes)
    amounts = per_metre * length_m
    return np.array([np.sum(amounts[classes == number]) for number in numbers], dtype=float)
