"""What any right solution must do: monotony, continuity across regimes, several balances, liquid states."""

from __future__ import annotations

import ast
import itertools
from dataclasses import replace
from pathlib import Path

import pytest
from scipy.optimize import brentq

from . import fluid as fluid_function
from .case import GRAVITY, Branch, Case, Group, Segment, atmosphere, celsius
from .loops import WORKED_LOOPS, any_open_pipe_rises, displaced_volume, random_case, random_cases
from .path import SteamPath
from .reference_loop import AIR, BAR, LITRE, reference_loop
from .stagnation import stagnation
from .states import boyle_pressure, cold, filled, liquid_of, loop_mass, operating

FALLING = [seed for seed in range(120) if not any_open_pipe_rises(random_case(seed))]


def test_the_second_opinion_never_imports_the_service() -> None:
    for source in Path(__file__).parent.glob("*.py"):
        for node in ast.walk(ast.parse(source.read_text(encoding="utf-8"))):
            names = [alias.name for alias in node.names] if isinstance(node, ast.Import) else []
            if isinstance(node, ast.ImportFrom):
                names = [node.module or ""]
            assert not any(name.split(".")[0] == "loopslack" for name in names), source.name


@pytest.mark.parametrize("seed", FALLING)
def test_a_larger_vessel_never_means_more_pressure_nor_less_steam_volume(seed: int) -> None:
    case = random_case(seed).but(opening_pressure=None)
    small, large = stagnation(case), stagnation(case.but(vessel=1.2 * case.vessel))
    if small.vessel_pressure is None or large.vessel_pressure is None:
        assert small.regime == "membrane-full"
        return
    assert large.vessel_pressure <= small.vessel_pressure * (1.0 + 1e-9)
    assert large.steam_volume >= small.steam_volume * (1.0 - 1e-9)


@pytest.mark.parametrize("seed", FALLING)
def test_more_sun_means_neither_less_pressure_nor_less_steam(seed: int) -> None:
    # a measured stagnation temperature holds for one sun only
    case = random_case(seed)
    case = case.but(groups=[replace(g, measured_stagnation=None) for g in case.groups], opening_pressure=None)
    mild, bright = stagnation(case), stagnation(case.but(sun=case.sun + 100.0))
    if mild.vessel_pressure is None or bright.vessel_pressure is None:
        assert bright.regime == "membrane-full"
        return
    assert bright.vessel_pressure >= mild.vessel_pressure * (1.0 - 1e-9)
    if all(regime == "emptied" for regime in mild.group_regimes):
        assert bright.steam_volume >= mild.steam_volume * (1.0 - 1e-9)


def test_pressure_and_steam_run_on_through_every_regime_as_the_vessel_grows() -> None:
    found = [stagnation(reference_loop(4.0 * 1.01**step)) for step in range(390)]
    balanced = [f for f in found if f.vessel_pressure is not None]
    assert {f.regime for f in balanced} == {"no-boiling", "pinned", "steam"}
    for before, after in itertools.pairwise(balanced):
        assert before.vessel_pressure is not None
        assert after.vessel_pressure is not None
        assert after.vessel_pressure <= before.vessel_pressure * (1.0 + 1e-12)
        if (
            before.regime != "no-boiling"
        ):  # a vessel full of liquid is stiff; with steam the pressure may not jump
            assert after.vessel_pressure >= 0.98 * before.vessel_pressure
        assert 0.0 <= after.steam_volume - before.steam_volume < 1.0 * LITRE


def _climbing(seed: int) -> Case:
    """Collectors below the station, pipes rising: the case in which several balances are possible."""
    case = random_case(seed)
    group = replace(case.groups[0], space=0, height=-25.0)
    pipes = [
        replace(b, space=0, open=True, segments=[replace(s, end_height=None) for s in b.segments])
        for b in case.branches
    ]
    return case.but(
        groups=[group], branches=pipes, station_height=0.0, gas="isothermal", opening_pressure=None
    )


