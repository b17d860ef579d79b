"""The use case from end to end: from a project to a folder of advice."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from datetime import UTC, datetime
from pathlib import Path

import numpy as np

from tunnelcalc.errors import ExitCode
from tunnelcalc.inputs.project_file import project_folder, read_project
from tunnelcalc.one_section import class_number
from tunnelcalc.outputs.figures import draw_all
from tunnelcalc.outputs.manifest import write_record
from tunnelcalc.outputs.run_folder import Target, part_folder, sync_folder
from tunnelcalc.pipeline.dispatch import method_sources
from tunnelcalc.plugin.registry import Registry
from tunnelcalc.project import Project
from tunnelcalc.sections import Sections
from tunnelcalc.trade_off import TradeOff
from tunnelcalc.tune.advice import Advice, advice
from tunnelcalc.tune.asked import Reading
from tunnelcalc.tune.tables import write_tables
from tunnelcalc.tune.trial import Trial, failing

TUNED = "tuned"
RECORD = "tune.json"


@dataclass(frozen=True, slots=True)
class Tuned:
    """Where the advice is written, what it says, what is missing of it, and how it ends."""

    folder: Path
    project: Project
    support_class: str
    held: tuple[str, ...]
    advice: tuple[Advice, ...]
    sections: Sections
    missing: tuple[tuple[str, str], ...]
    exit_code: ExitCode


def tune(
    path: Path,
    registry: Registry,
    vary: Sequence[str],
    held: Sequence[str] = (),
    *,
    class_name: str | None = None,
    out: Path | None = None,
) -> Tuned:
    """Vary parameters of a class, one at a time, on every section that no class satisfies.

    `vary` are texts `ELEMENT.PARAMETER=LOW:HIGH` or `ELEMENT.PARAMETER=WORD,WORD`; `held` are
    `ELEMENT.PARAMETER=VALUE`, changes that hold meanwhile. Without an element it is the class's
    own distance of installation or rate of advance. Without a name the class is the heaviest.
    Raises `InputError` before anything is written.
    """
    started = datetime.now(UTC)
    project = read_project(path, registry)
    number = len(project.support_classes) - 1
    if class_name is not None:
        number = class_number(project, class_name)
    chosen = project.support_classes[number]
    asked = Reading(project, chosen, registry).asked(vary, held)
    target = Target(project_folder(path), out, numbered=TUNED)
    target.check()
    ground = failing(project, registry)
    trial = Trial(project, registry, chosen, ground)
    with part_folder(target) as part:
        told: list[Advice] = []
        trade_offs: list[TradeOff] = []
        for variation in asked.variations if ground.count else ():
            beside = asked.beside(variation)
            found = trial.trade_off(variation, beside)
            trade_offs.append(found)
            told += advice(trial, variation, beside, found)
        write_tables(part, ground, told, trade_offs)
        missing = list(_unknown(trade_offs))
        figures = registry.trade_off_figures(project.plugins)
        for found in trade_offs:
            missing += draw_all(figures, found, part).missing
        ending = ExitCode.NOT_EVALUATED if missing else ExitCode.COMPLETE
        what = {
            "finished": datetime.now(UTC).isoformat(timespec="seconds"),
            "exit_code": int(ending),
            "options": {"class": chosen.name, "vary": list(vary), "set": list(held)},
            "sections_without_adequate_class": ground.count,
            "not_evaluated": [{"what": what, "reason": reason} for what, reason in missing],
        }
        methods = method_sources(project, registry)
        write_record(part, RECORD, project, registry, methods, started, what)
        sync_folder(part)
        folder = target.place(part)
        sync_folder(target.parent)
    stated = tuple(change.text for change in asked.held)
    return Tuned(folder, project, chosen.name, stated, tuple(told), ground, tuple(missing), ending)


def _unknown(trade_offs: Sequence[TradeOff]) -> Sequence[tuple[str, str]]:
    """What of the trials could not be judged."""
    counts = [(found.name, np.count_nonzero(~found.evaluated)) for found in trade_offs]
    return [
        (name, f"{count} trials could not be evaluated; see trade_off.csv")
        for name, count in counts
        if count
    ]
