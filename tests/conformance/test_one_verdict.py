"""The same vessel in the same loop, filled the same, gets the same checks and verdict whichever question asks."""

import json
from collections import Counter
from typing import Any

import msgspec
import pytest

from load.bodies import design_question
from loopslack.contract.answering.audit import audit_vessel
from loopslack.contract.answering.course import compute_stagnation_course
from loopslack.contract.answering.loop import check_stagnation, design_loop, size_vessel
from loopslack.contract.questions.existing import StagnationCourseQuestion, VesselAuditQuestion
from loopslack.contract.questions.operations import (
    LoopDesignQuestion,
    StagnationCheckQuestion,
    VesselSizingQuestion,
)
from loopslack.kernel.errors import CalculationError
from questions.wash_house import wash_house

Plain = dict[str, Any]
FILL = 3.1


def result(answer: Any, question: type, plain: Plain) -> Plain:
    asked = msgspec.json.decode(json.dumps(plain), type=question)
    return json.loads(msgspec.json.encode(answer(asked)))["result"]


def quantity(value: float, unit: str) -> Plain:
    return {"value": value, "unit": unit}


def lukewarm(**changes: Any) -> Plain:
    """The wash house with collectors that stay below boiling as far as is computed."""
    found = wash_house() | {"coolingVessel": {"kind": "none"}, "include": []} | changes
    for name in ("precharge", "vessel", "rules", "tolerances"):
        found.pop(name, None)
    roof = found["collectors"][0]
    roof.pop("measuredStagnation", None)
    roof["coefficients"] = {
        "eta0": 0.7,
        "a1": quantity(6, "W/m2K"),
        "a2": quantity(0.03, "W/m2K2"),
        "basis": "aperture",
    }
    return found


def vessel(litres: float) -> Plain:
    return {"nominalVolume": quantity(litres, "L"), "ratedPressure": quantity(10, "barg")}


def verdicts(loop: Plain, litres: float) -> dict[str, Plain]:
    """What each operation says of one vessel, as it would be filled."""
    given = loop | {"vessel": {"kind": "given"} | vessel(litres)}
    there = loop | {"vessel": vessel(litres)}
    checked = result(check_stagnation, StagnationCheckQuestion, there)
    read = {"pressure": checked["fillPressure"], "temperature": quantity(15, "degC")}
    set_up = {
        "precharge": checked["precharge"],
        "fillPressure": checked["fillPressure"],
        "temperature": quantity(15, "degC"),
    }
    return {
        "design": result(design_loop, LoopDesignQuestion, given),
        "sizing": result(size_vessel, VesselSizingQuestion, given),
        "check": checked,
        "course": result(compute_stagnation_course, StagnationCourseQuestion, there),
        "audit": result(
            audit_vessel, VesselAuditQuestion, there | {"gaugeReading": read, "commissioning": set_up}
        ),
    }


@pytest.mark.parametrize(("litres", "verdict"), [(30, "does-not-hold"), (60, "holds")])
def test_a_vessel_that_does_only_if_nothing_boils_gets_one_verdict_from_every_question(
    litres: float, verdict: str
) -> None:
    for name, found in verdicts(lukewarm(), litres).items():
        assert found["verdict"] == verdict, name
        told = [check for check in found.get("checks", []) if check["code"] == "volume-without-boiling"]
        assert name == "course" or [check["verdict"] for check in told] == [verdict], name


def test_less_is_accepted_in_every_question_where_stagnation_was_measured() -> None:
    loop = lukewarm(acceptWithoutBoiling=True)
    loop["collectors"][0]["measuredStagnation"] = {
        "temperature": quantity(118, "degC"),
        "irradiance": quantity(1000, "W/m2"),
        "ambient": quantity(30, "degC"),
    }
    found = verdicts(loop, 30)
    assert {name: told["verdict"] for name, told in found.items()} == dict.fromkeys(found, "holds")


def test_a_given_vessel_is_judged_alike_by_design_and_check_in_loops_of_every_kind() -> None:
    seen: Counter[str] = Counter()
    for seed in range(60):
        loop = design_question(seed) | {"coolingVessel": {"kind": "none"}, "include": []}
        loop.pop("precharge")
        del loop["vessel"]
        for litres in (12, 60, 300, 2000):
            given = {"kind": "given"} | vessel(litres)
            for fill in ({}, {"fillPressure": quantity(FILL, "barg")}):
                try:
                    designed = result(design_loop, LoopDesignQuestion, loop | {"vessel": given | fill})
                    checked = result(
                        check_stagnation, StagnationCheckQuestion, loop | {"vessel": vessel(litres)} | fill
                    )
                except CalculationError:
                    continue
                seen[designed["verdict"]] += 1
                assert designed["checks"] == checked["checks"], (seed, litres, fill)
                assert designed["verdict"] == checked["verdict"], (seed, litres, fill)
    assert set(seen) >= {"holds", "favourable-only", "does-not-hold"}
