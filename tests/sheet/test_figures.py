"""Every figure of every loop: nothing touches, nothing is cut, nothing depends on colour alone, all is described."""

import re
from itertools import combinations

import pytest

from loopslack.contract.questions.many import FigureQuestion
from loopslack.sheet.case import NothingToDraw
from loopslack.sheet.figures.marks import SIGNS
from loopslack.sheet.figures.register import FIGURES
from loopslack.sheet.figures.verdicts import verdict_sign
from loopslack.sheet.lines import Drawing
from loopslack.sheet.rendering import render_figure
from sheet.sheets import NAMES, asked, case
from sheet.svg import lettering, paper, places, root

LANGUAGES = ("en", "de")
DRAWN = [(name, figure, language) for name in NAMES for figure in FIGURES for language in LANGUAGES]


def drawing(name: str, figure: str, language: str) -> Drawing | None:
    return FIGURES[figure](case(name, language))


@pytest.mark.parametrize(("name", "figure", "language"), DRAWN)
def test_no_lettering_touches_another_or_is_cut(name: str, figure: str, language: str) -> None:
    drawn = drawing(name, figure, language)
    if drawn is None:
        assert (name, figure) in ABSENT
        return
    width, height = paper(drawn.svg)
    letters = lettering(drawn.svg)
    assert letters
    for one in letters:
        assert one.left >= -0.5, one
        assert one.right <= width + 0.5, one
        assert one.bottom <= height + 0.5, one
        assert one.top >= -0.5, one
    assert [(a.text, b.text) for a, b in combinations(letters, 2) if a.meets(b)] == []


@pytest.mark.parametrize(("name", "figure", "language"), DRAWN)
def test_no_lettering_of_the_sheet_itself_is_cut(name: str, figure: str, language: str) -> None:
    drawn = drawing(name, figure, language)
    if drawn is None:
        return
    cut = [one.text for one in lettering(drawn.svg) if "\N{HORIZONTAL ELLIPSIS}" in one.text]
    design = asked(name).question.design
    own = [part.id or "" for part in (*design.collectors, *design.pipe_runs)]
    builds = len({group.type for group in design.collectors})  # told beside an input where there are several
    assert [text for text in cut if not any(text[:8] in stated for stated in own) and builds == 1] == []


@pytest.mark.parametrize(("name", "figure", "language"), DRAWN)
def test_every_line_and_sign_lies_on_the_paper(name: str, figure: str, language: str) -> None:
    drawn = drawing(name, figure, language)
    if drawn is not None:
        width, height = paper(drawn.svg)
        off = [(x, y) for x, y in places(drawn.svg) if not (-1 <= x <= width + 1 and -1 <= y <= height + 1)]
        assert off == []


ABSENT = {
    # no fill window
    *(
        (name, "fill-pressure-over-temperature")
        for name in NAMES
        if asked(name).answer.result.settings is None
    ),
    # the question does not include the day
    *((name, "day-course") for name in NAMES if "course" not in (asked(name).question.design.include or ())),
    # no vessel holds it, so there is nowhere to walk to
    *(
        (name, figure)
        for name in NAMES
        if asked(name).answer.result.volumes.recommended is None
        for figure in ("walk", "sensitivity")
    ),
}


def test_figures_are_absent_only_where_the_answer_has_no_numbers() -> None:
    absent = {(name, figure) for name in NAMES for figure in FIGURES if drawing(name, figure, "en") is None}
    assert absent == ABSENT


@pytest.mark.parametrize(("name", "figure"), sorted({(n, f) for n, f, _ in DRAWN} - ABSENT))
def test_a_figure_is_named_and_described(name: str, figure: str) -> None:
    drawn = drawing(name, figure, "en")
    assert drawn is not None
    svg = root(drawn.svg)
    named = svg.attrib["aria-labelledby"].split()
    found = {part.attrib["id"]: part.text or "" for part in svg if "id" in part.attrib}
    assert svg.attrib["role"] == "img"
    assert list(found) == named
    assert found[named[0]] == drawn.title
    assert found[named[1]] == drawn.description
    assert len(drawn.description) > len(drawn.title)


@pytest.mark.parametrize("name", NAMES)
def test_a_drawing_holds_no_script_link_or_outside_thing(name: str) -> None:
    for figure in FIGURES:
        drawn = drawing(name, figure, "en")
        if drawn is not None:
            tags = {part.tag.rpartition("}")[2] for part in root(drawn.svg).iter()}
            assert tags <= {"svg", "title", "desc", "style", "line", "path", "rect", "circle", "text"}
            assert not re.search(r"href|url\(|\bon\w+=|javascript", drawn.svg)


@pytest.mark.parametrize("name", NAMES)
def test_the_same_question_gives_the_same_drawing(name: str) -> None:
    for figure in FIGURES:
        assert drawing(name, figure, "en") == drawing(name, figure, "en")


def test_states_differ_in_sign_or_dash_not_only_in_colour() -> None:
    assert len(set(SIGNS.values())) == len(SIGNS)
    assert len({sign for sign, _ in SIGNS.values()}) == len(SIGNS)


def test_verdicts_have_signs_of_their_own() -> None:
    signs = {verdict_sign(word) for word in ("holds", "favourable-only", "does-not-hold", "not-assessed")}
    assert len(signs) == 4


def test_a_figure_asked_for_alone_is_the_same_as_on_the_sheet() -> None:
    question, answer = asked("wash-house")
    alone = FigureQuestion(design=question.design, figure="pressure-over-liquid")
    drawn = drawing("wash-house", "pressure-over-liquid", "en")
    assert drawn is not None
    assert render_figure(answer, alone).decode() == drawn.svg


def test_a_figure_without_numbers_is_refused_in_words() -> None:
    question, answer = asked("too-small")
    alone = FigureQuestion(design=question.design, figure="fill-pressure-over-temperature")
    with pytest.raises(NothingToDraw) as refused:
        render_figure(answer, alone)
    assert refused.value.code == "nothing-to-draw"
    assert refused.value.pointer == "/figure"
