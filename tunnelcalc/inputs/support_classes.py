"""Reads support classes: each element against the parameters that its kind declares."""

from __future__ import annotations

import math
from collections import Counter
from collections.abc import Iterator, Mapping, Sequence
from types import MappingProxyType
from typing import NamedTuple

from tunnelcalc.inputs.values import Reader
from tunnelcalc.inputs.word_tables import TABLES, RowValues, Words, WordTables
from tunnelcalc.plugin.contract import SupportKind
from tunnelcalc.plugin.parameter import Parameter
from tunnelcalc.plugin.registry import Registry, describe
from tunnelcalc.project import Element, SupportClass
from tunnelcalc.schedule.selection import NONE_ADEQUATE_NAME
from tunnelcalc.support.reaction import FORMS, AdvanceIncrements, GroundRing
from tunnelcalc.text import quoted, suggestion
from tunnelcalc.vocabulary import Limits

INSTALLED_AT = Limits(0, 10000)
ADVANCE = Limits(0, 100, above=True)
NO_WORDS = Words()
RESERVED_NAMES = (NONE_ADEQUATE_NAME, "not_decided")


def read_support_classes(
    reader: Reader,
    registry: Registry,
    plugins: tuple[str, ...],
    smallest_radius_m: float | None,
    tables: WordTables,
) -> tuple[SupportClass, ...]:
    """The classes, lightest first. Classes with problems are left out: they are told."""
    classes: list[SupportClass] = []
    names: set[str] = set()
    for entry in reader.tables_of("support_classes", may_be_empty=False):
        name = entry.text("name", "a name of its own")
        if name is not None and (name in names or name in RESERVED_NAMES):
            entry.complain(
                "name",
                f"holds {quoted(name)}, which is taken",
                allowed="a name that no other class has; not " + " or ".join(RESERVED_NAMES),
                fix="give the class another name",
            )
        names.add(name or "")
        installed = entry.number("installed_at_m", INSTALLED_AT, "m", required=False)
        rate = entry.number("advance_m_per_day", ADVANCE, "m/day", required=False)
        elements = _elements(entry, registry, plugins, installed, smallest_radius_m, tables)
        stated = math.inf if entry.has("advance_m_per_day") else math.nan  # wrongly: told already
        for fault in class_faults(elements, stated, registry):
            entry.complain(fault.key, fault.message, allowed=fault.allowed, fix=fault.fix)
        entry.finish()
        if name is not None:
            rate = math.nan if rate is None else rate
            classes.append(SupportClass(name, tuple(elements), rate))
    return tuple(classes)


class ClassFault(NamedTuple):
    """What is wrong with the elements of a class together."""

    key: str
    message: str
    allowed: str
    fix: str


def class_faults(
    elements: Sequence[Element], advance_m_per_day: float, registry: Registry
) -> Iterator[ClassFault]:
    """Rings of changed ground at different distances have no solution here; an element that ages
    needs to know how fast the face moves on."""
    forms = [registry.support_kind(one.kind).reaction_form(one) for one in elements]
    labels = [one.label for one in elements]
    rings = [label for label, form in zip(labels, forms, strict=True) if form == GroundRing.form]
    if len(rings) > 1:
        yield ClassFault(
            "elements",
            f"holds {' and '.join(rings)}, which each change the ground in a ring",
            "one such element a class",
            "keep one of them",
        )
    if AdvanceIncrements.form in forms and advance_m_per_day != advance_m_per_day:
        yield ClassFault(
            "advance_m_per_day",
            f"is missing: {labels[forms.index(AdvanceIncrements.form)]} hardens while the face "
            "moves on",
            ADVANCE.describe("m/day"),
            "state the rate of advance of the class",
        )


def idle_values(classes: Sequence[SupportClass], registry: Registry) -> Iterator[str]:
    """What a class states and nothing is computed with; a class that is nothing but a name."""

    def hardens(element: Element) -> bool:
        return registry.support_kind(element.kind).reaction_form(element) == AdvanceIncrements.form

    for one in classes:
        if not one.elements:
            yield f"class {one.name} has no elements: it is the opening without support"
        if not math.isnan(one.advance_m_per_day) and not any(map(hardens, one.elements)):
            rate = f"advance_m_per_day of class {one.name}"
            yield f"{rate} is used by nothing: no element of the class hardens"


