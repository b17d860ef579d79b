"""How values stand in a table: the same text for the same value, always."""

from __future__ import annotations

import csv
import io
import os
from collections.abc import Iterable, Sequence
from functools import lru_cache
from pathlib import Path

from tunnelcalc.arrays import Array

NUMBER_FORMAT = "%.10g"
"""Ten significant digits, two more than promised."""


def number_text(value: float) -> str:
    """A number with ten significant digits; empty for NaN."""
    return NUMBER_FORMAT % (value + 0.0) if value == value else ""


def number_texts(values: Array) -> list[str]:
    """Numbers (n,) as text. Adding 0 turns a negative zero into zero."""
    return [NUMBER_FORMAT % v if v == v else "" for v in (values + 0.0).tolist()]


@lru_cache(maxsize=4096)
def text_cell(text: str) -> str:
    """Text as a CSV cell, in quotes where it must be. The same few texts stand in many rows."""
    if not any(character in text for character in ',"\r\n'):
        return text
    return '"' + text.replace('"', '""') + '"'


def write_table(path: Path, header: Sequence[str], rows: Iterable[Sequence[str]]) -> None:
    """Write a small CSV table and make sure that it is on the disk."""
    text = io.StringIO()
    writer = csv.writer(text, lineterminator="\n")
    writer.writerow(header)
    writer.writerows(rows)
    with path.open("w", encoding="utf-8", newline="") as stream:
        stream.write(text.getvalue())
        stream.flush()
        os.fsync(stream.fileno())
