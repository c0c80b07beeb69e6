"""One design among many: answered as it would be on its own, or told what stands in the way."""

import json
import sys
from concurrent.futures import ThreadPoolExecutor

import msgspec
import pytest

from loopslack.contract.answering import loop as answering
from loopslack.contract.answering import many as answering_many
from loopslack.contract.answering.many import (
    Tally,
    answer_design,
    answer_lines,
    end_line,
    id_of,
    read_shared,
)
from loopslack.contract.encoding import encoded
from loopslack.contract.questions.operations import LoopDesignQuestion
from loopslack.contract.reading.many import Shared
from loopslack.contract.refusals import Refused
from loopslack.kernel.errors import Contradiction
from many.designs import BATCH, HEAD, design, faulty

SHARED = read_shared(json.dumps(HEAD).encode())


class Item(msgspec.Struct):
    index: int
    id: str | None = None
    verdict: str | None = None
    answer: msgspec.Raw = msgspec.Raw()
    problem: dict | None = None


def answered(asked: object, shared: Shared = SHARED, **more: object) -> Item:
    body = asked if isinstance(asked, bytes) else json.dumps(asked).encode()
    return msgspec.json.decode(answer_design(body, 7, shared, **more).line, type=Item)


def faults(item: Item) -> dict[str, str]:
    return {fault["pointer"]: fault["code"] for fault in item.problem["errors"]}


@pytest.mark.parametrize("asked", BATCH["designs"][:2], ids=lambda asked: asked["id"])
def test_it_gets_the_bytes_it_would_get_on_its_own_but_for_remedies(asked):
    own = {key: value for key, value in asked.items() if key != "id"}
    stock = {"kind": "stock", "items": HEAD["stock"]}
    alone = HEAD["defaults"] | {"vessel": stock, "include": []} | own
    single = answering.design_loop(msgspec.json.decode(json.dumps(alone), type=LoopDesignQuestion))
    item = answered(asked)
    assert bytes(item.answer) == encoded(single)
    assert item.verdict == single.result.verdict
    assert (item.index, item.id) == (7, asked["id"])


def test_a_design_overrides_a_default_as_a_whole():
    ours = HEAD["defaults"]["reliefValve"]
    assert set(ours) == {"setPressure", "nominalSize"}
    own = {"setPressure": {"value": 4, "unit": "barg"}}
    for asked, opens_at, size in (
        (design("a"), 5.4, "holds"),
        (design("a", reliefValve=own), 3.5, "not-assessed"),
    ):
        answer = json.loads(bytes(answered(asked).answer))
        checks = {check["code"]: check for check in answer["result"]["checks"]}
        assert checks["relief-valve"]["limit"] == {"value": opens_at, "unit": "barg"}
        assert checks["relief-size"]["verdict"] == size


def test_a_design_with_a_vessel_of_its_own_does_not_choose_from_the_stock():
    own = answered(design("a", vessel={"kind": "series"}))
    result = msgspec.json.decode(own.answer)["result"]
    vessel = result.get("chosenVessel") or result["nearestVessel"]
    assert vessel["id"].startswith("preferred-")


def test_every_fault_of_a_design_is_told_with_its_place_in_the_design():
    item = answered({"id": "a", "staticHeigth": 1, "collectors": 3})
    assert item.id == "a"
    assert item.problem["status"] == 422
    assert faults(item)["/staticHeigth"] == "unknown-field"
    assert faults(item)["/collectors"] == "wrong-type"


def test_what_neither_design_nor_defaults_state_is_missing():
    item = answered({"id": "a"}, Shared())
    assert set(faults(item)) == {
        "/site",
        "/collectors",
        "/pipeRuns",
        "/fluid",
        "/staticHeight",
        "/reliefValve",
    }
    assert set(faults(item).values()) == {"missing"}


@pytest.mark.parametrize(
    ("body", "status", "code"),
    [
        (b'{"id":"a"', 400, "not-json"),
        (b"[]", 422, "wrong-type"),
        (b"7", 422, "wrong-type"),
        (b'{"id":"a\xff"}', 400, "not-utf-8"),
        (b'{"id":"a","id":"b"}', 400, "duplicate-key"),
        (b'{"id":NaN}', 400, "not-finite"),
        (b"[" * 5000 + b"]" * 5000, 400, None),
        (b'{"id":7}', 422, "wrong-type"),
        (b'{"id":""}', 422, "too-short"),
        (json.dumps({"id": "x" * 65}).encode(), 422, "too-long"),
        (b"{}", 422, "missing"),
    ],
)
def test_a_line_that_is_no_design_is_told_what_is_wrong_with_it(body, status, code):
    item = answered(body)
    assert item.problem["status"] == status
    assert code is None or code in {fault["code"] for fault in item.problem["errors"]}
    assert item.id is None or len(item.id) <= 64
    assert item.verdict is None


