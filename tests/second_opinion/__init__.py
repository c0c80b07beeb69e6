"""A second opinion: the four states of a closed glycol solar loop, solved another way.

Lives here: an independent fluid model (CoolProp below 100 degC, an own extension above, ideal Raoult
boiling), an independent steam path and an independent solver of the stagnation balance, with the loops to try
them on. Must not live here: any import of the service. Whatever the two have in common they have in common by
physics.

Everything is SI: m, m2, m3, kg, K, Pa absolute, W.
"""

from .case import Branch, Case, Group, Segment
from .fluid import Fluid, fluid
from .stagnation import Stagnation, smallest_vessel, stagnation
from .states import LiquidState, cold, filled, liquid_state, operating

__all__ = [
    "Branch",
    "Case",
    "Fluid",
    "Group",
    "LiquidState",
    "Segment",
    "Stagnation",
    "cold",
    "filled",
    "fluid",
    "liquid_state",
    "operating",
    "smallest_vessel",
    "stagnation",
]
