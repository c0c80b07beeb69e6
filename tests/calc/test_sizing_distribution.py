"""Designs over the distribution of loops of ``loops``: what is chosen holds, what is refused is refused rightly.

The distribution was stated before any result was seen; the share that holds is printed by stratum.
"""

from collections import Counter
from functools import cache

import pytest
from msgspec.structs import replace

from calc.loops import random_loop, stratum
from calc.reference import BAR
from loopslack.calc.analysis import Analysis
from loopslack.calc.design import Design, Request, design
from loopslack.calc.judge import judge
from loopslack.calc.model import Vessel
from loopslack.calc.precharge import gas_of
from loopslack.calc.selector import Selector
from loopslack.calc.sizing.volumes import size
from loopslack.calc.window import Bounds, Gas
from loopslack.library.vessels import preferred_vessels

LOOPS = 2000
SERIES = tuple(
    Vessel(id=size.id, nominal_volume=size.nominal_volume, rated_pressure=16 * BAR)
    for size in preferred_vessels()
)
REQUEST = Request(SERIES, 4, "size", "single")
# Shares of the window at which a chosen vessel is judged again.
FILLS = (0.0, 0.02, 0.5, 0.98, 1.0)


@cache
def designed(seed: int) -> Design:
    return design(random_loop(seed), REQUEST)


def judged_at(found: Design, share: float):
    fitted = found.chosen
    pressure = fitted.window.lower + share * (fitted.window.upper - fitted.window.lower)
    return judge(
        fitted.analysis,
        fitted.vessel,
        fitted.gas,
        fitted.mass_at(pressure),
        policy="single",
        membrane_limit=found.loop.criteria.membrane_limit,
        window=fitted.window,
    )


def test_no_chosen_vessel_fails_at_any_fill_pressure_in_its_window() -> None:
    shares: Counter[tuple[str, str]] = Counter()
    for seed in range(LOOPS):
        found = designed(seed)
        shares[stratum(seed), found.judgement.verdict] += 1
        if found.chosen is None:
            assert found.judgement.verdict != "holds"
            continue
        for share in FILLS:
            assert judged_at(found, share).verdict == "holds", (seed, share)
    for name in sorted({name for name, _ in shares}):
        total = sum(n for (other, _), n in shares.items() if other == name)
        print(f"{name}: {shares[name, 'holds'] / total:.0%} of {total} hold")


def test_a_vessel_a_little_smaller_than_the_smallest_has_no_wide_enough_window() -> None:
    for seed in range(0, LOOPS, 5):
        recommended = designed(seed).volumes.recommended
        if recommended is None or recommended.floor >= recommended.interval.smallest:
            continue
        analysis, interval = recommended.analysis, recommended.interval
        bounds = Bounds(analysis, analysis.singles, Gas(1.0, interval.precharge, _temperature(analysis)))
        assert bounds.window(interval.smallest).wide_enough, seed
        if analysis.loop.precharge.kind != "optimised":
            assert not bounds.window(interval.smallest * (1 - 1e-6)).wide_enough, seed


def _temperature(analysis: Analysis) -> float:
    stated = analysis.loop.precharge.temperature
    return analysis.loop.temperatures.fill if stated is None else stated


def refused_outright() -> list[int]:
    return [seed for seed in range(LOOPS) if designed(seed).volumes.recommended is None][:40]


def test_a_loop_for_which_no_volume_is_found_has_none_in_a_sweep_of_volume_precharge_and_fill() -> None:
    for seed in refused_outright():
        loop = random_loop(seed)
        analysis = Analysis(loop)
        ceiling = analysis.final_pressure
        least = analysis.states.fill.column + loop.atmosphere + loop.criteria.top_pressure
        for step in range(10):
            nominal = loop.content * 0.3 * 1.8**step
            for precharge in (least, least + 0.3 * (ceiling - least), least + 0.7 * (ceiling - least)):
                gas = Gas(nominal, precharge, loop.temperatures.fill)
                window = Bounds(analysis, analysis.singles, gas).window(nominal)
                assert not window.wide_enough, (seed, nominal, precharge)
                for fill in (precharge + 0.3 * BAR, precharge + 0.5 * (ceiling - precharge)):
                    mass = Bounds(analysis, (), gas).mass(nominal, fill)
                    article = Vessel(id="swept", nominal_volume=nominal, rated_pressure=16 * BAR)
                    found = judge(
                        analysis,
                        article,
                        gas,
                        mass,
                        policy="single",
                        membrane_limit=loop.criteria.membrane_limit,
                    )
                    assert found.verdict != "holds", (seed, nominal, precharge, fill)