def test_a_repeated_id_is_a_problem_of_the_later_design():
    item = answered(design("twice"), repeated=True)
    assert item.problem["status"] == 422
    assert faults(item) == {"/id": "contradiction"}
    assert "twice" in item.problem["detail"]


def test_a_bug_met_by_one_design_is_told_without_its_text_and_handed_to_whoever_logs(monkeypatch):
    def broken(question):
        raise ZeroDivisionError("the secret of the house")

    monkeypatch.setattr(answering_many, "design_loop", broken)
    outcome = answer_design(json.dumps(design("a")).encode(), 0, SHARED)
    item = json.loads(outcome.line)
    assert item["problem"]["status"] == 500
    assert item["id"] == "a"
    assert b"secret" not in outcome.line
    assert isinstance(outcome.fault, ZeroDivisionError)
    assert outcome.verdict == "refused"


def test_a_number_that_is_none_is_a_fault_and_not_null(monkeypatch):
    real = answering_many.design_loop

    def not_finite(question):
        answer = real(question)
        caution = answer.result.content.total
        wrong = msgspec.structs.replace(caution, value=float("nan"))
        content = msgspec.structs.replace(answer.result.content, total=wrong)
        result = msgspec.structs.replace(answer.result, content=content)
        return msgspec.structs.replace(answer, result=result)

    monkeypatch.setattr(answering_many, "design_loop", not_finite)
    outcome = answer_design(json.dumps(design("a")).encode(), 0, SHARED)
    assert json.loads(outcome.line)["problem"]["status"] == 500
    assert b"null" not in outcome.line


def test_the_calculations_own_refusal_is_told_as_on_its_own():
    item = answered(design("a", staticHeight={"value": 9000, "unit": "m"}))
    assert item.problem["type"] == "/docs/problems/invalid-field"
    assert faults(item) == {"/staticHeight": "out-of-range"}


def test_two_vessels_of_the_stock_with_one_name_refuse_the_head():
    stock = [HEAD["stock"][0], HEAD["stock"][1], HEAD["stock"][0]]
    with pytest.raises(Refused) as refused:
        read_shared(json.dumps({"stock": stock}).encode())
    assert [fault.pointer for fault in refused.value.faults] == ["/stock/2/id"]


def test_a_stock_that_no_design_could_choose_from_refuses_the_head():
    with pytest.raises(Refused) as refused:
        read_shared(
            json.dumps(HEAD | {"defaults": HEAD["defaults"] | {"vessel": {"kind": "series"}}}).encode()
        )
    assert [fault.pointer for fault in refused.value.faults] == ["/defaults/vessel"]


def test_a_stock_beyond_the_operators_limit_refuses_the_head():
    with pytest.raises(Refused) as refused:
        read_shared(json.dumps(HEAD).encode(), most_stock=len(HEAD["stock"]) - 1)
    assert [(fault.pointer, fault.code) for fault in refused.value.faults] == [("/stock", "too-many")]


def test_all_that_is_wrong_with_a_design_is_told_at_once():
    asked = design("a", staticHeight={"value": 9000, "unit": "m"}, vesselZone="inside", frob=1)
    asked["temperatures"] = {
        "returnPipe": {"value": 95, "unit": "degC"},
        "flowPipe": {"value": 80, "unit": "degC"},
    }
    assert faults(answered(asked)) == {
        "/staticHeight": "out-of-range",
        "/vesselZone": "not-a-member",
        "/frob": "unknown-field",
        "/temperatures/returnPipe": "contradiction",
    }


def test_what_a_design_lacks_does_not_hide_what_is_wrong_with_the_rest():
    asked = {"id": "a", "staticHeight": {"value": 9000, "unit": "m"}, "vesselsInParallel": 2}
    assert faults(answered(asked, Shared())) == {
        "/site": "missing",
        "/collectors": "missing",
        "/pipeRuns": "missing",
        "/fluid": "missing",
        "/staticHeight": "out-of-range",
        "/reliefValve": "missing",
    }


def refused_head(head):
    with pytest.raises(Refused) as refused:
        read_shared(json.dumps(head).encode())
    return [(fault.pointer, fault.code) for fault in refused.value.faults]


