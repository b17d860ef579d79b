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
    "Support elements act in parallel, each from its own distance behind the face. They are linear "
    "and never yield or break unless the project says so. Elements that do not age start from the "
    "closure of the unsupported opening there: the effect of elements installed earlier is "
    "neglected, and stiff support near the face carries more than is computed. Where an element "
    "hardens with age, all count from the wall as it then stands. No creep or shrinkage: load is "
    "overstated, closure understated. A factor of safety means something only while every element "
    "of the class holds.",
    "Shotcrete is a ring closed through the invert, from the start unless the project says where "
    "it is closed, and at the stated strength and stiffness unless it names a law of hardening. "
    "End-anchored bolts are springs fixed in still ground, which overstates their load and "
    "relieves the other elements, unless their anchor is said to move. Fully grouted bolts make "
    "the ground stronger in a ring from their installation on and carry nothing at the wall; "
    "elements placed after them still start from the closure without them.",
    "Bending of the lining under unequal stress is checked only where the project asks for it: as "
    "a thin elastic ring of all parts at once, placed before the ground moves and brought to the "
    "thrust at rest, so that the unequal load is assumed to fall as the mean does. Rings that act "
    "from different distances, or harden, have the thrust that they carry and a moment on the safe "
    "side of it; of a later ring this thrust is too small where earlier support is neglected. "
    "Young shotcrete is checked at the age of its highest thrust beside its strength. Against an "
    "elastic annulus of 0.06 of its radius the thin ring gave, bonded to the ground, 10 % less "
    "swing of thrust and 5 % more moment, and with full slip 2.7 % less of both.",
    "Screened by flags, and not computed: blocks and wedges, face stability, spalling and rock "
    "burst, squeezing in time, swelling, portals, neighbouring openings, faults. Not examined at "
    "all: settlement, junctions, earthquakes, gas.",
    "Quantities are theoretical and unrounded: no overbreak, rebound or laps.",
)
