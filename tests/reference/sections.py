"""Everything that a run writes about one section, found the slow way."""

from __future__ import annotations

import math
from collections.abc import Mapping
from dataclasses import replace
from typing import Any, NamedTuple

from reference.classes import ClassResults, Unsupported, class_results
from reference.equilibrium import pressure_at_closure
from reference.grounds import Row, ground_of, number


class SectionResults(NamedTuple):
    """Rows as the tables of a run hold them, by column name; numbers as float, NaN where empty.

    section : the computed columns of `sections.csv`, `radius_m` to `required_class`, and
        `needed_pressure_mpa`, NaN unless no class is adequate. Not `scheduled_class`, which
        depends on the neighbours, and not `flags`.
    classes : a row a class, as in `classes.csv`, without `chainage_m`.
    checks : a row a check, as in `checks.csv`, without `chainage_m` and `reason`.
    """

    section: dict[str, float | str]
    classes: list[dict[str, float | str]]
    checks: list[dict[str, float | str]]


def section_results(row: Row, project: Mapping[str, Any]) -> SectionResults:
    """Results of one section from its ground and the project.

    Parameters
    ----------
    row : ground values by column name, as a row of the ground table or of `sections.csv`: numbers
        or their text; a column that is absent, empty or NaN is not known. Other columns are
        ignored, so that a row of `sections.csv` may be passed as it is. `radius_m` of the row
        goes before that of the project.
    project : what `project.yaml` holds, loaded. `opening`, `ground: drainage`, `methods`,
        `support_classes` and `criteria` are read. Modulus and closure profile must be the
        default ones, the law of the ground one of `LAWS`.

    Returns
    -------
    SectionResults. Stresses and closures agree with a correct run to about 1e-9 of themselves;
    the program's own quadrature errs by up to 2e-9 where the plastic radius is below 20 R.
    Pressures of elements that are installed so late that next to no closure is left carry the
    rounding of that closure. A closure beyond the range of a double is NaN, and so is what
    follows from it.
    """
    radius = number(row, "radius_m")
    radius = float(project["opening"]["radius_m"]) if radius is None else radius
    section, mean = ground_of(row, radius, project)
    cases = {"mean": mean}
    if not math.isnan(larger := float(section["larger_stress_mpa"])):
        cases["larger"] = replace(mean, p0=larger)
    found = []
    for entry in project["support_classes"]:
        of_case = [
            class_results(row, entry, project, Unsupported(name, curve, radius), section)
            for name, curve in cases.items()
        ]
        found.append(of_case[0] if len(of_case) == 1 else _heavier(*of_case))
    adequate = [str(one["support_class"]) for one, _ in found if one["adequate"] == "yes"]
    limit = float(project["criteria"]["closure_pct"]) / 100 * radius
    section["required_class"] = adequate[0] if adequate else "none_adequate"
    section["needed_pressure_mpa"] = (
        math.nan
        if adequate
        else max(pressure_at_closure(curve, radius, limit) for curve in cases.values())
    )
    return SectionResults(
        section, [one for one, _ in found], [line for _, lines in found for line in lines]
    )


def _heavier(one: ClassResults, two: ClassResults) -> ClassResults:
    """Of two stress cases the one that asks more: told of a class is one of them whole."""

    def asks(found: ClassResults) -> tuple[bool, float, float]:
        row = found[0]
        factor = float(row["factor_of_safety"])
        least = math.inf if math.isnan(factor) else factor
        return row["adequate"] == "no", -least, float(row["supported_closure_pct"])

    return two if asks(two) > asks(one) else one
