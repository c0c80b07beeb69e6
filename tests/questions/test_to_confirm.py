"""What keeps an answer provisional names the member of the question that would settle it."""

import msgspec
import pytest

from loopslack.contract.answering.loop import check_stagnation, design_loop
from loopslack.contract.questions.operations import StagnationCheckQuestion
from questions.questions_of_each_kind import quantity, with_vessel
from questions.wash_house import question, wash_house


def without(part, *names):
    return {name: value for name, value in part.items() if name not in names}


def bare():
    """The reference loop with nothing stated that a check to be confirmed could use."""
    data = without(with_vessel(), "parts", "pump")
    data["vessel"] = without(data["vessel"], "ratedPressure")
    data["station"] = without(data["station"], "ratedPressure")
    data["collectors"] = [without(group, "ratedPressure") for group in data["collectors"]]
    data["reliefValve"] = without(data["reliefValve"], "nominalSize")
    return data


SETTLED = {
    "/vessel/ratedPressure": quantity(10, "barg"),
    "/station/ratedPressure": quantity(10, "barg"),
    "/collectors/0/ratedPressure": quantity(10, "barg"),
    "/reliefValve/nominalSize": "DN20",
    "/pump": {"head": quantity(0.3, "bar"), "netPositiveSuction": quantity(2, "mH2O")},
}


def asked(data):
    return check_stagnation(msgspec.convert(data, StagnationCheckQuestion)).result


def test_every_member_that_was_not_stated_is_pointed_at():
    fields = {entry.field for entry in asked(bare()).to_confirm}
    assert fields >= (SETTLED.keys() - {"/pump"}) | {"/pump/netPositiveSuction"}
    assert None not in fields


@pytest.mark.parametrize("settled", SETTLED)
def test_to_state_it_settles_it(settled):
    data = bare()
    *way, last = settled.strip("/").split("/")
    holder = data
    for step in way:
        holder = holder[int(step)] if isinstance(holder, list) else holder[step]
    if isinstance(holder, list):
        holder[int(last)] = SETTLED[settled]
    else:
        holder[last] = SETTLED[settled]
    before = {entry.field for entry in asked(bare()).to_confirm}
    after = {entry.field for entry in asked(data).to_confirm}
    assert before - after == {"/pump/netPositiveSuction" if settled == "/pump" else settled}


def test_two_parts_of_one_name_are_told_apart():
    twice = [{"name": "air separator", "height": quantity(1, "m")} for _ in range(2)]
    found = design_loop(question({**wash_house(), "parts": twice})).result.to_confirm
    fields = [entry.field for entry in found if entry.subject == "air separator"]
    assert fields == ["/parts/0/ratedPressure", "/parts/1/ratedPressure"]
