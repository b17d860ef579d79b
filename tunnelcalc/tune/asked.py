"""Reads what a user asks to be varied and held, with every problem of it at once."""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Mapping, Sequence
from dataclasses import replace

import numpy as np

from tunnelcalc.errors import PluginError, Problem, Problems, Where
from tunnelcalc.inputs.support_classes import ADVANCE, INSTALLED_AT, class_faults
from tunnelcalc.plugin.contract import SupportKind
from tunnelcalc.plugin.parameter import Misfit, Parameter
from tunnelcalc.plugin.registry import Registry, describe
from tunnelcalc.project import Project, SupportClass
from tunnelcalc.text import as_number, quoted, suggestion, words_near
from tunnelcalc.tune.changes import (
    ADVANCE_RATE,
    INSTALLED,
    Asked,
    Change,
    Value,
    Variation,
    changed,
    lacking,
)

VARY, SET = "--vary", "--set"
OPTIONS = Where("command line")
STEPS = 24
"""Values tried over the stated range, evenly spaced, ends included."""
OF_ELEMENT = {INSTALLED: Parameter(INSTALLED, "distance behind the face", "m", INSTALLED_AT)}
OF_CLASS = {
    **OF_ELEMENT,
    ADVANCE_RATE: Parameter(ADVANCE_RATE, "rate of advance", "m/day", ADVANCE),
}


