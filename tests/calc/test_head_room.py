"""How much worse than stated a filled vessel still takes, against the full judgement of the worsened loop."""

from math import inf

import pytest
from msgspec.structs import replace

from calc.loops import random_loop
from calc.reference import BAR, CRITERIA, ZERO, group, loop, run, stagnation_rise
from loopslack.calc.analysis import Analysis
from loopslack.calc.fit import Fit, fit
from loopslack.calc.head_room import Filled, HeadRoom, failing, head_room
from loopslack.calc.judge import judge
from loopslack.calc.model import Loop, Vessel
from loopslack.calc.precharge import precharge
from loopslack.calc.sizing.floor import without_boiling_floor
from loopslack.calc.window import Bounds, Gas
from loopslack.kernel.errors import CalculationError

LIMIT = CRITERIA.membrane_limit


def fitted(litres: float) -> tuple[Fit, Filled]:
    analysis = Analysis(loop())
    found = fit(analysis, analysis.singles, Vessel(id="v", nominal_volume=litres / 1000), 1, "size", LIMIT)
    assert found is not None
    filled = Filled(found.analysis, found.gas, found.mass, found.analysis.singles, LIMIT)
    return found, filled


@pytest.fixture(scope="module", params=[90, 120])
def case(request) -> tuple[Fit, Filled, dict[str, HeadRoom]]:
    found, filled = fitted(request.param)
    return found, filled, {room.id: room for room in head_room(filled)}


def failed(plan: Loop, gas: Gas, mass: float) -> set[tuple[str, str]]:
    """Codes and states of the core checks that fail in the full judgement; the window's width aside."""
    analysis = Analysis(plan)
    verdict = judge(
        analysis, Vessel(id="v", nominal_volume=gas.nominal), gas, mass, policy="single", membrane_limit=LIMIT
    )
    states = {"cold", "cut-off", "base", *(doubt.id for doubt in analysis.doubts)}
    return {
        (check.code, check.state)
        for check in verdict.checks
        if check.core and check.verdict != "holds" and check.state in states and check.code != "fill-window"
    }


def hotter(plan: Loop, kelvin: float) -> Loop:
    groups = tuple(replace(g, stagnation_temperature=g.stagnation_temperature + kelvin) for g in plan.groups)
    return replace(plan, groups=groups)


def longer(plan: Loop, metres: float) -> Loop:
    branches = (run("flow", "flow", 23 + metres / 2), run("return", "return", 23 + metres / 2))
    return replace(plan, branches=branches)


def test_a_little_less_than_the_head_room_holds_and_a_little_more_fails_by_the_named_check(case) -> None:
    found, filled, rooms = case
    plan = found.analysis.loop
    gas, mass = filled.gas, filled.mass

    def leaked(loss: float) -> Gas:
        return replace(gas, precharge=gas.precharge - loss)

    def topped_up(loss: float) -> float:
        """The mass that shows the old fill pressure again, by Boyle's law."""
        density = plan.fluid.density(plan.temperatures.fill)
        fill = gas.precharge * gas.nominal / (gas.nominal - mass / density)
        return density * gas.nominal * (1 - (gas.precharge - loss) / fill)

    worsened = {
        "pipe-length": lambda x: failed(longer(plan, x), gas, mass),
        "stagnation-temperature": lambda x: failed(hotter(plan, x), gas, mass),
        "precharge-loss": lambda x: failed(plan, leaked(x), mass),
        "precharge-loss-topped-up": lambda x: failed(plan, leaked(x), topped_up(x)),
    }
    assert rooms.keys() == worsened.keys()
    assert failed(plan, gas, mass) == set()
    ended = 0
    for id, room in rooms.items():
        assert room.value is not None
        assert room.value > 0
        assert worsened[id](room.value * 0.999) == set(), id
        if room.outcome == "value":
            assert (room.code, room.scenario) in worsened[id](room.value * 1.001), id
            ended += 1
        else:
            assert room.outcome == "beyond-search"
            assert worsened[id](room.value) == set(), id
    assert ended >= 3


