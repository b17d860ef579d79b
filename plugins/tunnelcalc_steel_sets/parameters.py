"""Parameters that the kinds of this plugin share, and what must fit together in them."""

from __future__ import annotations

from collections.abc import Iterable

from tunnelcalc import api
from tunnelcalc.api import Limits, Parameter
from tunnelcalc_steel_sets.joints import RIGID, SLIDING, joints_of
from tunnelcalc_steel_sets.profile import profile_of

NOT_DECLARED, YIELDS = "not_declared", "yields"
KN_PER_MN = 1e3
WHEN_SLIDING = ("joints", (SLIDING,))

STEEL = (
    Parameter("yield_strength_mpa", "yield strength", "MPa", Limits(50, 2000)),
    Parameter("steel_modulus_gpa", "Young's modulus", "GPa", Limits(10, 300)),
    Parameter("spacing_m", "spacing along the drive", "m", Limits(0.1, 10)),
)
BEYOND_YIELD = Parameter(
    "beyond_yield",
    "what the sets do at first yield: nothing is known, or they go on giving their capacity",
    choices=(NOT_DECLARED, YIELDS),
    default=NOT_DECLARED,
)
JOINTS = (
    Parameter(
        "joints",
        "whether the sets have joints that slide at a declared thrust",
        choices=(RIGID, SLIDING),
        default=RIGID,
    ),
    Parameter(
        "joint_count",
        "sliding joints in a ring",
        limits=Limits(1, 15, whole=True),
        only_if=WHEN_SLIDING,
    ),
    Parameter(
        "slip_load_kn",
        "thrust at which a joint slides, bolts tightened as specified",
        "kN",
        Limits(0, 5000, above=True),
        only_if=WHEN_SLIDING,
    ),
    Parameter(
        "joint_travel_mm",
        "length over which one joint can slide",
        "mm",
        Limits(0, 2000, above=True),
        only_if=WHEN_SLIDING,
    ),
)


def beyond_yield(element: api.Element) -> str:
    """What the element says of itself beyond first yield."""
    return str(element.values.get("beyond_yield", NOT_DECLARED))


def joint_misfits(element: api.Element) -> Iterable[api.Misfit]:
    """Joints that are stronger than the profile itself."""
    joints = joints_of(element)
    if joints is None:
        return
    profile = profile_of(element)
    most = profile.yield_strength_mpa * profile.area_m2 * KN_PER_MN
    if joints.slip_load_kn >= most:
        yield api.Misfit(
            "slip_load_kn",
            f"is {joints.slip_load_kn:g} kN; the profile yields in thrust at {most:.6g} kN, before "
            "the joints slide",
            "correct the slip load, or take a stronger profile",
        )
