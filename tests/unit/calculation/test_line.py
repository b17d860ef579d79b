"""Lines of a sheet: what agrees with its formula, and what does not."""

from __future__ import annotations

import math

import pytest

from tunnelcalc.calculation.line import SheetBlock, SheetLine
from tunnelcalc.calculation.working import Working


def line(formula: str, result: float, symbol: str = "y", **inputs: float) -> SheetLine:
    return SheetLine(symbol, "invented", formula, inputs, result)


def test_a_line_agrees_with_its_formula():
    assert line("2*x", 6.0, x=3.0).recomputed() == (6.0, 6.0)
    assert not line("2*x", 6.0, x=3.0).disagrees()


@pytest.mark.parametrize("off", [1e-9, -1e-9, 1e-6, 1.0, math.nan])
def test_a_result_that_is_a_little_off_disagrees(off):
    assert line("2*x", 6.0 + off * 6, x=3.0).disagrees()


def test_a_given_number_has_nothing_to_disagree_with():
    assert not line("", 6.0).disagrees()


def test_a_formula_without_its_numbers_disagrees():
    assert line("2*x", 6.0).disagrees()
    assert line("__import__('os')", 6.0).disagrees()


def test_a_root_is_put_in_and_must_satisfy_its_equation():
    root = math.sqrt(2)
    assert not line("x^2 = a", root, "x", x=root, a=2.0).disagrees()
    assert line("x^2 = a", root * (1 + 1e-7), "x", x=root * (1 + 1e-7), a=2.0).disagrees()
    assert line("x^2 = a", 1.0, "x", x=root, a=2.0).disagrees()


def test_the_rounding_of_nearly_equal_numbers_is_no_disagreement():
    # The difference keeps four digits of the sixteen: a change in the last digit of the inputs.
    near = 1.0 + 1e-12
    assert not line("a - b", 1.0e-12, a=near, b=1.0).disagrees()
    assert line("a - b", 1.0e-11, a=near, b=1.0).disagrees()


def test_no_value_agrees_with_no_value_alone():
    assert not line("x", math.nan, x=math.nan).disagrees()
    assert line("x", 1.0, x=math.nan).disagrees()


def test_a_working_puts_in_what_came_before():
    work = Working({"a": 2.0}, "book")
    work.add("b", "double", "2*a", 4.0, "m")
    work.add("c", "sum", "a + b", 6.0, source="other book", rename={"c": "d", "b": "b"})
    first, second = work.lines
    assert first == SheetLine("b", "double", "2*a", {"a": 2.0}, 4.0, "m", "book")
    assert second == SheetLine("d", "sum", "a + b", {"a": 2.0, "b": 4.0}, 6.0, "", "other book")


def test_a_block_lists_the_lines_that_disagree():
    wrong = line("2*x", 7.0, x=3.0)
    assert SheetBlock("t", (line("2*x", 6.0, x=3.0), wrong)).disagreements == (wrong,)


def test_other_names_stand_in_symbol_formula_and_numbers():
    line = SheetLine("K", "stiffness", "Ec*t/R^2", {"Ec": 6.0, "t": 2.0, "R": 2.0}, 3.0)
    other = line.with_names({"K": "K_1a", "Ec": "Ec_1a"})
    assert (other.symbol, other.formula) == ("K_1a", "Ec_1a*t/R^2")
    assert other.inputs == {"Ec_1a": 6.0, "t": 2.0, "R": 2.0}
    assert not other.disagrees()
