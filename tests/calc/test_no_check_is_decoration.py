"""Every check and every doubt decides: replaced by a failing stub, one at a time, the verdict and the vessel change."""

import pytest
from msgspec.structs import replace

from calc import reference
from calc.reference import BAR, ZERO, group, loop, run, stagnation_rise
from loopslack.calc import checks, judge
from loopslack.calc.design import Design, Request, design
from loopslack.calc.judgement import Check
from loopslack.calc.model import Part, Station, Vessel
from loopslack.kernel.errors import OutOfRange
from loopslack.library.vessels import preferred_vessels

SERIES = tuple(
    Vessel(id=size.id, nominal_volume=size.nominal_volume, rated_pressure=10 * BAR)
    for size in preferred_vessels()
)
# Every doubt applies to this loop: a better class than poor, and a run whose check valve nobody placed.
LOOP = loop(
    groups=(group(emptying="good", steam_power=50.0, worse_steam_power=80.0),),
    branches=(
        run("flow", "flow", length=40.0),
        run("return", "return", length=23.0, access="unknown"),
    ),
    station=Station(content=6.4e-3, height=0.0),
    parts=(
        Part(name="collectors", height=11.0, rated_pressure=10 * BAR),
        Part(name="heat exchanger", height=0.0, rated_pressure=10 * BAR, highest_temperature=ZERO + 140),
    ),
)
SCENARIOS = ("base", "warm-gas", "hotter-stagnation", "worse-emptying", "closed-branch")
HOT = ("relief_valve", "acceptance", "membrane", "steam_at_station")
STATIC = ("reserve", "top_pressure", "cut_off", "freezing", "fill_window", "protected")


def designed(policy="single") -> Design:
    return design(LOOP, Request(SERIES, 1, "size", policy))


def failing(check: Check) -> Check:
    return replace(check, verdict="does-not-hold", margin=-1.0)


def test_the_loop_holds_as_it_is() -> None:
    found = designed()
    assert found.judgement.verdict == "holds"
    assert found.chosen is not None
    assert set(found.judgement.doubts.values()) == {"holds"}


@pytest.mark.parametrize("name", STATIC)
def test_a_failing_static_check_costs_verdict_and_vessel(monkeypatch, name: str) -> None:
    original = getattr(checks, name)
    monkeypatch.setattr(checks, name, lambda *a, **k: failing(original(*a, **k)))
    found = designed()
    assert found.judgement.verdict == "does-not-hold"
    assert found.chosen is None


def test_a_failing_part_temperature_costs_verdict_and_vessel(monkeypatch) -> None:
    original = checks.part_temperatures
    monkeypatch.setattr(checks, "part_temperatures", lambda a: [failing(c) for c in original(a)])
    found = designed()
    assert found.judgement.verdict == "does-not-hold"
    assert found.chosen is None


def lukewarm(nominal: float) -> Design:
    """A loop whose collectors stay below boiling as far as is computed, with one vessel (m3) to choose from."""
    still = ZERO + 30 + stagnation_rise(0.7 * 1000, 6.0, 0.03)
    plain = group(peak_efficiency=0.7, linear_loss=6.0, quadratic_loss=0.03, stagnation_temperature=still)
    vessel = Vessel(id="one", nominal_volume=nominal, rated_pressure=10 * BAR)
    return design(loop(groups=(plain,)), Request((vessel,), 1, "size", "single"))


def test_a_vessel_that_does_only_if_nothing_boils_is_too_small_where_that_is_not_measured() -> None:
    small, large = lukewarm(25e-3), lukewarm(50e-3)
    failed = [c for c in small.judgement.checks if c.core and c.verdict != "holds"]
    assert [check.code for check in failed] == ["volume-without-boiling"]
    assert failed[0].limit == small.volumes.recommended.floor > 25e-3
    assert (small.judgement.verdict, small.chosen) == ("does-not-hold", None)
    assert large.judgement.verdict == "holds"
    assert large.chosen is not None


def test_a_failing_volume_without_boiling_costs_verdict_and_vessel(monkeypatch) -> None:
    original = checks.without_boiling
    monkeypatch.setattr(checks, "without_boiling", lambda *a: failing(original(*a)))
    found = lukewarm(50e-3)
    assert (found.judgement.verdict, found.chosen) == ("does-not-hold", None)


@pytest.mark.parametrize("scenario", SCENARIOS)
@pytest.mark.parametrize("name", HOT)
def test_a_failing_stagnation_check_costs_verdict_and_vessel_in_each_scenario(
    monkeypatch, name, scenario
) -> None:
    original = getattr(checks, name)

    def stub(*arguments, **named):
        check = original(*arguments, **named)
        return failing(check) if check.state == scenario else check

    monkeypatch.setattr(checks, name, stub)
    found = designed()
    assert found.judgement.verdict == ("does-not-hold" if scenario == "base" else "favourable-only")
    assert found.chosen is None
    if scenario != "base":
        assert found.judgement.doubts[scenario] == "does-not-hold"


@pytest.mark.parametrize("scenario", SCENARIOS)
def test_a_scenario_that_cannot_be_computed_is_not_assessed_and_never_passes(monkeypatch, scenario) -> None:
    original = judge.stagnation

    def stub(analysis, asked, gas, mass):
        if asked.id == scenario:
            raise OutOfRange("beyond the bubble line", remedy="none")
        return original(analysis, asked, gas, mass)

    monkeypatch.setattr(judge, "stagnation", stub)
    found = designed()
    assert found.judgement.verdict == "not-assessed"
    assert found.chosen is None


def test_all_doubts_at_once_decide_under_the_combined_policy_only(monkeypatch) -> None:
    original = checks.relief_valve

    def stub(analysis, state, pressure, *, at_least):
        check = original(analysis, state, pressure, at_least=at_least)
        return failing(check) if state == "all-doubts" else check

    monkeypatch.setattr(checks, "relief_valve", stub)
    assert designed("single").judgement.verdict == "holds"
    assert not designed("single").judgement.robust
    assert designed("combined").judgement.verdict != "holds"
    assert designed("combined").chosen is None


def test_without_doubts_nothing_is_ever_more_than_favourable() -> None:
    found = designed("none")
    assert found.judgement.verdict == "favourable-only"
    assert found.chosen is not None


def test_an_unstated_rating_is_to_be_confirmed_and_never_a_pass() -> None:
    series = tuple(Vessel(id=v.id, nominal_volume=v.nominal_volume) for v in SERIES)
    found = design(reference.loop(), Request(series, 1, "size", "single"))
    rating = next(c for c in found.judgement.checks if c.subject == "expansion vessel")
    assert rating.verdict == "not-assessed"
    assert rating in found.judgement.to_confirm
