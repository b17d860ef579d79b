"""The use case "what would do": for sections without an adequate class, one parameter of one
class at a time is varied within the user's bounds, until the class is adequate."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass, replace
from pathlib import Path
from types import MappingProxyType

import numpy as np

from tunnelcalc.arrays import Array
from tunnelcalc.errors import ExitCode, InputError, Problem, Where
from tunnelcalc.inputs.project_file import project_folder, read_project
from tunnelcalc.inputs.support_classes import ADVANCE, INSTALLED_AT
from tunnelcalc.one_section import class_number
from tunnelcalc.outputs.cells import number_text, write_table
from tunnelcalc.outputs.run_folder import Target, part_folder, sync_folder
from tunnelcalc.pipeline.chain import section_stages
from tunnelcalc.pipeline.plan import plan_classes
from tunnelcalc.pipeline.stage import Stage, check_chain
from tunnelcalc.plugin.registry import Registry
from tunnelcalc.project import Element, Project, SupportClass
from tunnelcalc.schedule.selection import NONE_ADEQUATE
from tunnelcalc.sections import Sections
from tunnelcalc.text import as_number, quoted, suggestion
from tunnelcalc.vocabulary import Limits

TUNED = "tuned"
STEPS = 24
"""Values tried over the stated range, evenly spaced, ends included."""
HALVINGS = 20
VARY = "--vary"
OPTIONS = Where("command line")
OF_CLASS = {"installed_at_m": (INSTALLED_AT, "m"), "advance_m_per_day": (ADVANCE, "m/day")}
HEADER = (
    "chainage_m",
    "ground_unit",
    "support_class",
    "element",
    "parameter",
    "unit",
    "value_now",
    "lowest_tried",
    "highest_tried",
    "adequate_from",
    "adequate_to",
    "verdict",
)
TRADE_OFF = (
    "chainage_m",
    "support_class",
    "element",
    "parameter",
    "unit",
    "parameter_value",
    "factor_of_safety",
    "supported_closure_pct",
    "missing_pressure_mpa",
    "adequate",
)


@dataclass(frozen=True, slots=True)
class Variation:
    """A parameter to vary: of an element, or of the class where `element` is empty."""

    element: str
    parameter: str
    unit: str
    lowest: float
    highest: float
    whole: bool = False

    def values(self) -> Array:
        """The values that are tried."""
        values = np.linspace(self.lowest, self.highest, STEPS)
        return np.unique(np.round(values)) if self.whole else values


@dataclass(frozen=True, slots=True)
class Advice:
    """What a variation does for one section: the range of values that are adequate, NaN where
    none in the stated range is."""

    position: int
    variation: Variation
    adequate_from: float
    adequate_to: float

    @property
    def helps(self) -> bool:
        return self.adequate_from == self.adequate_from


@dataclass(frozen=True, slots=True)
class Tuned:
    """Where the advice is written, what it says, and how it ends."""

    folder: Path
    project: Project
    support_class: str
    advice: tuple[Advice, ...]
    sections: Sections
    exit_code: ExitCode


def tune(
    path: Path,
    registry: Registry,
    vary: Sequence[str],
    *,
    class_name: str | None = None,
    out: Path | None = None,
) -> Tuned:
    """Vary parameters of a class on every section that no class satisfies.

    `vary` are texts `ELEMENT.PARAMETER=LOW:HIGH`, or `PARAMETER=LOW:HIGH` for the class's own
    distance of installation and rate of advance. Without a name the class is the heaviest.
    Raises `InputError`.
    """
    project = read_project(path, registry)
    number = len(project.support_classes) - 1
    if class_name is not None:
        number = class_number(project, class_name)
    chosen = project.support_classes[number]
    variations = [_variation(text, chosen, registry) for text in vary]
    stages = section_stages(project, registry, plan_classes(project, registry))
    sections = _computed(project.ground, stages)
    failing = sections.take(np.flatnonzero(sections["required_class"] == NONE_ADEQUATE))
    ground = project.ground.take(np.flatnonzero(sections["required_class"] == NONE_ADEQUATE))
    trial = _Trial(project, registry, chosen, ground)
    own_place = project_folder(path) / TUNED / chosen.name
    target = Target(project_folder(path), out or own_place, by_option=out is not None)
    possible = {variation: _possible(trial, variation) for variation in variations}
    with part_folder(target) as part:
        advice: list[Advice] = []
        curves: list[list[str]] = []
        for variation in variations if failing.count else ():
            values = possible[variation]
            tried = [trial.of(variation, float(value)) for value in values]
            advice += _advice(trial, variation, values, tried)
            curves += _curve_rows(chosen, variation, values, tried)
        rows = [_row(chosen, failing, one) for one in advice]
        write_table(part / "advice.csv", HEADER, rows)
        write_table(part / "trade_off.csv", TRADE_OFF, curves)
        sync_folder(part)
        folder = target.place(part)
        sync_folder(target.parent)
    return Tuned(folder, project, chosen.name, tuple(advice), failing, ExitCode.COMPLETE)


def _possible(trial: _Trial, variation: Variation) -> Array:
    """The values that fit the opening and the element's other parameters. Raises `InputError`
    where none does."""
    values = variation.values()
    misfits = [trial.misfit(variation, float(value)) for value in values]
    fitting = np.array([not misfit for misfit in misfits])
    if not np.any(fitting):
        name = f"{variation.element}.{variation.parameter}".lstrip(".")
        raise _refused(name, "values that fit", misfits[0])
    return values[fitting]


def _computed(ground: Sections, stages: Sequence[Stage]) -> Sections:
    check_chain(stages, ground)
    sections = ground
    for stage in stages:
        sections = stage(sections)
    return sections


@dataclass(frozen=True, slots=True)
class _Trial:
    """A class on the failing sections, with one of its parameters changed."""

    project: Project
    registry: Registry
    chosen: SupportClass
    ground: Sections

    def of(self, variation: Variation, value: float, rows: Array | None = None) -> Sections:
        changed = _changed(self.chosen, variation, value)
        project = replace(self.project, support_classes=(changed,))
        stages = section_stages(project, self.registry, plan_classes(project, self.registry))
        ground = self.ground if rows is None else self.ground.take(rows)
        return _computed(ground, stages)

    def misfit(self, variation: Variation, value: float) -> str:
        """Why a value does not fit; empty where it does."""
        radius = float(np.min(self.project.ground["radius_m"]))
        for element in _changed(self.chosen, variation, value).elements:
            kind = self.registry.support_kind(element.kind)
            for found in kind.misfits(element, radius):
                return f"{found.parameter} {found.message}; {found.fix}"
        return ""

    def adequate(self, variation: Variation, value: float, row: int) -> bool:
        found = self.of(variation, value, np.array([row]))
        return bool(found["class_adequate"][0, 0])


def _changed(chosen: SupportClass, variation: Variation, value: float) -> SupportClass:
    if not variation.element:
        if variation.parameter == "advance_m_per_day":
            return replace(chosen, advance_m_per_day=value)
        shift = value - min(element.installed_at_m for element in chosen.elements)
        moved = tuple(
            replace(element, installed_at_m=element.installed_at_m + shift)
            for element in chosen.elements
        )
        return replace(chosen, elements=moved)
    elements = tuple(
        _with_value(element, variation.parameter, value)
        if element.label == variation.element
        else element
        for element in chosen.elements
    )
    return replace(chosen, elements=elements)


def _with_value(element: Element, parameter: str, value: float) -> Element:
    if parameter == "installed_at_m":
        return replace(element, installed_at_m=value)
    return replace(element, values=MappingProxyType({**element.values, parameter: value}))


def _advice(
    trial: _Trial, variation: Variation, values: Array, tried: Sequence[Sections]
) -> Iterator[Advice]:
    """For each section the first stretch of values that are adequate, its ends found by halving:
    what lies between two values that were tried need not be seen."""
    adequate = np.array([found["class_adequate"][:, 0] for found in tried])
    for row in range(adequate.shape[1]):
        at = np.flatnonzero(adequate[:, row])
        if not at.size:
            yield Advice(row, variation, np.nan, np.nan)
            continue
        first = int(at[0])
        after = np.flatnonzero(~adequate[first:, row])
        last = first + int(after[0]) - 1 if after.size else len(values) - 1
        low, high = float(values[first]), float(values[last])
        if variation.whole:
            yield Advice(row, variation, low, high)
            continue
        if first > 0:
            low = _edge(trial, variation, row, low, float(values[first - 1]))
        if last < len(values) - 1:
            high = _edge(trial, variation, row, high, float(values[last + 1]))
        yield Advice(row, variation, low, high)


def _edge(trial: _Trial, variation: Variation, row: int, good: float, bad: float) -> float:
    """The last adequate value between one that is and one that is not."""
    for _ in range(HALVINGS):
        middle = 0.5 * (good + bad)
        if trial.adequate(variation, middle, row):
            good = middle
        else:
            bad = middle
    return good


def _row(chosen: SupportClass, failing: Sections, advice: Advice) -> list[str]:
    variation, row = advice.variation, advice.position
    now = _value_now(chosen, variation)
    verdict = "adequate within the range" if advice.helps else "none in range"
    return [
        number_text(float(failing["chainage_m"][row])),
        str(failing["ground_unit"][row]),
        chosen.name,
        variation.element,
        variation.parameter,
        variation.unit,
        number_text(now),
        number_text(variation.lowest),
        number_text(variation.highest),
        number_text(advice.adequate_from),
        number_text(advice.adequate_to),
        verdict,
    ]


def _value_now(chosen: SupportClass, variation: Variation) -> float:
    if not variation.element:
        if variation.parameter == "advance_m_per_day":
            return chosen.advance_m_per_day
        return min(element.installed_at_m for element in chosen.elements)
    (element,) = [one for one in chosen.elements if one.label == variation.element]
    if variation.parameter == "installed_at_m":
        return element.installed_at_m
    return element.number(variation.parameter)


def _curve_rows(
    chosen: SupportClass, variation: Variation, values: Array, tried: Sequence[Sections]
) -> Iterator[list[str]]:
    for row in range(tried[0].count):
        for value, found in zip(values.tolist(), tried, strict=True):
            yield [
                number_text(float(found["chainage_m"][row])),
                chosen.name,
                variation.element,
                variation.parameter,
                variation.unit,
                number_text(value),
                number_text(float(found["class_factor_of_safety"][row, 0])),
                number_text(float(found["class_closure_pct"][row, 0])),
                number_text(float(found["class_missing_pressure_mpa"][row, 0])),
                "yes" if bool(found["class_adequate"][row, 0]) else "no",
            ]


def _variation(text: str, chosen: SupportClass, registry: Registry) -> Variation:
    """The meaning of `ELEMENT.PARAMETER=LOW:HIGH`."""
    name, equals, ends = text.partition("=")
    element, dot, parameter = name.strip().rpartition(".")
    bounds = [as_number(end) for end in ends.split(":")]
    lowest, highest = bounds if len(bounds) == 2 else (None, None)
    if not equals or lowest is None or highest is None or not lowest < highest:
        raise _refused(text, "ELEMENT.PARAMETER=LOW:HIGH", "write two numbers, the lower first")
    if not chosen.elements:
        raise _refused(text, "a class with elements", "name another with --class", "element")
    if not dot:
        known = OF_CLASS
    else:
        labels = [one.label for one in chosen.elements]
        if element not in labels:
            raise _refused(text, " or ".join(labels), _meant(element, labels), "element")
        kind = registry.support_kind(chosen.elements[labels.index(element)].kind)
        stated = chosen.elements[labels.index(element)].values
        known = {"installed_at_m": OF_CLASS["installed_at_m"]} | {
            p.name: (p.limits, p.unit)
            for p in kind.parameters
            if not p.choices and p.name in stated
        }
    if parameter not in known:
        raise _refused(text, ", ".join(known), _meant(parameter, known), "parameter")
    limits, unit = known[parameter]
    if not bool(np.all(limits.contain(np.array([lowest, highest])))):
        raise _refused(text, limits.describe(unit), "keep the bounds within the allowed range")
    return Variation(element, parameter, unit, lowest, highest, limits.whole)


def _meant(name: str, known: Sequence[str] | dict[str, tuple[Limits, str]]) -> str:
    hint = suggestion(name, list(known))
    return f"did you mean {quoted(hint)}?" if hint else "name one of them"


def _refused(text: str, allowed: str, fix: str, what: str = "range") -> InputError:
    message = f"holds {quoted(text)}, which has no {what} that can be used"
    return InputError((Problem(OPTIONS, message, fix, name=VARY, allowed=allowed),))
