"""A remedy is sent back as a new question, made by the changes the answer tells, and holds."""

import msgspec
import pytest

from calc.remedies.failing_questions import checks, designs
from calc.remedies.sent_back import (
    Sought,
    changed,
    decoded,
    offered,
    remedies_of_check,
    remedies_of_design,
    verdict_of_check,
    verdict_of_design,
)
from loopslack.calc.model import Loop
from loopslack.calc.remedies.changes import changed as changed_case
from loopslack.contract.questions.operations import LoopDesignQuestion, StagnationCheckQuestion
from loopslack.contract.reading.loop import read_loop

DESIGNS, CHECKS = designs(), checks()


@pytest.fixture(scope="module")
def sought() -> dict[str, Sought]:
    return {name: remedies_of_design(question) for name, question in DESIGNS.items()}


@pytest.fixture(scope="module")
def sought_checks() -> dict[str, Sought]:
    return {name: remedies_of_check(question) for name, question in CHECKS.items()}


@pytest.mark.parametrize("name", DESIGNS)
def test_every_remedy_of_a_design_question_holds_when_it_is_asked(name, sought):
    found = sought[name]
    assert found.verdict != "holds"
    offers = offered(found.told)
    assert offers
    for code, changes in offers:
        assert verdict_of_design(changed(DESIGNS[name], changes)) == "holds", code


@pytest.mark.parametrize("name", CHECKS)
def test_every_remedy_of_a_check_holds_when_it_is_asked(name, sought_checks):
    found = sought_checks[name]
    assert found.verdict != "holds"
    offers = offered(found.told)
    assert offers
    for code, changes in offers:
        assert verdict_of_check(changed(CHECKS[name], changes)) == "holds", code


def _numbers(loop: Loop) -> list[float]:
    """Every number that a remedy may change, and those beside it."""
    relief, station = loop.relief, loop.station
    numbers = [
        loop.content,
        loop.cooling_content,
        loop.fluid.mass_fraction,
        loop.temperatures.cut_off,
        station.steam_loss,
        relief.set_pressure,
        relief.opening_pressure,
        relief.closing_pressure,
    ]
    for branch in loop.branches:
        numbers.append(float(branch.access == "open"))
        for part in branch.segments:
            numbers += [part.length, part.area, part.insulation, part.conductance, part.ambient]
            numbers += [part.start_height, part.end_height, part.outer_diameter]
    return numbers


@pytest.mark.parametrize("name", [*DESIGNS, *(f"check: {name}" for name in CHECKS)])
def test_the_changed_question_reads_into_the_very_loop_that_was_judged(name, sought, sought_checks):
    checked = name.startswith("check: ")
    name = name.removeprefix("check: ")
    found = (sought_checks if checked else sought)[name]
    question = (CHECKS if checked else DESIGNS)[name]
    kind = StagnationCheckQuestion if checked else LoopDesignQuestion
    judged = [one.case for one in found.found.single]
    if found.found.pair is not None:
        judged.append(changed_case(found.case, found.found.pair.changes))
    for (code, changes), case in zip(offered(found.told), judged, strict=True):
        loop = read_loop(decoded(changed(question, changes), kind)).loop
        assert _numbers(loop) == pytest.approx(_numbers(case.loop), rel=1e-5, abs=1e-5), code


def test_every_measure_is_offered_for_some_question(sought, sought_checks):
    everything = [*sought.values(), *sought_checks.values()]
    codes = {remedy.code for one in everything for remedy in one.told.single}
    assert codes == {
        "fill-pressure",
        "precharge",
        "cut-off",
        "stronger-glycol",
        "vessel",
        "cooling-vessel",
        "relief-valve",
        "part-rating",
        "stagnation-cooler",
        "open-run",
        "bare-pipe",
        "bare-run",
        "extra-pipe",
    }


def test_remedies_come_with_the_smallest_intervention_first(sought, sought_checks):
    for one in [*sought.values(), *sought_checks.values()]:
        ranks = [remedy.rank for remedy in one.told.single]
        assert ranks == sorted(ranks)


def test_better_emptying_is_told_apart_and_changes_nothing(sought):
    told = sought["poor emptying"].told
    assert [one.code for one in told.to_be_proved] == ["better-emptying"]
    assert "measurement" in told.to_be_proved[0].sentence
    assert "changes" not in msgspec.to_builtins(told.to_be_proved[0])
    assert all("emptying" not in step["field"] for _, steps in offered(told) for step in steps)
    assert all("SteamPower" not in step["field"] for _, steps in offered(told) for step in steps)


