"""The choice of a vessel from a list: ranked, each candidate checked itself, each refusal with its number.

Candidates of the same size share everything the loop has to say about that size, so that a list of thousands costs
little more than a list of fifty.
"""

from collections.abc import Sequence
from math import inf
from typing import Literal, NamedTuple

from msgspec.structs import replace

from loopslack.calc.analysis import Analysis
from loopslack.calc.checks import pressure_to_withstand
from loopslack.calc.cooling import Charged, hottest
from loopslack.calc.delivered import nearest_precharge
from loopslack.calc.fit import Fit, acceptance_needed, cooling_for, fit
from loopslack.calc.model import Vessel
from loopslack.calc.reasons import Reason, shortage
from loopslack.calc.scenarios import Scenario
from loopslack.calc.sizing.volumes import CoolingMode, Sized
from loopslack.kernel import kinds

RankedBy = Literal["price", "volume"]

# Delivered precharges solved with a cooling vessel found anew; further ones keep that of the adjusted vessel, so
# that a list of thousands of fixed precharges stays affordable.
_MOST_SOLVED = 100


class Refusal(NamedTuple):
    """A refused candidate with all its reasons."""

    vessel: Vessel
    pieces: int
    reasons: tuple[Reason, ...]


class Selection(NamedTuple):
    """The outcome: the first candidate in rank that fits, the others that would do, and the refused ones."""

    chosen: Fit | None
    alternatives: tuple[tuple[Vessel, int], ...]
    refused: tuple[Refusal, ...]
    ranked_by: RankedBy
    nearest: tuple[Vessel, int]


