"""Tries changed cases: quickly, to search with, and in full, to offer only what was judged whole.

The quick trial asks for the nominal volume that the windows need; it leaves out what takes long (the cooling
vessel of a design, the equilibria) and so may be too kind, never decisive. The full trial is the design or the check
itself without what a remedy does not need. Both are counted, and the count bounds the work.
"""

from math import inf

from msgspec.structs import replace

from loopslack.calc import checks
from loopslack.calc.analysis import Analysis
from loopslack.calc.cooling import Charged, hottest
from loopslack.calc.existing import check
from loopslack.calc.judge import required
from loopslack.calc.judgement import Judgement
from loopslack.calc.model import Vessel
from loopslack.calc.nearest import Asked, judged
from loopslack.calc.precharge import gas_of
from loopslack.calc.remedies.case import Case, Outcome
from loopslack.calc.scenarios import Scenario
from loopslack.calc.selection import choose
from loopslack.calc.selector import Selector
from loopslack.calc.sizing.floor import without_boiling_floor
from loopslack.calc.sizing.mass_balance import feasible
from loopslack.calc.sizing.volumes import Sized, size
from loopslack.calc.window import Bounds
from loopslack.kernel.errors import CalculationError

MOST_QUICK, MOST_FULL = 300, 24
_LARGEST_SENSIBLE = 10.0  # contents of the loop (own assumption): no remedy that asks for a larger vessel


class Bench:
    """Where cases are tried, and the books of it."""

    def __init__(self, most_quick: int = MOST_QUICK, most_full: int = MOST_FULL) -> None:
        self.most_quick, self.most_full = most_quick, most_full
        self.quick = self.full = 0
        self._weighed = 0

    @property
    def evaluations(self) -> int:
        """All trials so far."""
        return self.quick + self.full

    @property
    def spent(self) -> bool:
        """Whether the work allowed is used up."""
        return self.quick >= self.most_quick or self._weighed >= self.most_full

    def volume(self, case: Case) -> float:
        """Nominal volume (m3) that a case seems to need; infinite where it does not seem to hold.

        Nothing for a vessel that is there and seems to do.
        """
        self.quick += 1
        try:
            analysis = Analysis(case.loop)
            if not sound(analysis):
                return inf
            scenarios = required(analysis, case.policy)
            # The gravest doubts stand last; they decide soonest.
            if any(analysis.case(scenario).at_station for scenario in reversed(scenarios)):
                return inf
            if case.existing or (len(case.candidates) == 1 and case.pieces == 1):
                return 0.0 if _seems_to_do(analysis, scenarios, case) else inf
            return _volume_needed(analysis, scenarios, case)
        except CalculationError:
            return inf

    def outcome(self, case: Case) -> Outcome:
        """Try a case in full. With several steam spaces a trial takes longer and so counts double."""
        self.full += 1
        self._weighed += 1 if len({group.space for group in case.loop.groups}) == 1 else 2
        try:
            return _checked(case) if case.existing else _designed(case)
        except CalculationError:
            return Outcome(False)

    def sized(self, case: Case) -> Sized | None:
        """The smallest vessel of any size with which a case holds; None if there is none."""
        self.full += 1
        try:
            analysis = Analysis(case.loop)
            return _size(analysis, required(analysis, case.policy), case) if sound(analysis) else None
        except CalculationError:
            return None


def sound(analysis: Analysis) -> bool:
    """Whether the checks that no vessel can mend hold: freezing, ratings and temperatures of parts."""
    loop = analysis.loop
    found = [checks.freezing(analysis), *checks.part_temperatures(analysis)]
    found.extend(checks.protected(analysis, part) for part in loop.parts)
    return all(check.verdict != "does-not-hold" for check in found)


def rating_needed(analysis: Analysis) -> float:
    """Gauge pressure (Pa) that a vessel must be rated for."""
    return checks.pressure_to_withstand(analysis, analysis.loop.relief, 0.0)


def _bears(vessel: Vessel, needed: float) -> bool:
    return vessel.rated_pressure is None or vessel.rated_pressure >= needed


