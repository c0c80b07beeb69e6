"""Every check, under every doubt, replaced by a failing stub changes verdict, vessel row and batch count."""

import json
from typing import Any, get_args

import pytest
from msgspec.structs import replace

from loopslack.calc import checks, judge
from loopslack.calc.judgement import Check, CheckCode
from loopslack.contract.answering.many import answer_lines
from loopslack.contract.answers.loop import DoubtId
from loopslack.kernel import kinds
from questions.wash_house import changed, wash_house

UNSEEN = wash_house()
for pointer, stated in {
    "/collectors/0/emptyingClass": "good",
    "/pipeRuns/1/steamAccess": "unknown",
    "/pipeRuns/0/segments/0/length": {"value": 40, "unit": "m"},
    "/station/highestTemperature": {"value": 140, "unit": "degC"},
}.items():
    UNSEEN = changed(UNSEEN, pointer, stated)
"""A roof under which every doubt applies."""
LUKEWARM = changed(
    wash_house(),
    "/collectors/0/coefficients",
    {
        "eta0": 0.7,
        "a1": {"value": 6, "unit": "W/m2K"},
        "a2": {"value": 0.03, "unit": "W/m2K2"},
        "basis": "aperture",
    },
)
"""A roof that stays below boiling as far as is computed."""
HEAD = json.dumps({"defaults": {"include": []}}).encode()

# The function whose checks have the code, and a question for which they are made and hold.
CORE: dict[str, tuple[Any, str, dict[str, Any]]] = {
    "relief-valve": (checks, "relief_valve", UNSEEN),
    "acceptance": (checks, "acceptance", UNSEEN),
    "steam-at-station": (checks, "steam_at_station", UNSEEN),
    "membrane-temperature": (checks, "membrane", UNSEEN),
    "reserve": (checks, "reserve", UNSEEN),
    "top-pressure": (checks, "top_pressure", UNSEEN),
    "boiling-at-cut-off": (checks, "cut_off", UNSEEN),
    "freezing": (checks, "freezing", UNSEEN),
    "fill-window": (checks, "fill_window", UNSEEN),
    "part-protected": (checks, "protected", UNSEEN),
    "part-temperature": (checks, "part_temperatures", UNSEEN),
    "construction": (checks, "construction", UNSEEN),
    "volume-without-boiling": (checks, "without_boiling", LUKEWARM),
}
TOLD: dict[str, tuple[Any, str, dict[str, Any]]] = {
    "steam-reach": (checks, "steam_reach", UNSEEN),
    "glycol-degradation": (checks, "degradation", UNSEEN),
    "net-positive-suction": (checks, "suction", UNSEEN),
    "relief-size": (judge, "relief_size_check", UNSEEN),
}
IN_STAGNATION = ("relief-valve", "acceptance", "steam-at-station", "membrane-temperature")


def asked(question: dict[str, Any]) -> tuple[dict[str, Any], dict[str, int]]:
    """The result of a question as one design of many, and the counts of the batch."""
    lines, counts = answer_lines([json.dumps(question | {"id": "one", "include": []}).encode()], 0, HEAD)
    outcome = json.loads(lines)
    assert outcome["verdict"] == outcome["answer"]["result"]["verdict"]
    return outcome["answer"], counts


def failing(check: Check) -> Check:
    return replace(check, verdict="does-not-hold", margin=-1.0)


def failed(found: Any) -> Any:
    """What a function of checks gives, made to fail: a check, several, or one where there was none."""
    if isinstance(found, Check):
        return failing(found)
    made = list(found)
    if made:
        return [failing(check) for check in made]
    return [Check("construction", True, "fill", "does-not-hold", kinds.RATIO, reason="galvanised-parts")]


def rows(answer: dict[str, Any], code: str) -> set[str]:
    return {check["verdict"] for check in answer["result"]["checks"] if check["code"] == code}


def test_no_code_is_forgotten_here() -> None:
    # A rating that nobody stated has nothing to compare: it is told as to be confirmed, and there is no stub of it.
    assert {*CORE, *TOLD, "part-rating"} == set(get_args(CheckCode))


@pytest.mark.parametrize("question", [UNSEEN, LUKEWARM], ids=["boiling", "lukewarm"])
def test_as_they_are_the_loops_hold(question: dict[str, Any]) -> None:
    answer, counts = asked(question)
    assert counts == {"holds": 1}
    assert "chosenVessel" in answer["result"]


@pytest.mark.parametrize("code", CORE)
def test_a_failing_core_check_changes_verdict_vessel_row_and_count(code: str, monkeypatch) -> None:
    module, name, question = CORE[code]
    original = getattr(module, name)
    monkeypatch.setattr(module, name, lambda *a, **k: failed(original(*a, **k)))
    answer, counts = asked(question)
    result = answer["result"]
    assert result["verdict"] == "does-not-hold"
    assert "chosenVessel" not in result
    assert "nearestVessel" in result
    assert counts == {"does-not-hold": 1}
    assert "does-not-hold" in rows(answer, code)
    assert any(told["code"] == code and told["severity"] == "stop" for told in answer["advisories"])


@pytest.mark.parametrize("code", TOLD)
def test_a_failing_check_to_confirm_is_told_and_turns_no_verdict(code: str, monkeypatch) -> None:
    module, name, question = TOLD[code]
    original = getattr(module, name)
    monkeypatch.setattr(module, name, lambda *a, **k: failed(original(*a, **k)))
    answer, counts = asked(question)
    assert counts == {"holds": 1}
    assert rows(answer, code) == {"does-not-hold"}
    assert any(told["code"] == code and told["severity"] == "warning" for told in answer["advisories"])


def test_a_rating_that_is_not_stated_is_never_shown_as_passed() -> None:
    question = changed(UNSEEN, "/collectors/0/ratedPressure", None)
    answer, _ = asked(question)
    assert rows(answer, "part-rating") == {"not-assessed"}
    assert answer["result"]["basis"] == "provisional"
    assert any("part-rating" in one.values() for one in answer["result"]["toConfirm"])


@pytest.mark.parametrize("code", IN_STAGNATION)
@pytest.mark.parametrize("doubt", get_args(DoubtId))
def test_a_check_that_fails_under_one_doubt_changes_verdict_vessel_row_and_count(
    code: str, doubt: str, monkeypatch
) -> None:
    module, name, question = CORE[code]
    original = getattr(module, name)

    def stub(*a: Any, **k: Any) -> Check:
        check = original(*a, **k)
        return failing(check) if check.state == doubt else check

    monkeypatch.setattr(module, name, stub)
    answer, counts = asked(question)
    result = answer["result"]
    assert result["verdict"] == "favourable-only"
    assert "chosenVessel" not in result
    assert counts == {"favourable-only": 1}
    assert {one["id"]: one["verdict"] for one in result["doubts"]}[doubt] == "does-not-hold"
