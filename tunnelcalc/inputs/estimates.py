"""Quality and strength from observations and tests, where they were not stated directly.

A quantity may be known from several sources. Where more than one is there for an interval, the
project states the order of preference, or is refused; how far the sources lie apart is kept.
"""

from __future__ import annotations

from collections.abc import Callable, Container, Mapping, Sequence
from dataclasses import dataclass

import numpy as np

from tunnelcalc.arrays import Array
from tunnelcalc.inputs.intervals import Intervals
from tunnelcalc.inputs.laboratory_tests import FROM_TESTS, Tests
from tunnelcalc.inputs.merging import Merged, Origin
from tunnelcalc.inputs.values import Reader
from tunnelcalc.rock_mass import observations
from tunnelcalc.rock_mass.observations import RESIDUAL_GSI_RANGE, RMR89_DRY_RANGE
from tunnelcalc.vocabulary import GROUND

MEASURED = "measured"
"""The quantity itself, as a table states it."""
LABORATORY = "laboratory"
FROM_LABORATORY = f"{LABORATORY}: regression of Hoek & Brown (1980)"
"""What stands beside each value that was estimated from tests."""


@dataclass(frozen=True, slots=True)
class Estimator:
    """A published relation from observations to a quantity.

    `formula` is what `estimate` computes, as a calculation sheet writes it: in the symbols that
    `SYMBOLS` gives the columns of `needs`.
    """

    name: str
    quantity: str
    needs: tuple[str, ...]
    source: str
    allowed: str
    formula: str
    estimate: Callable[..., Array]
    only_if_named: bool = False
    """Whether it is used only where the project names it among the sources."""

    @property
    def told(self) -> str:
        """What stands beside each value that was estimated by it."""
        return f"{self.name}: {self.source}"


ESTIMATORS = (
    Estimator(
        "jcond89_rqd",
        "gsi",
        ("jcond89", "rqd_pct"),
        "Hoek, Carter & Diederichs (2013), ARMA 13-672",
        "jcond89 0 to 30, rqd_pct 0 to 100",
        "1.5*JCond89 + RQD/2",
        observations.gsi_from_jcond89_and_rqd,
    ),
    Estimator(
        "rmr89_dry",
        "gsi",
        ("rmr89_dry",),
        "Hoek, Kaiser & Bawden (1995)",
        f"rmr89_dry {RMR89_DRY_RANGE.minimum:g} to {RMR89_DRY_RANGE.maximum:g}",
        "RMR_dry - 5",
        observations.gsi_from_rmr89_dry,
    ),
    Estimator(
        "q_prime",
        "gsi",
        ("q_prime",),
        "Hoek, Kaiser & Bawden (1995)",
        "q_prime such that 9 ln(q_prime) + 44 lies between 0 and 100",
        "9*ln(Q_prime) + 44",
        observations.gsi_from_q_prime,
    ),
    Estimator(
        "block_volume",
        "gsi",
        ("block_volume_cm3", "joint_condition"),
        "Cai & Kaiser (2006), Geotech. Geol. Eng. 24, 1089-1102",
        "block volume and joint condition that give an index between 0 and 100",
        "(26.5 + 8.79*ln(Jc) + 0.9*ln(Vb))/(1 + 0.0151*ln(Jc) - 0.0253*ln(Vb))",
        observations.gsi_from_block_volume,
    ),
    Estimator(
        "point_load",
        "intact_strength_mpa",
        ("point_load_mpa", "point_load_factor"),
        "factor of the project times point load index",
        "a product within the range of intact_strength_mpa",
        "k_pl*Is50",
        observations.intact_strength_from_point_load_mpa,
    ),
    Estimator(
        "cai_2007",
        "residual_gsi",
        ("gsi",),
        "Cai et al. (2007), Int. J. Rock Mech. Min. Sci. 44, 247-265",
        f"gsi up to {RESIDUAL_GSI_RANGE.maximum:.4g}",
        "GSI*exp(-0.0134*GSI)",
        observations.residual_gsi,
        only_if_named=True,
    ),
)
ESTIMATED = ("gsi", "intact_strength_mpa", "mi", "residual_gsi")
SAME_VALUE = 1e-9
"""Sources that lie closer than this share of the larger value agree. [-]"""


