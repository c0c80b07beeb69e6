"""Measures on the vessels: another expansion vessel, a cooling vessel before it."""

from collections.abc import Sequence
from math import ceil, inf

from msgspec.structs import replace

from loopslack.calc.model import Vessel
from loopslack.calc.remedies.bench import Bench, rating_needed
from loopslack.calc.remedies.case import Case, analysed
from loopslack.calc.remedies.changes import Change, changed
from loopslack.calc.remedies.measure import Found, Measure, Option
from loopslack.kernel import kinds
from loopslack.kernel.errors import CalculationError
from loopslack.kernel.work import Work
from loopslack.library.vessels import preferred_vessels

_LADDER = 1.25
_UP, _DOWN = 15, 7  # rungs: from a fifth to some thirty times the present vessel
_RATING_STEP = 0.5e5
_LARGEST = 50.0  # m3 a single vessel may have in a question
_MOST_PIECES = 10
_PROBES, _PROBES_OF_CONTENT = (1.6, 3.0, 8.0), (1.5, 3.0, 8.0)
_ARTICLES = 2  # articles of a list tried before the solved volume itself is offered


class OtherVessel(Measure):
    """A vessel of another size; of a list the nearest article that does."""

    code = "vessel"
    rank = 6
    any_value = True
    finest = 1e-4
    kind = kinds.NOMINAL_VOLUME

    def __init__(self, stock: Sequence[Vessel] = (), *, keep_filling: bool = False) -> None:
        super().__init__(keep_filling=keep_filling)
        self.stock = tuple(stock)

    def options(self, case: Case) -> list[Option]:
        """Sizes on both sides of a vessel that is there, nearest first; none where candidates were all refused."""
        if not case.existing:
            return []
        present = _nominal(case)
        found, above, below = [], present, present
        for k in range(1, _UP + 1):
            found.append(Option(present * _LADDER**k, above))
            above = present * _LADDER**k
            if k <= _DOWN:
                found.append(Option(present / _LADDER**k, below))
                below = present / _LADDER**k
        return found

    def present(self, case: Case) -> float | None:
        """Nominal volume of all vessels that are there, or given, m3; none where there are several to choose from."""
        return _nominal(case) if len(case.candidates) == 1 else None

    def own_changes(self, case: Case, amount: float) -> tuple[Change, ...]:
        """Vessels of ``amount`` m3 together, whose membrane and rating do not limit them."""
        pieces = case.pieces if case.existing else max(1, ceil(amount / _LARGEST))
        like = case.candidates[0]
        article = Vessel(
            id="as-sized",
            nominal_volume=amount / pieces,
            rated_pressure=_rating(case, like),
            membrane_limit=like.membrane_limit if len(case.candidates) == 1 else None,
        )
        return _vessels(article, pieces)

    def probes(self, case: Case) -> list[tuple[Change, ...]]:
        """A few sizes: of the present vessel, or of the loop's content."""
        if case.existing:
            return [self.changes(case, _nominal(case) * factor) for factor in _PROBES]
        return [self.changes(case, case.loop.content * factor) for factor in _PROBES_OF_CONTENT]

    def search(self, case: Case, bench: Bench) -> Work[Found | None]:
        """The smallest vessel, then the nearest article of a list that does."""
        if case.existing:
            solved = yield from super().search(case, bench)
        else:
            solved = yield from self._any_size(case, bench)
        if solved is None:
            return None
        return (yield from self._article(case, solved, bench))

    def _any_size(self, case: Case, bench: Bench) -> Work[Found | None]:
        """The smallest volume of a design, whatever the candidates; none that only differs in the filling."""
        sized = bench.sized(case)
        yield
        if sized is None or sized.smallest > _LARGEST * _MOST_PIECES:
            return None
        amount = self.rounded(case, sized.smallest, 0.0)
        outcome = bench.outcome(self.apply(case, amount))
        yield
        return self.found(case, amount, outcome) if outcome.holds else None

    def _article(self, case: Case, solved: Found, bench: Bench) -> Work[Found]:
        """The nearest article of the stock, or else of the preferred sizes, that holds; else the volume itself."""
        larger = not case.existing or solved.amount >= _nominal(case)
        pieces = solved.case.pieces
        articles = self.stock or tuple(
            replace(solved.case.candidates[0], id=size.id, nominal_volume=size.nominal_volume)
            for size in preferred_vessels()
        )
        fitting = [v for v in articles if (v.nominal_volume * pieces >= solved.amount) == larger]
        fitting.sort(key=lambda v: v.nominal_volume if larger else -v.nominal_volume)
        for article in fitting[:_ARTICLES]:
            change = self.with_filling(case, _vessels(article, pieces))
            tried = changed(case, change)
            outcome = bench.outcome(tried)
            yield
            if outcome.holds:
                return solved._replace(changes=change, case=tried, outcome=outcome)
        return solved


class CoolingVessel(Measure):
    """A cooling vessel in the line before the expansion vessel."""

    code = "cooling-vessel"
    rank = 7
    any_value = True
    finest = 1e-4
    kind = kinds.VOLUME

    def options(self, case: Case) -> list[Option]:
        """Contents up to twice the vessel; none where a design sizes its own."""
        if case.cooling == "size":
            return []
        present = case.loop.cooling_content
        nominal = _nominal(case)
        if not case.existing:
            nominal = min(nominal, case.loop.content)
        found, towards = [], present
        for share in (0.06, 0.12, 0.25, 0.5, 1.0, 2.0):
            found.append(Option(present + share * nominal, towards))
            towards = present + share * nominal
        return found

    def own_changes(self, case: Case, amount: float) -> tuple[Change, ...]:  # noqa: ARG002 - one signature for all measures
        """A new cooling vessel."""
        return (Change("cooling-vessel", amount),)

    def present(self, case: Case) -> float:
        """Content of the present one, m3."""
        return case.loop.cooling_content


def _nominal(case: Case) -> float:
    """Nominal volume of the vessels that are there, or the most that may be chosen, m3."""
    return max(vessel.nominal_volume for vessel in case.candidates) * case.pieces


def _vessels(article: Vessel, pieces: int) -> tuple[Change, ...]:
    return (Change("vessel", article.nominal_volume, vessels=(article,), pieces=pieces),)


def _rating(case: Case, like: Vessel) -> float | None:
    """The rating a new vessel must have: that of the old if it does, unstated where it was."""
    if like.rated_pressure is None:
        return None
    try:
        needed = rating_needed(analysed(case))
    except CalculationError:
        return like.rated_pressure
    if not 0 < needed < inf:
        return like.rated_pressure
    return max(like.rated_pressure, ceil(needed / _RATING_STEP - 1e-9) * _RATING_STEP)
