"""The relief valve (safety valve): how far below its stamp it may open, where it shuts, what parts must bear.

Published allowances stand side by side; which one a question uses is chosen elsewhere. The capacity of a
valve is not here: it is the maker's figure, held against the steam that the collectors can make.
"""

from collections.abc import Callable, Mapping

from loopslack.kernel.citations import COMMON_PRACTICE, DERIVED, Cite
from loopslack.kernel.equation import Range, equation
from loopslack.kernel.kinds import Density, GaugePressure, Length, PressureDifference
from loopslack.physics.statics import GRAVITY

_FROM_ZERO = Range(0.0)
_SET = {"set_pressure": _FROM_ZERO}
_SYMBOL = {"p_sv": "set pressure"}


@equation(
    "allowance-en-12828",
    law="a = max(50000, 0.1 * p_sv)",
    symbols=_SYMBOL,
    source=Cite("en-12828", "from-memory"),
    note="Half a bar for set pressures up to 5 bar, a tenth above; the two meet at 5 bar.",
    valid=_SET,
)
def allowance_en_12828(set_pressure: GaugePressure) -> PressureDifference:
    """Distance below the set pressure, Pa, by EN 12828 and DIN 4807-2: 0.5 bar up to 5 bar, 10 % above."""
    return PressureDifference(max(50_000.0, 0.1 * set_pressure))


@equation(
    "allowance-ten-percent",
    law="a = 0.1 * p_sv",
    symbols=_SYMBOL,
    source=Cite("idae-asit-022", "read"),
    note="The guide's example takes 5.4 bar for a valve of 6 bar.",
    valid=_SET,
)
def allowance_ten_percent(set_pressure: GaugePressure) -> PressureDifference:
    """Distance below the set pressure, Pa: one tenth of it. Below 5 bar EN 12828 asks for more."""
    return PressureDifference(0.1 * set_pressure)


@equation(
    "allowance-task-26",
    law="a = 0.2 * p_sv if p_sv <= 300000 else 0.1 * p_sv",
    symbols=_SYMBOL,
    source=Cite("hausner-fink-2002", "from-memory"),
    note="One fifth up to 3 bar, one tenth above; the step at 3 bar is the publication's.",
    valid=_SET,
)
def allowance_task_26(set_pressure: GaugePressure) -> PressureDifference:
    """Distance below the set pressure, Pa: 20 % up to 3 bar, 10 % above. Drops by half just above 3 bar."""
    return PressureDifference(0.2 * set_pressure if set_pressure <= 300_000.0 else 0.1 * set_pressure)


@equation(
    "allowance-five-psi",
    law="a = 34473.786465841575",
    symbols=_SYMBOL,
    source=COMMON_PRACTICE,
    note="Five pounds-force per square inch whatever the set pressure.",
    valid=_SET,
)
def allowance_five_psi(set_pressure: GaugePressure) -> PressureDifference:  # noqa: ARG001 - one signature for all rules
    """Distance below the set pressure, Pa: 5 psi, whatever the set pressure."""
    return PressureDifference(34473.786465841575)


@equation(
    "set-tolerance-iso-4126-1",
    law="a = max(10000, 0.03 * p_sv)",
    symbols=_SYMBOL,
    source=Cite("iso-4126-1", "from-memory"),
    note="Three per cent or 0.1 bar, whichever is more.",
    valid=_SET,
)
def set_tolerance_iso_4126_1(set_pressure: GaugePressure) -> PressureDifference:
    """How far a sound valve may open below its stamp, Pa: the least allowance that a verdict may rest on."""
    return PressureDifference(max(10_000.0, 0.03 * set_pressure))


ALLOWANCES: Mapping[str, Callable[[GaugePressure], PressureDifference]] = {
    "en-12828": allowance_en_12828,
    "ten-percent": allowance_ten_percent,
    "task-26": allowance_task_26,
    "five-psi": allowance_five_psi,
    "iso-4126-1": set_tolerance_iso_4126_1,
}
"""Every rule for the distance below the set pressure, by its name."""


@equation(
    "opening-pressure",
    law="p_open = p_sv - a",
    symbols={"p_sv": "set pressure", "a": "allowance"},
    source=DERIVED,
    note="Definition of the allowance.",
    valid={"set_pressure": _FROM_ZERO, "allowance": _FROM_ZERO},
)
def opening_pressure(set_pressure: GaugePressure, allowance: PressureDifference) -> GaugePressure:
    """Lowest gauge pressure at the valve, Pa, at which it must be expected to open.

    Negative when the allowance exceeds the set pressure: no loop can run under such a valve.
    """
    return GaugePressure(set_pressure - allowance)


@equation(
    "pressure-under-valve",
    law="p_k = p_rv + rho * 9.80665 * z",
    symbols={"p_rv": "pressure at valve", "rho": "density", "z": "valve height"},
    source=DERIVED,
    note="Column pressure between the valve and the part.",
    valid={"density": _FROM_ZERO},
)
def pressure_under_valve(
    pressure_at_valve: GaugePressure, density: Density, valve_height: Length
) -> GaugePressure:
    """Gauge pressure, Pa, at a part while the valve has the stated pressure.

    ``valve_height`` counts from the part up to the valve. A valve above the vessel allows the vessel more,
    one below allows less; take the density that errs on the safe side, hot if the valve is above, cold if
    it is below. With the set pressure it gives the rating that a part must have: whether or not that
    pressure is ever computed to occur, the valve is what protects the part.
    """
    return GaugePressure(pressure_at_valve + density * GRAVITY * valve_height)


@equation(
    "blowdown-liquid",
    law="b = max(60000, 0.2 * p_sv)",
    symbols=_SYMBOL,
    source=Cite("iso-4126-1", "from-memory"),
    note="One fifth or 0.6 bar, whichever is more, for a valve that passes liquid.",
    valid=_SET,
)
def blowdown_liquid(set_pressure: GaugePressure) -> PressureDifference:
    """How far below its set pressure a valve that passes liquid may stay open, Pa.

    The largest permitted blowdown: it loses the most liquid, which is the safe side for what is left in the
    loop.
    """
    return PressureDifference(max(60_000.0, 0.2 * set_pressure))


@equation(
    "blowdown-gas",
    law="b = max(30000, 0.15 * p_sv)",
    symbols=_SYMBOL,
    source=Cite("iso-4126-1", "from-memory"),
    note="Fifteen per cent or 0.3 bar, whichever is more, for a valve that passes gas or steam.",
    valid=_SET,
)
def blowdown_gas(set_pressure: GaugePressure) -> PressureDifference:
    """How far below its set pressure a valve that passes gas or steam may stay open, Pa; the most."""
    return PressureDifference(max(30_000.0, 0.15 * set_pressure))


@equation(
    "closing-pressure",
    law="p_close = p_sv - b",
    symbols={"p_sv": "set pressure", "b": "blowdown"},
    source=DERIVED,
    note="Definition of the blowdown.",
    valid={"set_pressure": _FROM_ZERO, "blowdown": _FROM_ZERO},
)
def closing_pressure(set_pressure: GaugePressure, blowdown: PressureDifference) -> GaugePressure:
    """Gauge pressure at the valve, Pa, at which it has shut again.

    Negative for a set pressure below the blowdown: the valve may then stay open until the loop stands empty
    above it.
    """
    return GaugePressure(set_pressure - blowdown)
