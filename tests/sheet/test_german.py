"""A German sheet is German throughout: what both languages share are numbers, names, citations and formulas."""

import re
import tomllib
from collections.abc import Iterator
from functools import cache
from importlib.resources import files
from itertools import chain
from typing import Any

import pytest
from msgspec.structs import replace

from loopslack.library.sources import sources
from loopslack.sheet.composing import compose
from loopslack.sheet.lines import (
    Blanks,
    Block,
    Bullets,
    Drawing,
    Facts,
    Notice,
    Sheet,
    Table,
    Text,
)
from loopslack.sheet.sections.names import source_title
from sheet.sheets import NAMES, asked, blocks, case
from sheet.svg import lettering

# What formulas and units are written with.
FORMULAS = frozenset(
    [
        "max",
        "min",
        "exp",
        "atm",
        "stg",
        "top",
        "bar",
        "psi",
        "psig",
        "psia",
        "gal",
        "btu",
        "mws",
        "vol",
        "sat",
        "abs",
        "open",
        "eur",
    ]
)
_FINGERPRINT = re.compile(r"[0-9a-f]{12,16}")
_WORD = re.compile(r"[A-Za-zÄÖÜäöüß]{3,}")


def said(block: Block) -> Iterator[str]:
    match block:
        case Table():
            yield block.caption
            yield block.note
            yield from (column.title for column in block.columns)
            yield from chain.from_iterable(row.cells for row in block.rows)
        case Facts():
            yield from chain.from_iterable((fact.name, fact.value, fact.more) for fact in block.facts)
        case Text():
            yield block.text
        case Bullets():
            yield from block.items
        case Notice():
            yield from (block.grade, block.message, block.remedy)
        case Drawing():
            yield from (block.title, block.description)
            yield from (one.text for one in lettering(block.svg))
        case Blanks():
            yield from block.names
        case _:
            pass


def texts(of: Sheet) -> list[str]:
    found = [of.title, of.banner.word, of.banner.sentence, of.banner.basis, of.page_word, of.contents_word]
    found += [section.title for section in of.sections]
    found += [text for section in of.sections if section.id != "sources" for text in _of(section.blocks)]
    return found


def _of(given: tuple[Block, ...]) -> Iterator[str]:
    for block in given:
        yield from said(block)
        for inner in ("left", "right", "blocks"):
            yield from _of(getattr(block, inner, ()))


def sheets(name: str) -> tuple[Sheet, Sheet]:
    question, answer = asked(name)
    whole = replace(question.design, include=[*(question.design.include or []), "derivation"])
    return (
        compose(answer, replace(question, design=whole, language="en")),
        compose(answer, replace(question, design=whole, language="de")),
    )


def own(name: str) -> set[str]:
    """Words of the caller and of citations."""
    of = case(name)
    design = of.design
    stated = [group.id for group in design.collectors] + [run.id for run in design.pipe_runs]
    stated += [getattr(design.fluid, "name", None), *(part.name for part in design.parts or ())]
    items = getattr(design.vessel, "items", None) or [design.vessel]
    stated += [getattr(item, "id", None) for item in items]
    stated += [asked(name).question.remark, asked(name).question.project]
    cited = [source_title(of, key) for key in sources()]
    return {word.lower() for text in [*filter(None, stated), *cited] for word in _WORD.findall(text)}


@cache
def catalogue() -> frozenset[str]:
    """Every word the German catalogue uses."""
    text = files("loopslack.sheet").joinpath("words", "de.toml").read_text(encoding="utf-8")
    tables = tomllib.loads(text)
    said_there = chain(tables.pop("phrases").values(), tables.pop("names").values(), _values(tables))
    return frozenset(word.lower() for entry in said_there for word in _WORD.findall(entry))


def _values(tables: dict[str, Any]) -> Iterator[str]:
    for value in tables.values():
        if isinstance(value, str):
            yield value
        else:
            yield from _values(value)


@pytest.mark.parametrize("name", NAMES)
def test_every_word_of_a_german_sheet_is_of_its_catalogue(name: str) -> None:
    _, german = sheets(name)
    known = FORMULAS | own(name) | catalogue()
    foreign = {
        text: unknown
        for text in texts(german)
        if not _FINGERPRINT.fullmatch(text)
        and (unknown := {word.lower() for word in _WORD.findall(text)} - known)
    }
    assert foreign == {}


@pytest.mark.parametrize("name", NAMES)
def test_every_name_of_a_derivation_is_known_in_german(name: str) -> None:
    of, found = case(name, "de"), asked(name).answer.derivation
    assert found is not None
    names = {step.name for step in found.steps} | {constant.id for constant in found.constants}
    names |= {one.name for step in found.steps for one in step.inputs if one.symbol is None}
    meanings = {step.system.meaning for step in found.steps if step.system is not None}
    assert {text for text in names if of.words.name(text, of.own_names) is None} == set()
    assert {text for text in meanings if of.words.phrase(text) == text} == set()


@pytest.mark.parametrize("name", NAMES)
def test_both_languages_have_the_same_blocks(name: str) -> None:
    english, german = sheets(name)
    assert [section.id for section in english.sections] == [section.id for section in german.sections]
    assert [type(block) for block in blocks(english)] == [type(block) for block in blocks(german)]
