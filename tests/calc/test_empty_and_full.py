"""What is told where the vessel is empty or full, or where a column would hang in vacuum: no impossible number."""

import msgspec
import pytest
from msgspec.structs import replace

from calc.reference import BAR, loop
from calc.remedies.sent_back import decoded
from loopslack.calc.band import band
from loopslack.calc.discharge import discharge
from loopslack.calc.existing import Checked, check
from loopslack.calc.judge import worst
from loopslack.calc.judgement import Check
from loopslack.calc.model import Loop, Precharge, Vessel
from loopslack.calc.scenarios import BASE
from loopslack.contract.answering.loop import check_stagnation
from loopslack.contract.questions.operations import StagnationCheckQuestion
from questions.wash_house import least

AIR = 101325.0


def given(fill: float, nominal: float = 0.08, plan: Loop | None = None, precharge: float = 2.5) -> Checked:
    """The reference loop with a vessel at a precharge and filled to a pressure, bar gauge."""
    stated = Precharge(kind="stated", pressure=precharge * BAR + AIR, temperature=288.15)
    found = replace(plan or loop(), precharge=stated)
    return check(found, Vessel(id="v", nominal_volume=nominal), 1, "single", fill_pressure=fill * BAR + AIR)


def named(found: Checked, code: str) -> Check:
    return next(one for one in found.judgement.checks if one.code == code)


@pytest.mark.parametrize("fill", [0.0, 1.2, 2.0, 2.5])
def test_a_vessel_filled_below_its_precharge_holds_nothing_however_far_below(fill: float) -> None:
    found, barely = given(fill), given(2.5 + 1e-9)
    assert found.mass == 0
    states = {state.id: state for state in found.judgement.states}
    assert states["fill"].liquid == 0
    assert (states["fill"].pressure, states["fill"].reason) == (None, "vessel-empty")
    assert states["cold"].liquid == pytest.approx(-0.75e-3, abs=0.3e-3)
    assert named(found, "reserve").reason == named(found, "top-pressure").reason == "vessel-empty"
    assert named(found, "top-pressure").value is None
    # What it does when hot is what a vessel does that was filled to just its precharge.
    for id, state in found.judgement.stagnation.items():
        assert state.pressure == pytest.approx(barely.judgement.stagnation[id].pressure, rel=1e-6)
        assert state.liquid > 0
    assert found.judgement.verdict == "does-not-hold"


def test_less_filling_than_none_does_not_keep_the_valve_shut() -> None:
    """Liquid that a vessel below its precharge was said to lack once made room for the steam."""
    assert given(2.0, nominal=0.05).judgement.stagnation["base"].regime == "valve-opens"
    assert given(0.0, nominal=0.05).judgement.stagnation["base"].regime == "valve-opens"


def test_a_tolerance_of_the_filling_ends_where_the_vessel_is_empty() -> None:
    found = given(2.6)
    (row,) = band(found.fitted, found.fill_pressure, {"fill-pressure": 0.5 * BAR}, "single").rows
    (far,) = band(found.fitted, found.fill_pressure, {"fill-pressure": 2.0 * BAR}, "single").rows
    assert row.low == far.low
    assert row.low.pressure == pytest.approx(given(0.0).judgement.stagnation["base"].pressure)


def test_a_vessel_that_is_full_before_the_pump_stops_is_not_called_empty() -> None:
    found = given(2.6, nominal=1.5e-3)
    at_stop = next(state for state in found.judgement.states if state.id == "cut-off")
    assert at_stop.liquid > 1.5e-3
    assert (at_stop.pressure, at_stop.reason) == (None, "vessel-full")
    assert named(found, "boiling-at-cut-off").reason == "vessel-full"
    assert named(found, "boiling-at-cut-off").verdict == "does-not-hold"


def tall(plan: Loop, top: float) -> Loop:
    return replace(plan, top=top, gauge_height=top)