def test_a_number_out_of_range_in_what_designs_share_refuses_the_head():
    far = {"value": -3, "unit": "L"}
    stock = [HEAD["stock"][0] | {"nominalVolume": far}, *HEAD["stock"][1:]]
    defaults = HEAD["defaults"] | {"station": {"content": far}}
    assert refused_head({"stock": stock, "defaults": defaults}) == [
        ("/stock/0/nominalVolume", "out-of-range"),
        ("/defaults/station/content", "out-of-range"),
    ]
    assert refused_head({"stock": stock, "defaults": defaults | {"vesselZone": "inside"}}) == [
        ("/stock/0/nominalVolume", "out-of-range"),
        ("/defaults/station/content", "out-of-range"),
        ("/defaults/vesselZone", "not-a-member"),
    ]


def test_what_depends_on_the_site_or_may_be_overridden_is_left_to_the_designs():
    on_a_mountain = {"value": 1.2, "unit": "bara"}
    stock = [HEAD["stock"][0] | {"ratedPressure": on_a_mountain}]
    hot_return = {"returnPipe": {"value": 95, "unit": "degC"}, "flowPipe": {"value": 80, "unit": "degC"}}
    shared = read_shared(
        json.dumps({"stock": stock, "defaults": HEAD["defaults"] | {"temperatures": hot_return}}).encode()
    )
    at_sea = answered(design("a", temperatures={}), shared)
    assert faults(at_sea) == {"/vessel/items/0/ratedPressure": "out-of-range"}
    high = HEAD["defaults"]["site"] | {"altitude": {"value": 4500, "unit": "m"}}
    assert answered(design("b", temperatures={}, site=high), shared).problem is None
    assert "/temperatures/returnPipe" in faults(answered(design("c", site=high), shared))


@pytest.mark.parametrize("head", [b"{}", b'{"stock":null,"defaults":null}', b"{ }"])
def test_a_head_may_be_empty(head):
    assert read_shared(head) == Shared()


@pytest.mark.parametrize(
    ("body", "name"),
    [(b'{"x":[1],"id":"a"}', "a"), (b'{"id":1}', None), (b"[]", None), (b"", None), (b'{"id":"a"', None)],
)
def test_the_name_of_a_design_is_read_where_there_is_one(body, name):
    assert id_of(body) == name


def test_a_run_of_lines_is_answered_as_its_lines_are_one_by_one():
    head = json.dumps(HEAD).encode()
    bodies = [json.dumps(one).encode() for one in (design("a"), faulty("b"), design("a"))]
    text, counts = answer_lines([*bodies, None], 5, head, frozenset({2}))
    expected = [
        answer_design(body, 5 + place, SHARED, repeated=place == 2).line for place, body in enumerate(bodies)
    ]
    *first, last = text.splitlines()
    assert first == expected
    assert json.loads(last)["problem"]["status"] == 413
    assert json.loads(last)["index"] == 8
    assert sum(counts.values()) == 4
    assert counts["refused"] == 3


def test_the_summary_counts_each_verdict_and_all_of_them():
    tally = Tally()
    for verdict in ("holds", "holds", "favourable-only", "does-not-hold", "not-assessed", "refused"):
        tally.add(verdict)
    end = json.loads(end_line(tally))
    assert end == {
        "complete": True,
        "summary": {
            "designs": 6,
            "holds": 2,
            "favourableOnly": 1,
            "doesNotHold": 1,
            "notAssessed": 1,
            "refused": 1,
        },
    }


def test_an_early_end_says_why():
    end = json.loads(end_line(Tally(), Refused("deadline-passed", "Too late.")))
    assert end["complete"] is False
    assert end["problem"]["type"] == "/docs/problems/deadline-passed"


def test_errors_of_a_calculation_survive_on_their_way_between_processes():
    error = Contradiction("a", remedy="b", pointer="/c")
    assert error.__reduce__()[1][1:4] == ("a", "b", "/c")


def test_an_answer_does_not_depend_on_what_is_computed_beside_it():
    """The event loop, costly questions and batches compute in threads of their own over shared tables."""
    asked = [
        json.dumps(
            design(
                f"q-{number}",
                staticHeight={"value": 3 + number, "unit": "m"},
                units=("metric", "us")[number % 2],
            )
        ).encode()
        for number in range(12)
    ]
    alone = [answer_design(body, 0, SHARED).line for body in asked]
    interval = sys.getswitchinterval()
    sys.setswitchinterval(1e-5)
    try:
        with ThreadPoolExecutor(4) as threads:
            beside = list(
                threads.map(lambda body: answer_design(body, 0, SHARED).line, [*asked, *asked[::-1]])
            )
    finally:
        sys.setswitchinterval(interval)
    assert beside == alone + alone[::-1]
