"""The publications that the sheet names, in full."""

from collections.abc import Iterator

from loopslack.contract.answers.shared import SourceNote
from loopslack.library.sources import sources as published
from loopslack.sheet.case import Case
from loopslack.sheet.lines import Column, Row, Section, Table
from loopslack.sheet.sections.names import source_title
from loopslack.sheet.words import plain

_OURS = frozenset({"derived", "own-assumption", "common-practice"})


def sources(case: Case) -> Section | None:
    """Every publication cited by an assumption, a rule or an equation."""
    words, known = case.words, published()
    keys = dict.fromkeys(note.key for note in _cited(case) if note.key not in _OURS and note.key in known)
    if not keys:
        return None
    rows = []
    for key in sorted(keys):
        source = known[key]
        year = "" if source.year is None else f", {source.year}"
        publisher = words.phrase(plain(source.publisher))
        rows.append(
            Row(
                (
                    source_title(case, key),
                    f"{plain(source.title)}. {publisher[:1].upper()}{publisher[1:]}{year}.",
                    words(f"seen.{source.seen}"),
                )
            )
        )
    columns = (Column(words("column.key")), Column(words("column.publication")), Column(words("column.seen")))
    table = Table(words("table.sources"), columns, tuple(rows), compact=True)
    return Section("sources", words("section.sources"), (table,))


def _cited(case: Case) -> Iterator[SourceNote]:
    answer = case.answer
    yield from (one.source for one in answer.assumptions)
    yield from (rule.source for rule in answer.rules or ())
    if answer.derivation is not None:
        yield from (equation.source for equation in answer.derivation.equations)
        yield from (constant.source for constant in answer.derivation.constants)
