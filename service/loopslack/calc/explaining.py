"""Why a candidate that was solved with a cooling vessel of its own does not do: each property, and by how much."""

from collections.abc import Sequence
from math import inf
from typing import Protocol

from msgspec.structs import replace

from loopslack.calc.acceptance import AcceptanceNeeded
from loopslack.calc.analysis import Analysis
from loopslack.calc.cooling import Charged, hottest
from loopslack.calc.delivered import nearest_precharge
from loopslack.calc.fit import Fit, fit
from loopslack.calc.looks import too_narrow
from loopslack.calc.model import Vessel
from loopslack.calc.reasons import Reason, shortage
from loopslack.calc.scenarios import Scenario
from loopslack.calc.sizing.volumes import CoolingMode
from loopslack.calc.window import Bounds
from loopslack.kernel import kinds


class Asked(Protocol):
    """What candidates are solved for; ``membrane_limit`` in K."""

    analysis: Analysis
    scenarios: Sequence[Scenario]
    cooling: CoolingMode
    membrane_limit: float

    def fit(self, vessel: Vessel, count: int) -> Fit | None:
        """A candidate in the loop with its own cooling vessel; None where none is large enough."""

    def limit(self, vessel: Vessel) -> float:
        """Membrane limit of a vessel, K."""


def explained(asked: Asked, vessel: Vessel, count: int, fitted: Fit | None) -> list[Reason]:
    """Which properties narrow the window of a vessel with a cooling vessel of its own."""
    limit = asked.limit(vessel)
    if fitted is None:
        return [Reason("membrane-temperature", kinds.TEMPERATURE, limit, None, None)]
    found: list[Reason] = []
    fixed = None if vessel.precharge_adjustable else vessel.delivered_precharge
    base = asked.fit(replace(vessel, acceptance_volume=None), count)
    if fixed is not None and not (base is not None and base.window.wide_enough):
        free = replace(vessel, acceptance_volume=None, precharge_adjustable=True)
        base = asked.fit(free, count)
        if base is not None and base.window.wide_enough:
            found.append(_delivered(asked, free, fixed, base))
    if base is not None and base.window.wide_enough:
        accepted = vessel.acceptance_volume
        needed = None if accepted is None else AcceptanceNeeded(base, asked.scenarios).volume / count
        if accepted is not None and needed is not None and accepted < needed:
            found.append(shortage("acceptance-volume", kinds.ACCEPTANCE_VOLUME, accepted, needed))
        return found or [too_narrow(fitted)]
    if fitted.window.lower_bound.code == "membrane-temperature":
        needed = _membrane_needed(asked, fitted)
        short = None if needed is None else needed - limit
        return [Reason("membrane-temperature", kinds.TEMPERATURE, limit, needed, short)]
    return [too_narrow(fitted)]


def _delivered(asked: Asked, vessel: Vessel, delivered: float, adjusted: Fit) -> Reason:
    """How far the delivered precharge is from the nearest one that leaves a window."""

    def holds(precharge: float) -> bool:
        other = replace(vessel, delivered_precharge=precharge, precharge_adjustable=False)
        found = fit(
            asked.analysis, asked.scenarios, other, adjusted.pieces, asked.cooling, asked.membrane_limit
        )
        return found is not None and found.window.wide_enough

    bounds = Bounds(adjusted.analysis, asked.scenarios, adjusted.gas)
    needed = nearest_precharge(adjusted, bounds, delivered, holds)
    return shortage("precharge-as-delivered", kinds.GAUGE_PRESSURE, delivered, needed)


def _membrane_needed(asked: Asked, fitted: Fit) -> float | None:
    """Membrane limit (K) with which a vessel's window would be just wide enough."""
    plain = fit(fitted.analysis, asked.scenarios, fitted.vessel, fitted.pieces, "size", inf, content=0.0)
    if plain is None or not plain.window.wide_enough:
        return None
    # Ten pascals lower, so that a window found with this limit is wide enough in spite of rounding.
    lowest = plain.window.upper - asked.analysis.loop.criteria.window_width - 10.0
    charged = Charged(plain.analysis, plain.gas, plain.mass_at(lowest))
    return hottest(charged, asked.scenarios)[0] + 1e-6
