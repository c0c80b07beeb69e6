"""The largest question a caller may ask: the sheet stays bounded, whole, and says what it leaves out."""

from itertools import combinations

import msgspec
import pytest

from loopslack.contract.answering.loop import design_loop
from loopslack.contract.questions.many import SheetQuestion
from loopslack.sheet.case import Case
from loopslack.sheet.composing import compose
from loopslack.sheet.figures.register import FIGURES
from loopslack.sheet.lines import Drawing, Notice, Sheet, Table
from loopslack.sheet.rendering import render_html
from sheet.sheets import FOLDER, blocks
from sheet.svg import lettering


def largest() -> SheetQuestion:
    """Fifty groups, fifty runs of fifty stretches, a hundred parts, ten thousand vessels, every name at its longest."""
    asked = msgspec.json.decode((FOLDER / "wash-house.json").read_bytes())
    design = asked["design"]
    group, run = design["collectors"][0], design["pipeRuns"][0]
    stretch = {"length": {"value": 0.5, "unit": "m"}, "tube": run["segments"][0]["tube"]}
    design["collectors"] = [
        {**group, "id": f"{'水' * 61}{k}", "count": 1, "height": {"value": 11 - 0.05 * k, "unit": "m"}}
        for k in range(50)
    ]
    design["pipeRuns"] = [
        {"id": f"{'R' * 61}{k}", "role": ("flow", "return")[k % 2], "segments": [stretch] * 50}
        for k in range(50)
    ]
    design["parts"] = [
        {
            "name": f"{'P' * 61}{k}",
            "height": {"value": k % 10, "unit": "m"},
            "ratedPressure": {"value": 3, "unit": "barg"},
        }
        for k in range(100)
    ]
    design["vessel"] = {
        "kind": "stock",
        "items": [
            {
                "id": f"{'S' * 59}{k}",
                "nominalVolume": {"value": 10 + k % 700, "unit": "L"},
                "ratedPressure": {"value": 10, "unit": "barg"},
            }
            for k in range(10_000)
        ],
    }
    asked["remark"] = "line\n" * 400
    return msgspec.convert(asked, SheetQuestion)


@pytest.fixture(scope="module")
def question() -> SheetQuestion:
    return largest()


@pytest.fixture(scope="module")
def case(question: SheetQuestion) -> Case:
    return Case(design_loop(question.design), question.design, "en")


@pytest.fixture(scope="module")
def sheet(question: SheetQuestion, case: Case) -> Sheet:
    return compose(case.answer, question)


def test_its_tables_and_notices_are_bounded_and_say_what_is_left_out(sheet: Sheet) -> None:
    found = {block.caption: block for block in blocks(sheet) if isinstance(block, Table)}
    assert len(found["Pipe runs, from the collectors to the station"].rows) == 60
    assert found["Pipe runs, from the collectors to the station"].note == "and 2440 more"
    assert len(found["Rated parts"].rows) == 60
    assert len(found["Refused candidates, the nearest last"].rows) <= 12
    assert "refused candidates before these" in found["Refused candidates, the nearest last"].note
    assert max(len(table.rows) for table in found.values()) <= 400
    assert sum(isinstance(block, Notice) for block in blocks(sheet)) <= 60
    assert sum(len(section.blocks) for section in sheet.sections if section.id == "remark") == 60


def test_its_page_is_bounded(question: SheetQuestion, case: Case) -> None:
    assert len(render_html(case.answer, question)) < 1_500_000


def test_its_figures_are_whole_and_say_what_is_left_out(case: Case) -> None:
    for name, make in FIGURES.items():
        drawn: Drawing | None = make(case)
        if drawn is not None:
            letters = lettering(drawn.svg)
            assert [(a.text, b.text) for a, b in combinations(letters, 2) if a.meets(b)] == [], name
    schematic = FIGURES["loop-schematic"](case)
    assert schematic is not None
    assert "and 46 more groups" in schematic.svg
    assert "and 46 more pipe runs" in schematic.svg
