"""The choice of a vessel from a list: ranked, the first that fits taken, every refusal kept with its reasons."""

from collections.abc import Sequence
from typing import Literal, NamedTuple

from msgspec import Struct
from msgspec.structs import replace

from loopslack.calc.fit import Fit
from loopslack.calc.model import Vessel
from loopslack.calc.reasons import Reason
from loopslack.calc.selector import Selector

RankedBy = Literal["price", "volume"]


class Refusal(Struct, frozen=True, gc=False):
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


def choose(selector: Selector, candidates: Sequence[Vessel], most: int) -> Selection:
    """Rank the candidates, up to ``most`` equal ones in parallel, and take the first that fits."""
    by_price = _one_currency(candidates)
    offers = [(vessel, count) for vessel in candidates for count in range(1, most + 1)]
    if by_price:
        offers.sort(key=lambda o: ((o[0].price or 0.0) * o[1], o[0].nominal_volume * o[1], o[1], o[0].id))
    else:
        offers.sort(key=lambda o: (o[0].nominal_volume * o[1], o[1], o[0].id))
    chosen: Fit | None = None
    alternatives, refused = [], []
    for vessel, count in offers:
        reasons = selector.reasons(vessel, count, exact=chosen is None)
        if reasons:
            refused.append(Refusal(vessel, count, reasons))
        elif chosen is None:
            chosen = selector.fit(vessel, count)
        else:
            alternatives.append((vessel, count))
    ranked: RankedBy = "price" if by_price else "volume"
    return Selection(chosen, tuple(alternatives), tuple(refused), ranked)


def _one_currency(candidates: Sequence[Vessel]) -> bool:
    """Whether every candidate has a price in one and the same currency: prices are compared only then."""
    currencies = {vessel.currency if vessel.price is not None else None for vessel in candidates}
    return len(currencies) == 1 and None not in currencies


def with_power_left(selection: Selection, power: float) -> Selection:
    """The selection with steam power that nothing condenses told as a check tells it, W.

    A comparison of sizes knows it at the valve's pressure only; a loop at rest below that makes more steam.
    """
    known: dict[int, tuple[Reason, ...]] = {}  # by identity: a long list repeats itself

    def told(reasons: tuple[Reason, ...]) -> tuple[Reason, ...]:
        found = known.get(id(reasons))
        if found is None:
            found = known[id(reasons)] = tuple(
                replace(reason, value=power, short=power) if reason.code == "unspent-power" else reason
                for reason in reasons
            )
        return found

    return selection._replace(refused=tuple(replace(r, reasons=told(r.reasons)) for r in selection.refused))
