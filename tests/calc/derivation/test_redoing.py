"""A reader with a pencil: every printed step, redone from its own printed inputs, gives its printed number."""

from functools import reduce
from typing import Any

import pytest

from calc.derivation.cases import CASES, Case, case, sizing_case
from calc.derivation.redoing import FLUID_LAWS, Redone, half_digit, si
from loopslack.kernel.equation import EQUATIONS
from loopslack.kernel.units import GAUGE_UNITS, to_si

IDS = [f"{kind}: {name}" for kind, name in CASES]
cases = pytest.mark.parametrize(("kind", "name"), CASES, ids=IDS)


def lines(found: Case) -> list[dict[str, Any]]:
    return [step for step in found.printed["steps"] if "equation" in step]


@cases
def test_every_step_redone_through_the_register_gives_its_printed_number(kind: str, name: str) -> None:
    found = case(kind, name)
    off = []
    for step in lines(found):
        redone = Redone(step, found.printed)
        if redone.misses_by(redone.by_register) > 0:
            off.append((step["number"], step["name"]))
    assert off == []


@cases
def test_every_printed_law_worked_out_gives_its_printed_number(kind: str, name: str) -> None:
    found = case(kind, name)
    off = []
    for step in lines(found):
        # Forty digits of a fluid's law take their time; the register's own digits are held to them elsewhere.
        if step["equation"] in FLUID_LAWS and name != "the committed example":
            continue
        redone = Redone(step, found.printed)
        if redone.misses_by(redone.by_law) > 0:
            off.append((step["number"], step["name"]))
    assert off == []


@pytest.mark.parametrize(
    "name", ["water in a mild place", "an own fluid by tables", "protected to a temperature"]
)
def test_the_laws_of_other_fluids_worked_out_give_their_printed_numbers(name: str) -> None:
    found = case("design", name)
    redone = [Redone(step, found.printed) for step in lines(found) if step["equation"] in FLUID_LAWS]
    assert redone
    assert [one.step["number"] for one in redone if one.misses_by(one.by_law) > 0] == []


@cases
def test_a_number_changed_by_a_thousandth_is_noticed_by_whoever_redoes_the_step(kind: str, name: str) -> None:
    """The tolerance is no net that catches everything: where digits allow, a wrong number stands out."""
    found = case(kind, name)
    noticed = 0
    for step in lines(found):
        redone = Redone(step, found.printed)
        redone.printed *= 1.001
        noticed += redone.misses_by(redone.by_register) > 0
    assert noticed > 0.7 * len(lines(found))


@cases
def test_every_input_comes_from_where_it_says(kind: str, name: str) -> None:
    found = case(kind, name)
    assumed = {entry["field"] for entry in found.answer["assumptions"]}
    steps = {step["number"]: step for step in found.printed["steps"]}
    for step in lines(found):
        for entry in step["inputs"]:
            origin = entry["origin"]
            if origin == "step":
                earlier = steps[entry["step"]]
                assert earlier["number"] < step["number"]
                assert earlier["value"] == entry["value"]
            elif origin == "assumed":
                assert entry["pointer"] in assumed, entry
                assert entry["source"]["key"]
            elif origin == "tabulated":
                assert entry["table"]
                assert entry["source"]["key"]
            else:
                stated(found.question, entry, step)


def stated(question: dict[str, Any], entry: dict[str, Any], step: dict[str, Any]) -> None:
    """A number given at a pointer is the number that stands there, unless it is read off a table or counted nought."""
    place: Any = question
    missing = False
    for member in entry["pointer"].strip("/").split("/"):
        if isinstance(place, list):
            place = place[int(member)]
        elif member in place:
            place = place[member]
        else:
            missing = True
            break
    if missing:
        assert entry["pointer"] == "/coolingVessel", entry
        assert entry["value"]["value"] == 0, entry
        return
    kind = EQUATIONS[step["equation"]].arguments[entry["name"].replace(" ", "_")]
    number = si(entry["value"], kind)
    if isinstance(place, int | float):
        assert number == pytest.approx(float(place), rel=1e-5)
    elif isinstance(place, dict) and "unit" in place:
        if kind.name.endswith("pressure") and place["unit"] not in GAUGE_UNITS:
            return
        expected = to_si(place["value"], place["unit"], kind)
        assert abs(number - expected) <= 1.01 * half_digit(entry["value"], kind) + 1e-9 * abs(expected), entry
    else:
        assert "interpolated" in entry["meaning"] or entry["value"]["value"] == 0, entry


