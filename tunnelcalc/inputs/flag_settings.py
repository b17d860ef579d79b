"""The key `flags`: what a project says of the flags on validity."""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass

import numpy as np

from tunnelcalc.arrays import SAME_PLACE_M
from tunnelcalc.inputs.values import Reader
from tunnelcalc.plugin.contract import ValidityFlag
from tunnelcalc.sections import Sections
from tunnelcalc.text import quoted
from tunnelcalc.validity import (
    NOT_ASSESSED_RULES,
    YES_OR_NO,
    FlagSettings,
    Level,
    Override,
    Side,
    Threshold,
    ThresholdSetting,
    in_force,
    override_numbers,
)
from tunnelcalc.vocabulary import UNLIMITED

KEY, NOT_ASSESSED, THRESHOLDS, OVERRIDES, ORIGIN = (
    "flags",
    "not_assessed",
    "thresholds",
    "overrides",
    "origin",
)


@dataclass(frozen=True, slots=True)
class ReadSettings:
    """Settings, and the entry that each override was read from."""

    settings: FlagSettings
    entries: tuple[Reader, ...]


def read_flag_settings(reader: Reader, flags: Sequence[ValidityFlag]) -> ReadSettings:
    """Read `flags`; without it nothing is edited and nothing overridden."""
    table = reader.table_of(KEY, required=False)
    if table is None:
        return ReadSettings(FlagSettings(), ())
    rule = table.choice(NOT_ASSESSED, NOT_ASSESSED_RULES, required=False)
    thresholds = tuple(_thresholds(table, flags))
    overrides = list(_overrides(table, [flag.name for flag in flags]))
    table.finish()
    settings = FlagSettings(
        rule or NOT_ASSESSED_RULES[0], thresholds, tuple(override for override, _ in overrides)
    )
    return ReadSettings(settings, tuple(entry for _, entry in overrides))


def check_overrides(read: ReadSettings, sections: Sections, reader: Reader) -> None:
    """Tell overrides that leave the alignment, and those in which no section lies."""
    for override, entry in zip(read.settings.overrides, read.entries, strict=True):
        if _leaves(override, entry, sections):
            continue
        numbers = override_numbers((override,), sections["from_m"], sections["to_m"])
        if np.all(numbers < 0):
            reader.problems.add(
                entry.where,
                f"holds no section between {override.from_m:.10g} and {override.to_m:.10g} m",
                name=f'override of "{override.flag}"',
                allowed="ends between which at least one section lies wholly",
                fix="widen it to whole sections, or remove it",
            )


def _leaves(override: Override, entry: Reader, sections: Sections) -> bool:
    """Tell an override that reaches beyond the alignment: it would accept what nobody has seen."""
    first, last = float(sections["from_m"][0]), float(sections["to_m"][-1])
    outside = {
        "from_m": ("before the start", override.from_m < first - SAME_PLACE_M),
        "to_m": ("beyond the end", override.to_m > last + SAME_PLACE_M),
    }
    begins, ends = entry.notation.ends(first, last)
    for key, (side, leaves) in outside.items():
        if leaves:
            entry.complain(
                key,
                f"holds {quoted(entry.text(key) or '')}, which lies {side} of the alignment",
                allowed=f"a chainage from {begins} to {ends}",
                fix="correct it, or write the end of the alignment",
            )
    return any(leaves for _, leaves in outside.values())


def editable(flag: ValidityFlag) -> Mapping[str, Threshold]:
    """The thresholds of a flag that a project may edit, by key."""
    if flag.unit == YES_OR_NO:
        return {}
    return {threshold.key: threshold for threshold in flag.thresholds}


