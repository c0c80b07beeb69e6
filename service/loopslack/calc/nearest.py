"""The candidate that fails least, where none does: what an answer shows instead of a vessel to take. No choosing here.

Every kind of candidate is judged as it would best be filled. Of a long list a share, evenly spread over the sizes, is
judged first, and then those next to the best of it.
"""

from collections.abc import Sequence
from typing import NamedTuple

from loopslack.calc.analysis import Analysis
from loopslack.calc.fit import Fit, best_fit
from loopslack.calc.judge import JOINT, judge, required
from loopslack.calc.judgement import Check, DoubtPolicy, Judgement, Verdict
from loopslack.calc.model import Vessel
from loopslack.calc.scenarios import BASE, Scenario
from loopslack.calc.selection import Refusal
from loopslack.calc.sizing.volumes import CoolingMode
from loopslack.calc.window import Window
from loopslack.kernel.work import Work

_SPREAD = (
    5  # kinds of a long list judged all over it: each takes milliseconds, and short questions must stay short
)
_BESIDE = 3  # kinds judged next to the best of those
_ORDER: dict[Verdict, int] = {"holds": 0, "favourable-only": 1, "not-assessed": 2, "does-not-hold": 3}
_DIGITS = 3  # of a shortage: below, two candidates miss by as much

Badness = tuple[int, int, float, int, int]


class Asked(NamedTuple):
    """The loop with what is asked of a vessel in it; ``fill`` is a stated fill pressure, Pa absolute.

    ``accept_without_boiling`` is as in a request for a design.
    """

    analysis: Analysis
    policy: DoubtPolicy
    cooling: CoolingMode
    fill: float | None
    accept_without_boiling: bool = False

    @property
    def scenarios(self) -> tuple[Scenario, ...]:
        """The scenarios that count."""
        return required(self.analysis, self.policy)

    def limit(self, vessel: Vessel) -> float:
        """Membrane limit of a vessel, K."""
        own = vessel.membrane_limit
        return self.analysis.loop.criteria.membrane_limit if own is None else own


def nearest(asked: Asked, refused: Sequence[Refusal]) -> Work[Fit]:
    """The refused candidate that fails least; they come in rank, as it would best be filled.

    By its verdict, then by the core checks that fail in the base case and under the doubts that count, then by what
    they miss in all, each as a share of its limit, then by the reasons it is refused for, then by rank (own choice).
    """
    kinds: dict[tuple[object, ...], tuple[int, Refusal]] = {}
    for place, refusal in enumerate(refused):
        kinds.setdefault(_kind(refusal), (place, refusal))
    rows = sorted(kinds.values(), key=lambda row: (row[1].vessel.nominal_volume * row[1].pieces, row[0]))
    found: dict[int, tuple[Badness, Fit]] = {}

    def look(numbers: Sequence[int]) -> Work[int]:
        for number in numbers:
            if number not in found:
                yield
                place, refusal = rows[number]
                fitted = best_fit(
                    asked.analysis, asked.scenarios, refusal.vessel, refusal.pieces, asked.cooling
                )
                failure = _failure(asked, judged(asked, fitted))
                found[number] = (*failure, len(refusal.reasons), place), fitted
        return min(found, key=lambda number: found[number][0])

    if len(rows) <= _SPREAD + _BESIDE:
        best = yield from look(range(len(rows)))
    else:
        middle = yield from look([round(k * (len(rows) - 1) / (_SPREAD - 1)) for k in range(_SPREAD)])
        first = max(0, middle - _BESIDE // 2)
        best = yield from look(range(first, min(len(rows), first + _BESIDE + 1)))
    return found[best][1]


def judged(asked: Asked, fitted: Fit, window: Window | None = None) -> Judgement:
    """A vessel filled as recommended, or as stated, judged; ``window`` as for ``judge``."""
    vessel = fitted.vessel
    mass = fitted.mass if asked.fill is None else fitted.mass_at(asked.fill)
    limit = asked.limit(vessel)
    return judge(
        fitted.analysis,
        vessel,
        fitted.gas,
        mass,
        policy=asked.policy,
        membrane_limit=limit,
        window=window,
        accept_without_boiling=asked.accept_without_boiling,
    )


def _kind(refusal: Refusal) -> tuple[object, ...]:
    """All that tells one candidate from another, but price and name."""
    vessel = refusal.vessel
    fixed = None if vessel.precharge_adjustable else vessel.delivered_precharge
    own = vessel.nominal_volume, vessel.acceptance_volume, fixed, vessel.membrane_limit, vessel.rated_pressure
    return *own, refusal.pieces


def _failure(asked: Asked, judgement: Judgement) -> tuple[int, int, float]:
    """Verdict, number of failed core checks that count, and what they miss by."""
    doubts = {scenario.id for scenario in asked.analysis.every if scenario.id != BASE.id}
    left_out = doubts - {scenario.id for scenario in asked.scenarios} - {JOINT}
    failed = [c for c in judgement.checks if c.core and c.verdict != "holds" and c.state not in left_out]
    return _ORDER[judgement.verdict], len(failed), round(sum(map(_shortage, failed)), _DIGITS)


def _shortage(check: Check) -> float:
    """What a check misses, as a share of its limit, or of its value where the limit is nought; one without numbers."""
    if check.value is None or check.limit is None or check.margin is None:
        return 1.0
    return abs(check.margin) / (abs(check.limit) or abs(check.value) or 1.0)
