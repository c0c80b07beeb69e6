"""Compares candidates for one loop: each checked itself, each refusal with its number.

Candidates of the same size share everything the loop has to say about that size, so that a list of thousands costs
little more than a list of fifty.
"""

from collections.abc import Sequence
from functools import cached_property
from math import inf

from msgspec.structs import replace

from loopslack.calc.acceptance import AcceptanceNeeded, Extents
from loopslack.calc.analysis import Analysis
from loopslack.calc.checks import pressure_to_withstand
from loopslack.calc.cooling import Charged, hottest
from loopslack.calc.delivered import nearest_precharge
from loopslack.calc.fit import Fit, cooling_for, fit
from loopslack.calc.model import Vessel
from loopslack.calc.precharge import gas_of
from loopslack.calc.reasons import Reason, ReasonCode, shortage
from loopslack.calc.scenarios import BASE, Scenario
from loopslack.calc.sizing.volumes import CoolingMode, Sized, size
from loopslack.calc.window import Bounds
from loopslack.kernel import kinds
from loopslack.kernel.errors import CalculationError

# Refusals solved with the candidate's own cooling vessel; further ones are told by the loop as sized, so that a list
# of thousands stays affordable.
_MOST_SOLVED = 50


class Selector:
    """Compares candidates for one loop under one policy."""

    def __init__(
        self,
        analysis: Analysis,
        scenarios: Sequence[Scenario],
        sized: Sized | None,
        cooling: CoolingMode,
        membrane_limit: float,
        *,
        accept_without_boiling: bool = False,
    ) -> None:
        self.analysis, self.scenarios, self.sized = analysis, scenarios, sized
        self.accept_without_boiling = accept_without_boiling
        self.cooling: CoolingMode = cooling
        self.membrane_limit = membrane_limit
        self._fits: dict[tuple[object, ...], Fit | None] = {}
        self._reasons: dict[tuple[object, ...], tuple[Reason, ...]] = {}
        self._other_reasons: dict[tuple[object, ...], list[Reason]] = {}
        self._acceptances: dict[tuple[float, float | None], AcceptanceNeeded] = {}
        self._extents: Extents = {}
        self._precharges: dict[tuple[float, float], list[Reason]] = {}
        self._solved = 0
        self._needed = pressure_to_withstand(analysis, analysis.loop.relief, 0.0)

    def reasons(self, vessel: Vessel, count: int, *, exact: bool = True) -> tuple[Reason, ...]:
        """Every reason against a candidate.

        ``exact`` solves for the candidate's own cooling vessel; without it, and after ``_MOST_SOLVED`` refusals, the
        loop as sized tells, which is enough to sort those ranked after the choice.
        """
        own = self._own(vessel)
        key = (exact, count, vessel.rated_pressure, own)
        found = self._reasons.get(key)
        if found is None:
            others = self._other_reasons.get((exact, count, own))
            if others is None:
                others = self.against(vessel, count, exact=exact)
                self._other_reasons[exact, count, own] = others
            found = self._reasons[key] = (*self._rating(vessel), *others)
        return found

    def _rating(self, vessel: Vessel) -> list[Reason]:
        """Whether the vessel withstands what the relief valve lets through."""
        rated = vessel.rated_pressure
        if rated is None or rated >= self._needed:
            return []
        return [shortage("rated-pressure", kinds.GAUGE_PRESSURE, rated, self._needed)]

    def against(self, vessel: Vessel, count: int, *, exact: bool) -> list[Reason]:
        """Every reason but the rated pressure, which has to do with nothing else."""
        sized = self.sized
        if sized is None:
            rest = self._rest
            return [self._no_volume, *(rest.against(vessel, count, exact=False) if rest else ())]
        found: list[Reason] = []
        nominal = vessel.nominal_volume * count
        smallest, largest = sized.smallest, sized.interval.largest
        if nominal < smallest:
            found.append(shortage("nominal-volume", kinds.NOMINAL_VOLUME, nominal, smallest))
            found += self._acceptance(vessel, count, sized, smallest, None)
        elif nominal > largest:
            code: ReasonCode = "nominal-volume-beyond-interval"
            found.append(Reason(code, kinds.NOMINAL_VOLUME, nominal, largest, nominal - largest))
        else:
            brief = [] if exact and self._solved < _MOST_SOLVED else self._brief(vessel, count, sized)
            if brief or not exact:
                return found + brief
            fitted = self.fit(vessel, count)
            if fitted is None:
                limit = self._limit(vessel)
                found.append(Reason("membrane-temperature", kinds.TEMPERATURE, limit, None, None))
            elif not fitted.window.wide_enough:
                self._solved += 1
                self._explain(vessel, count, fitted, found)
        return found

    def _brief(self, vessel: Vessel, count: int, sized: Sized) -> list[Reason]:
        """Reasons against a vessel in the loop as it was sized, with the cooling vessel of the smallest one."""
        nominal = vessel.nominal_volume * count
        fixed = None if vessel.precharge_adjustable else vessel.delivered_precharge
        if fixed is not None:
            narrow = self._precharges.get((nominal, fixed))
            if narrow is None:
                narrow = self._precharges[nominal, fixed] = self._as_delivered(nominal, fixed, sized)
            if narrow:
                return narrow
        return self._acceptance(vessel, count, sized, nominal, fixed)

    def _as_delivered(self, nominal: float, fixed: float, sized: Sized) -> list[Reason]:
        """Whether the precharge as delivered leaves a vessel of ``nominal`` m3 a window in the loop as sized."""
        plain = self._plain(_article(nominal, fixed), sized)
        if plain.window.wide_enough:
            return []
        adjusted = self._plain(_article(nominal, None), sized)
        if not adjusted.window.wide_enough:
            return [self._too_narrow(plain)]
        needed = nearest_precharge(adjusted, self.scenarios, fixed, lambda _: True)
        return [shortage("precharge-as-delivered", kinds.GAUGE_PRESSURE, fixed, needed)]

    def _plain(self, article: Vessel, sized: Sized) -> Fit:
        """A vessel in the loop as it was sized."""
        gas = gas_of(sized.analysis, article, 1)
        window = Bounds(sized.analysis, self.scenarios, gas).window(gas.nominal)
        return Fit(article, 1, gas, sized.analysis, window)

    @cached_property
    def _no_volume(self) -> Reason:
        """No volume holds: the steam power nothing condenses, or no window at any size."""
        unspent = max(map(self._unspent, self.scenarios))
        if unspent > 0:
            return Reason("unspent-power", kinds.POWER, unspent, 0.0, unspent)
        return Reason("no-window", kinds.PRESSURE_DIFFERENCE, None, None, None)

    def _unspent(self, scenario: Scenario) -> float:
        """Steam power (W) left over at the valve's pressure; none known where the scenario is not computed."""
        try:
            return self.analysis.case(scenario).final.unspent
        except CalculationError:
            return 0.0

    @cached_property
    def _rest(self) -> "Selector | None":
        """Compares under the scenarios that some volume holds under, where none holds under all of them.

        What spoils every volume is one reason; a vessel may be too small for the others all the same.
        """

        def sized(scenarios: tuple[Scenario, ...]) -> Sized | None:
            try:
                return size(
                    self.analysis,
                    scenarios,
                    self.cooling,
                    self.membrane_limit,
                    accept_without_boiling=self.accept_without_boiling,
                )
            except CalculationError:
                return None

        possible = tuple(scenario for scenario in self.scenarios if sized((scenario,)) is not None)
        for scenarios in (possible, (BASE,)):
            if BASE in scenarios and (found := sized(scenarios)) is not None:
                return Selector(self.analysis, scenarios, found, self.cooling, self.membrane_limit)
        return None

    def _explain(self, vessel: Vessel, count: int, fitted: Fit, found: list[Reason]) -> None:
        """Which property of the vessel narrows its window."""
        unbounded = fit(
            self.analysis,
            self.scenarios,
            replace(vessel, acceptance_volume=None),
            count,
            self.cooling,
            self._limit(vessel),
        )
        if vessel.acceptance_volume is not None and unbounded and unbounded.window.wide_enough:
            needed = AcceptanceNeeded(unbounded, self.scenarios).volume / count
            value = vessel.acceptance_volume
            found.append(Reason("acceptance-volume", kinds.ACCEPTANCE_VOLUME, value, needed, needed - value))
            return
        if not vessel.precharge_adjustable and vessel.delivered_precharge is not None:
            adjusted = fit(
                self.analysis,
                self.scenarios,
                replace(vessel, precharge_adjustable=True),
                count,
                self.cooling,
                self.membrane_limit,
            )
            if adjusted is not None and adjusted.window.wide_enough:
                found.append(self._delivered(vessel, vessel.delivered_precharge, adjusted))
                return
        if fitted.window.lower_bound.code == "membrane-temperature":
            limit = self._limit(vessel)
            needed_limit = self._membrane_needed(fitted)
            short = None if needed_limit is None else needed_limit - limit
            found.append(Reason("membrane-temperature", kinds.TEMPERATURE, limit, needed_limit, short))
            return
        found.append(self._too_narrow(fitted))

    def _too_narrow(self, fitted: Fit) -> Reason:
        width = fitted.window.width
        limit = self.analysis.loop.criteria.window_width
        value = width if abs(width) < inf else None
        return Reason("no-window", kinds.PRESSURE_DIFFERENCE, value, limit, None)

    def _delivered(self, vessel: Vessel, delivered: float, adjusted: Fit) -> Reason:
        """How far the delivered precharge is from the nearest one that leaves a window."""

        def holds(precharge: float) -> bool:
            other = replace(vessel, delivered_precharge=precharge)
            found = fit(
                self.analysis, self.scenarios, other, adjusted.pieces, self.cooling, self.membrane_limit
            )
            return found is not None and found.window.wide_enough

        needed = nearest_precharge(adjusted, self.scenarios, delivered, holds)
        return shortage("precharge-as-delivered", kinds.GAUGE_PRESSURE, delivered, needed)

    def _membrane_needed(self, fitted: Fit) -> float | None:
        """Membrane limit (K) with which a vessel's window would be just wide enough."""
        plain = fit(fitted.analysis, self.scenarios, fitted.vessel, fitted.pieces, "size", inf, content=0.0)
        if plain is None or not plain.window.wide_enough:
            return None
        # Ten pascals lower, so that a window found with this limit is wide enough in spite of rounding.
        lowest = plain.window.upper - self.analysis.loop.criteria.window_width - 10.0
        charged = Charged(plain.analysis, plain.gas, plain.mass_at(lowest))
        return hottest(charged, self.scenarios)[0] + 1e-6

    def _acceptance(
        self, vessel: Vessel, count: int, sized: Sized, nominal: float, fixed: float | None
    ) -> list[Reason]:
        """Whether the membrane takes what a vessel of ``nominal`` m3 would have to hold in the loop as sized."""
        accepted = vessel.acceptance_volume
        if accepted is None:
            return []
        asked = self._acceptances.get((nominal, fixed))
        if asked is None:
            fitted = self._plain(_article(nominal, fixed), sized)
            asked = self._acceptances[nominal, fixed] = AcceptanceNeeded(
                fitted, self.scenarios, self._extents
            )
        if asked.suffices(accepted * count):
            return []
        return [shortage("acceptance-volume", kinds.ACCEPTANCE_VOLUME, accepted, asked.volume / count)]

    def _limit(self, vessel: Vessel) -> float:
        return self.membrane_limit if vessel.membrane_limit is None else vessel.membrane_limit

    @staticmethod
    def _own(vessel: Vessel) -> tuple[object, ...]:
        """All that tells one vessel from another, but its rating, its price and its name."""
        fixed = None if vessel.precharge_adjustable else vessel.delivered_precharge
        return vessel.nominal_volume, vessel.acceptance_volume, fixed, vessel.membrane_limit

    def fit(self, vessel: Vessel, count: int) -> Fit | None:
        """A candidate in the loop with its own cooling vessel; None where none is large enough."""
        key = (count, self._own(vessel))
        if key not in self._fits:
            content = None
            if self.cooling == "size":
                content = cooling_for(self.analysis, self.scenarios, vessel, count, self._limit(vessel))
                if content is None:
                    # Either no cooling vessel helps or the vessel has no window at all: the plain fit tells which.
                    plain = fit(self.analysis, self.scenarios, vessel, count, "size", inf, content=0.0)
                    wide = plain is not None and plain.window.wide_enough
                    self._fits[key] = None if wide else plain
                    return self._fits[key]
            self._fits[key] = fit(
                self.analysis,
                self.scenarios,
                vessel,
                count,
                self.cooling,
                self.membrane_limit,
                content,
            )
        found = self._fits[key]
        return found and replace(found, vessel=vessel, pieces=count)


def _article(nominal: float, fixed: float | None) -> Vessel:
    """A vessel of ``nominal`` m3 whose precharge is ``fixed`` (gauge Pa), or can be set."""
    return Vessel(
        id="", nominal_volume=nominal, delivered_precharge=fixed, precharge_adjustable=fixed is None
    )
