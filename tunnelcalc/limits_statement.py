"""The statement of limits that every output carries."""

LIMITS = (
    "An aid to, and no substitute for, the judgement of licensed engineers who know the site. "
    "Local codes and laws govern.",
    "Convergence-confinement holds for a deep circular opening, driven full face, in uniform and "
    "isotropic ground under equal stress from all sides. Where the stress ratio is not 1 the mean "
    "stress is used, which understates the stress at the wall; outside 0.8 to 1.25 every class "
    "must also pass under the larger stress from all sides, which is no substitute for an analysis "
    "of unequal stress.",
    "The ground follows the law that the project names, by default elastic and perfectly plastic "
    "after Hoek-Brown, with constant dilation and no change with time. Strains are small unless "
    "the law says otherwise. Stresses are effective only where a water head and the drainage of "
    "the lining are stated; seepage forces are always left out. The weight of the plastic zone "
    "counts only where the project says so.",
    "Support elements are linear, act in parallel and never yield or break; each starts from the "
    "closure of the unsupported opening at its own distance from the face. The effect of elements "
    "installed earlier is neglected, and stiff support near the face carries more than is "
    "computed. A factor of safety means something only while every element of the class holds.",
    "Shotcrete is a ring closed through the invert, at the stated strength and stiffness from the "
    "start: neither early age nor bending under unequal stress is checked. End-anchored bolts are "
    "springs fixed in still ground, which overstates their load and relieves the other elements.",
    "Screened by flags, and not computed: blocks and wedges, face stability, spalling and rock "
    "burst, squeezing in time, swelling, portals, neighbouring openings, faults. Not examined at "
    "all: settlement, junctions, earthquakes, gas.",
    "Quantities are theoretical and unrounded: no overbreak, rebound or laps.",
)