def test_a_pair_is_told_only_where_no_single_measure_does(sought):
    told = sought["freezing and steam"].told
    assert told.single == []
    assert told.pair is not None
    assert told.pair.steps[0].code == "stronger-glycol"
    assert sought["poor emptying"].told.pair is None


@pytest.mark.parametrize(
    ("name", "field", "unit", "words"),
    [
        ("too weak a mixture", "share", "volume-percent", "% by volume of glycol instead of 42 % by volume."),
        (
            "too weak a mixture by mass",
            "share",
            "mass-percent",
            "% by mass of glycol instead of 43 % by mass.",
        ),
        ("too weak a mixture by protection", "temperature", "degC", "degC instead of -25 degC."),
    ],
)
def test_a_stronger_mixture_is_stated_as_the_caller_states_it(name, field, unit, words, sought):
    remedy = next(one for one in sought[name].told.single if one.code == "stronger-glycol")
    assert [step.field for step in remedy.changes] == [f"/fluid/concentration/{field}"]
    assert remedy.changes[0].value == remedy.amount
    assert (remedy.amount.unit, remedy.present.unit) == (unit, unit)
    assert remedy.sentence.endswith(words)
    steps = remedy.amount.value * (2 if unit == "degC" else 10)
    assert steps == pytest.approx(round(steps), abs=1e-6)


def test_a_loop_of_water_gets_another_fluid(sought):
    changes = next(one for one in sought["no glycol"].told.single if one.code == "stronger-glycol").changes
    assert next(step.field for step in changes) == "/fluid"
    assert [step.word for step in changes if step.word] == ["propylene-glycol", "by-mass"]


def test_a_look_at_the_check_valve_comes_before_everything_else(sought):
    found = sought["check valve to look at"]
    look = found.told.single[0]
    assert (look.code, look.rank) == ("open-run", 1)
    assert "stagnation-cooler" in {one.code for one in found.told.single[1:]}
    assert look.sentence.startswith("First look where the check valve sits.")
    assert "place the check valve so that it can" in look.sentence
    assert "unseen" in {caution.code for caution in look.cautions}
    assert [(step.field, step.word) for step in look.changes] == [("/pipeRuns/1/steamAccess", "open")]
    assert "before anything is bought" in found.told.summary
    assert found.verdict != "holds"


def test_a_look_is_the_first_of_a_pair(sought):
    steps = sought["freezing and an unknown check valve"].told.pair.steps
    assert [step.code for step in steps] == ["open-run", "stronger-glycol"]


def test_a_check_valve_is_moved_before_a_cooler_is_bought(sought):
    told = sought["check valve to move"].told
    codes = [one.code for one in told.single]
    assert codes.index("open-run") < codes.index("stagnation-cooler")
    assert next(one for one in told.single if one.code == "open-run").sentence.startswith(
        "Place the check valve"
    )
    assert "before anything is bought" not in told.summary


def test_bare_pipe_carries_the_touch_caution(sought):
    bare = [r for r in sought["poor emptying"].told.single if r.code in {"bare-pipe", "bare-run"}]
    assert len(bare) == 2
    for remedy in bare:
        assert "hot-surfaces" in {caution.code for caution in remedy.cautions}


def test_a_remedy_is_told_in_the_units_asked_for(sought):
    told = sought["weathered, in the mountains, in other units"].told
    units = {remedy.amount.unit for remedy in told.single}
    assert units == {"psig", "BTU/h", "ft"}


def test_a_loop_that_neither_one_nor_two_measures_mend_says_so():
    question = changed(
        DESIGNS["freezing and steam"],
        [
            {"action": "set", "field": "/collectors/0/ratedPressure/value", "value": 2.5},
            {"action": "set", "field": "/staticHeight/value", "value": 30},
            {"action": "set", "field": "/station/highestTemperature", "value": {"value": 90, "unit": "degC"}},
        ],
    )
    told = remedies_of_design(question).told
    assert told.none_found
    assert told.single == []
    assert told.pair is None
    assert told.summary.startswith("Neither a single measure nor a pair")


def test_a_loop_that_holds_needs_nothing():
    question = changed(
        DESIGNS["poor emptying"],
        [{"action": "set", "field": "/collectors/0/emptyingClass", "word": "good"}],
    )
    found = remedies_of_design(question)
    assert found.verdict == "holds"
    assert found.told.single == []
    assert not found.told.none_found
