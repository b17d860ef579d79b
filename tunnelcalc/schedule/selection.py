"""The class that a section requires."""

from __future__ import annotations

import numpy as np

from tunnelcalc.arrays import Array

NONE_ADEQUATE = -1
"""Class number of a section that no class satisfies. It is never chosen and never passes."""
NONE_ADEQUATE_NAME = "none_adequate"


def required_classes(adequate: Array) -> Array:
    """First class, lightest first, that is adequate.

    Parameters
    ----------
    adequate : (n, c) bool, whether each class meets every criterion on each section.

    Returns
    -------
    (n,) class numbers from 0, or NONE_ADEQUATE.

    Source
    ------
    Definition. A heavier class need not be adequate where a lighter one is: it attracts more
    load.
    """
    if adequate.shape[1] == 0:
        return np.full(len(adequate), NONE_ADEQUATE, dtype=np.int32)
    first = np.argmax(adequate, axis=1)
    return np.where(np.any(adequate, axis=1), first, NONE_ADEQUATE).astype(np.int32)


def next_adequate(adequate: Array) -> Array:
    """For each class number, the first adequate class that is not lighter.

    Parameters
    ----------
    adequate : (n, c) bool.

    Returns
    -------
    (n, c) class numbers, NONE_ADEQUATE where neither the class nor a heavier one is adequate.

    Source
    ------
    Definition.
    """
    following = np.full(adequate.shape, NONE_ADEQUATE, dtype=np.int32)
    present = np.full(len(adequate), NONE_ADEQUATE, dtype=np.int32)
    for number in reversed(range(adequate.shape[1])):
        present = np.where(adequate[:, number], np.int32(number), present)
        following[:, number] = present
    return following
