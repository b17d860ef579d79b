"""All that a plugin may import.

A plugin is a module, named under the entry-point group `tunnelcalc`, with functions marked
`@hookimpl` that have the names of the hooks in `tunnelcalc.plugin.hooks`.
"""

from tunnelcalc.arrays import Array
from tunnelcalc.errors import InputError, Problem, Problems, ShapeError, Where
from tunnelcalc.ground_reaction.curve import CurvePoint, GroundCurve
from tunnelcalc.outputs.cells import number_text, write_table
from tunnelcalc.plugin.contract import (
    Amount,
    ClosureProfileMethod,
    Evaluation,
    GroundReactionMethod,
    GroundReader,
    Misfit,
    ModulusMethod,
    Parameter,
    ReportWriter,
    SheetReader,
    StrengthMethod,
    SupportCheck,
    SupportKind,
    ValidityFlag,
)
from tunnelcalc.plugin.hooks import hookimpl
from tunnelcalc.plugin.raw_table import RawTable
from tunnelcalc.project import Element, Project, SupportClass
from tunnelcalc.results import ItemTotal, RunResult, Zone
from tunnelcalc.sections import Sections
from tunnelcalc.support.reaction import (
    AdvanceIncrements,
    GroundRing,
    LinearSpring,
    PressureOfClosure,
    Reaction,
)
from tunnelcalc.text import decoded
from tunnelcalc.vocabulary import Limits

__all__ = [
    "AdvanceIncrements",
    "Amount",
    "Array",
    "ClosureProfileMethod",
    "CurvePoint",
    "Element",
    "Evaluation",
    "GroundCurve",
    "GroundReactionMethod",
    "GroundReader",
    "GroundRing",
    "InputError",
    "ItemTotal",
    "Limits",
    "LinearSpring",
    "Misfit",
    "ModulusMethod",
    "Parameter",
    "PressureOfClosure",
    "Problem",
    "Problems",
    "Project",
    "RawTable",
    "Reaction",
    "ReportWriter",
    "RunResult",
    "Sections",
    "ShapeError",
    "SheetReader",
    "StrengthMethod",
    "SupportCheck",
    "SupportClass",
    "SupportKind",
    "ValidityFlag",
    "Where",
    "Zone",
    "decoded",
    "hookimpl",
    "number_text",
    "write_table",
]