STOCK = (
    Vessel(id="small", nominal_volume=0.018, rated_pressure=10 * BAR),
    Vessel(id="short membrane", nominal_volume=0.2, acceptance_volume=0.03, rated_pressure=10 * BAR),
    Vessel(id="weak", nominal_volume=0.2, rated_pressure=1.5 * BAR),
    Vessel(
        id="overcharged",
        nominal_volume=0.3,
        delivered_precharge=4.5 * BAR,
        precharge_adjustable=False,
        rated_pressure=10 * BAR,
    ),
    Vessel(id="cool membrane", nominal_volume=0.2, membrane_limit=273.15 + 45, rated_pressure=10 * BAR),
)
CHANGES = {
    "nominal-volume": lambda vessel, short: replace(vessel, nominal_volume=vessel.nominal_volume + short),
    "acceptance-volume": lambda vessel, short: replace(
        vessel, acceptance_volume=vessel.acceptance_volume + short
    ),
    "rated-pressure": lambda vessel, short: replace(vessel, rated_pressure=vessel.rated_pressure + short),
    "membrane-temperature": lambda vessel, short: replace(
        vessel, membrane_limit=vessel.membrane_limit + short
    ),
    "precharge-as-delivered": lambda vessel, short: replace(
        vessel, delivered_precharge=vessel.delivered_precharge + short
    ),
}


@pytest.mark.parametrize("cooling", ["size", "none"])
def test_what_a_refused_vessel_is_short_by_makes_that_check_hold(cooling: str) -> None:
    told: Counter[str] = Counter()
    for seed in range(0, LOOPS, 4):
        analysis = Analysis(random_loop(seed))
        limit = analysis.loop.criteria.membrane_limit
        sized = size(analysis, analysis.singles, cooling, limit)
        if sized is None:
            continue
        selector = Selector(analysis, analysis.singles, sized, cooling, limit)
        for vessel in STOCK:
            for reason in selector.reasons(vessel, 1):
                if reason.short is None or reason.code not in CHANGES:
                    continue
                if reason.code == "membrane-temperature" and vessel.membrane_limit is None:
                    continue
                told[reason.code] += 1
                mended = CHANGES[reason.code](vessel, reason.short * (1 + 1e-9))
                left = {other.code for other in selector.reasons(mended, 1)}
                assert reason.code not in left, (seed, vessel.id, reason)
    print(f"reasons tried with cooling vessel {cooling!r}: {dict(told)}")
    assert {"nominal-volume", "acceptance-volume", "rated-pressure"} <= set(told)


def test_a_vessel_large_enough_but_short_in_acceptance_is_refused() -> None:
    refused = 0
    for seed in range(0, LOOPS, 4):
        found = designed(seed)
        if found.chosen is None:
            continue
        vessel, pieces = found.chosen.vessel, found.chosen.pieces
        held = max(result.liquid for result in found.judgement.stagnation.values()) / pieces
        short = replace(vessel, acceptance_volume=0.5 * held)
        again = design(found.loop, Request((short,), pieces, "size", "single"))
        assert again.chosen is None, seed
        refused += 1
    assert refused > 20


def test_the_order_of_groups_and_branches_does_not_matter() -> None:
    compared = 0
    for seed in range(0, LOOPS, 10):
        loop = random_loop(seed)
        if len(loop.groups) + len(loop.branches) < 3:
            continue
        mirrored = replace(loop, groups=loop.groups[::-1], branches=loop.branches[::-1])
        one, other = designed(seed), design(mirrored, REQUEST)
        assert one.judgement.verdict == other.judgement.verdict, seed
        if one.volumes.recommended and other.volumes.recommended:
            assert one.volumes.recommended.smallest == pytest.approx(
                other.volumes.recommended.smallest, rel=1e-6
            )
            compared += 1
    assert compared > 10


def test_delivered_precharge_counts_at_sea_level_and_20_degrees() -> None:
    analysis = Analysis(random_loop(1))
    vessel = Vessel(id="x", nominal_volume=0.1, delivered_precharge=1.5 * BAR, precharge_adjustable=False)
    gas = gas_of(analysis, vessel, 2)
    assert gas.precharge == pytest.approx(1.5 * BAR + 101325)
    assert gas.temperature == pytest.approx(293.15)
    assert gas.nominal == pytest.approx(0.2)
