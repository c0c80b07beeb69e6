"""The verdict can't be missed: it opens every answer that judges a loop, and is required there."""

import json
from pathlib import Path

import msgspec
import pytest

from loopslack.contract.answering import audit as answering_audit
from loopslack.contract.answering import course as answering_course
from loopslack.contract.answering import loop as answering
from loopslack.contract.answering import small as answering_small
from loopslack.contract.encoding import encoded
from loopslack.contract.questions import operations as loop_questions
from loopslack.contract.questions.existing import StagnationCourseQuestion, VesselAuditQuestion
from questions.questions_of_each_kind import SOUND

SCHEMAS = json.loads((Path(__file__).parents[2] / "openapi" / "v1.json").read_bytes())["components"][
    "schemas"
]
JUDGING = {
    loop_questions.LoopDesignQuestion: answering.design_loop,
    loop_questions.VesselSizingQuestion: answering.size_vessel,
    loop_questions.StagnationCheckQuestion: answering.check_stagnation,
    StagnationCourseQuestion: answering_course.compute_stagnation_course,
    VesselAuditQuestion: answering_audit.audit_vessel,
}
OTHERS = {
    loop_questions.LoopVolumeQuestion: answering_small.compute_loop_volume,
    loop_questions.ExpansionQuestion: answering_small.compute_expansion,
}


def answer(question, ask):
    return ask(msgspec.convert(SOUND[question], question))


@pytest.mark.parametrize(("question", "ask"), JUDGING.items(), ids=lambda one: getattr(one, "__name__", ""))
def test_an_answer_that_judges_begins_with_its_verdict(question, ask):
    found = answer(question, ask)
    assert encoded(found).startswith(b'{"result":{"verdict":"%b"' % found.result.verdict.encode())
    schema = SCHEMAS[type(found).__name__]
    assert "result" in schema["required"]
    assert "verdict" in SCHEMAS[schema["properties"]["result"]["$ref"].rpartition("/")[2]]["required"]


@pytest.mark.parametrize(("question", "ask"), OTHERS.items(), ids=lambda one: getattr(one, "__name__", ""))
def test_any_other_answer_begins_with_its_result(question, ask):
    assert encoded(answer(question, ask)).startswith(b'{"result":')


def test_one_of_many_tells_its_verdict_before_its_answer():
    assert list(SCHEMAS["DesignOutcome"]["properties"])[:4] == ["index", "id", "verdict", "answer"]