def test_no_pressure_below_vacuum_is_named_at_the_top_or_at_a_gauge() -> None:
    found = given(1.0, plan=tall(loop(), 60.0), precharge=0.5)
    for state in found.judgement.states:
        assert state.pressure is not None
        assert state.top_pressure is None
        assert state.gauge_pressure is None
    top = named(found, "top-pressure")
    assert (top.verdict, top.value, top.margin, top.reason) == ("does-not-hold", None, None, "below-vacuum")


def test_no_pressure_below_vacuum_is_left_after_a_discharge() -> None:
    plan = tall(loop(), 60.0)
    found = given(2.6, nominal=0.03, plan=plan)
    left = discharge(found.fitted.analysis, found.fitted.gas, found.mass, BASE)
    assert left is not None
    assert left.fill.top_pressure is None
    assert left.sucks_air


def test_an_answer_says_that_the_vessel_is_empty_instead_of_how_little_is_in_it() -> None:
    question = least() | {
        "vessel": {"nominalVolume": {"value": 80, "unit": "L"}},
        "precharge": {
            "kind": "stated",
            "pressure": {"value": 2.5, "unit": "barg"},
            "temperature": {"value": 15, "unit": "degC"},
        },
        "fillPressure": {"value": 2, "unit": "barg"},
        "include": [],
    }
    answer = msgspec.to_builtins(check_stagnation(decoded(question, StagnationCheckQuestion)))
    assert "fillPressure" not in answer["result"]
    filled = answer["result"]["states"][0]
    assert (filled["id"], filled["vesselLiquid"]["value"]) == ("fill", 0)
    assert "vesselPressure" not in filled
    told = {one["code"]: one["message"] for one in answer["advisories"]}
    assert "would be empty" in told["reserve"]
    assert "-" not in told["reserve"].replace("top-", "")


def shallow(accepted: float) -> Checked:
    """A vessel of 150 L whose membrane takes less than the loop pushes out."""
    vessel = Vessel(id="v", nominal_volume=0.15, acceptance_volume=accepted)
    return check(replace(loop(), cooling_content=0.03), vessel, 1, "single")


def test_a_membrane_that_is_full_bounds_no_pressure_and_keeps_no_valve_shut() -> None:
    """The gas behind it once told a pressure well below the valve's, beside the words that the valve stays shut."""
    found = shallow(20e-3)
    base = {one.code: one for one in found.judgement.checks if one.state == BASE.id}
    assert base["acceptance"].verdict == "does-not-hold"
    assert (base["relief-valve"].verdict, base["relief-valve"].value) == ("not-assessed", None)
    assert "membrane is full" in base["relief-valve"].reason
    assert shallow(60e-3).judgement.stagnation[BASE.id].pressure < found.fitted.analysis.final_pressure
    enough = {one.code: one for one in shallow(60e-3).judgement.checks if one.state == BASE.id}
    assert enough["acceptance"].verdict == enough["relief-valve"].verdict == "holds"


def test_an_answer_names_no_pressure_of_a_full_membrane_and_no_state_passes_by_it() -> None:
    question = least() | {
        "vessel": {
            "nominalVolume": {"value": 150, "unit": "L"},
            "acceptanceVolume": {"value": 20, "unit": "L"},
        },
        "coolingVessel": {"kind": "given", "content": {"value": 30, "unit": "L"}},
        "include": ["derivation"],
    }
    answer = msgspec.to_builtins(check_stagnation(decoded(question, StagnationCheckQuestion)))
    for state in answer["result"]["stagnation"]:
        assert "vesselPressure" not in state
        assert state["verdict"] == "does-not-hold"


def test_a_check_that_is_not_made_is_worse_than_one_that_holds() -> None:
    held = named(shallow(60e-3), "acceptance")
    unmade, failed = replace(held, verdict="not-assessed"), replace(held, verdict="does-not-hold")
    assert [worst([held]), worst([unmade, held]), worst([failed, unmade])] == [
        "holds",
        "not-assessed",
        "does-not-hold",
    ]
