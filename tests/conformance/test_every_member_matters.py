"""Every member of a design question changes the answer, or stands in a list reviewed by hand with the reason."""

import json
from copy import deepcopy
from functools import cache
from typing import Any

import msgspec
import pytest

from conformance.changes import WITHOUT_EFFECT, changes
from conformance.members import member_at, members
from loopslack.contract.answering import loop as answering
from loopslack.contract.questions.operations import LoopDesignQuestion

CHANGES = changes()


@cache
def answered(question: str) -> dict[str, Any]:
    answer = answering.design_loop(msgspec.json.decode(question, type=LoopDesignQuestion))
    found = json.loads(msgspec.json.encode(answer))
    del found["assumptions"]  # the echo of what was left open
    return found


def with_change(question: dict[str, Any], pointer: str, value: Any) -> dict[str, Any]:
    found = deepcopy(question)
    *path, last = pointer.strip("/").split("/")
    place: Any = found
    for step in path:
        place = place[int(step)] if isinstance(place, list) else place[step]
    place[last] = value
    return found


@pytest.mark.parametrize(
    ("question", "pointer", "value"),
    CHANGES,
    ids=[f"{k}{pointer}" for k, (_, pointer, _) in enumerate(CHANGES)],
)
def test_a_member_changes_the_answer(question, pointer, value) -> None:
    before = answered(json.dumps(question))
    after = answered(json.dumps(with_change(question, pointer, value)))
    assert after != before


def test_every_member_is_changed_or_reviewed() -> None:
    touched = set()
    for question, pointer, value in CHANGES:
        changed = with_change(question, pointer, value)
        touched.add(member_at(LoopDesignQuestion, changed, pointer))
        touched.add(member_at(LoopDesignQuestion, question, pointer) if _there(question, pointer) else "")
        for below in ("kind", "standard"):
            if isinstance(value, dict) and below in value:
                touched.add(member_at(LoopDesignQuestion, changed, f"{pointer}/{below}"))
    assert members(LoopDesignQuestion) - touched - set(WITHOUT_EFFECT) == set()
    assert set(WITHOUT_EFFECT) & touched == set()


def _there(question: Any, pointer: str) -> bool:
    for step in pointer.strip("/").split("/"):
        if isinstance(question, list):
            question = question[int(step)]
        elif step in question:
            question = question[step]
        else:
            return False
    return True


def test_accepting_a_loop_without_boiling_matters_where_nothing_boils() -> None:
    question = deepcopy(CHANGES[0][0])
    question["collectors"][0]["measuredStagnation"] = {
        "temperature": {"value": 135, "unit": "degC"},
        "irradiance": {"value": 1000, "unit": "W/m2"},
        "ambient": {"value": 30, "unit": "degC"},
    }
    question["collectors"][0]["coefficients"] = {
        "eta0": 0.6,
        "a1": {"value": 6, "unit": "W/m2K"},
        "a2": {"value": 0.02, "unit": "W/m2K2"},
        "basis": "aperture",
    }
    careful = answered(json.dumps(question))["result"]["volumes"]["recommended"]
    bold = answered(json.dumps(question | {"acceptWithoutBoiling": True}))["result"]["volumes"]["recommended"]
    assert careful["floor"]["value"] > bold["smallest"]["value"]
    assert "floor" not in bold
