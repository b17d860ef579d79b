"""Whether a support class is enough: demand against capacity, rules, and the closure limit."""

from __future__ import annotations

from collections.abc import Sequence
from enum import IntEnum
from typing import NamedTuple

import numpy as np

from tunnelcalc.arrays import Array


class Outcome(IntEnum):
    """Outcome of one check on one section. Only PASS lets a class be adequate."""

    PASS = 0
    FAIL = 1
    NOT_EVALUATED = 2


class CheckOutcome(NamedTuple):
    """Factor of safety (n,) [-], NaN where there is none, and `Outcome` (n,)."""

    factor_of_safety: Array
    outcome: Array


class ClassOutcome(NamedTuple):
    """Of one support class on n sections.

    `adequate` (n,) bool, `factor_of_safety` (n,) least of the load checks, NaN where none is
    loaded, and `governing` (n,): the position of the governing check, or the number of checks
    where the closure governs.
    """

    adequate: Array
    factor_of_safety: Array
    governing: Array


def load_check(demand: Array, capacity: Array, required_factor: float) -> CheckOutcome:
    """Judge a check that carries load, by its factor of safety.

    Parameters
    ----------
    demand, capacity : (n,) in one unit; NaN where the check could not be evaluated.
    required_factor : the least capacity / demand that passes. [-]

    Returns
    -------
    Factor and outcome. An unloaded element, demand 0, passes and has no factor; NaN never
    passes.

    Source
    ------
    Overall factor of safety: common practice, no source.
    """
    with np.errstate(over="ignore"):  # a vanishing demand: the factor is as good as none
        factor = np.divide(capacity, demand, out=np.full(demand.shape, np.nan), where=demand > 0)
    passed = (factor >= required_factor) | ((demand == 0) & np.isfinite(capacity))
    factor = np.where(np.isfinite(factor), factor, np.nan)
    return CheckOutcome(factor, _outcome(passed, demand, capacity))


def rule_check(demand: Array, capacity: Array) -> CheckOutcome:
    """Judge a rule that carries no load: it passes where demand <= capacity.

    Parameters
    ----------
    demand, capacity : (n,) in one unit; NaN where the rule could not be evaluated.

    Returns
    -------
    No factor (NaN) and the outcome.

    Source
    ------
    Definition; the project's factor of safety does not apply to rules.
    """
    return CheckOutcome(
        np.full(demand.shape, np.nan), _outcome(demand <= capacity, demand, capacity)
    )


def _outcome(passed: Array, demand: Array, capacity: Array) -> Array:
    evaluated = np.isfinite(demand) & np.isfinite(capacity)
    outcome = np.where(passed, Outcome.PASS, Outcome.FAIL)
    return np.where(evaluated, outcome, Outcome.NOT_EVALUATED).astype(np.int8)


def class_outcome(
    factors: Sequence[Array],
    outcomes: Sequence[Array],
    loads: Sequence[bool],
    counting: Sequence[Array],
    closure_pct: Array,
    largest_closure_pct: float,
) -> ClassOutcome:
    """Judge a class from its checks, in their order.

    Parameters
    ----------
    factors : of each check, (n,) factor of safety, NaN where there is none. [-]
    outcomes : of each check, (n,) Outcome.
    loads : for each check, whether it carries load; the others are rules.
    counting : for each check, (n,) whether the class needs it to pass here; what does not count
        has no part in the factor either.
    closure_pct : (n,) closure at rest with this class, in per cent of the radius; NaN where
        there is no equilibrium. [%]
    largest_closure_pct : the project's limit. [%]

    Returns
    -------
    ClassOutcome. The first failed rule governs, or the first check that could not be evaluated;
    else the least factor; else the closure.

    Source
    ------
    Definition; no tolerance on any limit.
    """
    count = closure_pct.size
    closure = len(factors)
    adequate = closure_pct <= largest_closure_pct
    least = np.full(count, np.inf)
    weakest = np.full(count, closure, dtype=np.int32)
    failed = np.full(count, closure, dtype=np.int32)
    checks = zip(factors, outcomes, loads, counting, strict=True)
    for position, (factor, outcome, load, counts) in enumerate(checks):
        adequate = adequate & ((outcome == Outcome.PASS) | ~counts)
        lower = (factor < least) & counts
        least = np.where(lower, factor, least)
        weakest = np.where(lower, position, weakest)
        blocking = (outcome == Outcome.NOT_EVALUATED) if load else (outcome != Outcome.PASS)
        first = blocking & counts & (failed == closure)
        failed = np.where(first, position, failed)
    governing = np.where(failed < closure, failed, weakest)
    return ClassOutcome(adequate, np.where(np.isfinite(least), least, np.nan), governing)