def _thresholds(table: Reader, flags: Sequence[ValidityFlag]) -> Iterator[ThresholdSetting]:
    edited = table.table_of(THRESHOLDS, required=False)
    if edited is None:
        return
    for flag in flags:
        if editable(flag):
            edited.known[flag.name] = None
            yield from _of_flag(edited, flag)
        elif edited.has(flag.name):
            edited.known[flag.name] = None
            edited.complain(
                flag.name,
                "is a flag of yes or no: it has no threshold",
                allowed="a flag that compares a value with a threshold",
                fix="remove it; where the flag may be accepted, say so under overrides",
            )
    edited.finish()


def _of_flag(edited: Reader, flag: ValidityFlag) -> Iterator[ThresholdSetting]:
    entry = edited.table_of(flag.name, required=False)
    if entry is None:
        return
    sides = editable(flag)
    values = {key: entry.number(key, UNLIMITED, flag.unit, required=False) for key in sides}
    origin = entry.text(ORIGIN, "where the value comes from", required=False) or ""
    stated = any(entry.has(key) for key in sides)
    unknown = [key for key in entry.table.entries if key not in (*sides, ORIGIN)]
    entry.finish()
    if not stated and not unknown:
        edited.complain(
            flag.name,
            "states no threshold",
            allowed=", ".join(sides),
            fix="state a threshold, or remove the entry",
        )
    found = [
        ThresholdSetting(flag.name, sides[key].level, sides[key].side, value, origin)
        for key, value in values.items()
        if value is not None
    ]
    _check_order(entry, flag, found)
    yield from found


def _check_order(entry: Reader, flag: ValidityFlag, found: Sequence[ThresholdSetting]) -> None:
    """Outside lies beyond advisory, and what is below lies under what is above."""
    settings = FlagSettings(thresholds=tuple(found))
    force = {(t.level, t.side): t for t in in_force(flag.name, flag.thresholds, settings)}
    pairs = [
        ((Level.OUTSIDE, Side.BELOW), (Level.ADVISORY, Side.BELOW)),
        ((Level.ADVISORY, Side.ABOVE), (Level.OUTSIDE, Side.ABOVE)),
        *(((one, Side.BELOW), (other, Side.ABOVE)) for one in Level for other in Level),
    ]
    for lower, upper in pairs:
        if lower not in force or upper not in force:
            continue
        low, high = force[lower], force[upper]
        if low.value <= high.value:
            continue
        stated = next((key for key in (high.key, low.key) if entry.has(key)), None)
        if stated is None:
            continue
        other, word = (low, "at least") if stated == high.key else (high, "at most")
        entry.complain(
            stated,
            f"is {force[lower if stated == low.key else upper].value:g}, out of order with "
            f"{other.key}, which is {other.value:g}",
            allowed=f"{word} {other.value:g}",
            fix="state both, outside beyond advisory",
        )
        return


def _overrides(table: Reader, names: Sequence[str]) -> Iterator[tuple[Override, Reader]]:
    before: list[Override] = []
    for entry in table.tables_of(OVERRIDES, required=False):
        flag = entry.choice("flag", names)
        start, end = entry.chainage("from_m"), entry.chainage("to_m")
        person = entry.text("person", "the name of who accepts the flag")
        reason = entry.text("reason", "why the flag is accepted")
        entry.finish()
        if flag is None or start is None or end is None or person is None or reason is None:
            continue
        override = Override(flag, start, end, person, reason)
        if end - start <= SAME_PLACE_M:
            entry.complain(
                "to_m",
                f"is {end:.10g} m along the axis, not above from_m, which is {start:.10g}",
                allowed="an end beyond from_m",
                fix="write the lower chainage as from_m",
            )
        elif any(_overlap(override, other) for other in before):
            entry.complain(
                "from_m",
                f"overlaps another override of {quoted(flag)}",
                allowed="one override a flag and section",
                fix="end one where the other begins",
            )
        else:
            before.append(override)
            yield override, entry


def _overlap(one: Override, other: Override) -> bool:
    apart = one.to_m - SAME_PLACE_M <= other.from_m or other.to_m - SAME_PLACE_M <= one.from_m
    return one.flag == other.flag and not apart
