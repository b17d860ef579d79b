"""Elements with values from each parameter's range, made from what a kind declares alone."""

from __future__ import annotations

import math
import random
from collections.abc import Iterator, Sequence
from functools import lru_cache

from tunnelcalc.plugin.contract import SupportKind
from tunnelcalc.plugin.parameter import Parameter
from tunnelcalc.plugin.ring_sections import with_section
from tunnelcalc.project import Element

SHARES = (0.5, 0.2, 0.05)
"""Of a range that begins at 0: where the middle values do not fit together, smaller ones."""
TRIALS = 2000
"""Further sets of values, anywhere in the ranges, that are tried then."""
MOST_WORDS = 6
INSTALLED_AT_M = 1.0

Values = dict[str, float | str]


def elements_of(kind: SupportKind, smallest_radius_m: float) -> list[Element]:
    """Elements in which every word of a choice meets every word of every other choice.

    Of a choice of very many words a few are taken. Raises AssertionError where a combination has
    no values that fit together.
    """
    return [_fitting(kind, words, smallest_radius_m) for words in combinations(kind)]


def combinations(kind: SupportKind) -> list[dict[str, str]]:
    """Combinations of the choices that a kind leaves, so many that every pair of words that can
    stand together does so in one of them."""
    return [dict(words) for words in _covering(tuple(kind.parameters))]


@lru_cache(maxsize=64)
def _covering(parameters: tuple[Parameter, ...]) -> list[dict[str, str]]:
    chosen = [parameter for parameter in parameters if parameter.choices]
    # A choice that hangs on another comes after it.
    ordered = sorted(chosen, key=lambda p: p.only_if is not None)
    left = [(words, _pairs(words)) for words in _combined(ordered, {})]
    taken, told = [], set[frozenset[tuple[str, str]]]()
    while left:
        words, pairs = max(left, key=lambda one: len(one[1] - told))
        taken.append(words)
        told |= pairs
        left = [one for one in left if one[1] - told]
    return taken


def _pairs(words: dict[str, str]) -> set[frozenset[tuple[str, str]]]:
    """Every pair of words, and every word by itself."""
    each = list(words.items())
    return {frozenset((one, other)) for one in each for other in each} or {frozenset()}


def option_sets(options: Sequence[Parameter]) -> list[Values]:
    """Values of the options of a class check, for every combination of their words."""
    numbers = [p for p in options if not p.choices]
    ordered = sorted((p for p in options if p.choices), key=lambda p: p.only_if is not None)
    return [
        {**words, **{p.name: middle(p, SHARES[0]) for p in numbers if _applies(p, words)}}
        for words in _combined(ordered, {})
    ]


def _combined(left: Sequence[Parameter], words: dict[str, str]) -> Iterator[dict[str, str]]:
    if not left:
        yield words
        return
    parameter, *others = left
    if not _applies(parameter, words):
        yield from _combined(others, words)
        return
    for word in _few(parameter.choices):
        yield from _combined(others, {**words, parameter.name: word})


def _few(words: tuple[str, ...]) -> tuple[str, ...]:
    return words if len(words) <= MOST_WORDS else (words[0], words[len(words) // 2], words[-1])


def _applies(parameter: Parameter, words: dict[str, str]) -> bool:
    if parameter.only_if is None:
        return True
    other, needed = parameter.only_if
    return words.get(other, "") in needed


def _fitting(kind: SupportKind, words: dict[str, str], smallest_radius_m: float) -> Element:
    numbers = [p for p in kind.parameters if not p.choices and _applies(p, words)]
    for values in _plain_and_whole(_tried(numbers)):
        element = Element(kind.name, kind.name, INSTALLED_AT_M, {**words, **values})
        if not list(kind.misfits(element, smallest_radius_m)):
            return with_section(kind, element)
    raise AssertionError(f"no values of {kind.name} with {words} fit together")


def _plain_and_whole(tried: Iterator[Values]) -> Iterator[Values]:
    """Each set of values, and again in whole numbers: a kind may ask for some."""
    for values in tried:
        yield values
        yield {name: _whole(value) for name, value in values.items()}


def _whole(value: float | str) -> float | str:
    return value if isinstance(value, str) or value < 1 else float(round(value))


def _tried(numbers: Sequence[Parameter]) -> Iterator[Values]:
    for share in SHARES:
        yield {parameter.name: middle(parameter, share) for parameter in numbers}
    draw = random.Random(1)
    for _ in range(TRIALS):
        yield {parameter.name: anywhere(parameter, draw.random()) for parameter in numbers}


def middle(parameter: Parameter, share: float) -> float:
    """The geometric mean of a range, or a share of one that begins at 0 or below."""
    low, high = parameter.limits.minimum, parameter.limits.maximum
    value = math.sqrt(low * high) if low > 0 else low + share * (high - low)
    return float(round(value)) if parameter.limits.whole else value


def anywhere(parameter: Parameter, share: float) -> float:
    """A value at a share of the range, by its logarithm where the range is above 0."""
    low, high = parameter.limits.minimum, parameter.limits.maximum
    value = low * (high / low) ** share if low > 0 else low + share**3 * (high - low)
    return float(round(value)) if parameter.limits.whole else value
