"""A second way to every number of a section: scalar, slow, from the governing equations.

Nothing here imports the program. Each function takes plain numbers for one section and solves
the equations with scipy: quadrature, ordinary differential equations, bracketed roots. It serves
as the other side of comparisons, and of benchmarks.

`section_results` does a whole section: see `reference.sections`.
"""

from reference.closure_profile import share_of_closure
from reference.equilibrium import Spring, State, pressure_at_closure, state_at_rest
from reference.ground_curve import GroundCurve
from reference.sections import SectionResults, section_results

__all__ = [
    "GroundCurve",
    "SectionResults",
    "Spring",
    "State",
    "pressure_at_closure",
    "section_results",
    "share_of_closure",
    "state_at_rest",
]