def _power_left(case: Case, share: float) -> float:
    """Steam power less losses, W, with that share of every pipe in steam, the group emptied, masses balanced.

    Solved for the boiling temperature, which the solver under test never does.
    """
    liquid, group = liquid_of(case), case.groups[0]
    hot = liquid.density(case.hot_liquid)
    steam = group.content + share * case.pipe_content
    limit = group.stagnation(case.sun, case.ambient, case.stagnation_shift)

    def front_pressure(boiling: float) -> float:
        held = hot * (case.content - steam) + liquid.steam_density(boiling) * steam
        in_vessel = (loop_mass(case) - held) / liquid.density(
            case.room_temperature
        ) + case.allowance * case.content
        in_vessel = min(in_vessel, 0.9999 * case.vessel)
        pressure = boyle_pressure(case, in_vessel, case.room_temperature)
        return pressure - hot * GRAVITY * (group.height + share * (case.station_height - group.height))

    def too_hot(boiling: float) -> float:
        return boiling - liquid.boiling_temperature(front_pressure(boiling))

    hottest = celsius(249.0)
    beyond = too_hot(hottest) < 0.0  # no collector here stagnates that hot: no power, only losses
    boiling = hottest if beyond else float(brentq(too_hot, celsius(1.0), hottest, xtol=1e-11))
    lost = 0.0
    for branch in case.branches:
        left = share * branch.length
        for segment in branch.segments:
            lost += segment.loss_coefficient * (boiling - segment.ambient) * min(left, segment.length)
            left = max(0.0, left - segment.length)
    return group.area * group.power(boiling, case.sun, case.ambient, limit) * (boiling < limit) - lost


def _balances(seed: int) -> bool:
    return stagnation(_climbing(seed)).regime in {"no-boiling", "pinned", "steam"}


@pytest.mark.parametrize("seed", [seed for seed in range(40) if _balances(seed)])
def test_with_rising_pipes_the_balance_with_most_steam_is_reported(seed: int) -> None:
    case = _climbing(seed)
    found = stagnation(case)
    assert any_open_pipe_rises(case)
    share = found.reaches[0] / case.branches[0].length
    scale = case.groups[0].area
    assert found.reaches == pytest.approx([share * branch.length for branch in case.branches], rel=1e-9)
    if share == 1.0:
        assert _power_left(case, 1.0) == pytest.approx(found.unspent, abs=1e-6 * scale)
        return
    if share > 1e-6:
        assert _power_left(case, share) == pytest.approx(0.0, abs=1e-4 * scale)
    for step in range(1, 150):
        assert _power_left(case, share + (1.0 - share) * step / 150.0) < 0.0


def test_of_two_balances_on_a_rising_pipe_the_one_with_steam_is_reported() -> None:
    """All liquid is one balance: 25 m of column stop the boiling. Steam in the pipe is the other."""
    loop = reference_loop(900.0, precharge=3.4 * BAR + AIR, fill_pressure=3.5 * BAR + AIR)
    case = loop.but(groups=[replace(loop.groups[0], height=-25.0)])
    found = stagnation(case)
    level = case.but(branches=[replace(branch, open=False) for branch in case.branches])
    assert stagnation(level).regime == "no-boiling"
    assert found.regime == "steam"
    assert found.reaches[0] > 5.0
    assert _power_left(case, found.reaches[0] / 23.0) == pytest.approx(0.0, abs=1e-3)


