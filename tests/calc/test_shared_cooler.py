"""A stagnation cooler at the station takes the steam of all spaces together, in the sizing as in the judgement."""

import pytest
from msgspec.structs import replace

from calc.loops import random_loop
from calc.reference import group, loop, run
from loopslack.calc.analysis import Analysis
from loopslack.calc.balance import Balance
from loopslack.calc.cooling import cool_window
from loopslack.calc.design import Design, Request, design
from loopslack.calc.judge import judge
from loopslack.calc.model import Loop, Vessel
from loopslack.calc.scenarios import BASE
from loopslack.calc.window import Bounds, Gas
from loopslack.kernel.errors import CalculationError
from loopslack.library.vessels import preferred_vessels

SERIES = tuple(
    Vessel(id=size.id, nominal_volume=size.nominal_volume, rated_pressure=16e5)
    for size in preferred_vessels()
)


def cooled(found: Loop, power: float) -> Loop:
    return replace(found, station=replace(found.station, steam_loss=power))


def twins(*, apart: bool, cooler: float) -> Loop:
    """Two equal halves of a roof, each with its own short runs, in one steam space or in two."""
    halves = [
        group(
            name=f"half {k}", count=4, aperture=9.2, content=6.8e-3, space=k if apart else 0, emptying="poor"
        )
        for k in (0, 1)
    ]
    runs = [
        replace(run(f"{role} {k}", role, length=9.0), space=k if apart else 0)
        for k in (0, 1)
        for role in ("flow", "return")
    ]
    halves = [replace(half, steam_power=120.0, worse_steam_power=None) for half in halves]
    return cooled(loop(groups=tuple(halves), branches=tuple(runs)), cooler)


@pytest.mark.parametrize("cooler", [200.0, 900.0, 1300.0, 2500.0])
def test_equal_halves_apart_ask_for_the_same_pressure_as_in_one_space(cooler: float) -> None:
    one = Balance(twins(apart=False, cooler=cooler), BASE).station_pressure()
    two = Balance(twins(apart=True, cooler=cooler), BASE).station_pressure()
    assert (one is None) == (two is None)
    if one is not None:
        assert two == pytest.approx(one, rel=1e-10)


def test_equal_halves_apart_are_sized_as_in_one_space() -> None:
    request = Request(SERIES, 1, "size", "single")
    one = design(twins(apart=False, cooler=1300.0), request)
    two = design(twins(apart=True, cooler=1300.0), request)
    assert one.judgement.verdict == two.judgement.verdict == "holds"
    assert two.volumes.recommended.smallest == pytest.approx(one.volumes.recommended.smallest, rel=1e-7)
    assert two.volumes.recommended.interval.largest == pytest.approx(
        one.volumes.recommended.interval.largest, rel=1e-6
    )


def test_at_the_station_pressure_all_spaces_together_leave_what_the_cooler_takes() -> None:
    seen = 0
    for seed in range(400):
        found = random_loop(seed)
        if len({one.space for one in found.groups}) < 2:
            continue
        balance = Balance(found, BASE)
        try:
            extent = balance.at_pressure(2.5e5)
        except CalculationError:
            continue
        arriving = sum(steam.unspent for steam in extent.spaces)
        if arriving < 10:
            continue
        balance = Balance(cooled(found, 0.6 * arriving), BASE)
        pressure = balance.station_pressure()
        assert pressure is not None
        assert pressure >= 2.5e5 * (1 - 1e-9)
        sun = found.sun.irradiance * found.aperture
        if pressure < 20e5:
            assert balance.at_pressure(pressure).unspent <= 1e-9 * sun
            assert balance.at_pressure(pressure * 0.999).unspent > 0
            seen += 1
    assert seen > 30


def needing(seed: int) -> Design | None:
    """A loop of several spaces that the least cooler, and half as much again, lets hold."""
    found = random_loop(seed)
    if len({one.space for one in found.groups}) < 2:
        return None
    try:
        analysis = Analysis(found)
        unspent = max(analysis.case(scenario).final.unspent for scenario in analysis.singles)
    except CalculationError:
        return None
    if unspent < 50:
        return None
    power = found.station.steam_loss + 1.5 * unspent
    asked = design(cooled(found, power), Request(SERIES, 1, "size", "single"))
    return asked if asked.chosen is not None else None


def test_a_sized_vessel_passes_and_a_smaller_one_or_less_cooling_fails() -> None:
    seen = by_station = 0
    for seed in range(1000):
        asked = needing(seed)
        if asked is None:
            continue
        seen += 1
        sized = asked.volumes.recommended
        analysis = sized.analysis
        limit = analysis.loop.criteria.membrane_limit
        precharge = asked.chosen.gas.precharge
        for factor in (1.0, 1.1):
            volume = sized.smallest * factor
            if volume > sized.interval.largest:
                continue
            gas = Gas(volume, precharge, asked.chosen.gas.temperature)
            window = cool_window(analysis, analysis.singles, gas, limit)
            if analysis.loop.precharge.kind != "optimised":
                assert window.width >= analysis.loop.criteria.window_width * (1 - 1e-4), seed
            for share in (0.02, 0.5, 0.98):
                fill = window.lower + share * window.width
                mass = Bounds(analysis, (), gas).mass(volume, fill)
                vessel = Vessel(id="sized", nominal_volume=volume, rated_pressure=16e5)
                found = judge(
                    analysis, vessel, gas, mass, policy="single", membrane_limit=limit, window=window
                )
                bad = [
                    c.code
                    for c in found.checks
                    if c.core and c.verdict != "holds" and c.state != "all-doubts"
                ]
                assert set(bad) <= {"fill-window", "part-protected", "freezing", "part-temperature"}, (
                    seed,
                    bad,
                )
        if sized.smallest > sized.floor and analysis.loop.precharge.kind != "optimised":
            gas = Gas(sized.smallest * 0.9, precharge, asked.chosen.gas.temperature)
            assert not cool_window(analysis, analysis.singles, gas, limit).wide_enough, seed
        bare = design(cooled(asked.loop, 0.0), asked.request)
        by_station += bare.chosen is None
    assert seen > 25
    assert by_station > 0.8 * seen