@cases
def test_every_root_names_its_equations_and_leaves_next_to_nothing_over(kind: str, name: str) -> None:
    found = case(kind, name)
    scales = {"bar": 1e-6, "psi": 1e-5, "W": 1e-5, "BTU/h": 1e-4, "K": 1e-4, "delta_degF": 1e-4}
    for step in found.printed["steps"]:
        if "equation" in step:
            assert "system" not in step
            continue
        system = step["system"]
        assert system["equations"], step["name"]
        assert system["residualStep"] in {entry["number"] for entry in lines(found)}
        assert system["residualStep"] in system["equations"]
        assert system["residualStep"] > step["number"]
        residual = system["residual"]
        assert abs(residual["value"]) < scales[residual["unit"]], (step["name"], residual)


@cases
def test_every_member_of_the_answer_that_a_step_names_shows_its_number(kind: str, name: str) -> None:
    found = case(kind, name)
    pointed = [
        (pointer, step["value"]) for step in found.printed["steps"] for pointer in step.get("answers", ())
    ]
    assert len(pointed) > 20
    for pointer, value in pointed:
        place: Any = found.answer
        for member in pointer.strip("/").split("/"):
            place = place[int(member)] if isinstance(place, list) else place[member]
        assert place["unit"] == value["unit"], pointer
        assert place["value"] == pytest.approx(value["value"], rel=1.01e-6, abs=1e-9), pointer


@pytest.mark.parametrize("name", ["the committed example", "a first quote", "steam at the station"])
def test_a_sizing_names_only_members_that_a_sizing_has(name: str) -> None:
    found = sizing_case(name)
    pointers = {pointer for step in found.printed["steps"] for pointer in step.get("answers", ())}
    assert "/result/precharge" in pointers
    for step in found.printed["steps"]:
        for pointer in step.get("answers", ()):
            shown = reduce(lambda place, member: place[member], pointer.strip("/").split("/"), found.answer)
            assert shown["value"] == pytest.approx(step["value"]["value"], rel=1.01e-6)


@cases
def test_equations_and_constants_are_listed_once_each_with_their_papers(kind: str, name: str) -> None:
    found = case(kind, name)
    listed = [entry["id"] for entry in found.printed["equations"]]
    assert len(listed) == len(set(listed))
    assert set(listed) == {step["equation"] for step in lines(found)}
    for entry in found.printed["equations"]:
        law = EQUATIONS[entry["id"]]
        assert entry["law"] == law.law
        assert (entry["source"]["key"], entry["source"]["seen"]) == (law.source.key, law.source.seen)
        assert [(one["symbol"], one["meaning"]) for one in entry["symbols"]] == list(law.symbols.items())
    constants = [entry["id"] for entry in found.printed["constants"]]
    assert len(constants) == len(set(constants))
    assert set(constants) == {name for step in lines(found) for name in step.get("constants", ())}


@cases
def test_steps_are_numbered_in_order_and_no_step_is_written_twice(kind: str, name: str) -> None:
    steps = case(kind, name).printed["steps"]
    assert [step["number"] for step in steps] == list(range(1, len(steps) + 1))
    places = ("name", "step", "pointer", "row")
    written = [
        (
            step["equation"],
            *((*(entry.get(place) for place in places), entry["value"]["value"]) for entry in step["inputs"]),
            *step.get("constants", ()),
        )
        for step in steps
        if "equation" in step
    ]
    assert len(written) == len(set(written))


def test_every_law_of_the_balance_is_used_in_some_derivation() -> None:
    """But one: a vessel full when filled is bound by its membrane's acceptance before, in every loop tried here."""
    modules = {
        f"loopslack.physics.{name}" for name in ("balance", "balance_pressure", "balance_steam", "order")
    }
    laws = {key for key, law in EQUATIONS.items() if law.function.__module__ in modules}
    used = {entry["id"] for kind, name in CASES for entry in case(kind, name).printed["equations"]}
    assert laws - used == {"all-liquid"}


def test_the_cases_come_to_rest_in_every_way_a_loop_can() -> None:
    found = [case(kind, name).found.judgement.stagnation for kind, name in CASES]
    assert {states["base"].regime for states in found if "base" in states} >= {
        "steam",
        "pinned",
        "no-boiling",
        "valve-opens",
    }
