"""Every equilibrium of several steam spaces, or with runs that rise, is one: its equations are put in again."""

import pytest
from msgspec.structs import replace

from calc.loops import random_loop
from calc.reference import BAR, loop
from loopslack.calc.analysis import Analysis
from loopslack.calc.balance import Balance, mixing
from loopslack.calc.charge import Charge, VesselLaw
from loopslack.calc.equilibrium import Equilibrium, equilibrium
from loopslack.calc.front import Front, SteamPath
from loopslack.calc.meeting import Meeting
from loopslack.calc.model import Loop
from loopslack.calc.scenarios import BASE
from loopslack.kernel.errors import CalculationError

SIZES = (0.6, 1.5, 4.0)


def charged(found: Loop, size: float) -> tuple[Analysis, Balance, Charge] | None:
    """A vessel of ``size`` times the content, charged by the trade's habit; None where that cannot be."""
    try:
        analysis = Analysis(found)
        _ = analysis.case(BASE)
    except CalculationError:
        return None
    precharge = found.atmosphere + max(0.3 * BAR, analysis.states.cold.column + found.criteria.top_pressure)
    fill = precharge + 0.3 * BAR
    if fill >= analysis.final_pressure:
        return None
    nominal = size * found.content
    filled = nominal * (1 - precharge / fill)
    mass = filled * analysis.states.fill.vessel_density
    room = found.temperatures.vessel_room
    return (
        analysis,
        Balance(found, BASE),
        Charge(nominal, precharge, found.temperatures.fill, filled, mass, room, 0.0),
    )


def solved(analysis: Analysis, balance: Balance, charge: Charge, *, warm: bool) -> Equilibrium | None:
    try:
        return equilibrium(
            balance, charge, mixing(balance.loop), gas_follows=warm, opening=analysis.final_pressure
        )
    except CalculationError:
        return None


def assert_rest(found: Equilibrium, balance: Balance, charge: Charge, *, warm: bool) -> None:
    """Each steam stands at the vessel's pressure, what is liquid would not boil at it, and the vessel has room."""
    law = VesselLaw(balance, charge, mixing(balance.loop), gas_follows=warm)
    assert law.excess(found.pressure, found.extent.expelled) == pytest.approx(0, abs=1e-8 * charge.nominal)
    for space, steam in zip(balance.spaces, found.extent.spaces, strict=True):
        if steam.boiling:
            stands, again = space.at(steam.temperature)
            assert stands == pytest.approx(found.pressure, rel=1e-7)
            assert again.pipe == pytest.approx(steam.pipe, rel=1e-7, abs=1e-12)
        elif space.highest_boiling() == space.hottest:
            assert space.pressure(space.hottest) <= found.pressure * (1 + 1e-9)


@pytest.mark.parametrize("warm", [False, True], ids=["gas at the room's", "gas as the liquid"])
def test_steam_of_several_spaces_and_on_crests_stands_at_the_vessels_pressure(warm: bool) -> None:
    regimes, several, rising = set(), 0, 0
    for seed in range(700):
        found = random_loop(seed)
        for size in SIZES:
            case = charged(found, size)
            if case is None or (len(case[1].spaces) == 1 and case[1].spaces[0].path.falling):
                continue
            analysis, balance, charge = case
            for _ in range(2):  # the second time from where the first ended
                rest = solved(analysis, balance, charge, warm=warm)
                if rest is None or rest.regime == "valve-opens" or rest.liquid < 0:
                    continue
                assert_rest(rest, balance, charge, warm=warm)
                regimes.add(rest.regime)
                several += len(balance.spaces) > 1
                rising += not all(space.path.falling for space in balance.spaces)
    assert regimes >= {"steam", "pinned"}
    assert several > 100
    assert rising > 100


def test_the_crest_above_the_collectors_holds_the_steam_back_and_is_not_passed_over() -> None:
    """Here a walk in even steps once took a state whose steam stood 0.2 bar below its vessel."""
    analysis, balance, charge = charged(random_loop(112), 4.0)
    rest = solved(analysis, balance, charge, warm=False)
    assert rest.extent.spaces[0].temperature == pytest.approx(412.4805, abs=1e-3)


def below_the_vessel(depth: float) -> Loop:
    """The reference loop with its collectors far below the vessel, so that every run rises."""
    plain = loop()
    return loop(
        groups=tuple(replace(group, height=-depth) for group in plain.groups),
        branches=tuple(
            replace(
                run,
                segments=tuple(replace(piece, start_height=-depth, end_height=0.0) for piece in run.segments),
            )
            for run in plain.branches
        ),
        top=0.0,
    )


@pytest.mark.parametrize("depth", [5.0, 20.0, 60.0, 124.0])
def test_no_state_is_given_for_a_pressure_that_the_valve_would_not_allow(depth: float) -> None:
    found = below_the_vessel(depth)
    analysis = Analysis(found)
    for nominal in (0.03, 0.06, 0.1, 0.2, 0.4):
        for filled in (0.05, 0.15, 0.3):
            density = analysis.states.fill.vessel_density
            charge = Charge(
                nominal, 2 * BAR, 288.15, filled * nominal, filled * nominal * density, 293.15, 0.0
            )
            balance = Balance(found, BASE)
            rest = solved(analysis, balance, charge, warm=False)
            assert rest is not None
            if rest.regime != "valve-opens":
                assert rest.pressure <= analysis.final_pressure * (1 + 1e-9)
                assert rest.liquid < 0 or rest.pressure > 0


