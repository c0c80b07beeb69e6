"""What stands on a sheet, and that it can be made again."""

import pytest
from msgspec.structs import replace

from loopslack.kernel.errors import OutOfRange
from loopslack.sheet.composing import compose, fingerprint, paper_of
from loopslack.sheet.lines import Blanks, Bullets, Card, Drawing, Facts, Table, Text
from sheet.sheets import NAMES, asked, blocks, case, sheet

ALWAYS = {
    "result",
    "notices",
    "pressures",
    "steam",
    "sizing",
    "settings",
    "rules",
    "checks",
    "order",
    "inputs",
    "assumptions",
    "derivation",
    "sources",
    "cautions",
    "signing",
}


@pytest.mark.parametrize("name", NAMES)
def test_every_sheet_has_every_part_the_answer_has_numbers_for(name: str) -> None:
    ids = [section.id for section in sheet(name).sections]
    assert len(ids) == len(set(ids))
    assert set(ids) >= ALWAYS
    assert ("remark" in ids) == (asked(name).question.remark is not None)
    assert ("day" in ids) == (asked(name).answer.course is not None)
    assert ids[0] == "result"
    assert ids[-1] == "signing"


@pytest.mark.parametrize("name", NAMES)
def test_every_table_is_square_and_every_text_is_one_line(name: str) -> None:
    for block in blocks(sheet(name)):
        if isinstance(block, Table):
            assert block.rows
            assert {len(row.cells) for row in block.rows} == {len(block.columns)}
            texts = [cell for row in block.rows for cell in row.cells]
        elif isinstance(block, Facts):
            assert block.facts
            texts = [text for fact in block.facts for text in (fact.name, fact.value, fact.more)]
        elif isinstance(block, Bullets):
            texts = list(block.items)
        else:
            continue
        assert [text for text in texts if "\n" in text or "{" in text or text != text.strip()] == []


@pytest.mark.parametrize("name", NAMES)
def test_there_is_a_place_to_sign_and_a_card_only_for_a_vessel_that_was_chosen(name: str) -> None:
    of = sheet(name)
    assert any(isinstance(block, Blanks) for block in of.sections[-1].blocks)
    cards = [block for block in blocks(of) if isinstance(block, Card)]
    result = asked(name).answer.result
    assert len(cards) == (result.chosen_vessel is not None and result.verdict == "holds")


@pytest.mark.parametrize("name", [name for name in NAMES if not case(name).chosen])
def test_settings_of_a_vessel_that_was_not_chosen_say_so_first(name: str) -> None:
    settings = next(section for section in sheet(name).sections if section.id == "settings")
    first = settings.blocks[0]
    assert isinstance(first, Text)
    assert first.tone == "stop"
    assert not any(isinstance(block, Blanks | Bullets | Card) for block in settings.blocks)


def test_the_sheet_names_what_it_takes_to_make_it_again() -> None:
    question, answer = asked("wash-house")
    of = sheet("wash-house")
    shown = [
        fact.value for block in of.sections[-1].blocks if isinstance(block, Facts) for fact in block.facts
    ]
    made = answer.provenance
    assert shown == [made.service_version, made.contract_version, made.equations, fingerprint(question)]
    assert fingerprint(question) in of.foot


def test_a_fingerprint_is_that_of_everything_that_was_asked() -> None:
    question, _ = asked("wash-house")
    assert fingerprint(question) == fingerprint(replace(question))
    for changed in (
        replace(question, author="B"),
        replace(question, language="de"),
        replace(question, date=None),
    ):
        assert fingerprint(changed) != fingerprint(question)


def test_no_date_is_printed_that_was_not_stated() -> None:
    question, answer = asked("wash-house")
    undated = compose(answer, replace(question, date=None))
    assert undated.date == ""
    assert [fact.name for fact in undated.head] == ["Project", "Customer", "Designed by"]


@pytest.mark.parametrize("day", ["2026-02-30", "0000-01-01", "2026-13-01"])
def test_a_day_the_calendar_has_not_is_refused(day: str) -> None:
    question, answer = asked("wash-house")
    with pytest.raises(OutOfRange) as refused:
        compose(answer, replace(question, date=day))
    assert refused.value.pointer == "/date"


def test_paper_follows_the_question_then_the_units() -> None:
    question, _ = asked("wash-house")
    assert paper_of(question) == "a4"
    assert paper_of(replace(question, paper="letter")) == "letter"
    assert paper_of(replace(question, design=replace(question.design, units="us"))) == "letter"


@pytest.mark.parametrize("name", NAMES)
def test_a_long_list_never_makes_a_long_sheet(name: str) -> None:
    of = sheet(name)
    assert max(len(block.rows) for block in blocks(of) if isinstance(block, Table)) <= 120
    assert sum(isinstance(block, Drawing) for block in blocks(of)) <= 10
