"""Puts a sheet together: head, verdict, and every section in its order. To add a section, add its function here."""

import hashlib
from collections.abc import Callable
from datetime import date

import msgspec

from loopslack.contract.answers.operations import LoopDesignAnswer
from loopslack.contract.questions.many import SheetQuestion
from loopslack.kernel.errors import OutOfRange
from loopslack.sheet.case import Case
from loopslack.sheet.lines import Fact, Section, Sheet, Text
from loopslack.sheet.sections import closing
from loopslack.sheet.sections.assumptions import assumptions
from loopslack.sheet.sections.checks import checks
from loopslack.sheet.sections.day import day
from loopslack.sheet.sections.derivation import derivation
from loopslack.sheet.sections.inputs import inputs
from loopslack.sheet.sections.notices import notices
from loopslack.sheet.sections.order import order
from loopslack.sheet.sections.pressures import pressures
from loopslack.sheet.sections.remedies import remedies
from loopslack.sheet.sections.result import banner, result
from loopslack.sheet.sections.rules import rules
from loopslack.sheet.sections.sensitivity import sensitivity
from loopslack.sheet.sections.settings import settings
from loopslack.sheet.sections.sizing import sizing
from loopslack.sheet.sections.sources import sources
from loopslack.sheet.sections.steam import steam
from loopslack.sheet.words import paragraphs, plain

SECTIONS: tuple[Callable[[Case], Section | None], ...] = (
    result,
    notices,
    remedies,
    pressures,
    steam,
    sizing,
    settings,
    rules,
    sensitivity,
    day,
    checks,
    order,
    inputs,
    assumptions,
    derivation,
    sources,
    closing.cautions,
)

_FOOT = 48  # letters


def fingerprint(question: SheetQuestion) -> str:
    """What the sheet was asked for, as sixteen letters: the same question has the same fingerprint."""
    return hashlib.sha256(msgspec.json.encode(question)).hexdigest()[:16]


def paper_of(question: SheetQuestion) -> str:
    """The paper asked for; Letter where US units are and nothing else is said."""
    return question.paper or ("letter" if question.design.units == "us" else "a4")


def _day(stated: str | None) -> str:
    """A stated date. Raises ``OutOfRange`` for a day the calendar has not."""
    if stated is None:
        return ""
    try:
        return date.fromisoformat(stated).isoformat()
    except ValueError:
        raise OutOfRange(
            f"{stated} is no day of the calendar.",
            remedy="State the date as YYYY-MM-DD, or leave it out.",
            pointer="/date",
        ) from None


def _short(text: str) -> str:
    """A text short enough for the foot of every page."""
    return text if len(text) <= _FOOT else f"{text[: _FOOT - 1].rstrip()}…"


def compose(answer: LoopDesignAnswer, question: SheetQuestion) -> Sheet:
    """Everything that stands on the sheet of an answer."""
    case = Case(answer, question.design, question.language or "en", question.project or "")
    words = case.words
    mark = fingerprint(question)
    sections = [section for make in SECTIONS if (section := make(case)) is not None]
    if case.chosen:  # what to set comes right behind the result; where nothing is chosen, why not comes first
        sections.sort(key=lambda section: {"result": 0, "settings": 1}.get(section.id, 2))
    if question.remark:
        remark = tuple(Text(line) for line in paragraphs(question.remark))
        sections.insert(1, Section("remark", words("section.remark"), remark))
    sections.append(closing.signing(case, mark))
    texts = {name: plain(getattr(question, name) or "").strip() for name in ("project", "customer", "author")}
    head = [Fact(words(f"head.{name}"), text) for name, text in texts.items() if text]
    day = _day(question.date)
    if day:
        head.append(Fact(words("head.date"), day))
    foot = words(
        "foot",
        project=_short(texts["project"]) or words("title"),
        version=plain(answer.provenance.service_version),
        mark=mark,
    )
    return Sheet(
        language=words.language,
        paper=paper_of(question),
        title=words("title"),
        subject=texts["project"],
        author=texts["author"],
        date=day,
        head=tuple(head),
        banner=banner(case),
        sections=tuple(sections),
        foot=foot,
        page_word=words("page"),
        contents_word=words("contents"),
    )
