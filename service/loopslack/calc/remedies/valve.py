"""Measures on the relief valve and on what it protects: another set pressure, higher ratings of parts."""

from math import ceil
from typing import NamedTuple

from loopslack.calc import checks
from loopslack.calc.analysis import Analysis
from loopslack.calc.equilibrium import ROUNDING
from loopslack.calc.model import Relief
from loopslack.calc.remedies.case import Case, analysed
from loopslack.calc.remedies.changes import VESSEL, Change, valve_set_to
from loopslack.calc.remedies.measure import Measure, Option
from loopslack.kernel import kinds
from loopslack.kernel.errors import CalculationError
from loopslack.kernel.kinds import GaugePressure
from loopslack.physics.relief import set_tolerance_iso_4126_1

_STEP = 0.5e5
_LOWEST, _HIGHEST = 0.5e5, 16e5  # Pa gauge, what a question may state
_HIGHEST_RATING = 100e5
_MOST_DOWN = 8


class HigherValve(Measure):
    """A relief valve of higher set pressure, within the ratings of all parts."""

    code = "relief-valve"
    rank = 8
    kind = kinds.GAUGE_PRESSURE
    rising = True

    def options(self, case: Case) -> list[Option]:
        """Set pressures above the present one in steps of half a bar, as far as every stated rating bears."""
        analysis = _analysis(case)
        first = int(case.loop.relief.set_pressure / _STEP + 1e-6) + 1
        found = []
        for k in range(first, int(_HIGHEST / _STEP) + 1):
            if analysis is None or not _possible(analysis, case, valve_set_to(case.loop.relief, k * _STEP)):
                break
            found.append(Option(k * _STEP))
        return found

    def own_changes(self, case: Case, amount: float) -> tuple[Change, ...]:  # noqa: ARG002 - one signature for all measures
        """A new set pressure."""
        return (Change("relief-set-pressure", amount),)

    def present(self, case: Case) -> float:
        """The present set pressure, Pa gauge."""
        return case.loop.relief.set_pressure


class LowerValve(HigherValve):
    """A relief valve of lower set pressure, where the present one lets a part see more than its rating."""

    rising = False

    def options(self, case: Case) -> list[Option]:
        """Set pressures below the present one, highest first, where the present one is too high."""
        analysis, relief = _analysis(case), case.loop.relief
        if analysis is None or not overloaded(analysis, case, relief):
            return []
        first = ceil(relief.set_pressure / _STEP - 1e-6) - 1
        found = [
            Option(k * _STEP)
            for k in range(first, int(_LOWEST / _STEP) - 1, -1)
            if _possible(analysis, case, valve_set_to(relief, k * _STEP))
        ]
        return found[:_MOST_DOWN]


class PartRatings(Measure):
    """Parts, and the vessel if need be, rated for what the relief valve lets through."""

    code = "part-rating"
    rank = 9
    kind = kinds.GAUGE_PRESSURE

    def options(self, case: Case) -> list[Option]:
        """The one rating for all parts that have too low a one."""
        failing = _failing(case)
        if not failing:
            return []
        amount = ceil(max(part.needed for part in failing) / _STEP - 1e-9) * _STEP
        return [Option(amount)] if amount <= _HIGHEST_RATING else []

    def own_changes(self, case: Case, amount: float) -> tuple[Change, ...]:
        """A new rating of every part concerned."""
        return tuple(Change("rated-pressure", amount, place=part.place) for part in _failing(case))

    def present(self, case: Case) -> float | None:
        """The lowest rating that is too low, Pa gauge."""
        return min((part.rated for part in _failing(case)), default=None)


class Overloaded(NamedTuple):
    """A part whose rating is too low: its place among the parts, rating and need, Pa gauge."""

    place: int
    rated: float
    needed: float


def overloaded(analysis: Analysis, case: Case, relief: Relief) -> list[Overloaded]:
    """Parts whose stated rating does not bear a valve; the vessel among them if no candidate bears it."""
    found = []
    for k, part in enumerate(case.loop.parts):
        needed = checks.pressure_to_withstand(analysis, relief, part.height)
        if part.rated_pressure is not None and not _bears(part.rated_pressure, needed):
            found.append(Overloaded(k, part.rated_pressure, needed))
    needed = checks.pressure_to_withstand(analysis, relief, 0.0)
    ratings = [vessel.rated_pressure for vessel in case.candidates]
    stated = [rating for rating in ratings if rating is not None]
    if len(stated) == len(ratings) and not any(_bears(rating, needed) for rating in stated):
        found.append(Overloaded(VESSEL, max(stated), needed))
    return found


def _bears(rating: float, needed: float) -> bool:
    return rating >= needed * (1 - ROUNDING)


def _failing(case: Case) -> list[Overloaded]:
    analysis = _analysis(case)
    return [] if analysis is None else overloaded(analysis, case, case.loop.relief)


def _possible(analysis: Analysis, case: Case, relief: Relief) -> bool:
    """Whether a valve may be had: every stated rating bears it, and a stated allowance is not below its tolerance."""
    tolerance = set_tolerance_iso_4126_1(GaugePressure(relief.set_pressure))
    allowance = relief.set_pressure - relief.opening_pressure
    if allowance < tolerance * (1 - ROUNDING) or relief.opening_pressure <= 0:
        return False
    return not overloaded(analysis, case, relief)


def _analysis(case: Case) -> Analysis | None:
    try:
        return analysed(case)
    except CalculationError:
        return None
