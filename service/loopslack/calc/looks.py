"""Looks at candidates in one loop, its cooling vessel fixed: which of them do, and what each lacks.

Nothing is solved for a single candidate: candidates of the same size share everything the loop has to say about that
size, so that a list of thousands costs little more than a list of fifty.
"""

from collections.abc import Sequence
from math import inf

from msgspec.structs import replace

from loopslack.calc.acceptance import AcceptanceNeeded
from loopslack.calc.analysis import Analysis
from loopslack.calc.cooling import Charged, surely_cool
from loopslack.calc.delivered import nearest_precharge
from loopslack.calc.extents import Extents
from loopslack.calc.fit import Fit
from loopslack.calc.model import Vessel
from loopslack.calc.precharge import gas_of
from loopslack.calc.reasons import Reason, shortage
from loopslack.calc.scenarios import Scenario
from loopslack.calc.window import Bounds, Gas
from loopslack.kernel import kinds


class Looks:
    """What a loop with its cooling vessel says of candidates under some scenarios."""

    def __init__(
        self,
        analysis: Analysis,
        scenarios: Sequence[Scenario],
        *,
        adds_cooling: bool,
        extents: Extents | None = None,
    ) -> None:
        """``adds_cooling`` says that cooling vessels are added; ``extents`` are of the loop with another one."""
        self.analysis, self.scenarios, self.adds_cooling = analysis, scenarios, adds_cooling
        self.extents = Extents(analysis, extents)
        self._last: Bounds | None = None
        self._plain: dict[tuple[float, float | None], Fit] = {}
        self._acceptances: dict[tuple[float, float | None], AcceptanceNeeded] = {}
        self._delivered: dict[tuple[float, float, float], Reason] = {}
        self._cool: dict[tuple[float, float | None, float, float | None], bool] = {}

    def plain(self, nominal: float, fixed: float | None) -> Fit:
        """A vessel of ``nominal`` m3 with a fixed precharge (gauge Pa as delivered) or one that can be set."""
        found = self._plain.get((nominal, fixed))
        if found is None:
            article = _article(nominal, fixed)
            gas = gas_of(self.analysis, article, 1)
            found = Fit(article, 1, gas, self.analysis, self._bounds(gas).window(nominal))
            self._plain[nominal, fixed] = found
        return found

    def _bounds(self, gas: Gas) -> Bounds:
        """Bounds for a precharge; nearly all vessels have the same, and the others differ in nothing else."""
        last = self._last
        if last is None:
            last = Bounds(self.analysis, self.scenarios, gas)
        elif (last.precharge, last.temperature) != (gas.precharge, gas.temperature):
            last = last.charged(gas)
        self._last = last
        return last

    def wide(self, vessel: Vessel, count: int) -> bool:
        """Whether vessels lack nothing, their membrane's temperature aside."""
        nominal = vessel.nominal_volume * count
        fixed = None if vessel.precharge_adjustable else vessel.delivered_precharge
        if not self.plain(nominal, fixed).window.wide_enough:
            return False
        accepted = vessel.acceptance_volume
        return accepted is None or self._acceptance(nominal, fixed).suffices(accepted * count)

    def does(self, vessel: Vessel, count: int, limit: float) -> bool:
        """Whether vessels are sure to do, their membrane at or below ``limit`` K; False if unknown."""
        return self.wide(vessel, count) and self.cool(vessel, count, limit)

    def lacks(self, vessel: Vessel, count: int, limit: float) -> list[Reason]:
        """What keeps vessels from a wide enough window; empty where they have one.

        A vessel can lack both: its precharge is then told for a membrane that takes enough, and its membrane for a
        precharge that can be set.
        """
        nominal = vessel.nominal_volume * count
        fixed = None if vessel.precharge_adjustable else vessel.delivered_precharge
        found: list[Reason] = []
        if fixed is not None and not self.plain(nominal, fixed).window.wide_enough:
            if not self.plain(nominal, None).window.wide_enough:
                return [too_narrow(self.plain(nominal, fixed))]
            found.append(self.delivered(nominal, fixed, limit))
            fixed = None
        elif not self.plain(nominal, fixed).window.wide_enough:
            return [too_narrow(self.plain(nominal, fixed))]
        return found + self.short_membrane(vessel, count, nominal, fixed)

    def delivered(self, nominal: float, fixed: float, limit: float) -> Reason:
        """How far a delivered precharge is from the nearest one that leaves a window, the membrane cool."""

        def cool(precharge: float) -> bool:
            return self.cool(_article(nominal, precharge), 1, limit)

        found = self._delivered.get((nominal, fixed, limit))
        if found is None:
            adjusted = self.plain(nominal, None)
            needed = nearest_precharge(adjusted, self._bounds(adjusted.gas), fixed, cool)
            found = shortage("precharge-as-delivered", kinds.GAUGE_PRESSURE, fixed, needed)
            self._delivered[nominal, fixed, limit] = found
        return found

    def short_membrane(self, vessel: Vessel, count: int, nominal: float, fixed: float | None) -> list[Reason]:
        """Whether the membrane takes what vessels of ``nominal`` m3 in all would have to hold."""
        accepted = vessel.acceptance_volume
        asked = None if accepted is None else self._acceptance(nominal, fixed)
        if accepted is None or asked is None or asked.suffices(accepted * count):
            return []
        return [shortage("acceptance-volume", kinds.ACCEPTANCE_VOLUME, accepted, asked.volume / count)]

    def _acceptance(self, nominal: float, fixed: float | None) -> AcceptanceNeeded:
        found = self._acceptances.get((nominal, fixed))
        if found is None:
            found = AcceptanceNeeded(self.plain(nominal, fixed), self.scenarios, self.extents)
            self._acceptances[nominal, fixed] = found
        return found

    def cool(self, vessel: Vessel, count: int, limit: float) -> bool:
        """Whether the membrane is sure to stay within ``limit`` K; False if that is not known.

        At every filling of the window where a cooling vessel is added for that; else at those that leave the window
        just wide enough, since the lower ones are then left out of it.
        """
        nominal = vessel.nominal_volume * count
        fixed = None if vessel.precharge_adjustable else vessel.delivered_precharge
        accepted = None if self.adds_cooling else vessel.acceptance_volume
        key = nominal, fixed, limit, accepted
        found = self._cool.get(key)
        if found is None:
            fitted = self.plain(nominal, fixed)
            least = fitted.window.lower_bound.mass
            if not self.adds_cooling:
                least = max(least, self._fullest(fitted, inf if accepted is None else accepted * count))
            charged = Charged(self.analysis, fitted.gas, least)
            found = self._cool[key] = surely_cool(
                charged, self.scenarios, limit, self.extents, closely=not self.adds_cooling
            )
        return found

    def _fullest(self, fitted: Fit, acceptance: float) -> float:
        """Mass (kg) that leaves a wide enough window above it, and no more."""
        gas, criteria = fitted.gas, self.analysis.loop.criteria
        window = self._bounds(gas).window(gas.nominal, acceptance)
        # Ten pascals lower, so that the window found with this bound is wide enough in spite of rounding.
        return fitted.mass_at(window.upper - criteria.window_width - 10.0) if window.wide_enough else -inf


def _article(nominal: float, fixed: float | None) -> Vessel:
    return Vessel(
        id="", nominal_volume=nominal, delivered_precharge=fixed, precharge_adjustable=fixed is None
    )


def tolerant(vessel: Vessel) -> Vessel:
    """The vessel with a membrane that takes any volume."""
    return replace(vessel, acceptance_volume=None)


def too_large(nominal: float, largest: float) -> Reason:
    """A nominal volume beyond the upper end of the feasible ones."""
    return Reason("nominal-volume-beyond-interval", kinds.NOMINAL_VOLUME, nominal, largest, nominal - largest)


def too_narrow(fitted: Fit) -> Reason:
    """The window that no property of the vessel alone narrows."""
    width = fitted.window.width
    limit = fitted.analysis.loop.criteria.window_width
    value = width if abs(width) < inf else None
    return Reason("no-window", kinds.PRESSURE_DIFFERENCE, value, limit, None)
