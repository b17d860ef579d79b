"""The section of sets or girders in a metre of tunnel, for checks that put rings together."""

from __future__ import annotations

from tunnelcalc import api
from tunnelcalc_steel_sets.joints import joints_of
from tunnelcalc_steel_sets.profile import profile_of


def ring_section_of(element: api.Element) -> api.RingSection:
    """The section smeared over the spacing; Poisson ratio 0, since bars apart are not hindered.

    Blocked sets bend between their blocks, and sliding joints open the ring: neither bears
    together with shotcrete all around.
    """
    profile = profile_of(element)
    alone = ""
    if element.values.get("contact") == "blocked":
        alone = "blocked sets do not bear together with shotcrete all around"
    elif joints_of(element) is not None:
        alone = "a ring with sliding joints is not elastic all around"
    return api.RingSection(
        area_m2_per_m=profile.area_m2 / profile.spacing_m,
        inertia_m4_per_m=profile.inertia_m4 / profile.spacing_m,
        depth_m=profile.depth_m,
        modulus_mpa=profile.modulus_mpa,
        poisson_ratio=0.0,
        compressive_strength_mpa=profile.yield_strength_mpa,
        tensile_strength_mpa=profile.yield_strength_mpa,
        acts_alone=alone,
    )
