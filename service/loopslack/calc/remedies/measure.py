"""What a measure is, and how its smallest amount is found. Which measures there are: the other modules.

A measure offers amounts, smallest intervention first. Amounts that are steps are tried in turn; between two amounts
that may take any value the smallest is solved for, then moved by a practical step to the safe side.
"""

from abc import ABC, abstractmethod
from collections.abc import Sequence
from math import ceil, floor, inf, log10
from typing import Literal, NamedTuple

from loopslack.calc.remedies.bench import Bench
from loopslack.calc.remedies.case import Case, Outcome
from loopslack.calc.remedies.changes import Change, changed
from loopslack.kernel.kinds import Kind
from loopslack.kernel.work import Work

RemedyCode = Literal[
    "fill-pressure",
    "precharge",
    "cut-off",
    "stronger-glycol",
    "vessel",
    "cooling-vessel",
    "relief-valve",
    "part-rating",
    "stagnation-cooler",
    "open-run",
    "bare-pipe",
    "bare-run",
    "extra-pipe",
]

SPARE_VESSEL = 1.25
"""How much larger a vessel may be than if the station took all steam: one preferred size (own assumption).

The least amount of anything that only just keeps steam from the station goes with a vessel without bounds, and
nobody wants it; a little more of the amount brings the vessel down to nearly what the rest of the loop needs.
"""

_MARGIN = 1e-4  # share by which an amount is moved to the safe side before it is rounded there
_FULL_TRIES = 4
_BOUNDLESS = 1e9  # W
_WITHIN = 0.004  # share of the amount within which the smallest is found


class Option(NamedTuple):
    """An amount to try. ``towards`` is a smaller intervention that fails, where the amount may take any value."""

    amount: float
    towards: float = 0.0


class Found(NamedTuple):
    """The smallest amount of a measure with which a case holds.

    ``amount`` and ``present`` are what an answer shows, in SI of ``kind``; there may be nothing present.
    """

    code: RemedyCode
    rank: int
    kind: Kind
    amount: float
    present: float | None
    changes: tuple[Change, ...]
    case: Case
    outcome: Outcome