def test_the_largest_extent_on_a_path_that_rises_is_the_coolest_steam_at_its_pressure() -> None:
    for seed in range(400):
        found = random_loop(seed)
        for space in Balance(found, BASE).spaces:
            if space.path.falling:
                continue
            low, high = space.coldest, space.highest_boiling()
            many = [low + (high - low) * k / 700 for k in range(700)]
            pressures = [space.pressure(t) for t in many]
            for pressure in (1.5 * BAR, 3 * BAR, 5 * BAR):
                first = next((t for t, p in zip(many, pressures, strict=True) if p >= pressure), None)
                if first is None:
                    continue
                steam = space.at_pressure(pressure)
                assert steam.temperature <= first + 1e-6
                assert steam.temperature >= first - (high - low) / 700 - 1e-6


@pytest.mark.parametrize("warm", [False, True], ids=["gas at the room's", "gas as the liquid"])
def test_several_spaces_and_crests_take_few_looks_at_the_steam_even_at_worst(
    warm: bool, monkeypatch: pytest.MonkeyPatch
) -> None:
    looks = 0
    plain = SteamPath.front

    def counted(self: SteamPath, power: float, temperature: float) -> Front:
        nonlocal looks
        looks += 1
        return plain(self, power, temperature)

    monkeypatch.setattr(SteamPath, "front", counted)
    seen: dict[str, list[int]] = {"several": [], "rising": [], "several and rising": []}
    for seed in range(860):
        for size in SIZES:
            case = charged(random_loop(seed), size)
            if case is None:
                continue
            analysis, balance, charge = case
            several = len(balance.spaces) > 1
            rising = not all(space.path.falling for space in balance.spaces)
            if not several and not rising:
                continue
            looks = 0
            if solved(analysis, balance, charge, warm=warm) is not None:
                seen[" and ".join(["several"] * several + ["rising"] * rising)].append(looks)
    for kind, (typical, worst) in {
        "several": (15, 105),
        "rising": (30, 60),
        "several and rising": (40, 100),
    }.items():
        assert len(seen[kind]) > 50
        assert sorted(seen[kind])[len(seen[kind]) // 2] <= typical, kind
        assert max(seen[kind]) <= worst, kind


def test_a_state_far_from_the_limit_is_found_at_once(monkeypatch: pytest.MonkeyPatch) -> None:
    """Secants in the pressure once crept towards it from the valve's, by a ten-thousandth a step."""
    searched = []
    monkeypatch.setattr(Meeting, "find", lambda *a: searched.append(a))
    analysis, balance, charge = charged(random_loop(11), 4.0)
    rest = solved(analysis, balance, charge, warm=False)
    assert searched == []
    assert rest.pressure < 0.45 * analysis.final_pressure


def two_roofs(depth: float) -> Loop:
    """The reference roof, and a second field far below the vessel with a steam space of its own."""
    high, low = loop(), below_the_vessel(depth)
    return replace(
        high,
        groups=(high.groups[0], replace(low.groups[0], name="field", space=1, content=0.1)),
        branches=(*high.branches, *(replace(run, name=f"{run.name} field", space=1) for run in low.branches)),
    )


@pytest.mark.parametrize("warm", [False, True], ids=["gas at the room's", "gas as the liquid"])
@pytest.mark.parametrize("depth", [10.0, 25.0, 40.0, 60.0, 100.0])
def test_a_field_that_may_stand_full_of_steam_or_of_liquid_always_comes_to_rest(
    depth: float, warm: bool
) -> None:
    found = two_roofs(depth)
    analysis = Analysis(found)
    density, regimes = analysis.states.fill.vessel_density, set()
    for nominal in (0.05, 0.1, 0.2, 0.3, 0.5, 0.8, 1.2, 2.0, 4.0):
        for filled in (0.02, 0.05, 0.1, 0.2):
            share = filled * nominal
            charge = Charge(nominal, 2 * BAR, 288.15, share, share * density, 293.15, 0.0)
            balance = Balance(found, BASE)
            # What cannot be solved would be refused here.
            rest = equilibrium(
                balance, charge, mixing(found), gas_follows=warm, opening=analysis.final_pressure
            )
            if rest.regime != "valve-opens" and rest.liquid >= 0:
                regimes.add(tuple(steam.boiling for steam in rest.extent.spaces))
                law = VesselLaw(balance, charge, mixing(found), gas_follows=warm)
                assert law.excess(rest.pressure, rest.extent.expelled) == pytest.approx(
                    0, abs=1e-8 * charge.nominal
                )
                for space, steam in zip(balance.spaces, rest.extent.spaces, strict=True):
                    if steam.boiling:
                        assert space.at(steam.temperature)[0] == pytest.approx(rest.pressure, rel=1e-7)
    assert regimes