def test_a_level_stretch_fills_at_its_own_height_and_a_crest_where_it_is_met() -> None:
    def pipe(length: float, end: float) -> Segment:
        return Segment(length=length, bore=0.02, outer=0.022, end_height=end)

    level = Branch(segments=[pipe(4.0, 6.0), pipe(5.0, 6.0), pipe(6.0, 0.0)], role="flow")
    straight = Branch(segments=[pipe(10.0, 0.0)], role="return")
    group = Group(area=10.0, eta0=0.8, a1=3.5, a2=0.01, class_power=80.0, content=0.01, height=10.0)
    case = reference_loop(80.0, groups=[group], branches=[level, straight])
    path = SteamPath(case, 0)
    assert not path.rises
    assert list(zip(path.elevations, path.reaches, strict=True)) == [
        (10.0, [0.0, 0.0]),
        (6.0, [4.0, 4.0]),
        (6.0, [9.0, 4.0]),
        (0.0, [15.0, 10.0]),
    ]
    crest = Branch(segments=[pipe(4.0, 12.0), pipe(5.0, 10.0), pipe(6.0, 0.0)], role="flow")
    path = SteamPath(case.but(branches=[crest, straight]), 0)
    assert path.rises
    assert list(zip(path.elevations, path.reaches, strict=True)) == [
        (10.0, [0.0, 0.0]),
        (12.0, [4.0, 0.0]),
        (10.0, [9.0, 0.0]),
        (0.0, [15.0, 10.0]),
    ]


def test_reach_is_proportional_to_length_when_every_branch_runs_straight_to_the_station() -> None:
    loop = reference_loop(80.0)
    long = replace(loop.branches[0], segments=[replace(loop.branches[0].segments[0], length=41.0)])
    found = stagnation(loop.but(branches=[long, loop.branches[1]]))
    assert found.reaches[0] / 41.0 == pytest.approx(found.reaches[1] / 23.0, rel=1e-9)
    assert found.reaches[0] > 5.0


def test_two_equal_spaces_behave_as_one() -> None:
    loop = reference_loop(80.0)
    half = replace(loop.groups[0], area=9.2, content=6.8 * LITRE)
    groups = [half, replace(half, space=1)]
    branches = [loop.branches[0], replace(loop.branches[1], space=1)]
    one, two = stagnation(loop), stagnation(loop.but(groups=groups, branches=branches))
    assert two.vessel_pressure == pytest.approx(one.vessel_pressure, rel=1e-9)
    assert two.reaches == pytest.approx(one.reaches, rel=1e-7)


def test_two_equal_groups_behave_as_one_even_when_pinned() -> None:
    loop = reference_loop(25.0)
    half = replace(loop.groups[0], area=9.2, content=6.8 * LITRE)
    one, two = stagnation(loop), stagnation(loop.but(groups=[half, half]))
    assert one.regime == "pinned"
    assert two.vessel_pressure == pytest.approx(one.vessel_pressure, rel=1e-9)
    assert two.steam_volume == pytest.approx(one.steam_volume, rel=1e-6)


def test_the_allowance_puts_its_volume_into_the_vessel_when_hot_and_takes_it_out_when_cold() -> None:
    plain, allowed = reference_loop(80.0), reference_loop(80.0, allowance=0.005)
    share = 0.005 * plain.content
    assert operating(allowed).vessel_liquid - operating(plain).vessel_liquid == pytest.approx(share)
    assert cold(plain).vessel_liquid - cold(allowed).vessel_liquid == pytest.approx(share)
    assert filled(allowed).vessel_liquid == filled(plain).vessel_liquid
    assert stagnation(allowed).vessel_liquid > stagnation(plain).vessel_liquid


def test_liquid_states_keep_the_mass_of_the_filling() -> None:
    loop = reference_loop(80.0)
    density = fluid_function("PG", 0.43).density
    state = operating(loop)
    at = {"flow": celsius(70.0), "return": celsius(40.0)}
    held = density(celsius(55.0)) * (loop.collector_content + loop.station_content)
    held += sum(density(at[branch.role]) * branch.content for branch in loop.branches)
    held += density(loop.room_temperature) * state.vessel_liquid
    assert held == pytest.approx(loop_mass(loop), rel=1e-12)


def test_a_vessel_without_liquid_has_no_pressure() -> None:
    starved = reference_loop(10.0, fill_pressure=1.63 * BAR + AIR, site_minimum=celsius(-15.0))
    found = cold(starved)
    assert found.state == "vessel-empty"
    assert found.vessel_pressure is None
    assert found.vessel_liquid < 0.0
    assert stagnation(starved.but(fill_pressure=1.5 * BAR + AIR)).regime == "vessel-empty"