class Selector:
    """Compares candidates for one loop under one policy."""

    def __init__(
        self,
        analysis: Analysis,
        scenarios: Sequence[Scenario],
        sized: Sized | None,
        cooling: CoolingMode,
        membrane_limit: float,
    ) -> None:
        self.analysis, self.scenarios, self.sized = analysis, scenarios, sized
        self.cooling: CoolingMode = cooling
        self.membrane_limit = membrane_limit
        self._fits: dict[tuple[object, ...], Fit | None] = {}
        self._smallest_acceptance: float | None = None
        self._solved = 0
        self._needed = pressure_to_withstand(analysis, analysis.loop.relief, 0.0)

    def choose(self, candidates: Sequence[Vessel], most: int) -> Selection:
        """Rank the candidates, up to ``most`` equal ones in parallel, and take the first that fits."""
        by_price = _one_currency(candidates)
        offers = [(vessel, count) for vessel in candidates for count in range(1, most + 1)]
        if by_price:
            offers.sort(key=lambda o: (_price(o), o[0].nominal_volume * o[1], o[1], o[0].id))
        else:
            offers.sort(key=lambda o: (o[0].nominal_volume * o[1], o[1], o[0].id))
        chosen: Fit | None = None
        alternatives, refused = [], []
        for vessel, count in offers:
            reasons = self.reasons(vessel, count, full=chosen is None)
            if reasons:
                refused.append(Refusal(vessel, count, tuple(reasons)))
            elif chosen is None:
                chosen = self._fit(vessel, count)
            else:
                alternatives.append((vessel, count))
        nearest = (chosen.vessel, chosen.pieces) if chosen else _nearest(refused)
        ranked: RankedBy = "price" if by_price else "volume"
        return Selection(chosen, tuple(alternatives), tuple(refused), ranked, nearest)

    def reasons(self, vessel: Vessel, count: int, *, full: bool = True) -> list[Reason]:
        """Every reason against a candidate.

        Without ``full`` the cooling vessel is not solved for: enough to sort those ranked after the choice.
        """
        found = []
        if vessel.rated_pressure is not None and vessel.rated_pressure < self._needed:
            found.append(
                shortage("rated-pressure", kinds.GAUGE_PRESSURE, vessel.rated_pressure, self._needed)
            )
        sized = self.sized
        if sized is None:
            found.append(self._hopeless())
            return found
        nominal = vessel.nominal_volume * count
        smallest, largest = sized.smallest, sized.interval.largest
        if nominal < smallest:
            found.append(
                Reason("nominal-volume", kinds.NOMINAL_VOLUME, nominal, smallest, smallest - nominal)
            )
            self._acceptance(vessel, count, found, sized)
            return found
        if nominal > largest:
            found.append(
                Reason(
                    "nominal-volume-beyond-interval",
                    kinds.NOMINAL_VOLUME,
                    nominal,
                    largest,
                    nominal - largest,
                )
            )
            return found
        if full or self.cooling != "size":
            fitted = self._fit(vessel, count)
        else:
            # Ranked after the choice: the loop as sized tells whether it would do.
            fitted = fit(sized.analysis, self.scenarios, vessel, count, "size", inf, content=0.0)
        if fitted is None:
            limit = self._limit(vessel)
            found.append(Reason("membrane-temperature", kinds.TEMPERATURE, limit, None, None))
        elif not fitted.window.wide_enough:
            self._explain(vessel, count, fitted, found)
        return found

    def _hopeless(self) -> Reason:
        """No volume holds: the steam power nothing condenses, or no window at any size."""
        unspent = max(self.analysis.case(s).final.unspent for s in self.scenarios)
        if unspent > 0:
            return Reason("unspent-power", kinds.POWER, unspent, 0.0, unspent)
        return Reason("no-window", kinds.PRESSURE_DIFFERENCE, None, None, None)

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
            needed = acceptance_needed(unbounded, self.scenarios) / count
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
        found.append(
            Reason(
                "no-window",
                kinds.PRESSURE_DIFFERENCE,
                fitted.window.width if abs(fitted.window.width) < inf else None,
                self.analysis.loop.criteria.window_width,
                None,
            )
        )

    def _delivered(self, vessel: Vessel, delivered: float, adjusted: Fit) -> Reason:
        """How far the delivered precharge is from the nearest one that leaves a window."""
        self._solved += 1
        exact = self._solved <= _MOST_SOLVED

        def holds(precharge: float) -> bool:
            other = replace(vessel, delivered_precharge=precharge)
            found = fit(
                self.analysis, self.scenarios, other, adjusted.pieces, self.cooling, self.membrane_limit
            )
            return found is not None and found.window.wide_enough

        needed = nearest_precharge(adjusted, self.scenarios, delivered, holds if exact else lambda _: True)
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

    def _acceptance(self, vessel: Vessel, count: int, found: list[Reason], sized: Sized) -> None:
        """For a vessel too small anyway: whether its membrane would be too small as well."""
        if vessel.acceptance_volume is None:
            return
        needed = self._least_acceptance(sized) / count
        if vessel.acceptance_volume < needed:
            found.append(
                shortage("acceptance-volume", kinds.ACCEPTANCE_VOLUME, vessel.acceptance_volume, needed)
            )

    def _least_acceptance(self, sized: Sized) -> float:
        """Acceptance volume (m3) that the smallest vessel that holds would need."""
        if self._smallest_acceptance is None:
            article = Vessel(id="smallest", nominal_volume=sized.smallest)
            fitted = fit(sized.analysis, self.scenarios, article, 1, "size", inf, content=0.0)
            self._smallest_acceptance = 0.0 if fitted is None else acceptance_needed(fitted, self.scenarios)
        return self._smallest_acceptance

    def _limit(self, vessel: Vessel) -> float:
        return self.membrane_limit if vessel.membrane_limit is None else vessel.membrane_limit

    def _key(self, vessel: Vessel, count: int) -> tuple[object, ...]:
        fixed = None if vessel.precharge_adjustable else vessel.delivered_precharge
        acceptance = vessel.acceptance_volume
        return (
            vessel.nominal_volume * count,
            None if acceptance is None else acceptance * count,
            fixed,
            vessel.membrane_limit,
        )

    def _fit(self, vessel: Vessel, count: int) -> Fit | None:
        key = self._key(vessel, count)
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
        return found and found._replace(vessel=vessel, pieces=count)


def _price(offer: tuple[Vessel, int]) -> float:
    price = offer[0].price
    return inf if price is None else price * offer[1]


def _one_currency(candidates: Sequence[Vessel]) -> bool:
    """Whether every candidate has a price in one and the same currency: prices are compared only then."""
    currencies = {vessel.currency if vessel.price is not None else None for vessel in candidates}
    return len(currencies) == 1 and None not in currencies


def _nearest(refused: Sequence[Refusal]) -> tuple[Vessel, int]:
    """The refused candidate with the fewest reasons, the largest among equals."""
    best = min(refused, key=lambda r: (len(r.reasons), -r.vessel.nominal_volume * r.pieces, r.vessel.id))
    return best.vessel, best.pieces
