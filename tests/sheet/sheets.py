"""The loops the sheet is tested with, each asked once: question, answer, and what is made of them."""

from functools import cache
from pathlib import Path
from typing import NamedTuple

import msgspec

from loopslack.contract.answering.loop import design_loop
from loopslack.contract.answers.operations import LoopDesignAnswer
from loopslack.contract.questions.many import SheetQuestion
from loopslack.sheet.case import Case
from loopslack.sheet.composing import compose
from loopslack.sheet.lines import Beside, Block, Card, Sheet
from loopslack.sheet.rendering import asked_in_full, render_html

FOLDER = Path(__file__).parent / "loops"
NAMES = sorted(path.stem for path in FOLDER.glob("*.json"))


class Asked(NamedTuple):
    """A sheet as it was asked for and what was answered."""

    question: SheetQuestion
    answer: LoopDesignAnswer


@cache
def asked(name: str) -> Asked:
    question = msgspec.json.decode((FOLDER / f"{name}.json").read_bytes(), type=SheetQuestion)
    return Asked(question, design_loop(asked_in_full(question.design)))


@cache
def sheet(name: str) -> Sheet:
    return compose(asked(name).answer, asked(name).question)


@cache
def html(name: str) -> str:
    return render_html(asked(name).answer, asked(name).question).decode()


def case(name: str, language: str = "") -> Case:
    question, answer = asked(name)
    return Case(answer, question.design, language or question.language or "en")


def blocks(of: Sheet) -> list[Block]:
    """Every block, those inside others too."""
    found: list[Block] = []

    def walk(block: Block) -> None:
        found.append(block)
        if isinstance(block, Beside):
            for one in (*block.left, *block.right):
                walk(one)
        if isinstance(block, Card):
            for one in block.blocks:
                walk(one)

    for section in of.sections:
        for block in section.blocks:
            walk(block)
    return found
