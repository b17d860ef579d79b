"""How values stand in a table."""

from __future__ import annotations

import csv
import io
from pathlib import Path

import numpy as np
import pytest

from tunnelcalc.outputs.cells import number_text, number_texts, text_cell, write_table


@pytest.mark.parametrize(
    ("value", "text"),
    [
        (0.1 + 0.2, "0.3"),
        (1 / 3, "0.3333333333"),
        (123456.7891234, "123456.7891"),
        (9999999.999, "9999999.999"),
        (6.02214076e23, "6.02214076e+23"),
        (-0.0, "0"),
        (0.0, "0"),
        (float("nan"), ""),
        (5.0, "5"),
    ],
)
def test_a_number_has_ten_significant_digits_and_no_idle_ones(value: float, text: str):
    assert number_text(value) == text
    assert number_texts(np.array([value, 1.0])) == [text, "1"]


@pytest.mark.parametrize(
    "text", ["plain", "a,b", 'say "hi"', "two\nlines", "two\rlines", "", " x "]
)
def test_a_text_is_read_back_as_it_was(text: str):
    line = text_cell("first") + "," + text_cell(text) + "\n"
    assert next(csv.reader(io.StringIO(line, newline=""))) == ["first", text]


def test_a_small_table_is_read_back_as_it_was(tmp_path: Path):
    table = [["class", "length"], ["C 1, heavy", "12.5"], ["Füße", ""]]
    write_table(tmp_path / "t.csv", table[0], table[1:])
    content = (tmp_path / "t.csv").read_bytes()
    assert b"\r" not in content
    assert list(csv.reader(io.StringIO(content.decode("utf-8"), newline=""))) == table
