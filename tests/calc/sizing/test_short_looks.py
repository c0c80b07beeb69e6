"""What is told without solving an equilibrium says the same as the equilibrium does."""

from collections import Counter

import pytest
from msgspec.structs import replace

from calc.loops import random_loop
from calc.reference import BAR, ZERO
from loopslack.calc.acceptance import AcceptanceNeeded
from loopslack.calc.analysis import Analysis
from loopslack.calc.cooling import Charged, hottest, spare
from loopslack.calc.extents import Extents
from loopslack.calc.fit import Fit
from loopslack.calc.model import Vessel
from loopslack.calc.precharge import gas_of
from loopslack.calc.selector import Selector
from loopslack.calc.sizing.volumes import Sized, size
from loopslack.calc.window import Bounds

SEEDS = range(0, 240, 2)
SIZES = (1.0, 1.3, 2.5)


def sized_loops() -> list[tuple[int, Analysis, Sized]]:
    found = []
    for seed in SEEDS:
        analysis = Analysis(random_loop(seed))
        sized = size(analysis, analysis.singles, "size", analysis.loop.criteria.membrane_limit)
        if sized is not None:
            found.append((seed, analysis, sized))
    return found


LOOPS = sized_loops()


def charged_in(analysis: Analysis, nominal: float, share: float) -> Charged | None:
    """A vessel filled to a share of its window; None where it has no window."""
    gas = gas_of(analysis, Vessel(id="", nominal_volume=nominal), 1)
    lower, upper = Bounds(analysis, analysis.singles, gas).masses(gas.nominal)
    if not 0 <= lower.mass < upper.mass:
        return None
    return Charged(analysis, gas, lower.mass + share * (upper.mass - lower.mass))


@pytest.mark.parametrize("limit", [ZERO + 40, ZERO + 50, ZERO + 60, ZERO + 70])
def test_spare_mass_has_the_sign_of_the_margin_of_the_membranes_temperature(limit: float) -> None:
    signs: Counter[bool] = Counter()
    for seed, analysis, sized in LOOPS:
        for factor in SIZES:
            for share in (0.0, 0.5):
                charged = charged_in(analysis, factor * sized.smallest, share)
                if charged is None:
                    continue
                for scenario in analysis.singles:
                    temperature = hottest(charged, (scenario,))[0]
                    if abs(temperature - limit) < 1e-6:
                        continue
                    left = spare(charged, scenario, limit)
                    assert (left >= 0) == (temperature <= limit), (seed, factor, share, scenario.id)
                    signs[left >= 0] += 1
    assert min(signs[True], signs[False]) > 50


def test_a_look_at_the_steam_never_contradicts_the_acceptance_volume_that_is_solved() -> None:
    outcomes: Counter[bool] = Counter()
    for seed, _, sized in LOOPS:
        extents = Extents(sized.analysis)
        for factor in SIZES:
            article = Vessel(id="", nominal_volume=factor * sized.smallest)
            gas = gas_of(sized.analysis, article, 1)
            window = Bounds(sized.analysis, sized.analysis.singles, gas).window(gas.nominal)
            fitted = Fit(article, 1, gas, sized.analysis, window)
            needed = AcceptanceNeeded(fitted, sized.analysis.singles, extents)
            volume = AcceptanceNeeded(fitted, sized.analysis.singles).volume
            for share in (0.2, 0.5, 0.9, 0.999999, 1.000001, 1.1, 2.0):
                accepted = share * volume
                assert needed.suffices(accepted) == (accepted >= volume), (seed, factor, share)
                outcomes[accepted >= volume] += 1
    assert min(outcomes.values()) > 100


CHANGES = {
    "nominal-volume": "nominal_volume",
    "acceptance-volume": "acceptance_volume",
    "rated-pressure": "rated_pressure",
    "precharge-as-delivered": "delivered_precharge",
}


def test_what_a_vessel_ranked_after_the_choice_is_short_by_makes_that_check_hold() -> None:
    told: Counter[str] = Counter()
    for seed, analysis, sized in LOOPS:
        selector = Selector(analysis, analysis.singles, sized, "size", analysis.loop.criteria.membrane_limit)
        for factor in (0.6, *SIZES):
            nominal = factor * sized.smallest
            stock = (
                Vessel(id="plain", nominal_volume=nominal, rated_pressure=1.5 * BAR),
                Vessel(id="short", nominal_volume=nominal, acceptance_volume=0.1 * nominal),
                Vessel(
                    id="fixed",
                    nominal_volume=nominal,
                    delivered_precharge=4 * BAR,
                    precharge_adjustable=False,
                ),
            )
            for vessel in stock:
                for reason in selector.reasons(vessel, 1, exact=False):
                    name = CHANGES.get(reason.code)
                    if name is None or reason.short is None:
                        continue
                    told[reason.code] += 1
                    mended = replace(vessel, **{name: getattr(vessel, name) + reason.short * (1 + 1e-9)})
                    left = {other.code for other in selector.reasons(mended, 1, exact=False)}
                    assert reason.code not in left, (seed, vessel.id, reason)
    assert set(told) == set(CHANGES)
