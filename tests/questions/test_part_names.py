"""A part is called the same in every answer, and is never nameless."""

from copy import deepcopy

import msgspec

from loopslack.contract.answering.loop import design_loop
from loopslack.contract.answering.small import compute_loop_volume
from loopslack.contract.questions.operations import LoopVolumeQuestion
from questions.wash_house import question, wash_house


def nameless(runs: int = 2):
    data = deepcopy(wash_house())
    for part in (*data["collectors"], *data["pipeRuns"]):
        part.pop("id", None)
    data["pipeRuns"] += [deepcopy(data["pipeRuns"][-1]) for _ in range(runs - len(data["pipeRuns"]))]
    return data


def test_a_part_without_a_name_is_called_what_it_is_and_numbered_among_its_like():
    found = design_loop(question(nameless(runs=3))).result
    names = [part.name for part in found.content.parts]
    assert names[:4] == ["collectors", "flow", "return 1", "return 2"]
    assert {reach.pipe_run for state in found.stagnation for reach in state.reach} == set(names[1:4])
    reached = {check.subject for check in found.checks if check.code == "steam-reach"}
    assert reached
    assert reached <= set(names[1:4])


def test_content_alone_and_a_design_call_their_parts_alike():
    data = nameless()
    data.pop("coolingVessel", None)  # content alone counts a given one only
    members = {field.encode_name for field in msgspec.structs.fields(LoopVolumeQuestion)}
    alone = msgspec.convert({key: data[key] for key in data.keys() & members}, LoopVolumeQuestion)
    names = {part.name for part in compute_loop_volume(alone).result.content.parts}
    assert names
    assert names <= {part.name for part in design_loop(question(data)).result.content.parts}


def test_a_stated_name_stands():
    data = nameless()
    data["pipeRuns"][0]["id"] = "attic line"
    found = design_loop(question(data)).result
    assert [part.name for part in found.content.parts][1:3] == ["attic line", "return"]
