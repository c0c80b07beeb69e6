"""The answer of an audit: verdict first, numbers in the caller's units, sentences made of its own numbers."""

import json
from copy import deepcopy
from pathlib import Path
from typing import Any

import msgspec
import pytest

from loopslack.contract.answering.audit import audit_vessel
from loopslack.contract.questions.existing import VesselAuditQuestion
from loopslack.kernel.errors import CalculationError, Contradiction

EXAMPLE = Path(__file__).parents[2] / "openapi/examples/auditVessel/five-years-on.question.json"
Plain = dict[str, Any]


def quantity(value: float, unit: str) -> Plain:
    return {"value": value, "unit": unit}


def question(**changes: Any) -> Plain:
    """The committed example with members changed; None leaves one out."""
    found = json.loads(EXAMPLE.read_text(encoding="utf-8"))
    for name, value in changes.items():
        if value is None:
            found.pop(name, None)
        else:
            found[name] = value
    return found


def answer(plain: Plain) -> Plain:
    asked = msgspec.json.decode(json.dumps(plain), type=VesselAuditQuestion)
    return json.loads(msgspec.json.encode(audit_vessel(asked)))


def reading(bar: float, celsius: float = 18) -> Plain:
    return {"pressure": quantity(bar, "barg"), "temperature": quantity(celsius, "degC")}


def measured(bar: float, celsius: float = 18) -> Plain:
    return {"pressure": quantity(bar, "barg"), "temperature": quantity(celsius, "degC")}


def codes(entries: list[Plain]) -> list[str]:
    return [entry["code"] for entry in entries]


def test_the_verdict_is_the_first_member_and_the_example_is_undecided() -> None:
    found = answer(question())
    result = found["result"]
    assert next(iter(result)) == "verdict"
    assert result["verdict"] == "does-not-hold"
    assert result["finding"]["explains"] == "open"
    assert "reading-undecided" in codes(found["advisories"])
    assert codes(result["actions"])[0] == "measure-precharge"
    assert "add" not in result["setInstead"]
    worst = {entry["standing"]["verdict"] for entry in result["finding"]["explanations"]}
    assert result["verdict"] in worst


def test_a_failing_audit_always_has_a_stop() -> None:
    for plain in (
        question(),
        question(measuredPrecharge=measured(1.1)),
        question(gaugeReading=reading(2.6)),
        question(commissioning=None),
    ):
        found = answer(plain)
        stops = [entry for entry in found["advisories"] if entry["severity"] == "stop"]
        assert bool(stops) == (found["result"]["verdict"] != "holds")
        order = [entry["severity"] for entry in found["advisories"]]
        assert order == sorted(order, key=("stop", "warning", "note").index)


def test_a_measured_precharge_names_the_gas_and_how_much() -> None:
    found = answer(question(measuredPrecharge=measured(1.01)))
    finding = found["result"]["finding"]
    assert (finding["explains"], finding["certainty"]) == ("precharge", "shown")
    assert "decidingMeasurement" not in finding
    lost = found["result"]["standing"]["prechargeLost"]
    assert lost["value"] == pytest.approx(0.61, abs=0.01)
    advisory = next(entry for entry in found["advisories"] if entry["code"] == "precharge-lost")
    assert f"{lost['value']:.4g} bar" in advisory["message"]
    assert advisory["parameters"]["lost"] == lost
    actions = codes(found["result"]["actions"])
    assert actions == ["set-precharge", "fill", "note-reading"]


def test_a_measured_precharge_as_set_names_the_liquid_and_how_many_litres() -> None:
    found = answer(question(measuredPrecharge=measured(1.63), gaugeReading=reading(1.9)))
    result = found["result"]
    assert result["finding"]["explains"] == "liquid"
    missing = result["standing"]["liquidMissing"]
    assert missing["value"] > 5
    assert result["setInstead"]["keepPrecharge"]
    assert result["setInstead"]["add"]["value"] > missing["value"]
    assert codes(result["actions"]) == ["add", "note-reading"]
    add = result["actions"][0]
    assert add["parameters"]["add"] == result["setInstead"]["add"]
    assert add["parameters"]["fill"] == result["setInstead"]["fillPressure"]
    assert f"{add['parameters']['add']['value']:.4g} L" in add["message"]


