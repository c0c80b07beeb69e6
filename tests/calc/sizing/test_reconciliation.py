"""Why two answers differ: the steps of a walk, and that they add up, on the reference loop and on 1,000 others."""

from itertools import pairwise
from random import Random

import pytest

from calc.loops import random_loop
from calc.reference import loop
from calc.sizing.printed import printed_analysis
from loopslack.calc.analysis import Analysis
from loopslack.calc.precharge import precharge
from loopslack.calc.scenarios import BASE
from loopslack.calc.sizing.mass_balance import feasible
from loopslack.calc.sizing.reconciliation import (
    base_choices,
    smallest,
    walk_between,
    walk_to_recommended,
)
from loopslack.calc.sizing.rules.register import RuleResult, run_all
from loopslack.calc.sizing.volumes import Sized, size
from loopslack.calc.sizing.walk import CHOICE_STEPS, LAST_STEPS, SENTENCES, SUBJECTS, Step, Walk
from loopslack.calc.window import Bounds, Gas
from loopslack.kernel.errors import CalculationError, NotApplicable
from loopslack.kernel.units import from_si

PARTS = tuple(range(0, 5600, 700))  # a fifth to a quarter of the loops has a vessel to recommend


def show(kind, si: float) -> str:
    return f"{from_si(si, kind.metric, kind):.4g} {kind.metric}"


def answered(analysis: Analysis) -> tuple[Sized | None, dict[str, RuleResult]]:
    limit = analysis.loop.criteria.membrane_limit
    sized = size(analysis, analysis.singles, "size", limit)
    results = run_all(analysis, sized, analysis.singles, check=False)
    return sized, {result.key: result for result in results}


def reference_walk(analysis: Analysis) -> Walk:
    sized, results = answered(analysis)
    assert sized is not None
    least = smallest(results.values())
    assert least is not None
    return walk_to_recommended(analysis, least, sized, analysis.singles)


def assert_adds_up(walk: Walk) -> None:
    difference = walk.end_volume - walk.start_volume
    assert sum(step.change for step in walk.steps) == pytest.approx(
        difference, rel=1e-9, abs=1e-12 * max(walk.start_volume, walk.end_volume)
    )
    assert walk.steps[0].before == walk.start_volume
    assert walk.steps[-1].after == walk.end_volume
    for one, other in pairwise(walk.steps):
        assert one.after == other.before
    for step in walk.steps:
        assert 0 <= step.after < 1e6


def codes(walk: Walk) -> tuple[str, ...]:
    return tuple(code for step in walk.steps for code in step.codes)


@pytest.mark.parametrize("first", PARTS)
def test_the_steps_add_up_in_a_thousand_random_loops_with_a_recommendation_and_more_without(
    first: int,
) -> None:
    walked = {"recommended": 0, "between": 0}
    for seed in range(first, first + 700):
        analysis = Analysis(random_loop(seed))
        sized, results = answered(analysis)
        least = smallest(results.values())
        published = [result for result in results.values() if result.answer.choices is not None]
        assert least is None or least.nominal_volume == min(result.nominal_volume for result in published)
        if sized is not None and least is not None:
            walk = walk_to_recommended(analysis, least, sized, analysis.singles)
            assert codes(walk) == CHOICE_STEPS + LAST_STEPS
            assert walk.end_volume == sized.smallest == results["mass-balance"].nominal_volume
            assert walk.start_volume == least.nominal_volume
            assert_adds_up(walk)
            walked["recommended"] += 1
        if len(published) > 1:
            one, other = Random(seed).sample(published, 2)  # noqa: S311 - loops, not secrets
            walk = walk_between(analysis, one, other)
            assert codes(walk) == CHOICE_STEPS
            assert (walk.start_volume, walk.end_volume) == (one.nominal_volume, other.nominal_volume)
            assert_adds_up(walk)
            walked["between"] += 1
    assert walked["recommended"] >= 125
    assert walked["between"] > 500


def test_the_reference_loop_owes_most_of_its_volume_to_steam() -> None:
    steps = {step.codes[0]: step.change * 1000 for step in reference_walk(printed_analysis()).steps}
    assert max(steps, key=lambda code: abs(steps[code])) == "vaporisation"
    assert steps["vaporisation"] == pytest.approx(13.6 * 1.842, abs=0.05)
    assert steps["pipe-steam"] > 15
    assert steps["expansion"] < 0