def test_gas_lost_and_made_up_with_liquid_opens_the_valve(case) -> None:
    room = case[2]["precharge-loss-topped-up"]
    assert (room.outcome, room.code) == ("value", "relief-valve")


def test_a_vessel_that_fails_as_it_is_has_no_head_room_and_says_by_which_check() -> None:
    _, filled = fitted(90)
    small = filled._replace(gas=replace(filled.gas, nominal=0.05))
    for room in head_room(small):
        assert (room.outcome, room.value) == ("none", None)
        assert (room.code, room.scenario) == failing(small)


def test_a_loop_without_pipes_has_no_head_room_of_pipe() -> None:
    cool = loop(groups=(group(steam_power=0.0, worse_steam_power=None),), branches=())
    analysis = Analysis(cool)
    found = fit(analysis, analysis.singles, Vessel(id="v", nominal_volume=0.09), 1, "size", LIMIT)
    assert found is not None
    rooms = head_room(Filled(found.analysis, found.gas, found.mass, analysis.singles, LIMIT))
    assert [room.id for room in rooms] == [
        "stagnation-temperature",
        "precharge-loss",
        "precharge-loss-topped-up",
    ]


def test_a_state_whose_properties_are_unknown_does_not_pass() -> None:
    """Collectors beyond the bubble line and a valve that lets them get there: not assessed, so the room ends."""
    wild = loop(relief=replace(loop().relief, set_pressure=16 * BAR, opening_pressure=15 * BAR))
    analysis = Analysis(wild)
    found = fit(analysis, analysis.singles, Vessel(id="v", nominal_volume=0.4), 1, "size", LIMIT)
    assert found is not None
    rooms = {
        room.id: room
        for room in head_room(Filled(found.analysis, found.gas, found.mass, analysis.singles, LIMIT))
    }
    hot = rooms["stagnation-temperature"]
    assert hot.outcome == "value"
    assert hot.value is not None
    assert hot.value < 100


def test_pipe_added_to_a_loop_that_relies_on_not_boiling_ends_where_its_least_volume_passes_the_vessel() -> (
    None
):
    still = ZERO + 30 + stagnation_rise(0.7 * 1000, 6.0, 0.03)
    plain = group(peak_efficiency=0.7, linear_loss=6.0, quadratic_loss=0.03, stagnation_temperature=still)
    plan = loop(groups=(plain,))
    floor = without_boiling_floor(Analysis(plan), accept_without_boiling=False)
    vessel = Vessel(id="v", nominal_volume=1.05 * floor)
    found = fit(Analysis(plan), Analysis(plan).singles, vessel, 1, "given", LIMIT)
    assert found is not None
    filled = Filled(found.analysis, found.gas, found.mass, found.analysis.singles, LIMIT)
    room = {room.id: room for room in head_room(filled)}["pipe-length"]
    assert (room.code, room.outcome) == ("volume-without-boiling", "value")
    most = Analysis(longer(plan, room.value))
    assert without_boiling_floor(most, accept_without_boiling=False) == pytest.approx(
        found.gas.nominal, rel=1e-8
    )
    assert failed(longer(plan, 1.001 * room.value), found.gas, found.mass) == {
        ("volume-without-boiling", "base")
    }


def test_of_bounds_that_are_one_but_for_rounding_the_first_is_named() -> None:
    """Where the emptying class limits the steam, hotter collectors send out no more: the base case bounds as much."""
    seen = 0
    for seed in range(500):
        plan = random_loop(seed)
        try:
            analysis = Analysis(plan)
            bounds = Bounds(
                analysis, analysis.singles, Gas(0.1, precharge(analysis, 0.1), plan.temperatures.fill)
            )
            for size in (0.5, 1.0, 2.0, 3.0):
                nominal = size * plan.content
                lower, _ = bounds.masses(nominal)
                masses = [(id, slope * nominal - offset) for _, id, slope, offset in bounds.lower]
                as_much = [id for id, mass in masses if mass == pytest.approx(lower.mass, rel=1e-11)]
                if lower.mass < inf and len(as_much) > 1:
                    seen += 1
                    assert lower.scenario == as_much[0], seed
        except CalculationError:
            continue
    assert seen > 4
