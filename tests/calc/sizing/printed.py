"""The reference loop under the conventions that the published rules are printed with.

Everything is filled, charged and kept at 15 degC, the fluid-data allowance is left out, and head and start pressure
count with the density at that temperature: head 1.118 bar, precharge 1.618 bar, fill 1.918 bar, final 5.4 bar.
"""

from functools import cache

from msgspec.structs import replace

from calc.reference import CRITERIA, TEMPERATURES, ZERO, loop
from loopslack.calc.analysis import Analysis
from loopslack.calc.model import Loop

FIFTEEN = ZERO + 15


def printed_loop(**changes) -> Loop:
    temperatures = replace(
        TEMPERATURES, site_minimum=FIFTEEN, indoor_cold=FIFTEEN, vessel_room=FIFTEEN, vessel_cold=FIFTEEN
    )
    criteria = replace(CRITERIA, fluid_allowance=0.0)
    return loop(**({"temperatures": temperatures, "criteria": criteria} | changes))


@cache
def printed_analysis() -> Analysis:
    return Analysis(printed_loop())
