"""All that a plugin may import.

A plugin is a module, named under the entry-point group `tunnelcalc`, with functions marked
`@hookimpl` that have the names of the hooks in `tunnelcalc.plugin.hooks`.
"""

from tunnelcalc.arrays import Array
from tunnelcalc.calculation.line import SheetLine
from tunnelcalc.calculation.working import Working
from tunnelcalc.errors import InputError, Problem, Problems, ShapeError, Where
from tunnelcalc.ground_reaction.curve import CurvePoint, GroundCurve
from tunnelcalc.limits_statement import LIMITS
from tunnelcalc.outputs.cells import number_text, write_table
from tunnelcalc.plugin.contract import (
    Amount,
    ClassCheck,
    ClassCheckWithOptions,
    Evaluation,
    GroundReader,
    LiningCheck,
    ReportWriter,
    RingKind,
    SectionFigure,
    SectionValues,
    SheetReader,
    SupportCheck,
    SupportKind,
    TradeOffFigure,
    ValidityFlag,
)
from tunnelcalc.plugin.flag import Condition, Flag, NumberOfFlag
from tunnelcalc.plugin.hooks import hookimpl
from tunnelcalc.plugin.method_contract import (
    ClosureProfileMethod,
    GroundReactionMethod,
    ModulusMethod,
    StrengthMethod,
)
from tunnelcalc.plugin.parameter import Misfit, Parameter, WordTable, source_of
from tunnelcalc.plugin.raw_table import RawTable
from tunnelcalc.project import Element, Project, SupportClass
from tunnelcalc.results import ItemTotal, RunResult, Zone
from tunnelcalc.section_curves import (
    BEYOND,
    CAPACITY,
    INSTALLED,
    CaseCurves,
    ClosureAlongDrive,
    ReactionOfClass,
    ReactionOfElement,
    ReactionOfGround,
    SectionCurves,
    StrengthEnvelope,
    ThrustAndMoment,
)
from tunnelcalc.sections import Sections, of_element, one_section
from tunnelcalc.support.reaction import (
    AdvanceIncrements,
    GroundRing,
    LinearSpring,
    PressureOfClosure,
    Reaction,
)
from tunnelcalc.support.ring_section import RingSection
from tunnelcalc.text import decoded
from tunnelcalc.trade_off import TradeOff
from tunnelcalc.validity import PRACTICE, YES_OR_NO, Level, Side, Threshold
from tunnelcalc.verification import Standing, VerificationCheck
from tunnelcalc.vocabulary import Limits

__all__ = [
    "BEYOND",
    "CAPACITY",
    "INSTALLED",
    "LIMITS",
    "PRACTICE",
    "YES_OR_NO",
    "AdvanceIncrements",
    "Amount",
    "Array",
    "CaseCurves",
    "ClassCheck",
    "ClassCheckWithOptions",
    "ClosureAlongDrive",
    "ClosureProfileMethod",
    "Condition",
    "CurvePoint",
    "Element",
    "Evaluation",
    "Flag",
    "GroundCurve",
    "GroundReactionMethod",
    "GroundReader",
    "GroundRing",
    "InputError",
    "ItemTotal",
    "Level",
    "Limits",
    "LinearSpring",
    "LiningCheck",
    "Misfit",
    "ModulusMethod",
    "NumberOfFlag",
    "Parameter",
    "PressureOfClosure",
    "Problem",
    "Problems",
    "Project",
    "RawTable",
    "Reaction",
    "ReactionOfClass",
    "ReactionOfElement",
    "ReactionOfGround",
    "ReportWriter",
    "RingKind",
    "RingSection",
    "RunResult",
    "SectionCurves",
    "SectionFigure",
    "SectionValues",
    "Sections",
    "ShapeError",
    "SheetLine",
    "SheetReader",
    "Side",
    "Standing",
    "StrengthEnvelope",
    "StrengthMethod",
    "SupportCheck",
    "SupportClass",
    "SupportKind",
    "Threshold",
    "ThrustAndMoment",
    "TradeOff",
    "TradeOffFigure",
    "ValidityFlag",
    "VerificationCheck",
    "Where",
    "WordTable",
    "Working",
    "Zone",
    "decoded",
    "hookimpl",
    "number_text",
    "of_element",
    "one_section",
    "source_of",
    "write_table",
]
