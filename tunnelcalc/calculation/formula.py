"""Formulas as a checker would write them, evaluated without running anything else.

A formula has + - * / ^ and brackets, names, numbers, the functions below, and
`integral(x, from, to, expression)`. It is read into a tree, of which only these parts are
accepted: nothing that is written in a formula can reach the program or the machine.
"""

from __future__ import annotations

import ast
import math
import operator
from collections.abc import Callable, Mapping
from functools import lru_cache

FUNCTIONS: Mapping[str, Callable[..., float]] = {
    "exp": math.exp,
    "ln": math.log,
    "sqrt": math.sqrt,
    "sin": math.sin,
    "cos": math.cos,
    "tan": math.tan,
    "asin": math.asin,
    "radians": math.radians,
    "degrees": math.degrees,
    "abs": abs,
}
"""Functions of one number."""

CHOOSING: Mapping[str, Callable[..., float]] = {"min": min, "max": max}
"""Functions of two numbers or more."""

INTEGRAL = "integral"
ROUND = "round"
"""Of a number, to a number of decimals."""
CONSTANTS: Mapping[str, float] = {"pi": math.pi}
"""Names with a value of their own."""

LONGEST = 2000
"""Letters. No formula of a checker is longer; a longer one could exhaust the machine."""
QUADRATURE_ERROR = 1e-12
QUADRATURE_PIECES = 400

_OPERATORS: Mapping[type[ast.operator], Callable[[float, float], float]] = {
    ast.Add: operator.add,
    ast.Sub: operator.sub,
    ast.Mult: operator.mul,
    ast.Div: operator.truediv,
    ast.Pow: operator.pow,
}


class FormulaError(ValueError):
    """A text is no formula, lacks a value, or has no result."""


def sides(formula: str) -> tuple[str, ...]:
    """The one side of an expression, or the two of an equation."""
    parts = tuple(part.strip() for part in formula.split("="))
    if len(parts) > 2 or not all(parts):
        raise FormulaError(f"{formula!r} is neither an expression nor an equation")
    return parts


def names(formula: str) -> tuple[str, ...]:
    """The names in a formula that need a value, in the order in which they stand."""
    found: dict[str, None] = {}
    for side in sides(formula):
        _collect(_tree(side), frozenset(), found)
    return tuple(found)


def evaluate(expression: str, inputs: Mapping[str, float]) -> float:
    """The value of an expression. Raises `FormulaError` where there is none."""
    try:
        value = _value(_tree(expression), inputs)
    except FormulaError:
        raise
    except (ArithmeticError, ValueError, RecursionError) as error:
        raise FormulaError(f"{expression!r} has no value: {error}") from error
    return value


def renamed(formula: str, new_names: Mapping[str, str]) -> str:
    """The formula with other names for some quantities."""
    pieces: list[str] = []
    word = ""
    for letter in f"{formula}\n":
        if letter.isalnum() or letter == "_":
            word += letter
            continue
        pieces.append(new_names.get(word, word) + letter)
        word = ""
    return "".join(pieces)[:-1]


@lru_cache(maxsize=4096)
def _tree(expression: str) -> ast.expr:
    """The checked tree of an expression."""
    if len(expression) > LONGEST:
        raise FormulaError("the formula is too long")
    if "**" in expression:
        raise FormulaError("a power is written a^b")
    try:
        tree = ast.parse(expression.replace("^", "**").strip(), mode="eval").body
        _check(tree)
    except FormulaError:
        raise
    except (SyntaxError, ValueError, RecursionError, MemoryError) as error:
        raise FormulaError(f"{expression!r} is no formula: {error}") from error
    return tree