def test_a_loop_that_stands_as_it_should_is_left_alone() -> None:
    good = answer(question(measuredPrecharge=measured(1.63), gaugeReading=reading(1.9)))["result"][
        "setInstead"
    ]
    found = answer(
        question(
            measuredPrecharge=measured(1.63),
            gaugeReading={"pressure": good["fillPressure"], "temperature": quantity(18, "degC")},
            commissioning={
                "precharge": quantity(1.63, "barg"),
                "fillPressure": good["fillPressure"],
                "temperature": quantity(18, "degC"),
            },
        )
    )
    result = found["result"]
    assert result["verdict"] == "holds"
    assert result["finding"]["explains"] == "neither"
    assert result["filling"]["position"] == "inside"
    assert codes(result["actions"]) == ["leave", "note-reading"]
    assert not [entry for entry in found["advisories"] if entry["severity"] == "stop"]


def test_without_record_and_measurement_the_precharge_is_an_assumption_and_the_basis_provisional() -> None:
    found = answer(question(commissioning=None))
    assert found["result"]["basis"] == "provisional"
    assert "precharge-not-known" in codes(found["result"]["toConfirm"])
    assert "/commissioning/precharge" in [entry["field"] for entry in found["assumptions"]]
    assert "precharge-not-known" in codes(found["advisories"])
    assert found["result"]["finding"]["certainty"] == "open"


def test_an_audit_in_us_units_says_the_same() -> None:
    metric, us = answer(question()), answer(question(units="us"))
    assert us["result"]["verdict"] == metric["result"]["verdict"]
    litres = metric["result"]["standing"]["liquidMissing"]["value"]
    gallons = us["result"]["standing"]["liquidMissing"]
    assert gallons["unit"] == "gal_us"
    assert gallons["value"] == pytest.approx(litres / 3.785411784, rel=1e-5)
    assert codes(us["advisories"]) == codes(metric["advisories"])


def test_the_reading_lies_in_the_window_as_its_two_distances_say() -> None:
    filling = answer(question(gaugeReading=reading(2.5), measuredPrecharge=measured(1.63)))["result"][
        "filling"
    ]
    value = filling["reading"]["value"]
    assert filling["aboveLower"]["value"] == pytest.approx(value - filling["lower"]["value"], abs=1e-5)
    assert filling["belowUpper"]["value"] == pytest.approx(filling["upper"]["value"] - value, abs=1e-5)
    assert (filling["position"] == "inside") == (
        filling["aboveLower"]["value"] >= 0 and filling["belowUpper"]["value"] >= 0
    )


def test_a_gauge_read_in_slush_and_a_record_that_contradicts_itself_are_refused() -> None:
    with pytest.raises(CalculationError):
        answer(question(gaugeReading=reading(1.4, -30)))
    record = deepcopy(question()["commissioning"])
    record["fillPressure"] = quantity(1.5, "barg")
    with pytest.raises(Contradiction):
        answer(question(commissioning=record))


def test_a_vessel_that_is_too_small_names_the_one_that_would_hold() -> None:
    vessel = {"nominalVolume": quantity(35, "L"), "ratedPressure": quantity(10, "barg")}
    found = answer(question(vessel=vessel, gaugeReading=reading(2.1), measuredPrecharge=measured(1.6)))
    instead = found["result"]["setInstead"]
    assert instead["verdict"] != "holds"
    if "smallestVolume" in instead:
        assert instead["smallestVolume"]["value"] > 35
        assert codes(found["result"]["actions"])[-2] == "replace-vessel"
    else:
        assert codes(found["result"]["actions"])[-2] == "change-loop"