def estimator_told(told: str) -> Estimator | None:
    """The relation that a value was estimated by, from what stands beside it."""
    return next((e for e in ESTIMATORS if e.told == told), None)


def source_names(quantity: str) -> tuple[str, ...]:
    """What a project may name as sources of a quantity."""
    relations = tuple(e.name for e in ESTIMATORS if e.quantity == quantity)
    tests = (LABORATORY,) if quantity in FROM_TESTS else ()
    return (MEASURED, *relations, *tests)


def observations_of(quantity: str) -> tuple[str, ...]:
    """From what a quantity is estimated unasked."""
    return tuple(
        need
        for e in ESTIMATORS
        if e.quantity == quantity and not e.only_if_named
        for need in e.needs
    )


def idle_observations(names: Container[str]) -> set[str]:
    """Observations that no relation uses, because another one that it needs is not given."""
    unasked = [estimator for estimator in ESTIMATORS if not estimator.only_if_named]
    needs = {need for estimator in unasked for need in estimator.needs}
    complete = [e for e in unasked if all(need in names for need in e.needs)]
    return {n for n in needs if n in names} - {need for e in complete for need in e.needs}


def incomplete_pairs(numbers: Mapping[str, Array]) -> tuple[str, ...]:
    """Relations for which some intervals give only a part of what they need."""
    notes = []
    for estimator in ESTIMATORS:
        there = [~np.isnan(numbers[need]) for need in estimator.needs if need in numbers]
        if len(there) == len(estimator.needs) > 1:
            part = int(np.count_nonzero(np.any(there, axis=0) & ~np.all(there, axis=0)))
            if part:
                both = " and ".join(estimator.needs)
                notes.append(f"{part} intervals give only one of {both}: no {estimator.name} there")
    return tuple(notes)


def read_preferences(reader: Reader) -> dict[str, tuple[str, ...]]:
    """The order of preference of each quantity's sources, empty where none is stated."""
    table = reader.table_of("estimates", required=False)
    preferences: dict[str, tuple[str, ...]] = dict.fromkeys(ESTIMATED, ())
    if table is None:
        return preferences
    for quantity in ESTIMATED:
        allowed = source_names(quantity)
        names = []
        for where, name in table.texts_of(quantity):
            if name in allowed and name not in names:
                names.append(name)
                continue
            table.problems.add(
                where,
                f'holds "{name}"' + (", which stands already" if name in names else ""),
                name=table.label(quantity),
                allowed=", ".join(allowed),
                fix="name each source once, the preferred one first",
            )
        preferences[quantity] = tuple(names)
    table.finish()
    return preferences


def estimate(
    found: Merged,
    intervals: Intervals,
    tests: Tests,
    preferences: Mapping[str, Sequence[str]],
    wanted: Mapping[str, Array],
) -> None:
    """Fill in estimated values, their origin, and the spread between sources.

    `wanted` are the intervals (i,) that need a quantity, where not all of them do: elsewhere it
    is no fault that a relation does not hold.
    """
    for quantity in ESTIMATED:
        rows = wanted.get(quantity, np.ones(found.count, dtype=bool))
        sources = _sources(found, intervals, tests, quantity, preferences[quantity], rows)
        _choose(found, intervals, quantity, sources, preferences[quantity])


