"""What a sheet says of measures and of open parts: captions that are true, nothing left out."""

import json
from typing import Any

import msgspec
import pytest

from calc.remedies.failing_questions import designs
from loopslack.contract.answering.loop import design_loop
from loopslack.contract.questions.many import SheetQuestion
from loopslack.sheet.composing import compose
from loopslack.sheet.lines import Sheet, Table
from loopslack.sheet.rendering import asked_in_full
from sheet.plain_text import plain_text
from sheet.sheets import FOLDER, blocks

DESIGNS = designs()


def composed(design: dict[str, Any], language: str = "en") -> Sheet:
    asked = json.loads((FOLDER / "wash-house.json").read_bytes()) | {"design": design, "language": language}
    question = msgspec.json.decode(json.dumps(asked), type=SheetQuestion)
    return compose(design_loop(asked_in_full(question.design)), question)


def table(of: Sheet, start: str) -> Table:
    return next(one for one in blocks(of) if isinstance(one, Table) and one.caption.startswith(start))


@pytest.mark.parametrize(
    ("language", "together", "alone", "look"),
    [
        ("en", "Both measures together", "Each measure", "First look where the check valve sits."),
        (
            "de",
            "Beide Maßnahmen zusammen",
            "Jede Maßnahme",
            "Zuerst nachsehen, wo das Rückschlagventil sitzt.",
        ),
    ],
)
def test_of_a_pair_it_says_that_both_measures_do_together(
    language: str, together: str, alone: str, look: str
) -> None:
    found = composed(DESIGNS["freezing and an unknown check valve"], language)
    told = table(found, together)
    assert look in told.rows[0].cells[1]
    assert not any(isinstance(one, Table) and one.caption.startswith(alone) for one in blocks(found))
    single = composed(DESIGNS["check valve to look at"], language)
    assert look in table(single, alone).rows[0].cells[1]
    assert not any(isinstance(one, Table) and one.caption == together for one in blocks(single))


def test_a_check_valve_known_to_shut_a_run_is_to_be_moved_at_once() -> None:
    found = plain_text(composed(DESIGNS["check valve to move"]))
    assert "Place the check valve so that steam can push liquid down" in found
    assert "First look" not in found


def test_a_mixture_is_told_as_it_was_asked_for() -> None:
    by_volume = plain_text(composed(DESIGNS["too weak a mixture"]))
    assert "Use 49.7 % (vol.) of glycol. Now: 42 % (vol.)." in by_volume
    protecting = plain_text(composed(DESIGNS["too weak a mixture by protection"]))
    assert "Use a mixture that protects down to \N{MINUS SIGN}33 °C. Now: \N{MINUS SIGN}25 °C." in protecting


def test_every_open_part_stands_beside_the_tightest_margins() -> None:
    design = json.loads(json.dumps(DESIGNS["poor emptying"]))
    design["collectors"][0].pop("ratedPressure")
    design["station"].pop("ratedPressure")
    found = composed(design)
    rows = [row.cells for row in table(found, "Tightest margin of every check").rows if row.mark == "open"]
    confirm = {cells[0] for cells in rows}
    every = table(found, "Checks in every state")
    opened = {row.cells[0] for row in every.rows if row.mark == "open"}
    assert len(opened) >= 2
    assert opened <= confirm
    assert len(rows) == len(confirm)
