"""Pairs of measures, for cases that no single measure mends."""

from collections.abc import Iterable, Sequence
from itertools import combinations
from math import ceil, inf
from typing import NamedTuple

from loopslack.calc.analysis import Analysis
from loopslack.calc.remedies.bench import Bench
from loopslack.calc.remedies.case import Case
from loopslack.calc.remedies.changes import Change, changed, valve_set_to
from loopslack.calc.remedies.measure import Found, Measure, Option
from loopslack.calc.remedies.valve import HigherValve, PartRatings, overloaded
from loopslack.kernel.errors import CalculationError
from loopslack.kernel.work import Work

_STEP = 0.5e5  # Pa, of set pressures and ratings
_HIGHEST = 16e5
_ALIKE = ({"bare-pipe", "bare-run", "extra-pipe"}, {"relief-valve"}, {"open-run"})


class Pair(NamedTuple):
    """Two measures that help only together, the smaller intervention first. Case and outcome are those of both."""

    first: Found
    second: Found

    @property
    def changes(self) -> tuple[Change, ...]:
        """The changes of both. The larger intervention was solved first, so it is applied first."""
        return (*self.second.changes, *self.first.changes)


def smallest_pair(case: Case, every: Sequence[Measure], bench: Bench) -> Work[Pair | None]:
    """The pair of lowest rank that helps, among all pairs of measures.

    Bounded: a pair is solved only where a generous amount of the one lets the other seem to help. The larger
    intervention is then solved with a generous amount of the smaller, and the smaller anew with the larger in place.
    """
    able = [measure for measure in every if measure.probes(case)]
    both, untried = HigherValveAndRatings(), True
    pairs = sorted(combinations(able, 2), key=lambda pair: (pair[0].rank + pair[1].rank, pair[1].rank))
    for smaller, larger in pairs:
        if bench.spent:
            return None
        if untried and smaller.rank + larger.rank > both.rank:
            untried = False
            found = yield from both.search(case, bench)
            if found is not None:
                return both.split(found)
        if any({smaller.code, larger.code} <= alike for alike in _ALIKE):
            continue
        pair = yield from _solved(case, smaller, larger, bench)
        if pair is not None:
            return pair
    found = (yield from both.search(case, bench)) if untried else None
    return None if found is None else both.split(found)


def _solved(case: Case, smaller: Measure, larger: Measure, bench: Bench) -> Work[Pair | None]:
    for probe in smaller.probes(case):
        generous = changed(case, probe)
        promising = yield from _promising(
            (changed(generous, more) for more in larger.probes(generous)), bench
        )
        if not promising:
            continue
        second = yield from larger.search(generous, bench)
        if second is None:
            continue
        first = yield from smaller.search(changed(case, second.changes), bench)
        if first is not None:
            return Pair(first, second)
    return None


def _promising(cases: Iterable[Case], bench: Bench) -> Work[bool]:
    for case in cases:
        if bench.spent:
            return False
        volume = bench.volume(case)
        yield
        if volume < inf:
            return True
    return False


class HigherValveAndRatings(HigherValve):
    """A valve of higher set pressure together with the ratings it then asks for."""

    rank = HigherValve.rank + PartRatings.rank

    def options(self, case: Case) -> list[Option]:
        """Every set pressure above the present one."""
        first = int(case.loop.relief.set_pressure / _STEP + 1e-6) + 1
        return [Option(k * _STEP) for k in range(first, int(_HIGHEST / _STEP) + 1)]

    def own_changes(self, case: Case, amount: float) -> tuple[Change, ...]:
        """The set pressure and the rating of every part that does not bear it."""
        relief = valve_set_to(case.loop.relief, amount)
        try:
            failing = overloaded(Analysis(case.loop), case, relief)
        except CalculationError:
            failing = []
        ratings = (
            Change("rated-pressure", ceil(part.needed / _STEP - 1e-9) * _STEP, place=part.place)
            for part in failing
        )
        return (Change("relief-set-pressure", amount), *ratings)

    def split(self, found: Found) -> Pair:
        """The two measures as a pair."""
        valve, *ratings = found.changes
        filling = tuple(change for change in ratings if change.id == "fill-pressure")
        ratings = [change for change in ratings if change.id == "rated-pressure"]
        highest = max((change.value for change in ratings), default=valve.value)
        second = found._replace(
            code=PartRatings.code,
            rank=PartRatings.rank,
            amount=highest,
            present=None,
            changes=tuple(ratings),
        )
        return Pair(found._replace(rank=HigherValve.rank, changes=(valve, *filling)), second)
