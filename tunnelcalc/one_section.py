"""One section of a project: found by its chainage, and computed by itself."""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np

from tunnelcalc.arrays import SAME_PLACE_M
from tunnelcalc.chainage import FORMS, ChainageError
from tunnelcalc.errors import InputError, Problem, Where
from tunnelcalc.pipeline.stage import Stage, check_chain
from tunnelcalc.project import Project
from tunnelcalc.sections import Sections
from tunnelcalc.text import quoted, suggestion

AT = "--at"
CLASS = "--class"
OPTIONS = Where("command line")


def position_at(project: Project, text: str) -> int:
    """Position of the section at a chainage as the user wrote it.

    Where two sections meet it is the one that begins there. Raises `InputError`.
    """
    try:
        at = project.notation.axis_m(text)
    except ChainageError as error:
        raise _refused(
            AT,
            f"holds {quoted(text)}, which {error}",
            f"a chainage of this project, {FORMS}",
            "write the chainage as the project's notation has it",
        ) from None
    begins, ends = project.ground["from_m"], project.ground["to_m"]
    before = np.flatnonzero(begins <= at + SAME_PLACE_M)
    if before.size and at <= ends[before[-1]] + SAME_PLACE_M:
        return int(before[-1])
    for gap in project.gaps:
        if gap.from_m <= at <= gap.to_m:
            what = f"holds {quoted(text)}, which lies in a gap without ground data: {gap.reason}"
            break
    else:
        what = f"holds {quoted(text)}, where there is no section"
    first, last = project.notation.ends(float(begins[0]), float(ends[-1]))
    raise _refused(AT, what, f"a chainage from {first} to {last}", "name a place with ground data")


def class_number(project: Project, name: str) -> int:
    """Number of a support class by its name. Raises `InputError`."""
    if name in project.class_names:
        return project.class_names.index(name)
    meant = suggestion(name, project.class_names)
    raise _refused(
        CLASS,
        f"names {quoted(name)}, which is no support class of the project",
        ", ".join(project.class_names),
        f"write {meant}" if meant else "name one of the classes",
    )


def computed(project: Project, position: int, stages: Sequence[Stage]) -> Sections:
    """One section with every column of the stages, which must look at each section by itself.

    Its numbers are, bit by bit, those of a run: no section depends on the others.
    """
    check_chain(stages, project.ground)
    section = project.ground.take(slice(position, position + 1))
    for stage in stages:
        section = stage(section)
    return section


def _refused(option: str, message: str, allowed: str, fix: str) -> InputError:
    return InputError((Problem(OPTIONS, message, fix, name=option, allowed=allowed),))