def _elements(
    entry: Reader,
    registry: Registry,
    plugins: tuple[str, ...],
    class_installed_m: float | None,
    smallest_radius_m: float | None,
    tables: WordTables,
) -> list[Element]:
    class_states_it = entry.has("installed_at_m")  # rightly or wrongly: that is told already
    elements: list[Element] = []
    count: Counter[str] = Counter()
    for item in entry.tables_of("elements"):
        kind = _kind(item, registry)
        own = item.number("installed_at_m", INSTALLED_AT, "m", required=False)
        if not class_states_it and not item.has("installed_at_m"):
            item.complain(
                "installed_at_m",
                "is missing here and in the class",
                allowed=INSTALLED_AT.describe("m") + ", behind the face",
                fix="state it for the class, or for each of its elements",
            )
        if kind is None:
            continue
        before = len(item.problems)
        values = _parameters(item, kind, tables)
        item.finish()
        count[kind.name] += 1
        label = kind.name if count[kind.name] == 1 else f"{kind.name}_{count[kind.name]}"
        installed = own if own is not None else class_installed_m
        if values is None or len(item.problems) > before or installed is None:
            continue
        element = Element(kind.name, label, installed, MappingProxyType(values))
        try:
            _fits(item, kind, element, smallest_radius_m)
            _is_supported(item, kind, element, registry, plugins)
        except Exception as error:  # a stranger's plugin may raise anything
            message = f"names {quoted(kind.name)}, whose plugin failed with {describe(error)}"
            item.complain("kind", message, fix="report the fault to the maker of the plugin")
        elements.append(element)
    return elements


def _kind(item: Reader, registry: Registry) -> SupportKind | None:
    known = registry.names("support_kind")
    name = item.text("kind", " or ".join(known))
    if name is None:
        return None
    if name in known:
        return registry.support_kind(name)
    claimants = registry.disputed.get(("support_kind", name))
    if claimants:
        offered_by = " and ".join(sorted(claimants))
        message = f"names {quoted(name)}, which the plugins {offered_by} both offer"
        fix = "uninstall one of them"
    else:
        hint = suggestion(name, known)
        failed = "".join(f"; {failure}" for failure in registry.failures)
        message = f"names {quoted(name)}, a kind of support that no plugin handles"
        fix = f'did you mean "{hint}"?' if hint else f"install the plugin that offers it{failed}"
    allowed = " or ".join(known) or "none: no plugin offers a kind of support"
    item.complain("kind", message, allowed=allowed, fix=fix)
    return None


def _parameters(
    item: Reader, kind: SupportKind, tables: WordTables
) -> dict[str, float | str] | None:
    """The values of an element; None where a word of it is told to be wrong in its table."""
    values: dict[str, float | str] = {}
    rows: list[RowValues | None] = []
    for parameter in sorted(kind.parameters, key=lambda p: p.only_if is not None):
        if not _has_use(item, parameter, values):
            item.known[parameter.name] = None
            continue
        added = tables.get((kind.name, parameter.name), NO_WORDS)
        value: float | str | None
        if added.unread and item.has(parameter.name):
            value = item.text(parameter.name)
            rows += [] if value in parameter.choices else [None]
        else:
            value = parameter_value(item, parameter, tuple(added.rows))
        if value is not None:
            values[parameter.name] = value
        if isinstance(value, str) and value in added.rows:
            rows.append(added.choose(value))
    for row in rows:
        if row is None:
            return None
        values |= row
    return values


def _has_use(item: Reader, parameter: Parameter, values: Mapping[str, float | str]) -> bool:
    """Whether a parameter is asked for with the choices made so far; else what is stated of it is
    a problem, unless the choice itself has one."""
    if parameter.only_if is None or parameter.in_use(values):
        return True
    other, words = parameter.only_if
    if item.has(parameter.name) and (other in values or not item.has(other)):
        chosen = f"with {other}: {values[other]}" if other in values else f"so: {other}"
        item.complain(
            parameter.name,
            f"has no use {chosen}" + ("" if other in values else " is not stated"),
            fix=f"remove it, or write {other}: {' or '.join(words)}",
        )
    return False


def parameter_value(
    item: Reader, parameter: Parameter, more_words: tuple[str, ...] = ()
) -> float | str | None:
    """The value of a parameter as it is stated, or meant where it may stay unsaid; a choice may
    have more words than those that are declared."""
    if not parameter.choices:
        return item.number(parameter.name, parameter.limits, parameter.unit)
    required = not parameter.default
    otherwise = "write one of the allowed words"
    if parameter.words_from is not None:
        otherwise += f", or add yours to a table that {TABLES} names"
    words = (*parameter.choices, *more_words)
    stated = item.choice(parameter.name, words, required, otherwise)
    return stated if required or item.has(parameter.name) else parameter.default


def _fits(
    item: Reader, kind: SupportKind, element: Element, smallest_radius_m: float | None
) -> None:
    if smallest_radius_m is None:
        return
    for misfit in kind.misfits(element, smallest_radius_m):
        item.complain(misfit.parameter, misfit.message, fix=misfit.fix)


def _is_supported(
    item: Reader,
    kind: SupportKind,
    element: Element,
    registry: Registry,
    plugins: tuple[str, ...],
) -> None:
    form = kind.reaction_form(element)
    if form not in FORMS:
        item.complain(
            "kind",
            f'names "{kind.name}", which reacts as {form}; that is not one of the four forms',
            allowed="an element that reacts as " + " or ".join(FORMS),
            fix="take an element of another kind",
        )
    elif not any(check.carries_load for check in registry.checks_for(element, plugins)):
        item.complain(
            "kind",
            f'names "{kind.name}", for which no load check is registered',
            fix="name under plugins: the plugin that checks it, or take another kind",
        )
