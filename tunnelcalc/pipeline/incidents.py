"""What a run could not evaluate, counted by who and why."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, field

import numpy as np

from tunnelcalc.arrays import Array
from tunnelcalc.results import CheckLine, Incident
from tunnelcalc.sections import Sections
from tunnelcalc.support.adequacy import Outcome

NO_CLOSURE = "no closure that can be computed"
ENDLESS_RING = "no closure that can be computed: without support the plastic zone has no end"


@dataclass(slots=True)
class Incidents:
    """Counts what could not be evaluated, while chunks are finished."""

    counts: dict[tuple[str, str], tuple[int, float]] = field(default_factory=dict)

    def add(self, what: str, reason: str, chainage_m: Array) -> None:
        """Count sections; the first to be told keeps its chainage."""
        if len(chainage_m):
            count, first = self.counts.get((what, reason), (0, float(chainage_m[0])))
            self.counts[what, reason] = (count + len(chainage_m), first)

    def add_chunk(self, chunk: Sections, checks: Sequence[CheckLine]) -> None:
        """Sections of a chunk without a closure, and checks that a class misses."""
        chainage = chunk["chainage_m"]
        unknown = ~np.isfinite(chunk["closure_mm"])
        endless = unknown & np.isinf(chunk["plastic_radius_m"])
        self.add("ground reaction", NO_CLOSURE, chainage[unknown & ~endless])
        self.add("ground reaction", ENDLESS_RING, chainage[endless])
        missed = (chunk["check_outcome"] == Outcome.NOT_EVALUATED) & chunk["check_counts"]
        missed = missed.astype(bool) & ~unknown[:, None]
        for position in np.flatnonzero(np.any(missed, axis=0)).tolist():
            line = checks[position]
            rows = np.flatnonzero(missed[:, position])
            reasons = chunk["check_reason"][rows, position]
            for reason in dict.fromkeys(reasons.tolist()):
                self.add(
                    f"{line.class_name} {line.label}", reason, chainage[rows[reasons == reason]]
                )

    def listed(self) -> tuple[Incident, ...]:
        return tuple(
            Incident(what, reason, count, first)
            for (what, reason), (count, first) in sorted(self.counts.items())
        )
