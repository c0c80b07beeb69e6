"""Texts of callers are printed as they are: none changes the structure, reads a file, opens a connection or fails."""

import json
import socket

import msgspec
import pytest
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st
from msgspec.structs import replace

from loopslack.contract.answering.loop import design_loop
from loopslack.contract.quantity import Length, Pressure, Volume
from loopslack.contract.questions.fluid import OwnFluid
from loopslack.contract.questions.many import FigureQuestion, SheetQuestion
from loopslack.contract.questions.plant import RatedPart
from loopslack.contract.questions.vessels import FromStock, StockVessel
from loopslack.sheet.composing import compose
from loopslack.sheet.figures.register import FIGURES
from loopslack.sheet.pdf import pdf
from loopslack.sheet.rendering import render_figure, render_html
from sheet.sheets import asked, html
from sheet.test_page import read

HOSTILE = [
    "<script>alert(1)</script>",
    "</title></style><img src=x onerror=alert(1)>",
    '"><svg onload=alert(1)>',
    "{{7*7}} ${7*7} {0} {amount} %s %n",
    '#read("/etc/passwd") #import "@preview/x:1.0.0": * #while true {}',
    "$ integral $ *bold* _it_ `raw` = heading @ref <label> \\u{41} // comment /* x */",
    "]] #panic() [#sys.inputs.data",
    "\u202eesrever\u202c \u2066iso\u2069 \u200f\u200e",
    "שלום עולם وقال مرحبا 123 (abc) שלום",
    "🏠🔥👩‍🚒 水道 ไทย नमस्ते ᚠᛇᚻ",
    "\x00\x01\x1b[31m\x7f\x85\u2028\u2029\ufeff\ufffe\uffff",
    "e\u0301\u0327 Z̸̢̛a̴̡͘l̵̨͝g̷̛͜o̸ \u0600\u0601\u06dd\u070f",
    "a" * 64,
    "&amp;&lt;&#x3c;script&#x3e;",
    "javascript:alert(1) data:text/html,x http://198.51.100.7/x",
    "\ud7ff\ue000\U0010ffff\U000e0001",
]


METRE = Length(value=1.0, unit="m")
STRONG, WEAK = Pressure(value=10.0, unit="barg"), Pressure(value=3.0, unit="barg")


def own_fluid() -> OwnFluid:
    fluid = asked("alpine-hut-own-fluid").question.design.fluid
    assert isinstance(fluid, OwnFluid)
    return fluid


def asked_with(text: str) -> SheetQuestion:
    """The wash house, with a text in every place a caller can write one."""
    question, _ = asked("wash-house")
    design = question.design
    groups = [replace(design.collectors[0], id=text[:64] or "x")]
    runs = [replace(run, id=(text[:60] or "x") + str(k)) for k, run in enumerate(design.pipe_runs)]
    # a sound part, and one that is too weak, so that an advisory speaks of it
    parts = [
        RatedPart(name=text[:64] or "x", height=METRE, rated_pressure=STRONG),
        RatedPart(name=(text[:60] or "x") + "2", height=METRE, rated_pressure=WEAK),
    ]
    articles = [
        StockVessel(
            id=(text[:58] or "x") + str(k), nominal_volume=Volume(value=k, unit="L"), rated_pressure=STRONG
        )
        for k in (25.0, 80.0, 100.0)
    ]
    return replace(
        question,
        design=replace(
            design,
            collectors=groups,
            pipe_runs=runs,
            parts=parts,
            vessel=FromStock(items=articles),
            fluid=replace(own_fluid(), name=text[:64] or "x"),
            include=["derivation"],
        ),
        project=text[:200],
        customer=text[:200],
        author=text[:200],
        remark=f"{text}\n{text}"[:2000],
    )


@pytest.fixture(autouse=True)
def no_connection(monkeypatch: pytest.MonkeyPatch) -> None:
    def refuse(*_: object) -> None:
        raise AssertionError("a connection was opened")

    monkeypatch.setattr(socket.socket, "connect", refuse)


def shape(text: str) -> list[str]:
    return [tag for tag, _ in read(text).seen if tag not in {"wbr", "bdi"}]


@pytest.mark.parametrize("text", HOSTILE)
def test_a_hostile_text_changes_nothing_but_the_text(text: str) -> None:
    question, plain = asked_with(text), asked_with("plain")
    page = render_html(design_loop(question.design), question).decode()
    assert shape(page) == shape(render_html(design_loop(plain.design), plain).decode())
    for shown in ("\x00", "\x1b", "\u202e", "\u2066"):
        assert shown not in page


@pytest.mark.apart
@pytest.mark.parametrize("text", HOSTILE)
def test_a_hostile_text_is_set_as_pdf(text: str) -> None:
    question = asked_with(text)
    made = pdf(compose(design_loop(question.design), question))
    assert made.startswith(b"%PDF-1.7")
    assert b"root:x:0" not in made


@pytest.mark.parametrize("text", HOSTILE)
def test_a_hostile_name_stays_a_name_in_every_figure(text: str) -> None:
    question = asked_with(text)
    answer = design_loop(question.design)
    for figure in ("loop-schematic", "steam-reach", "pressure-over-liquid"):
        drawn = render_figure(answer, FigureQuestion(design=question.design, figure=figure)).decode()
        tags = [tag for tag, _ in read(drawn).seen]
        plain = asked_with("plain")
        other = FIGURES[figure]
        assert other is not None
        assert set(tags) <= {"svg", "title", "desc", "style", "line", "path", "rect", "circle", "text"}
        same = render_figure(
            design_loop(plain.design), FigureQuestion(design=plain.design, figure=figure)
        ).decode()
        assert tags == [tag for tag, _ in read(same).seen]


@pytest.mark.apart
@settings(
    max_examples=60,
    deadline=None,
    suppress_health_check=[HealthCheck.too_slow, HealthCheck.function_scoped_fixture],
)
@given(st.text(max_size=200))
def test_no_text_breaks_the_page_or_the_pdf(text: str) -> None:
    question, answer = asked("wash-house")
    changed = replace(question, project=text, remark=text, customer=text[::-1])
    read(render_html(answer, changed).decode())
    short = compose(answer, changed)
    assert pdf(replace(short, sections=short.sections[:2])).startswith(b"%PDF")


def test_a_text_longer_than_allowed_is_refused_before_anything_is_set() -> None:
    body = json.loads(msgspec.json.encode(asked("wash-house").question))
    for member, longest in (("project", 200), ("customer", 200), ("author", 200), ("remark", 2000)):
        msgspec.convert({**body, member: "x" * longest}, SheetQuestion)
        with pytest.raises(msgspec.ValidationError):
            msgspec.convert({**body, member: "x" * 10_000}, SheetQuestion)


def test_the_plain_sheet_holds_no_marks_of_direction() -> None:
    assert not set(html("wash-house")) & set("\u202a\u202b\u202c\u202d\u202e\u2066\u2067\u2068\u2069")