def _seems_to_do(analysis: Analysis, scenarios: tuple[Scenario, ...], case: Case) -> bool:
    """Whether one given vessel has a wide enough window, and its filling lies in it."""
    vessel, loop = case.candidates[0], analysis.loop
    if not _bears(vessel, rating_needed(analysis)):
        return False
    gas = gas_of(analysis, vessel, case.pieces)
    if gas.nominal < _floor(analysis, case):
        return False
    bounds = Bounds(analysis, scenarios, gas)
    window = bounds.window(gas.nominal, gas.acceptance)
    if not window.wide_enough:
        return False
    filled = case.fill_pressure
    if case.mass is not None:
        filled = bounds.pressure(gas.nominal, case.mass, loop.temperatures.fill)
    if filled is not None and not window.lower <= filled <= window.upper:
        return False
    several = len({group.space for group in loop.groups}) > 1
    if case.cooling == "size" or several:
        # A design adds its cooling vessel; several steam spaces take too long for a quick look.
        return True
    limit = loop.criteria.membrane_limit if vessel.membrane_limit is None else vessel.membrane_limit
    # More liquid keeps the membrane cooler, so one look at the least filling that must be allowed is enough.
    least = max(window.lower, window.upper - loop.criteria.window_width)
    least = least if filled is None else min(least, filled)
    charged = Charged(analysis, gas, bounds.mass(gas.nominal, least))
    return hottest(charged, scenarios)[0] <= limit


def _volume_needed(analysis: Analysis, scenarios: tuple[Scenario, ...], case: Case) -> float:
    """Smallest nominal volume by the windows, infinite beyond every candidate that bears the valve's pressure."""
    needed = rating_needed(analysis)
    sizes = [v.nominal_volume * case.pieces for v in case.candidates if _bears(v, needed)]
    largest = max(sizes, default=0.0)
    if len(sizes) > 1:
        largest = min(largest, max(_LARGEST_SENSIBLE * analysis.content, min(sizes)))
    interval = feasible(analysis, scenarios, upper_end=False)
    if interval is None:
        return inf
    floor = _floor(analysis, case)
    smallest = max(interval.smallest, floor)
    if smallest > largest:
        return inf
    if case.cooling != "size":
        limited = feasible(analysis, scenarios, analysis.loop.criteria.membrane_limit, upper_end=False)
        smallest = inf if limited is None else max(limited.smallest, floor)
    return smallest if smallest <= largest else inf


def _floor(analysis: Analysis, case: Case) -> float:
    return without_boiling_floor(analysis, accept_without_boiling=case.accept_without_boiling)


def _size(analysis: Analysis, scenarios: tuple[Scenario, ...], case: Case) -> Sized | None:
    limit = analysis.loop.criteria.membrane_limit
    return size(analysis, scenarios, case.cooling, limit, accept_without_boiling=case.accept_without_boiling)


def _designed(case: Case) -> Outcome:
    """What a design would choose, judged; without the volumes that only its answer shows."""
    analysis = Analysis(case.loop)
    if not sound(analysis):
        return Outcome(False)
    scenarios = required(analysis, case.policy)
    sized = _size(analysis, scenarios, case)
    if sized is None:
        return Outcome(False)
    limit = case.loop.criteria.membrane_limit
    selector = Selector(analysis, scenarios, sized, case.cooling, limit)
    chosen = choose(selector, case.candidates, case.pieces).chosen
    if chosen is None:
        return Outcome(False)
    if case.fill_pressure is not None:
        chosen = replace(chosen, window=replace(chosen.window, recommended=case.fill_pressure))
    asked = Asked(analysis, case.policy, case.cooling, case.fill_pressure, case.accept_without_boiling)
    judgement = judged(asked, chosen, chosen.window)
    return Outcome(_satisfied(case, judgement), chosen, judgement)


def _checked(case: Case) -> Outcome:
    """The check of the vessel that is there."""
    found = check(
        case.loop,
        case.candidates[0],
        case.pieces,
        case.policy,
        fill_pressure=case.fill_pressure,
        mass=case.mass,
        accept_without_boiling=case.accept_without_boiling,
    )
    return Outcome(_satisfied(case, found.judgement), found.fitted, found.judgement)


def _satisfied(case: Case, judgement: Judgement) -> bool:
    """Whether the policy has what it asks for; one that asks for no doubt never says more than favourable."""
    return judgement.verdict == "holds" or (case.policy == "none" and judgement.base == "holds")
