"""What a kind of support, or a check with options, asks of a project: its parameters."""

from __future__ import annotations

from collections.abc import Callable, Iterable, Mapping
from dataclasses import dataclass

from tunnelcalc.vocabulary import UNLIMITED, Limits, Sort


@dataclass(frozen=True, slots=True)
class Misfit:
    """Why values do not fit together, and what to do about it."""

    parameter: str
    message: str
    fix: str


@dataclass(frozen=True, slots=True)
class WordTable:
    """A table by which a project adds words to a choice: each row a word and what it stands for.

    `states` are parameters of the same kind, numbers: each is a column, with its own unit and
    limits, and an element that chooses the word has the row's values of them. `misfits` tells
    what does not fit together in a row, a column each.
    """

    word_column: str
    states: tuple[str, ...]
    misfits: Callable[[Mapping[str, float]], Iterable[Misfit]]


@dataclass(frozen=True, slots=True)
class Parameter:
    """A parameter of a support kind: validation and listings are made from this alone.

    A parameter with `only_if = ("contact", ("blocked",))` is required when one of those choices
    is made and refused otherwise; every other parameter is required. Only a choice may have a
    `default`: the word that is meant where the project says nothing. No number has one. A choice
    of a kind may take further words from a table of the project, `words_from`; an element that
    chooses one has its source under `source_of(name)`.
    """

    name: str
    meaning: str
    unit: str = ""
    limits: Limits = UNLIMITED
    choices: tuple[str, ...] = ()
    only_if: tuple[str, tuple[str, ...]] | None = None
    default: str = ""
    words_from: WordTable | None = None

    @property
    def sort(self) -> Sort:
        return Sort.CHOICE if self.choices else Sort.NUMBER

    def in_use(self, values: Mapping[str, float | str]) -> bool:
        """Whether an element with these values, words first, has a use for it."""
        return self.only_if is None or values.get(self.only_if[0]) in self.only_if[1]

    def allowed(self) -> str:
        """The allowed values in words."""
        return " or ".join(self.choices) if self.choices else self.limits.describe(self.unit)


def source_of(parameter: str) -> str:
    """Where an element says from which row of a table its word of a choice comes."""
    return f"{parameter}_source"
