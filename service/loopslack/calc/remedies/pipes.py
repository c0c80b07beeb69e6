"""Measures on the pipes that steam fills: more of them, bare ones, runs opened to steam.

Pipe is added and bared at the end towards the station, where steam comes last. Steam gives off more heat there only
when it would otherwise arrive at the station.
"""

from collections.abc import Callable
from functools import lru_cache

from loopslack.calc.analysis import Analysis
from loopslack.calc.judge import required
from loopslack.calc.judgement import DoubtPolicy
from loopslack.calc.model import Branch, Loop
from loopslack.calc.remedies.case import Case
from loopslack.calc.remedies.changes import Change
from loopslack.calc.remedies.measure import Measure, Option
from loopslack.kernel import kinds
from loopslack.kernel.errors import CalculationError

_ALL = -1.0  # stands for every run
_BARE_SHARES = (0.1, 0.25, 0.5, 1.0)
_EXTRA_SHARES = (0.05, 0.1, 0.2, 0.4, 0.7, 1.0)  # no more than the loop already has (own assumption)


class LookAtRun(Measure):
    """A look where the check valve sits, by which a run nobody has placed one in turns out to be open.

    Work to be proved, and the least there is: it changes nothing of the loop, and so nothing of its filling. What it is
    judged with is the loop as it then would be known.
    """

    code = "open-run"
    rank = 1
    refills = False
    kind = kinds.LENGTH

    def options(self, case: Case) -> list[Option]:
        """Each run of which it is not known, shortest first, then all of them."""
        runs = self._runs(case)
        found = [Option(float(k)) for k in runs]
        return [*found, Option(_ALL)] if len(runs) > 1 else found

    def own_changes(self, case: Case, amount: float) -> tuple[Change, ...]:
        """Runs opened."""
        chosen = self._runs(case) if amount < 0 else [int(amount)]
        return tuple(Change("steam-access", place=k) for k in chosen)

    def shown(self, case: Case, amount: float) -> float:
        """Length of the runs opened, m."""
        return sum(case.loop.branches[change.place].length for change in self.own_changes(case, amount))

    def _runs(self, case: Case) -> list[int]:
        return _runs(case.loop, lambda branch: branch.access == "unknown")


class OpenRun(LookAtRun):
    """A check valve placed so that steam can push liquid down a run it cannot enter.

    A run of which it is not known is opened along with those that are shut, and alone by a look first.
    """

    rank = 10
    refills = True

    def options(self, case: Case) -> list[Option]:
        """Each run that is shut, shortest first, then all that are not open."""
        shut = _runs(case.loop, lambda branch: branch.access == "closed")
        found = [Option(float(k)) for k in shut]
        return [*found, Option(_ALL)] if shut and len(self._runs(case)) > 1 else found

    def _runs(self, case: Case) -> list[int]:
        return _runs(case.loop, lambda branch: branch.access != "open")


class BarePipe(Measure):
    """Insulation taken off the last metres of every open run before the station."""

    code = "bare-pipe"
    rank = 12
    any_value = True
    finest = 0.1
    kind = kinds.LENGTH

    def options(self, case: Case) -> list[Option]:
        """Metres in every open run up to its whole length."""
        runs = [k for k in open_runs(case) if any(s.insulation > 0 for s in case.loop.branches[k].segments)]
        longest = max((case.loop.branches[k].length for k in runs), default=0.0)
        found, towards = [], 0.0
        for share in _BARE_SHARES if runs else ():
            found.append(Option(share * longest, towards))
            towards = share * longest
        return found

    def own_changes(self, case: Case, amount: float) -> tuple[Change, ...]:
        """Metres bared, run by run."""
        branches = case.loop.branches
        return tuple(Change("bare-pipe", min(amount, branches[k].length), place=k) for k in open_runs(case))

    def shown(self, case: Case, amount: float) -> float:
        """Metres bared in all."""
        return sum(change.value for change in self.own_changes(case, amount))


class BareRun(Measure):
    """Insulation taken off a whole run."""

    code = "bare-run"
    rank = 13
    kind = kinds.LENGTH

    def options(self, case: Case) -> list[Option]:
        """Each open run with insulation, shortest first."""
        runs = open_runs(case)
        insulated = [k for k in runs if any(s.insulation > 0 for s in case.loop.branches[k].segments)]
        return [Option(float(k)) for k in insulated] if len(runs) > 1 else []

    def own_changes(self, case: Case, amount: float) -> tuple[Change, ...]:
        """A run bared."""
        return (Change("bare-pipe", case.loop.branches[int(amount)].length, place=int(amount)),)

    def shown(self, case: Case, amount: float) -> float:
        """Length of the run, m."""
        return case.loop.branches[int(amount)].length


class ExtraPipe(Measure):
    """More pipe in every open run, laid level before the station or as a detour on its last stretch."""

    code = "extra-pipe"
    rank = 14
    any_value = True
    finest = 0.1
    kind = kinds.LENGTH

    def options(self, case: Case) -> list[Option]:
        """Metres in every open run, up to as much as there is."""
        runs = open_runs(case)
        length = sum(case.loop.branches[k].length for k in runs) / max(1, len(runs))
        found, towards = [], 0.0
        for share in _EXTRA_SHARES if runs else ():
            found.append(Option(share * length, towards))
            towards = share * length
        return found

    def own_changes(self, case: Case, amount: float) -> tuple[Change, ...]:
        """Metres added, run by run."""
        return tuple(Change("extra-pipe", amount, place=k) for k in open_runs(case))

    def shown(self, case: Case, amount: float) -> float:
        """Metres added in all."""
        return amount * len(open_runs(case))


def open_runs(case: Case) -> list[int]:
    """Runs that are open to steam, shortest first; of several steam spaces those whose steam reaches the station."""
    runs = _runs(case.loop, lambda branch: branch.access == "open")
    spaces = _arriving(case.loop, case.policy)
    return [k for k in runs if case.loop.branches[k].space in spaces] if spaces else runs


def _runs(loop: Loop, wanted: Callable[[Branch], bool]) -> list[int]:
    found = [k for k, branch in enumerate(loop.branches) if wanted(branch)]
    return sorted(found, key=lambda k: loop.branches[k].length)


@lru_cache(maxsize=16)
def _arriving(loop: Loop, policy: DoubtPolicy) -> frozenset[int]:
    """Steam spaces whose steam reaches the station at the final pressure, base case or doubt."""
    ids = list(dict.fromkeys(group.space for group in loop.groups))
    if len(ids) == 1:
        return frozenset(ids)
    try:
        analysis = Analysis(loop)
        return frozenset(
            ids[k]
            for scenario in required(analysis, policy)
            for k, steam in enumerate(analysis.case(scenario).final.spaces)
            if steam.unspent > 0
        )
    except CalculationError:
        return frozenset()