def _check(node: ast.expr) -> None:
    match node:
        case ast.Constant(value=value) if type(value) in (int, float):
            pass
        case ast.Name():
            pass
        case ast.UnaryOp(op=ast.USub() | ast.UAdd(), operand=operand):
            _check(operand)
        case ast.BinOp(left=left, op=op, right=right) if type(op) in _OPERATORS:
            _check(left)
            _check(right)
        case ast.Call(func=ast.Name(id=name), args=arguments, keywords=[]):
            _check_call(name, arguments)
        case _:
            raise FormulaError(f"{ast.unparse(node)!r} may not stand in a formula")


def _check_call(name: str, arguments: list[ast.expr]) -> None:
    if name in FUNCTIONS:
        fits = len(arguments) == 1
    elif name in CHOOSING:
        fits = len(arguments) > 1
    elif name == ROUND:
        fits = len(arguments) == 2 and isinstance(arguments[1], ast.Constant)
    elif name == INTEGRAL:
        fits = len(arguments) == 4 and isinstance(arguments[0], ast.Name)
    else:
        raise FormulaError(f"there is no function {name!r}")
    if not fits:
        raise FormulaError(f"{name} has a wrong number of arguments")
    for argument in arguments:
        _check(argument)


def _collect(node: ast.expr, bound: frozenset[str], found: dict[str, None]) -> None:
    """Names in order; `bound` are variables of integration."""
    match node:
        case ast.Name(id=name):
            if name not in bound and name not in CONSTANTS:
                found.setdefault(name)
        case ast.UnaryOp(operand=operand):
            _collect(operand, bound, found)
        case ast.BinOp(left=left, right=right):
            _collect(left, bound, found)
            _collect(right, bound, found)
        case ast.Call(func=ast.Name(id="integral"), args=[ast.Name(id=variable), *ends, body]):
            for end in ends:
                _collect(end, bound, found)
            _collect(body, bound | {variable}, found)
        case ast.Call(args=arguments):
            for argument in arguments:
                _collect(argument, bound, found)


def _value(node: ast.expr, inputs: Mapping[str, float]) -> float:
    match node:
        case ast.Constant(value=value):
            return float(value)  # type: ignore[arg-type]
        case ast.Name(id=name):
            if name in inputs:
                return float(inputs[name])
            if name in CONSTANTS:
                return CONSTANTS[name]
            raise FormulaError(f"{name} has no value")
        case ast.UnaryOp(op=op, operand=operand):
            value = _value(operand, inputs)
            return -value if isinstance(op, ast.USub) else value
        case ast.BinOp(left=left, op=op, right=right):
            result = _OPERATORS[type(op)](_value(left, inputs), _value(right, inputs))
            if isinstance(result, complex):
                raise FormulaError("a root of a negative number")
            return result
        case ast.Call(func=ast.Name(id=name), args=arguments):
            return _called(name, arguments, inputs)
        case _:
            raise FormulaError(f"{ast.unparse(node)!r} may not stand in a formula")


def _called(name: str, arguments: list[ast.expr], inputs: Mapping[str, float]) -> float:
    """The value of a function."""
    match arguments:
        case [ast.Name(id=variable), low, high, body] if name == INTEGRAL:
            return _integral(variable, _value(low, inputs), _value(high, inputs), body, inputs)
    values = [_value(argument, inputs) for argument in arguments]
    if any(math.isnan(value) for value in values):
        return math.nan  # min and max would depend on the order
    if name == ROUND:
        number, decimals = values
        return round(number, int(decimals))
    return float((FUNCTIONS[name] if name in FUNCTIONS else CHOOSING[name])(*values))


def _integral(
    variable: str, low: float, high: float, body: ast.expr, inputs: Mapping[str, float]
) -> float:
    from scipy.integrate import quad

    if not math.isfinite(low) or not math.isfinite(high):
        raise FormulaError("an integral needs finite ends")
    found, *_ = quad(
        lambda x: _value(body, {**inputs, variable: x}),
        low,
        high,
        epsabs=0,
        epsrel=QUADRATURE_ERROR,
        limit=QUADRATURE_PIECES,
        full_output=1,  # keeps it silent: what is not reached shows in the comparison
    )
    return float(found)
