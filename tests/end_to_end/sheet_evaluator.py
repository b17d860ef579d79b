"""Formulas of a sheet by Python's own parser, `math` and scipy: an evaluator that is not ours."""

from __future__ import annotations

import ast
import math
from collections.abc import Mapping

from scipy.integrate import quad

NAMES = {
    **{name: getattr(math, name) for name in ("exp", "sqrt", "sin", "cos", "tan", "asin")},
    **{name: getattr(math, name) for name in ("radians", "degrees", "pi")},
    "ln": math.log,
    "abs": abs,
    "min": min,
    "max": max,
    "round": round,
    "integral": lambda low, high, f: quad(f, low, high, epsabs=0, epsrel=1e-11, limit=500)[0],
}


class _Integrals(ast.NodeTransformer):
    """integral(x, a, b, f) becomes integral(a, b, lambda x: f)."""

    def visit_Call(self, node: ast.Call) -> ast.AST:
        self.generic_visit(node)
        if isinstance(node.func, ast.Name) and node.func.id == "integral":
            variable, low, high, body = node.args
            assert isinstance(variable, ast.Name)
            function = ast.parse(f"lambda {variable.id}: 0", mode="eval").body
            assert isinstance(function, ast.Lambda)
            function.body = body
            node.args = [low, high, function]
        return node


def value(expression: str, inputs: Mapping[str, float]) -> float:
    tree = ast.parse(expression.replace("^", "**"), mode="eval")
    tree = ast.fix_missing_locations(_Integrals().visit(tree))
    return float(eval(compile(tree, "formula", "eval"), {**NAMES, **inputs}))


def both_sides(formula: str, inputs: Mapping[str, float], result: float) -> tuple[float, float]:
    """What must be equal: the result and the formula, or the sides of an equation."""
    if " = " not in formula:
        return result, value(formula, inputs)
    left, right = formula.split(" = ")
    return value(left, inputs), value(right, inputs)
