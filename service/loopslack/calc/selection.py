"""The choice of a vessel from a list: ranked, the first that fits taken, every refusal kept with its reasons."""

from collections.abc import Sequence
from operator import attrgetter
from typing import Literal, NamedTuple

from msgspec import Struct
from msgspec.structs import replace

from loopslack.calc.fit import Fit
from loopslack.calc.model import Vessel
from loopslack.calc.reasons import Reason
from loopslack.calc.selector import Selector

RankedBy = Literal["price", "volume"]


class Offer(Struct, frozen=True, gc=False):
    """A candidate: one article, and how many equal ones. Thousands are made, which nobody has to collect."""

    vessel: Vessel
    pieces: int


class Refusal(Struct, frozen=True, gc=False):
    """A refused candidate with all its reasons; ``as_sized`` as for the grounds of a selector."""

    vessel: Vessel
    pieces: int
    reasons: tuple[Reason, ...]
    as_sized: bool = False


class Selection(NamedTuple):
    """The outcome: the first candidate in rank that fits, the others that would do, and the refused ones."""

    chosen: Fit | None
    alternatives: tuple[Offer, ...]
    refused: tuple[Refusal, ...]
    ranked_by: RankedBy


def choose(selector: Selector, candidates: Sequence[Vessel], most: int) -> Selection:
    """Rank the candidates, up to ``most`` equal ones in parallel, and take the first that fits."""
    by_price = _one_currency(candidates)
    chosen: Fit | None = None
    alternatives, refused = [], []
    for offer in ranked(candidates, most, by_price=by_price):
        vessel, count = offer.vessel, offer.pieces
        reasons, as_sized = selector.grounds(vessel, count, exact=chosen is None)
        if reasons:
            refused.append(Refusal(vessel, count, reasons, as_sized))
        elif chosen is None:
            chosen = selector.chosen(vessel, count)
        else:
            alternatives.append(offer)
    return Selection(chosen, tuple(alternatives), tuple(refused), "price" if by_price else "volume")


def ranked(candidates: Sequence[Vessel], most: int, *, by_price: bool) -> list[Offer]:
    """Up to ``most`` equal ones of each: by price if there are prices to compare, then volume, pieces and name.

    Sorted by the last of these first: a key that is one number or text costs a fraction of one that is several.
    """
    named = sorted(candidates, key=attrgetter("id"))
    if most == 1:
        named.sort(key=attrgetter("nominal_volume"))
        if by_price:
            named.sort(key=attrgetter("price"))
        return [Offer(vessel, 1) for vessel in named]
    offers = [Offer(vessel, pieces) for pieces in range(1, most + 1) for vessel in named]
    offers.sort(key=lambda offer: offer.vessel.nominal_volume * offer.pieces)
    if by_price:
        offers.sort(key=lambda offer: (offer.vessel.price or 0.0) * offer.pieces)
    return offers


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
