"""The array type of the numerical rooms and the one check that they share."""

from __future__ import annotations

from typing import Any

import numpy as np
import numpy.typing as npt

from tunnelcalc.errors import ShapeError

Array = npt.NDArray[Any]
"""One quantity: one value a section along the first axis."""

SAME_PLACE_M = 1e-3
"""Two chainages within a millimetre are the same place. [m]"""


def same_length(**arrays: Array) -> None:
    """Raise ShapeError, naming the arrays, unless all have the same first length."""
    lengths = {name: np.shape(array)[:1] for name, array in arrays.items()}
    if len(set(lengths.values())) > 1:
        described = ", ".join(f"{name} {length}" for name, length in lengths.items())
        raise ShapeError(f"arrays of one call must have the same length: {described}")
