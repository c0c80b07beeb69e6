"""Compares candidates for one loop: each checked itself, each refusal with its number.

A look at a candidate in the loop as it was sized, with the cooling vessel of the smallest volume, costs little and
proves that it does. One that does not do there may with a cooling vessel of its own, which has to be solved; beyond
``_MOST_SOLVED`` of those the look alone tells, and the refusal says so.
"""

from collections.abc import Sequence
from functools import cached_property
from math import inf
from typing import NamedTuple

from msgspec.structs import replace

from loopslack.calc.analysis import Analysis
from loopslack.calc.checks import pressure_to_withstand
from loopslack.calc.explaining import explained
from loopslack.calc.fit import Fit, cooling_for, fit
from loopslack.calc.looks import Looks, tolerant, too_large
from loopslack.calc.model import Vessel
from loopslack.calc.reasons import Reason, shortage
from loopslack.calc.scenarios import BASE, Scenario
from loopslack.calc.sizing.volumes import CoolingMode, Sized, size
from loopslack.kernel import kinds
from loopslack.kernel.errors import CalculationError

_MOST_SOLVED = 50
_ROOMIER = 1.5, 4.0  # of the cooling vessel of the smallest volume: enough for nearly all that do at all


class Grounds(NamedTuple):
    """The reasons against a candidate; ``as_sized`` where it might do with a cooling vessel of its own, not solved."""

    reasons: tuple[Reason, ...]
    as_sized: bool = False


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
        self._contents: dict[tuple[float, float | None, float], float | None] = {}
        self._grounds: dict[tuple[object, ...], Grounds] = {}
        self._other_grounds: dict[tuple[object, ...], Grounds] = {}
        self._looks = (
            None if sized is None else Looks(sized.analysis, scenarios, adds_cooling=cooling == "size")
        )
        cold = tuple(scenario for scenario in scenarios if not scenario.gas_follows)
        self._kindest = Looks(
            analysis, cold, adds_cooling=False
        )  # no cooling vessel, no warm gas: nothing is asked for less
        self._solved = 0
        self._needed = pressure_to_withstand(analysis, analysis.loop.relief, 0.0)

    def reasons(self, vessel: Vessel, count: int, *, exact: bool = True) -> tuple[Reason, ...]:
        """Every reason against a candidate; none means that it does."""
        return self.grounds(vessel, count, exact=exact).reasons

    def grounds(self, vessel: Vessel, count: int, *, exact: bool = True) -> Grounds:
        """Every reason against a candidate.

        ``exact`` solves for the cooling vessel of a candidate that does not do with that of the smallest volume;
        without it the look is enough, which is all that those ranked after the choice are given.
        """
        fixed = None if vessel.precharge_adjustable else vessel.delivered_precharge
        size, accepted, limit = vessel.nominal_volume, vessel.acceptance_volume, vessel.membrane_limit
        key = vessel.rated_pressure, size, accepted, fixed, limit, count, exact
        found = self._grounds.get(key)
        if found is None:
            own = key[1:]
            others = self._other_grounds.get(own)
            if others is None:
                others = self._other_grounds[own] = self.against(vessel, count, exact=exact)
            rating = self._rating(vessel)
            found = Grounds((*rating, *others.reasons), others.as_sized) if rating else others
            self._grounds[key] = found
        return found

    def _rating(self, vessel: Vessel) -> list[Reason]:
        """Whether the vessel withstands what the relief valve lets through."""
        rated = vessel.rated_pressure
        if rated is None or rated >= self._needed:
            return []
        return [shortage("rated-pressure", kinds.GAUGE_PRESSURE, rated, self._needed)]

    def against(self, vessel: Vessel, count: int, *, exact: bool) -> Grounds:
        """Every reason but the rated pressure, which has to do with nothing else."""
        sized, looks = self.sized, self._looks
        if sized is None or looks is None:
            rest = self._rest
            return Grounds(
                (self._no_volume, *(rest.against(vessel, count, exact=False).reasons if rest else ()))
            )
        nominal = vessel.nominal_volume * count
        fixed = None if vessel.precharge_adjustable else vessel.delivered_precharge
        limit = self.limit(vessel)
        usual = fixed is None and limit <= self.membrane_limit
        if nominal < sized.floor or (nominal < sized.smallest and (usual or self._hopeless(nominal, fixed))):
            # The smallest volume is that of just such a vessel with a membrane that takes more.
            return Grounds(self._too_small(vessel, count, sized, looks))
        sizing, wide = self.cooling == "size", looks.wide(vessel, count)
        cool = (wide or not sizing) and looks.cool(vessel, count, limit)
        if wide and cool:
            return Grounds(())
        if not wide and not usual and self._hopeless(nominal, fixed):
            return Grounds(self._told(vessel, count, sized, looks))
        # Gas that stays cooler may leave a vessel of much precharge the window that it has not yet.
        worth = self._roomier if wide else self._roomier[-1:] if fixed is not None else ()
        roomy = any(roomier.does(vessel, count, limit) for roomier in worth)
        if roomy and not exact:
            return Grounds(())
        # A cooling vessel of its own changes what a candidate has room for, and may cool a membrane that is too hot.
        unsure = wide or (sized.cooling > 0 if sizing else not cool)
        if unsure and self._worth_solving(exact=exact, does=wide, still=not sizing and not cool):
            self._solved += 1
            fitted = self.fit(vessel, count)
            if roomy or (fitted is not None and fitted.window.wide_enough):
                return Grounds(())
            told = fixed is not None and self._doing(vessel, count, fixed)
            if not told and sized.smallest <= nominal <= sized.interval.largest:
                return Grounds(tuple(explained(self, vessel, count, fitted)))
            unsure = False
        return Grounds(self._told(vessel, count, sized, looks), unsure)

    def _hopeless(self, nominal: float, fixed: float | None) -> bool:
        """Whether a vessel has no wide enough window even without a cooling vessel and with its gas cool."""
        return not self._kindest.plain(nominal, fixed).window.wide_enough

    def _told(self, vessel: Vessel, count: int, sized: Sized, looks: Looks) -> tuple[Reason, ...]:
        """The reasons of a candidate that was not solved, by a look."""
        nominal = vessel.nominal_volume * count
        if nominal < sized.smallest:
            return self._too_small(vessel, count, sized, looks)
        limit = self.limit(vessel)
        unknown = Reason("membrane-temperature", kinds.TEMPERATURE, limit, None, None)
        fixed = None if vessel.precharge_adjustable else vessel.delivered_precharge
        # As it is but for what its membrane takes: told by the smallest cooling vessel it does with.
        cool = self._doing(vessel, count, fixed)
        if cool:
            return tuple(cool.short_membrane(vessel, count, nominal, fixed)) or (unknown,)
        free = None if fixed is None else self._doing(vessel, count, None)
        if fixed is not None and free:
            # Another precharge may warm the membrane much: told by the largest cooling vessel it does with.
            ample = self._doing(vessel, count, None, last=True) or free
            return ample.delivered(nominal, fixed, limit), *free.short_membrane(vessel, count, nominal, None)
        if nominal > sized.interval.largest and not looks.wide(tolerant(vessel), count):
            return (too_large(nominal, sized.interval.largest),)
        if self.cooling == "size" and self._solved < _MOST_SOLVED:
            self._solved += 1
            return tuple(explained(self, vessel, count, self.fit(vessel, count)))
        return tuple(looks.lacks(vessel, count, limit)) or (unknown,)

    def _doing(self, vessel: Vessel, count: int, fixed: float | None, *, last: bool = False) -> Looks | None:
        """The look with the smallest cooling vessel, or the largest, by which a vessel does, its acceptance aside."""
        unlimited = tolerant(vessel)
        if fixed is None:
            unlimited = replace(unlimited, precharge_adjustable=True)
        every = [look for look in (self._looks, *self._roomier) if look is not None]
        does = (
            look for look in every[:: -1 if last else 1] if look.does(unlimited, count, self.limit(vessel))
        )
        return next(does, None)

    @cached_property
    def _roomier(self) -> tuple[Looks, ...]:
        """Looks at the loop with larger cooling vessels, as larger or warmer vessels need them; see ``_ROOMIER``."""
        sized, looks = self.sized, self._looks
        if sized is None or looks is None or self.cooling != "size":
            return ()
        contents = [share * sized.cooling for share in _ROOMIER if sized.cooling > 0]
        return tuple(
            Looks(
                self.analysis.with_cooling(content),
                self.scenarios,
                adds_cooling=True,
                extents=looks.extents,
            )
            for content in contents
        )

    def _worth_solving(self, *, exact: bool, does: bool, still: bool) -> bool:
        """Whether a candidate is solved of which a look does not tell all.

        ``does`` says that nothing but the membrane's temperature is open, ``still`` that no cooling vessel is added
        that could settle it. A candidate that may be the choice is always worth it where it does otherwise.
        """
        if exact and does:
            return True
        return (exact or does or still) and self._solved < _MOST_SOLVED

    def _too_small(self, vessel: Vessel, count: int, sized: Sized, looks: Looks) -> tuple[Reason, ...]:
        """A nominal volume below the smallest, and a membrane that takes less than even the smallest would hold."""
        nominal = vessel.nominal_volume * count
        small = shortage("nominal-volume", kinds.NOMINAL_VOLUME, nominal, sized.smallest)
        return small, *looks.short_membrane(vessel, count, sized.smallest, None)

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

    def limit(self, vessel: Vessel) -> float:
        """Membrane limit of a vessel, K."""
        return self.membrane_limit if vessel.membrane_limit is None else vessel.membrane_limit

    def chosen(self, vessel: Vessel, count: int) -> Fit | None:
        """A candidate that does, with its own cooling vessel, else with the smallest it is sure to do with."""
        found = self.fit(vessel, count)
        if found is not None and found.window.wide_enough:
            return found
        for times, look in zip((1.0, *_ROOMIER), (self._looks, *self._roomier), strict=False):
            if look is not None and look.does(vessel, count, self.limit(vessel)):
                content = look.analysis.loop.cooling_content
                roomy = fit(
                    self.analysis, self.scenarios, vessel, count, self.cooling, self.membrane_limit, content
                )
                return roomy and replace(roomy, cooling_times=times)
        return found

    def fit(self, vessel: Vessel, count: int) -> Fit | None:
        """A candidate in the loop with its own cooling vessel; None where none is large enough."""
        fixed = None if vessel.precharge_adjustable else vessel.delivered_precharge
        key = vessel.nominal_volume, vessel.acceptance_volume, fixed, vessel.membrane_limit, count
        if key not in self._fits:
            self._fits[key] = self._fitted(vessel, count)
        found = self._fits[key]
        return found and replace(found, vessel=vessel, pieces=count)

    def _content(self, vessel: Vessel, count: int) -> float | None:
        """Content (m3) of a candidate's own cooling vessel, which what its membrane takes has nothing to do with."""
        fixed = None if vessel.precharge_adjustable else vessel.delivered_precharge
        limit = self.limit(vessel)
        key = vessel.nominal_volume * count, fixed, limit
        if key not in self._contents:
            free = replace(vessel, acceptance_volume=None)
            self._contents[key] = cooling_for(self.analysis, self.scenarios, free, count, limit)
        return self._contents[key]

    def _fitted(self, vessel: Vessel, count: int) -> Fit | None:
        analysis, scenarios = self.analysis, self.scenarios
        content = None
        if self.cooling == "size":
            content = self._content(vessel, count)
            if content is None:
                # Either no cooling vessel helps or the vessel has no window at all: the plain fit tells which.
                plain = fit(analysis, scenarios, vessel, count, "size", inf, content=0.0)
                return None if plain is not None and plain.window.wide_enough else plain
        return fit(analysis, scenarios, vessel, count, self.cooling, self.membrane_limit, content)
