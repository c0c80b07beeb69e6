"""The least vessel of a loop that relies on its collectors not boiling: one place for sizing, choice and verdict."""

from loopslack.calc.analysis import Analysis
from loopslack.calc.scenarios import BASE
from loopslack.calc.sizing.rules.en_12977 import en_12977_volume


def without_boiling_floor(analysis: Analysis, *, accept_without_boiling: bool) -> float:
    """Least volume (m3) for a loop that relies on its collectors not boiling at the final pressure, else 0.

    Such a loop stands on a computed stagnation temperature alone, so the volume of EN 12977 is asked for, unless
    the caller accepts less and states measured stagnation temperatures. Raises ``CalculationError`` where the steam of
    the base case is not known, or the precharge leaves that rule no room.
    """
    if analysis.case(BASE).final.boiling:
        return 0.0
    measured = all(group.measured_stagnation for group in analysis.loop.groups)
    if accept_without_boiling and measured:
        return 0.0
    return en_12977_volume(analysis)