def test_a_cold_state_below_the_freezing_point_says_so() -> None:
    assert cold(reference_loop(80.0, site_minimum=celsius(-40.0))).freezes
    assert not cold(reference_loop(80.0, site_minimum=celsius(-15.0))).freezes


def test_the_valve_turns_the_regime_and_leaves_the_figures() -> None:
    shut, open_ = stagnation(reference_loop(25.0)), WORKED_LOOPS["wash house, too small a vessel"]
    assert stagnation(open_).regime == "valve-opens"
    assert stagnation(open_).regime_if_shut == "pinned"
    assert stagnation(open_).vessel_pressure == shut.vessel_pressure


def test_a_membrane_at_its_limit_below_the_opening_pressure_is_not_called_an_open_valve() -> None:
    tiny = reference_loop(2.0, opening_pressure=9.0 * BAR + AIR)
    assert stagnation(tiny).regime_if_shut == "membrane-full"
    assert stagnation(tiny).regime == "valve-opens"
    assert stagnation(tiny.but(acceptance=1.0 * LITRE)).regime == "membrane-full"


@pytest.mark.parametrize(
    ("name", "regime"),
    [
        ("wash house", "steam"),
        ("wash house, every doubt at once", "steam"),
        ("wash house, high pressure keeps it liquid", "no-boiling"),
        ("membrane full", "membrane-full"),
        ("district field, one branch shut", "steam"),
    ],
)
def test_named_loops_end_in_the_regime_they_were_made_for(name: str, regime: str) -> None:
    assert stagnation(WORKED_LOOPS[name]).regime == regime


def test_air_pressure_falls_by_half_a_pound_per_thousand_feet() -> None:
    """Source: US Navy manual MO-405, as a rule of thumb."""
    fall = (atmosphere(0.0) - atmosphere(304.8)) / 6894.757
    assert fall == pytest.approx(0.5, abs=0.05)


def test_random_loops_repeat_by_seed_and_span_what_they_promise() -> None:
    assert random_case(17) == random_case(17)
    cases = list(random_cases(500))
    assert {case.fluid for case in cases} == {"water", "PG", "EG"}
    assert {len(case.spaces) for case in cases} == {1, 2}
    assert {1, 2, 3} <= {len(case.groups) for case in cases}
    assert {1, 2, 3, 4} <= {len(case.branches) for case in cases}
    assert any(not branch.open for case in cases for branch in case.branches)
    assert any(segment.insulation == 0.0 for case in cases for b in case.branches for segment in b.segments)
    areas = [sum(group.area for group in case.groups) for case in cases]
    assert min(areas) < 5.0
    assert max(areas) > 1000.0
    heads = [group.height for case in cases for group in case.groups]
    assert min(heads) < -1.0
    assert max(heads) > 35.0
    assert max(case.altitude for case in cases) > 2000.0
    ratios = [case.vessel / displaced_volume(case) for case in cases]
    assert 0.49 < min(ratios) < 0.6
    assert 6.0 < max(ratios) < 8.01
    assert 30 < sum(any_open_pipe_rises(case) for case in cases) < 150
    assert all(case.liquid_at_filling > 0.0 for case in cases)


def test_random_loops_reach_every_regime_often_enough_to_compare_two_solvers() -> None:
    found = [stagnation(case) for case in random_cases(500)]
    shut = [f.regime_if_shut for f in found if f.regime != "valve-opens"]
    assert shut.count("steam") > 150
    assert shut.count("pinned") >= 5
    assert shut.count("no-boiling") >= 1
    assert sum(f.regime == "valve-opens" for f in found) > 50
    assert sum(f.unspent > 0.0 for f in found) > 20
    assert max(f.mass_error for f in found) < 1e-9