class Reading:
    """Reads texts NAME=VALUES about one class."""

    def __init__(self, project: Project, chosen: SupportClass, registry: Registry) -> None:
        self.chosen = chosen
        self.registry = registry
        self.words = project.words
        self.smallest_radius_m = float(np.min(project.ground["radius_m"]))
        self.problems = Problems()

    def asked(self, vary: Sequence[str], held: Sequence[str]) -> Asked:
        """What the texts mean. Raises `InputError` with all that is wrong."""
        changes = [one for one in map(self._change, held) if one is not None]
        variations = [one for one in map(self._variation, vary) if one is not None]
        self._only_once(SET, changes)
        self._only_once(VARY, variations)
        self.problems.raise_if_any()
        asked = Asked(tuple(variations), tuple(changes))
        fitting = [self._fitting(asked, variation) for variation in variations]
        self._idle(asked)
        self.problems.raise_if_any()
        return Asked(tuple(fitting), asked.held)

    def _change(self, text: str) -> Change | None:
        """The meaning of `ELEMENT.PARAMETER=VALUE`."""
        place = self._parameter(SET, text)
        if place is None:
            return None
        element, parameter, stated = place
        if parameter.choices:
            word = self._word(SET, text, parameter, stated)
            return None if word is None else Change(element, parameter.name, word, text)
        value = as_number(stated)
        if value is None or not _within(parameter, value):
            self._refuse(SET, text, "value", parameter.allowed(), "correct the value")
            return None
        return Change(element, parameter.name, value, text)

    def _variation(self, text: str) -> Variation | None:
        """The meaning of `ELEMENT.PARAMETER=LOW:HIGH` or `ELEMENT.PARAMETER=WORD,WORD`."""
        place = self._parameter(VARY, text)
        if place is None:
            return None
        element, parameter, stated = place
        values: tuple[Value, ...]
        if parameter.choices:
            named = [self._word(VARY, text, parameter, word) for word in stated.split(",")]
            words = [word for word in named if word is not None]
            values = tuple(dict.fromkeys(words))
            for word in values:
                if words.count(str(word)) > 1:
                    message = (
                        f"holds {quoted(text)}, which names {quoted(str(word))} more than once"
                    )
                    self._tell(VARY, message, "each word once", "leave the others out")
        else:
            values = self._range(text, parameter, stated)
        whole = parameter.limits.whole
        if not values:
            return None
        return Variation(element, parameter.name, parameter.unit, values, whole, text)

    def _range(self, text: str, parameter: Parameter, stated: str) -> tuple[float, ...]:
        bounds = [as_number(end) for end in stated.split(":")]
        lowest, highest = bounds if len(bounds) == 2 else (None, None)
        if lowest is None or highest is None or not lowest < highest:
            fix = "write two numbers, the lower first"
            self._refuse(VARY, text, "range", "ELEMENT.PARAMETER=LOW:HIGH", fix)
            return ()
        if not (_within(parameter, lowest) and _within(parameter, highest)):
            fix = "keep the bounds within the allowed range"
            self._refuse(VARY, text, "range", parameter.allowed(), fix)
            return ()
        values = np.linspace(lowest, highest, STEPS)
        return tuple((np.unique(np.round(values)) if parameter.limits.whole else values).tolist())

    def _word(self, option: str, text: str, parameter: Parameter, word: str) -> str | None:
        word = word.strip()
        if word in parameter.choices:
            return word
        allowed = words_near(parameter.choices, word)
        self._refuse(option, text, "word", allowed, _meant(word, parameter.choices))
        return None

    def _parameter(self, option: str, text: str) -> tuple[str, Parameter, str] | None:
        """Element, parameter, and the text of the values."""
        name, equals, stated = text.partition("=")
        element, dot, wanted = name.strip().rpartition(".")
        if not equals:
            form = "LOW:HIGH, or WORD,WORD" if option == VARY else "VALUE"
            allowed, fix = f"ELEMENT.PARAMETER={form}", "write = and the values after the name"
            self._refuse(option, text, "value", allowed, fix)
            return None
        if not self.chosen.elements:
            allowed, fix = "a class with elements", "name another with --class"
            self._refuse(option, text, "element", allowed, fix)
            return None
        known: Mapping[str, Parameter] = OF_CLASS
        if dot:
            kinds = {one.label: one.kind for one in self.chosen.elements}
            if element not in kinds:
                labels = list(kinds)
                fix = _meant(element, labels)
                self._refuse(option, text, "element", " or ".join(labels), fix)
                return None
            kind = self.registry.support_kind(kinds[element])
            known = OF_ELEMENT | {one.name: self._with_words(kind, one) for one in kind.parameters}
        if wanted not in known:
            self._refuse(option, text, "parameter", ", ".join(known), _meant(wanted, known))
            return None
        return element, known[wanted], stated.strip()

    def _with_words(self, kind: SupportKind, parameter: Parameter) -> Parameter:
        """The parameter with the words that a table of the project adds."""
        added = self.words.get((kind.name, parameter.name), {})
        return replace(parameter, choices=(*parameter.choices, *added))

    def _only_once(self, option: str, named: Sequence[Change | Variation]) -> None:
        names = [one.name for one in named]
        for position, one in enumerate(named):
            if one.name in names[:position]:
                message = f"holds {quoted(one.text)}, whose parameter was given before"
                self._tell(option, message, "each parameter once", "leave one of the two out")

    def _fitting(self, asked: Asked, variation: Variation) -> Variation:
        """The variation with the values that fit; what its words lack, or that none fits, is told.

        A value of a range may not fit the others: the range is the user's, and what fits of it is
        tried. A word that does not fit was asked for by name.
        """
        fitting: list[Value] = []
        reason: Misfit | None = None
        lacks: dict[tuple[str, str], None] = {}
        for value in variation.values:
            changes = (*asked.beside(variation), variation.change(value))
            made, idle = changed(self.chosen, changes, self.registry, self.words)
            if any(change.name == variation.name for change in idle):
                self._tell_idle(VARY, variation.element, variation.parameter, variation.text)
                return variation
            found = tuple(self._lacking(made))
            lacks.update(dict.fromkeys(found))
            if found:
                continue
            misfit = next(self._misfits(made), None)
            if misfit is None:
                fitting.append(value)
            elif variation.of_words:
                self._unfit(variation, f"which does not fit with {quoted(str(value))}", misfit)
            reason = reason or misfit
        for allowed, fix in lacks:
            message = f"holds {quoted(variation.text)}, which needs more than the class states"
            self._tell(VARY, message, allowed, fix)
        if reason and not fitting and not variation.of_words:
            self._unfit(variation, "which has no values that fit that can be used", reason)
        return Variation(
            variation.element,
            variation.parameter,
            variation.unit,
            tuple(fitting) or variation.values,
            variation.whole,
            variation.text,
        )

    def _lacking(self, made: SupportClass) -> Iterator[tuple[str, str]]:
        for element in made.elements:
            for parameter in lacking(element, self.registry.support_kind(element.kind)):
                name = f"{element.label}.{parameter.name}"
                yield f"{name}: {parameter.allowed()}", f"add {SET} {name}=VALUE"

    def _misfits(self, made: SupportClass) -> Iterator[Misfit]:
        for element in made.elements:
            kind = self.registry.support_kind(element.kind)
            try:
                found = tuple(kind.misfits(element, self.smallest_radius_m))
            except (Exception, SystemExit) as error:  # a stranger's plugin may raise anything
                failed = f"the plugin of {kind.name} failed with {describe(error)}"
                raise PluginError(f"{element.label} cannot be judged: {failed}") from error
            yield from found
        for fault in class_faults(made.elements, made.advance_m_per_day, self.registry):
            yield Misfit(fault.key, fault.message, fault.fix)

    def _idle(self, asked: Asked) -> None:
        """Tell what is held and has no use in anything that is tried."""
        for change in asked.held:
            used = False
            for variation in asked.variations:
                for value in variation.values:
                    changes = (*asked.beside(variation), variation.change(value))
                    _, idle = changed(self.chosen, changes, self.registry, self.words)
                    used = used or (change in changes and change not in idle)
            if not used and all(change.name == one.name for one in asked.variations):
                message = f"holds {quoted(change.text)}, which {VARY} changes"
                self._tell(SET, message, "what holds while something else varies", "leave it out")
            elif not used:
                self._tell_idle(SET, change.element, change.parameter, change.text)

    def _tell_idle(self, option: str, element: str, wanted: str, text: str) -> None:
        kinds = {one.label: one.kind for one in self.chosen.elements}
        kind = self.registry.support_kind(kinds[element])
        (parameter,) = [one for one in kind.parameters if one.name == wanted]
        other, words = parameter.only_if or ("", ())
        message = f"holds {quoted(text)}, which has no use in what is tried"
        allowed = f"{wanted} only where {other} is {' or '.join(words)}"
        fix = f"add {SET} {element}.{other}={words[0] if words else ''}, or leave it out"
        self._tell(option, message, allowed, fix)

    def _unfit(self, variation: Variation, why: str, misfit: Misfit) -> None:
        message = f"holds {quoted(variation.text)}, {why}"
        fix = f"{misfit.parameter} {misfit.message}; {misfit.fix}"
        self._tell(VARY, message, "values that fit", fix)

    def _refuse(self, option: str, text: str, what: str, allowed: str, fix: str) -> None:
        message = f"holds {quoted(text)}, which has no {what} that can be used"
        self._tell(option, message, allowed, fix)

    def _tell(self, option: str, message: str, allowed: str, fix: str) -> None:
        self.problems.found.append(Problem(OPTIONS, message, fix, name=option, allowed=allowed))


def _within(parameter: Parameter, value: float) -> bool:
    return bool(np.all(parameter.limits.contain(np.array([value]))))


def _meant(name: str, known: Iterable[str]) -> str:
    hint = suggestion(name, list(known))
    return f"did you mean {quoted(hint)}?" if hint else "name one of them"
