"""Advice and trade-off as tables."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from pathlib import Path

import numpy as np

from tunnelcalc.outputs.cells import number_text, write_table
from tunnelcalc.sections import Sections
from tunnelcalc.trade_off import TradeOff
from tunnelcalc.tune.advice import Advice
from tunnelcalc.tune.changes import Value

TABLE_DIGITS = 10
"""As in every table."""
ADVICE_HEADER = (
    "chainage_m",
    "ground_unit",
    "support_class",
    "element",
    "parameter",
    "unit",
    "value_now",
    "lowest_tried",
    "highest_tried",
    "words_tried",
    "held",
    "adequate_from",
    "adequate_to",
    "adequate_words",
    "verdict",
)
TRADE_OFF_HEADER = (
    "chainage_m",
    "support_class",
    "element",
    "parameter",
    "unit",
    "parameter_value",
    "factor_of_safety",
    "supported_closure_pct",
    "missing_pressure_mpa",
    "governing_check",
    "adequate",
)


def write_tables(
    folder: Path, ground: Sections, advice: Sequence[Advice], trade_offs: Sequence[TradeOff]
) -> tuple[str, ...]:
    """Write both; returns their names."""
    write_table(folder / "advice.csv", ADVICE_HEADER, [_advice_row(ground, one) for one in advice])
    rows = [row for found in trade_offs for row in _trade_off_rows(ground, found)]
    write_table(folder / "trade_off.csv", TRADE_OFF_HEADER, rows)
    return ("advice.csv", "trade_off.csv")


def _advice_row(ground: Sections, advice: Advice) -> list[str]:
    found = advice.trade_off
    ends = ["", ""] if found.of_words else [_cell(found.tried[0]), _cell(found.tried[-1])]
    return [
        number_text(float(ground["chainage_m"][advice.position])),
        str(ground["ground_unit"][advice.position]),
        *_named(found),
        _cell(found.now),
        *ends,
        ";".join(map(str, found.tried)) if found.of_words else "",
        ";".join(found.held),
        *advice.ends(TABLE_DIGITS, _to_digits),
        ";".join(advice.words),
        advice.verdict,
    ]


def _trade_off_rows(ground: Sections, found: TradeOff) -> Iterator[list[str]]:
    for row in range(ground.count):
        for index, value in enumerate(found.tried):
            at = index, row
            told = "yes" if found.adequate[at] else "no"
            numbers = (found.factor_of_safety, found.closure_pct, found.missing_pressure_mpa)
            yield [
                number_text(float(ground["chainage_m"][row])),
                *_named(found),
                _cell(value),
                *(number_text(float(column[at])) for column in numbers),
                str(found.governing[at]),
                told if found.evaluated[at] else "not_evaluated",
            ]


def _named(found: TradeOff) -> tuple[str, ...]:
    return (found.support_class, found.element, found.parameter, found.unit)


def _to_digits(value: float, digits: int) -> str:
    return f"{value:.{digits}g}" if value == value else ""


def _cell(value: Value | None) -> str:
    if isinstance(value, str):
        return value
    return number_text(np.nan if value is None else value)