def _sources(
    found: Merged,
    intervals: Intervals,
    tests: Tests,
    quantity: str,
    preference: Sequence[str],
    rows: Array,
) -> dict[str, tuple[Array, str]]:
    """Values (i,) by source, NaN where it has none, and what the source is called."""
    sources: dict[str, tuple[Array, str]] = {}
    if quantity in found.numbers:
        sources[MEASURED] = (found.numbers[quantity].copy(), "")
    for estimator in ESTIMATORS:
        wanted = estimator.quantity == quantity
        wanted = wanted and (estimator.name in preference or not estimator.only_if_named)
        if wanted and all(name in found.numbers for name in estimator.needs):
            needed = [found.numbers[name] for name in estimator.needs]
            values = estimator.estimate(*needed)
            if not preference or estimator.name in preference:
                _tell_out_of_range(found, intervals, estimator, needed, values, rows)
            sources[estimator.name] = (values, estimator.told)
    if quantity in FROM_TESTS and tests.by_unit:
        values = tests.values_of(quantity, found.texts["ground_unit"])
        sources[LABORATORY] = (values, FROM_LABORATORY)
    return sources


def _tell_out_of_range(
    found: Merged,
    intervals: Intervals,
    estimator: Estimator,
    needed: Sequence[Array],
    values: Array,
    rows: Array,
) -> None:
    """Tell it where the observation stands: of a ground unit once, not in each interval."""
    given = np.all(~np.isnan(np.array(needed)), axis=0)
    outside = given & np.isnan(values) & rows
    intervals.tell_no_more(estimator.quantity, outside)
    first = estimator.needs[0]
    for row in np.flatnonzero(outside).tolist():
        observed = ", ".join(
            f"{name} {column[row]:g}" for name, column in zip(estimator.needs, needed, strict=True)
        )
        where, context = intervals.source(row, first, found.origins[first][row] == Origin.UNIT)
        intervals.problems.add(
            where,
            f"gives no {estimator.quantity}: {observed} is outside the range of its relation",
            name=f'column "{first}"',
            allowed=f"{estimator.allowed} ({estimator.source})",
            context=context,
            fix=f"correct the observation, or leave it out and state {estimator.quantity} itself",
        )


def _choose(
    found: Merged,
    intervals: Intervals,
    quantity: str,
    sources: Mapping[str, tuple[Array, str]],
    preference: Sequence[str],
) -> None:
    there = {name: ~np.isnan(values) for name, (values, _) in sources.items()}
    count = np.sum(list(there.values()), axis=0) if there else np.zeros(found.count)
    if not preference:
        _tell_undecided(intervals, quantity, there, count)
    if quantity not in found.numbers:
        found.add(quantity)
    open_rows = np.ones(found.count, dtype=bool)
    for name in preference or sources:
        if name not in sources:
            continue
        values, method = sources[name]
        chosen = open_rows & there[name]
        if name != MEASURED:
            found.put(quantity, chosen, values, Origin.ESTIMATED, method)
        open_rows &= ~chosen
    # A stated value that the preference does not name is not used.
    found.put(quantity, open_rows, np.full(found.count, np.nan), Origin.NOWHERE)
    if np.any(count > 1):
        stacked = np.array([values for values, _ in sources.values()])
        lowest = np.min(np.where(np.isnan(stacked), np.inf, stacked), axis=0)
        highest = np.max(np.where(np.isnan(stacked), -np.inf, stacked), axis=0)
        spread = np.subtract(highest, lowest, out=np.full(found.count, np.nan), where=count > 1)
        same = spread <= SAME_VALUE * highest
        found.add(f"{quantity}_spread", np.where(same, 0.0, spread))


def _tell_undecided(
    intervals: Intervals, quantity: str, there: Mapping[str, Array], count: Array
) -> None:
    rows = np.flatnonzero(count > 1)
    if not rows.size:
        return
    row = int(rows[0])
    names = [name for name, mask in there.items() if mask[row]]
    more = f" and {rows.size - 1} more intervals" if rows.size > 1 else ""
    intervals.problems.add(
        intervals.table.place(row),
        f"has {quantity} from {' and '.join(names)}, and the project does not say which to take",
        name=f'column "{quantity}"',
        allowed=GROUND[quantity].allowed(),
        context=intervals.context(row) + more,
        fix=f"state the order of preference under ground: estimates: {quantity}",
    )
