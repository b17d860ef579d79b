"""Figures of the curves of one section and of trade-offs, drawn by matplotlib.

matplotlib is imported only by the functions that draw, so that commands start fast.
"""

from __future__ import annotations

from collections.abc import Callable

from tunnelcalc import api
from tunnelcalc_report.closure_profile import ClosureProfileFigure
from tunnelcalc_report.ground_reaction import GroundReactionFigure
from tunnelcalc_report.strength import ShearStrengthFigure, StrengthEnvelopeFigure
from tunnelcalc_report.thrust_moment import ThrustMomentFigure
from tunnelcalc_report.trade_off import ParameterFigure


@api.hookimpl
def tunnelcalc_register_section_figures(register: Callable[[api.SectionFigure], None]) -> None:
    register(ClosureProfileFigure())
    register(GroundReactionFigure())
    register(ShearStrengthFigure())
    register(StrengthEnvelopeFigure())
    register(ThrustMomentFigure())


@api.hookimpl
def tunnelcalc_register_trade_off_figures(register: Callable[[api.TradeOffFigure], None]) -> None:
    register(ParameterFigure())
