"""A class with some of its values changed, and what is then still missing in it."""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass, replace
from types import MappingProxyType

from tunnelcalc.plugin.contract import SupportKind
from tunnelcalc.plugin.parameter import Parameter
from tunnelcalc.plugin.registry import Registry
from tunnelcalc.project import AddedWords, Element, SupportClass
from tunnelcalc.trade_off import full_name

INSTALLED, ADVANCE_RATE = "installed_at_m", "advance_m_per_day"
Value = float | str


@dataclass(frozen=True, slots=True)
class Change:
    """One value of an element, or of the class where `element` is empty; `text` as it was asked."""

    element: str
    parameter: str
    value: Value
    text: str

    @property
    def name(self) -> str:
        return full_name(self.element, self.parameter)


@dataclass(frozen=True, slots=True)
class Variation:
    """The values of one parameter that are tried, rising, or else its words."""

    element: str
    parameter: str
    unit: str
    values: tuple[Value, ...]
    whole: bool
    text: str

    @property
    def name(self) -> str:
        return full_name(self.element, self.parameter)

    @property
    def of_words(self) -> bool:
        return isinstance(self.values[0], str)

    def change(self, value: Value) -> Change:
        return Change(self.element, self.parameter, value, self.text)


@dataclass(frozen=True, slots=True)
class Asked:
    """What the user varies, one at a time, and what is held meanwhile."""

    variations: tuple[Variation, ...]
    held: tuple[Change, ...]

    def beside(self, variation: Variation) -> tuple[Change, ...]:
        """What is held while a parameter varies: all but that parameter itself."""
        return tuple(change for change in self.held if change.name != variation.name)


def changed(
    chosen: SupportClass,
    changes: Sequence[Change],
    registry: Registry,
    words: AddedWords = MappingProxyType({}),
) -> tuple[SupportClass, tuple[Change, ...]]:
    """The class with the changes, and those changes that have no use in it.

    What a word leaves without use goes, and a choice that comes into use unsaid has its default.
    A word that a table of the project adds brings the values of its row, and takes them with it.
    """
    of_class = [change for change in changes if not change.element]
    for change in of_class:
        chosen = _class_changed(chosen, change)
    elements, idle = [], []
    for element in chosen.elements:
        own = [change for change in changes if change.element == element.label]
        done, unused = _element_changed(element, own, registry.support_kind(element.kind), words)
        elements.append(done)
        idle += unused
    return replace(chosen, elements=tuple(elements)), tuple(idle)


def _class_changed(chosen: SupportClass, change: Change) -> SupportClass:
    value = float(change.value)
    if change.parameter == ADVANCE_RATE:
        return replace(chosen, advance_m_per_day=value)
    shift = value - installed_first_m(chosen)
    moved = (replace(e, installed_at_m=e.installed_at_m + shift) for e in chosen.elements)
    return replace(chosen, elements=tuple(moved))


def installed_first_m(chosen: SupportClass) -> float:
    """Distance behind the face at which the first element of a class is installed. [m]"""
    return min(element.installed_at_m for element in chosen.elements)


def _element_changed(
    element: Element, changes: Sequence[Change], kind: SupportKind, words: AddedWords
) -> tuple[Element, list[Change]]:
    of_rows = _of_rows(element.values, kind, words)
    values = {name: value for name, value in element.values.items() if name not in of_rows}
    for change in changes:
        if change.parameter == INSTALLED:
            element = replace(element, installed_at_m=float(change.value))
        else:
            values[change.parameter] = change.value
    used: dict[str, Value] = {}
    for parameter in in_order(kind):
        if not parameter.in_use(used):
            continue
        if parameter.name in values:
            used[parameter.name] = values[parameter.name]
        elif parameter.default:
            used[parameter.name] = parameter.default
    unused = [c for c in changes if c.parameter != INSTALLED and c.parameter not in used]
    made = MappingProxyType({**used, **_of_rows(used, kind, words)})
    return replace(element, values=made), unused


def _of_rows(
    values: Mapping[str, Value], kind: SupportKind, words: AddedWords
) -> Mapping[str, Value]:
    """What the words of an element stand for, by the tables of the project."""
    found: dict[str, Value] = {}
    for parameter in kind.parameters:
        rows = words.get((kind.name, parameter.name), {})
        found |= rows.get(str(values.get(parameter.name)), {})
    return found


def lacking(element: Element, kind: SupportKind) -> Iterator[Parameter]:
    """The parameters that an element needs, by its own words, and does not state."""
    for parameter in in_order(kind):
        if parameter.in_use(element.values) and parameter.name not in element.values:
            yield parameter


def in_order(kind: SupportKind) -> list[Parameter]:
    """The parameters of a kind, those that depend on a word last."""
    return sorted(kind.parameters, key=lambda parameter: parameter.only_if is not None)
