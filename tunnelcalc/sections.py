"""The sections of an alignment: one named array a quantity, all sections at once."""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence

import numpy as np

from tunnelcalc.arrays import Array, same_length


class Sections(Mapping[str, Array]):
    """Named columns of equal length. Columns are read-only; sections gain columns, never lose one.

    The first axis of every column is the section, by increasing chainage. A column of shape
    (n, c) holds one value a section and support class.
    """

    def __init__(self, columns: Mapping[str, Array]) -> None:
        same_length(**columns)
        self._columns: dict[str, Array] = {}
        for name, column in columns.items():
            view = np.asarray(column).view()
            view.flags.writeable = False
            self._columns[name] = view

    def __getitem__(self, name: str) -> Array:
        return self._columns[name]

    def __iter__(self) -> Iterator[str]:
        return iter(self._columns)

    def __len__(self) -> int:
        return len(self._columns)

    @property
    def count(self) -> int:
        """Number of sections."""
        return next((len(column) for column in self._columns.values()), 0)

    def with_columns(self, more: Mapping[str, Array]) -> Sections:
        """These sections with further columns; a name that stands already is replaced."""
        return Sections({**self._columns, **more})

    def take(self, index: Array | slice) -> Sections:
        """The sections at `index`: a slice, a mask (n,) or positions."""
        return Sections({name: column[index] for name, column in self._columns.items()})

    def only(self, names: Sequence[str]) -> Sections:
        """These sections with the named columns alone."""
        return Sections({name: self._columns[name] for name in names})


def joined(parts: Sequence[Sections]) -> Sections:
    """Sections of consecutive parts that have the same columns."""
    return Sections({name: np.concatenate([part[name] for part in parts]) for name in parts[0]})


def of_element(name: str, position: int) -> str:
    """Column of one element among those of its class, which are counted from 0."""
    return f"{name}_{position + 1}"


def one_section(values: Mapping[str, float | str]) -> Sections:
    """One section from its values by name."""
    return Sections(
        {
            name: np.array([value], dtype=object if isinstance(value, str) else float)
            for name, value in values.items()
        }
    )