class Measure(ABC):
    """A way to change a loop. ``rank`` orders measures by how small the intervention is."""

    code: RemedyCode
    rank: int
    kind: Kind
    any_value = False  # whether amounts may take any value between two options
    rising = False  # whether a larger step never holds less
    refills = True  # whether the work opens the loop, which is then filled anew, as recommended
    finest = 0.0  # the smallest difference of an amount that means anything, SI

    def __init__(self, *, keep_filling: bool = False) -> None:
        self.keep_filling = keep_filling

    @abstractmethod
    def options(self, case: Case) -> Sequence[Option]:
        """Amounts, smallest intervention first; none where the measure has no place in this case."""

    @abstractmethod
    def own_changes(self, case: Case, amount: float) -> tuple[Change, ...]:
        """The changes an amount means."""

    def changes(self, case: Case, amount: float) -> tuple[Change, ...]:
        """The changes an amount means, with a new filling where a stated one cannot stay."""
        return self.with_filling(case, self.own_changes(case, amount))

    def with_filling(self, case: Case, changes: tuple[Change, ...]) -> tuple[Change, ...]:
        """Changes, and a filling as recommended where one was stated and the loop is opened."""
        if case.filled and self.refills and not self.keep_filling:
            return (*changes, Change("fill-pressure"))
        return changes

    def apply(self, case: Case, amount: float) -> Case:
        """The changed case."""
        return changed(case, self.changes(case, amount))

    def present(self, case: Case) -> float | None:  # noqa: ARG002 - one signature for all measures
        """What there is now."""
        return None

    def shown(self, case: Case, amount: float) -> float:  # noqa: ARG002 - one signature for all measures
        """The amount as an answer shows it."""
        return amount

    def probes(self, case: Case) -> list[tuple[Change, ...]]:
        """A few generous amounts, to see whether the measure can help at all."""
        options = self.options(case)
        picked = options[-1:] if self.rising else options[-3:]
        return [self.changes(case, option.amount) for option in picked]

    def step(self, amount: float) -> float:
        """The practical step of an amount: three digits, or the finest that means anything."""
        return max(float(10.0 ** (floor(log10(abs(amount))) - 2)), self.finest) if amount else self.finest

    def search(self, case: Case, bench: Bench) -> Work["Found | None"]:
        """Find the smallest amount, pausing after every trial."""
        options = self.options(case)
        if not options:
            return None
        if self.any_value:
            return (yield from self._scale(case, options, bench))
        return (yield from self._steps(case, options, bench))

    def found(self, case: Case, amount: float, outcome: Outcome) -> Found:
        """Put the result together."""
        changes = self.changes(case, amount)
        return Found(
            self.code,
            self.rank,
            self.kind,
            self.shown(case, amount),
            self.present(case),
            changes,
            changed(case, changes),
            outcome,
        )

    def _steps(self, case: Case, options: Sequence[Option], bench: Bench) -> Work[Found | None]:
        """The first step that holds."""
        if self.rising and len(options) > 1:
            last = bench.volume(self.apply(case, options[-1].amount))
            yield
            if last == inf:
                return None
        tries = 0
        for k, option in enumerate(options):
            if bench.spent or tries == _FULL_TRIES:
                return None
            tried = self.apply(case, option.amount)
            promising = bench.volume(tried) < inf
            yield
            if promising:
                tries += 1
                outcome = bench.outcome(tried)
                yield
                if outcome.holds:
                    return self.found(case, option.amount, outcome)
                if self.rising:
                    return (yield from self._climbed(case, options[k + 1 :], bench))
        return None

    def _climbed(self, case: Case, options: Sequence[Option], bench: Bench) -> Work[Found | None]:
        """The first of rising steps that holds in full, where the quick trial was too kind to a smaller one."""
        best: Found | None = None
        low, high = 0, len(options) - 1
        while low <= high and not bench.spent:
            # The last one first: without it there is none.
            middle = high if best is None else (low + high) // 2
            outcome = bench.outcome(self.apply(case, options[middle].amount))
            yield
            if outcome.holds:
                best, high = self.found(case, options[middle].amount, outcome), middle - 1
            elif best is None:
                return None
            else:
                low = middle + 1
        return best

    def _scale(self, case: Case, options: Sequence[Option], bench: Bench) -> Work[Found | None]:
        """The smallest amount between a promising one and one that fails."""
        # What the vessel would be if the station took all steam; where that is unknown, the best of the options.
        spare = bench.volume(with_boundless_cooler(case))
        yield
        volumes = []
        for option in options:
            volumes.append(bench.volume(self.apply(case, option.amount)))
            yield
            if volumes[-1] == 0.0:
                break
        least = min(volumes)
        if least == inf:
            return None
        largest = SPARE_VESSEL * (least if spare == inf else max(least, spare))
        first = next(k for k, volume in enumerate(volumes) if volume <= largest)
        good, bad = options[first].amount, options[first].towards
        while abs(good - bad) > max(_WITHIN * abs(good), 0.5 * self.finest) and not bench.spent:
            middle = 0.5 * (good + bad)
            if bench.volume(self.apply(case, middle)) <= largest:
                good = middle
            else:
                bad = middle
            yield
        return (yield from self._confirmed(case, good, bad, options[first].amount, bench))

    def _confirmed(
        self, case: Case, good: float, bad: float, generous: float, bench: Bench
    ) -> Work[Found | None]:
        """Try in full what the quick trial found, and more of it where that was too kind."""
        best: Found | None = None
        tries = 0
        amount = self.rounded(case, good, bad)
        while tries < _FULL_TRIES and not bench.spent:
            outcome = bench.outcome(self.apply(case, amount))
            tries += 1
            yield
            if outcome.holds:
                best = self.found(case, amount, outcome)
                if tries == 1:
                    break
                generous = amount
            else:
                if tries == 1:
                    amount = generous
                    bad = good
                    continue
                if best is None:
                    break
                bad = amount
            amount = self.rounded(case, 0.5 * (bad + generous), bad)
        return best

    def rounded(self, case: Case, amount: float, away_from: float) -> float:  # noqa: ARG002 - one signature for all measures
        """An amount moved away from one that fails, to the next practical step."""
        step = self.step(amount)
        share = _MARGIN * abs(amount)
        if amount >= away_from:
            return ceil((amount + share) / step) * step
        return floor((amount - share) / step) * step


def with_boundless_cooler(case: Case) -> Case:
    """The case if the station took any steam that arrives."""
    return changed(case, (Change("steam-cooler", _BOUNDLESS),))