def test_the_walk_passes_the_smallest_vessel_of_the_base_case_and_of_the_single_doubts() -> None:
    """Printed for the reference loop at fill 1.918 bar: 51.6 to 53 L, and 69.6 L for the hotter of the doubts."""
    after = {step.codes[0]: step.after * 1000 for step in reference_walk(printed_analysis()).steps}
    assert after["gas-temperature"] == pytest.approx(53, rel=0.02)
    assert after["doubts"] == pytest.approx(69.6, rel=0.02)


def test_the_base_case_of_the_walk_is_the_mass_balance_itself() -> None:
    """At its volume, filled to the least above the precharge, the vessel just reaches the final pressure."""
    analysis = Analysis(loop())
    analysis.allowance = 0.0
    charged = precharge(analysis, 1.0)
    choices = base_choices(analysis, charged)
    volume = choices.nominal_volume()
    bounds = Bounds(analysis, (BASE,), Gas(volume, charged, analysis.loop.temperatures.fill))
    upper = bounds.masses(volume)[1]
    assert upper.code == "relief-valve"
    assert bounds.pressure(volume, upper.mass, analysis.loop.temperatures.fill) == pytest.approx(
        choices.fill, rel=1e-12
    )


def test_the_step_of_the_fill_window_ends_at_the_vessel_without_a_membrane_limit() -> None:
    analysis = Analysis(loop())
    walk = reference_walk(analysis)
    after = {step.codes[0]: step.after for step in walk.steps}
    plain = feasible(analysis, analysis.singles)
    assert plain is not None
    assert after["fill-window"] == pytest.approx(plain.smallest, rel=1e-12)
    assert after["cooling-vessel"] > plain.smallest


def test_every_step_has_a_sentence_with_its_own_numbers() -> None:
    assert SENTENCES.keys() == {*CHOICE_STEPS, *LAST_STEPS}
    for step in reference_walk(Analysis(loop())).steps:
        sentence = step.sentence(show)
        assert sentence.endswith(".")
        assert "{" not in sentence
        for facts in step.parameters.values():
            for fact in facts.values():
                assert show(fact.kind, fact.si) in sentence
        if step.direction:
            assert f"{abs(step.change) * 1000:.4g} L" in sentence
            assert ("adds" if step.change > 0 else "saves") in sentence
        else:
            assert "makes no difference" in sentence


def test_the_step_of_the_doubts_names_the_doubt_that_asks_for_most() -> None:
    step = next(step for step in reference_walk(Analysis(loop())).steps if step.codes == ("doubts",))
    assert step.subject == "hotter-stagnation"
    assert SUBJECTS["hotter-stagnation"] in step.sentence(show)


def test_choices_between_which_no_vessel_exists_are_changed_together_and_say_so() -> None:
    """From the set pressure to the opening pressure alone, the final pressure would fall below the start."""
    found: list[Step] = []
    for seed in range(400):
        analysis = Analysis(random_loop(seed))
        _, results = answered(analysis)
        boil_off, standard = results["collector-boil-off"], results["en-12977"]
        if boil_off.nominal_volume and standard.nominal_volume:
            walk = walk_between(analysis, boil_off, standard)
            found += [step for step in walk.steps if len(step.codes) > 1]
    assert found
    for step in found:
        assert step.codes[:2] == ("final-pressure", "starting-pressure")
        assert step.sentence(show).startswith("Taken together, since no vessel exists between them: ")


def test_a_walk_and_its_way_back_undo_each_other() -> None:
    analysis = printed_analysis()
    _, results = answered(analysis)
    there = walk_between(analysis, results["ufc"], results["steam-range"])
    back = walk_between(analysis, results["steam-range"], results["ufc"])
    assert sum(step.change for step in there.steps) == pytest.approx(
        -sum(step.change for step in back.steps), rel=1e-9
    )


def test_a_rule_without_an_answer_is_no_place_to_walk_from() -> None:
    analysis = printed_analysis()
    _, results = answered(analysis)
    with pytest.raises(NotApplicable, match="us-mechanical-code gives this loop no volume"):
        walk_between(analysis, results["us-mechanical-code"], results["ufc"])


def test_no_walk_leads_to_a_recommendation_that_does_not_exist() -> None:
    """A vessel that holds under fewer doubts is no way to one that must hold under all."""
    for seed in range(200):
        analysis = Analysis(random_loop(seed))
        sized = size(analysis, (BASE,), "size", analysis.loop.criteria.membrane_limit)
        if sized is not None and feasible(analysis, analysis.singles) is None:
            least = smallest(run_all(analysis, None, analysis.singles, check=False))
            assert least is not None
            with pytest.raises(CalculationError, match="No vessel holds this loop"):
                walk_to_recommended(analysis, least, sized, analysis.singles)
            return
    pytest.fail("no loop of these holds in its base case only")
