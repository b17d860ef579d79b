"""From columns over the whole alignment to zones, quantities and counts."""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np

from tunnelcalc.arrays import Array
from tunnelcalc.pipeline.incidents import Incidents
from tunnelcalc.pipeline.plan import PlannedClass
from tunnelcalc.plugin.isolation import contained_amounts
from tunnelcalc.project import Project
from tunnelcalc.results import CheckLine, ItemTotal, Zone, governing_labels
from tunnelcalc.schedule.quantities import excavation_m3_per_m, totals_by_class
from tunnelcalc.schedule.selection import NONE_ADEQUATE, NONE_ADEQUATE_NAME
from tunnelcalc.schedule.zoning import stretches, zone_starts
from tunnelcalc.sections import Sections
from tunnelcalc.validity import is_raised


def zones(
    project: Project, sections: Sections, checks: Sequence[CheckLine], flag_names: Sequence[str]
) -> tuple[Zone, ...]:
    """The schedule, a row a zone."""
    stretch = stretches(sections["from_m"], sections["to_m"])
    starts = zone_starts(sections["scheduled_class"], stretch)
    ends = np.append(starts[1:], sections.count)
    labels = [governing_labels(checks, number) for number in range(len(project.class_names))]
    return tuple(
        _zone(project, sections, labels, flag_names, int(first), int(end))
        for first, end in zip(starts, ends, strict=True)
    )


def _zone(
    project: Project,
    sections: Sections,
    labels: Sequence[Sequence[str]],
    flag_names: Sequence[str],
    first: int,
    end: int,
) -> Zone:
    within = sections.take(slice(first, end))
    number = int(within["scheduled_class"][0])
    least, governing, needed = np.nan, "", np.nan
    if number == NONE_ADEQUATE:
        at = _largest(within["needed_pressure_mpa"])
        needed = float(within["needed_pressure_mpa"][at])
        name = NONE_ADEQUATE_NAME
    else:
        factors = within["class_factor_of_safety"][:, number]
        loaded = np.any(np.isfinite(factors))
        # Where nothing is loaded, the section that moves most governs.
        at = _largest(-factors if loaded else within["class_closure_pct"][:, number])
        least = float(factors[at])
        governing = labels[number][int(within["class_governing"][at, number])]
        name = project.class_names[number]
    raised = np.any(is_raised(within["flag_level"]), axis=0).tolist()
    return Zone(
        first=first,
        last=end - 1,
        from_m=float(within["from_m"][0]),
        to_m=float(within["to_m"][-1]),
        support_class=name,
        least_factor_of_safety=least,
        governing_check=governing,
        governing_chainage_m=float(within["chainage_m"][at]),
        needed_pressure_mpa=needed,
        ground_units=tuple(sorted({unit for unit in within["ground_unit"].tolist() if unit})),
        flags=tuple(sorted(n for n, on in zip(flag_names, raised, strict=True) if on)),
    )


def _largest(values: Array) -> int:
    """Position of the largest value, the first of equals; NaN is least."""
    return int(np.argmax(np.where(np.isnan(values), -np.inf, values)))


def item_totals(
    project: Project, plan: Sequence[PlannedClass], sections: Sections, incidents: Incidents
) -> tuple[ItemTotal, ...]:
    """Quantities of every class; elements that give the same item are added up."""
    scheduled = sections["scheduled_class"]
    length = sections["to_m"] - sections["from_m"]
    numbers = np.array([*range(len(plan)), NONE_ADEQUATE])
    lengths = totals_by_class(np.ones(sections.count), length, scheduled, numbers)
    excavated = totals_by_class(
        excavation_m3_per_m(sections["radius_m"]), length, scheduled, numbers
    )
    totals: list[ItemTotal] = []
    for position, number in enumerate(numbers.tolist()):
        name = NONE_ADEQUATE_NAME if number == NONE_ADEQUATE else project.class_names[number]
        totals.append(ItemTotal(name, "length", "m", float(lengths[position])))
        totals.append(ItemTotal(name, "excavation", "m3", float(excavated[position])))
        if number == NONE_ADEQUATE:
            continue
        rows = np.flatnonzero(scheduled == number)
        within = sections.take(rows)
        amounts: dict[tuple[str, str], float] = {}
        for item in plan[number].elements:
            found, fault = contained_amounts(item.kind, within, item.element)
            if fault:
                what = f"{name} {item.element.label}: quantities"
                incidents.add(what, fault, within["chainage_m"])
            for amount in found:
                key = (amount.item, amount.unit)
                added = float(np.sum(amount.per_metre * length[rows]))
                amounts[key] = amounts.get(key, 0.0) + added
        totals.extend(ItemTotal(name, item, unit, sum_) for (item, unit), sum_ in amounts.items())
    return tuple(totals)
