"""A long list is compared by looks; whatever it says of a vessel, the vessel solved and judged alone says the same."""

from collections import Counter
from random import Random

from msgspec.structs import replace

from calc.loops import random_loop
from calc.reference import BAR, ZERO
from loopslack.calc.analysis import Analysis
from loopslack.calc.design import Design, Request, design
from loopslack.calc.fit import fit
from loopslack.calc.model import Vessel
from loopslack.calc.nearest import Asked, judged
from loopslack.calc.selection import Selection
from loopslack.calc.selector import Selector
from loopslack.calc.sizing.volumes import CoolingMode, size

LITRES = (
    8,
    12,
    18,
    25,
    35,
    50,
    80,
    100,
    140,
    200,
    250,
    300,
    400,
    500,
    600,
    800,
    1000,
    1500,
    2000,
    3000,
    5000,
)
SEEDS = (*range(14), 19, 35)  # in the last two a hot membrane and a fixed precharge decide
MODES: tuple[CoolingMode, ...] = ("size", "none")


def stock(seed: int) -> tuple[Vessel, ...]:
    """An invented list: membranes that take less, get less warm or more, precharges that cannot be changed."""
    random = Random(seed)  # noqa: S311 - an invented list, not a secret
    found = []
    for place in range(60):
        nominal = random.choice(LITRES) / 1000
        vessel = Vessel(
            id=str(place),
            nominal_volume=nominal,
            rated_pressure=16 * BAR,
            acceptance_volume=random.choice((None, 0.5 * nominal, 0.7 * nominal, 0.35 * nominal)),
            membrane_limit=random.choice((None, None, ZERO + 60, ZERO + 50, ZERO + 99)),
            delivered_precharge=random.choice((1.5, 2.5, 4)) * BAR,
            precharge_adjustable=random.random() < 0.7,
            price=random.uniform(20, 30) + 1400 * nominal,
            currency="EUR",
        )
        found.append(vessel)
    return tuple(found)


def does_alone(found: Design, vessel: Vessel, pieces: int, cooling: CoolingMode) -> bool:
    analysis = found.analysis
    limit = found.loop.criteria.membrane_limit
    fitted = fit(analysis, analysis.singles, vessel, pieces, cooling, limit)
    if fitted is None or not fitted.window.wide_enough:
        return False
    return judged(Asked(analysis, "single", cooling, None), fitted).verdict == "holds"


def test_every_alternative_does_alone_and_no_refused_vessel_does_unless_it_was_only_looked_at() -> None:
    seen: Counter[tuple[str, str]] = Counter()
    for seed in SEEDS:
        loop = random_loop(seed)
        for cooling in MODES:
            found = design(loop, Request(stock(seed), 2, cooling, "single"))
            if found.chosen is None:
                continue
            selection: Selection = found.selection
            for offer in selection.alternatives[:25]:
                assert does_alone(found, offer.vessel, offer.pieces, cooling), (
                    seed,
                    cooling,
                    offer.vessel.id,
                )
                seen[cooling, "alternative"] += 1
            for refusal in selection.refused[-25:]:
                alone = does_alone(found, refusal.vessel, refusal.pieces, cooling)
                assert refusal.as_sized or not alone, (seed, cooling, refusal.vessel.id)
                seen[cooling, "refused"] += 1
    assert min(seen.values()) > 30
    assert len(seen) == 4


def test_a_hot_membrane_is_refused_where_no_cooling_vessel_is_added_and_told_by_its_limit() -> None:
    analysis = Analysis(random_loop(19))
    limit = analysis.loop.criteria.membrane_limit
    sized = size(analysis, analysis.singles, "none", limit)
    assert sized is not None
    selector = Selector(analysis, analysis.singles, sized, "none", limit)
    vessel = Vessel(id="cool", nominal_volume=1.2 * sized.smallest, membrane_limit=ZERO + 35)
    for exact in (True, False):
        assert [reason.code for reason in selector.reasons(vessel, 1, exact=exact)] == [
            "membrane-temperature"
        ]


def test_a_vessel_short_of_two_things_is_told_both_and_does_with_both_made_up() -> None:
    told = 0
    for seed in range(0, 120, 3):
        analysis = Analysis(random_loop(seed))
        limit = analysis.loop.criteria.membrane_limit
        sized = size(analysis, analysis.singles, "size", limit)
        if sized is None:
            continue
        selector = Selector(analysis, analysis.singles, sized, "size", limit)
        vessel = Vessel(
            id="both",
            nominal_volume=1.5 * sized.smallest,
            acceptance_volume=0.05 * sized.smallest,
            delivered_precharge=0.9 * analysis.final_pressure - 1e5,
            precharge_adjustable=False,
        )
        reasons = {reason.code: reason for reason in selector.reasons(vessel, 1)}
        if set(reasons) != {"acceptance-volume", "precharge-as-delivered"}:
            continue
        told += 1
        charged = replace(vessel, delivered_precharge=reasons["precharge-as-delivered"].limit)
        left = {reason.code for reason in selector.reasons(charged, 1)}
        assert left == {"acceptance-volume"}, seed
        ample = replace(charged, acceptance_volume=vessel.nominal_volume)
        assert selector.reasons(ample, 1) == (), seed
    assert told > 3


def test_a_precharge_as_delivered_may_let_a_smaller_vessel_do_than_the_rule() -> None:
    found = design(random_loop(35), Request(stock(35), 2, "none", "single"))
    recommended, chosen = found.volumes.recommended, found.chosen
    assert recommended is not None
    assert chosen is not None
    assert not chosen.vessel.precharge_adjustable
    assert chosen.gas.nominal < recommended.smallest
    assert found.judgement.verdict == "holds"
