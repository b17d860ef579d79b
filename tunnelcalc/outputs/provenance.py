"""Tables on where the ground came from: each value's origin, and laboratory results."""

from __future__ import annotations

from collections.abc import Iterator
from itertools import chain
from pathlib import Path

from tunnelcalc.outputs.cells import number_text, number_texts, write_table
from tunnelcalc.project import Project, UnitTests, ValueOrigins
from tunnelcalc.rock_mass.laboratory import IntactFit
from tunnelcalc.vocabulary import GROUND

VALUES_HEADER = ("quantity", "from_m", "to_m", "value", "unit", "origin", "method")
LABORATORY_HEADER = (
    "ground_unit",
    "method",
    "tests",
    "least_confinement_mpa",
    "greatest_confinement_mpa",
    "intact_strength_mpa",
    "intact_strength_low_mpa",
    "intact_strength_high_mpa",
    "mi",
    "mi_low",
    "mi_high",
    "r_squared",
    "outliers",
)


def write_provenance(folder: Path, project: Project) -> None:
    """Write `ground_values.csv`, and `laboratory.csv` where there are tests."""
    rows = chain.from_iterable(_value_rows(origins, project) for origins in project.origins)
    written = () if project.notation.is_plain else ("from_chainage", "to_chainage")
    header = (*VALUES_HEADER[:3], *written, *VALUES_HEADER[3:])
    write_table(folder / "ground_values.csv", header, rows)
    if project.tests:
        results = [row for tests in project.tests for row in _laboratory_rows(tests)]
        write_table(folder / "laboratory.csv", LABORATORY_HEADER, results)


def _value_rows(origins: ValueOrigins, project: Project) -> Iterator[tuple[str, ...]]:
    count = len(origins.value)
    notation = project.notation
    written = (notation.written(origins.from_m), notation.written(origins.to_m, arriving=True))
    return zip(
        [origins.quantity] * count,
        number_texts(origins.from_m),
        number_texts(origins.to_m),
        *(() if notation.is_plain else written),
        number_texts(origins.value),
        [GROUND[origins.quantity].unit] * count,
        origins.origin.tolist(),
        origins.method.tolist(),
        strict=True,
    )


def _laboratory_rows(tests: UnitTests) -> list[tuple[str, ...]]:
    result = tests.result
    outliers = ";".join(tests.outliers)
    return [
        _row(tests, "regression", result.regression, number_text(result.r_squared), outliers),
        _row(tests, "least_squares", result.least_squares, "", ""),
    ]


def _row(
    tests: UnitTests, method: str, fit: IntactFit, r_squared: str, outliers: str
) -> tuple[str, ...]:
    numbers = (
        tests.result.least_confinement_mpa,
        tests.result.greatest_confinement_mpa,
        fit.intact_strength_mpa,
        *fit.intact_strength_interval_mpa,
        fit.mi,
        *fit.mi_interval,
    )
    count = str(tests.result.test_count)
    texts = (number_text(number) for number in numbers)
    return (tests.ground_unit, method, count, *texts, r_squared, outliers)
