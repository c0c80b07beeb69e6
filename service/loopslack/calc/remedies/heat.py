"""Measures on the heat of the steam: a stagnation cooler at the station, and what better emptying would have to be.

Better emptying is no remedy: it is work on the pipes whose success only a measurement shows, so it is told apart and
turns no verdict.
"""

from math import inf
from typing import NamedTuple

from msgspec.structs import replace

from loopslack.calc.judge import required
from loopslack.calc.model import CollectorGroup
from loopslack.calc.remedies.bench import Bench
from loopslack.calc.remedies.case import Case, analysed
from loopslack.calc.remedies.changes import Change
from loopslack.calc.remedies.measure import Measure, Option
from loopslack.kernel import kinds
from loopslack.kernel.errors import CalculationError
from loopslack.kernel.work import Work
from loopslack.library.defaults import default

_LARGEST = 1e7  # W, what a question may state
_LEAST_POWER = 5.0  # W/m2, the least that a measurement may be stated as
_WITHIN = 0.5


class StagnationCooler(Measure):
    """A cooler that takes heat from the steam before it reaches the station, stated at the steam's temperature."""

    code = "stagnation-cooler"
    rank = 11
    any_value = True
    finest = 1.0
    kind = kinds.POWER

    def options(self, case: Case) -> list[Option]:
        """As much as all collectors can send out; the least is solved for."""
        loop = case.loop
        most = sum(group.aperture * _most_power(group) for group in loop.groups)
        try:
            unspent = unspent_power(case)
        except CalculationError:
            return []
        amount = max(loop.station.steam_loss, most)
        if unspent <= 0 or amount > _LARGEST:
            return []
        return [Option(amount, loop.station.steam_loss + min(unspent, most))]

    def own_changes(self, case: Case, amount: float) -> tuple[Change, ...]:  # noqa: ARG002 - one signature for all measures
        """A cooler of a power."""
        return (Change("steam-cooler", amount),)

    def present(self, case: Case) -> float:
        """What is taken at the station now, W."""
        return case.loop.station.steam_loss


class Emptying(NamedTuple):
    """Steam power (W/m2 of aperture) to be proved by a measurement, and the largest there is now."""

    steam_power: float
    present: float


def better_emptying(case: Case, bench: Bench) -> Work[Emptying | None]:
    """How little steam the collectors would have to send out for the loop to seem to hold; None if none is enough.

    The quarter by which a measured figure is doubted is counted in.
    """
    present = max(group.steam_power for group in case.loop.groups)
    good, bad = _LEAST_POWER, present
    promising = bench.volume(with_steam_power(case, good)) < inf
    yield
    if not promising or good >= bad:
        return None
    while bad - good > _WITHIN and not bench.spent:
        middle = 0.5 * (good + bad)
        if bench.volume(with_steam_power(case, middle)) < inf:
            good = middle
        else:
            bad = middle
        yield
    return Emptying(float(int(good)), present)


def with_steam_power(case: Case, power: float) -> Case:
    """The case with every group measured at no more than a steam power (W/m2)."""
    worse = default("doubt-measured-steam-power").si

    def measured(group: CollectorGroup) -> CollectorGroup:
        own = min(group.steam_power, power)
        return replace(group, emptying="measured", steam_power=own, worse_steam_power=own * worse)

    groups = tuple(measured(group) for group in case.loop.groups)
    return replace(case, loop=replace(case.loop, groups=groups))


def unspent_power(case: Case) -> float:
    """Most power (W) left at the station at the final pressure, or below it where the loop can stand there.

    That at the final pressure is the least there is: at any lower one there is more steam and less loss.
    """
    analysis = analysed(case)
    scenarios = required(analysis, case.policy)
    unspent = max(analysis.case(scenario).final.unspent for scenario in scenarios)
    if unspent > 0:
        return unspent
    # Steam reaches the station only at lower pressures: any cooler may widen the window.
    reaches = any(analysis.case(scenario).station is not None for scenario in scenarios)
    return 1e-3 if reaches else 0.0


def _most_power(group: CollectorGroup) -> float:
    return max(group.steam_power, group.worse_steam_power or 0.0)
