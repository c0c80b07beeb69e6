"""How each type of question is read: what finds the faults that no single member shows."""

from collections.abc import Callable
from contextlib import suppress
from typing import Any

from loopslack.contract.questions import existing as questions_existing
from loopslack.contract.questions import operations as questions
from loopslack.contract.questions.many import (
    FigureQuestion,
    LoopDesignBatchQuestion,
    SheetQuestion,
    StreamHead,
)
from loopslack.contract.reading.again import refusing
from loopslack.contract.reading.existing import read_audit, read_check, read_course
from loopslack.contract.reading.many import read_batch, read_head
from loopslack.contract.reading.reader import EnoughError, Reader
from loopslack.contract.reading.sizing import read_sizing
from loopslack.contract.reading.small import read_contents, read_expansion

Read = Callable[[Any, Reader], object]
"""Reads a question and leaves what is refused with the reader."""


@refusing
def _read_sheet(question: SheetQuestion | FigureQuestion, reader: Reader) -> object:
    own = Reader(turn=reader.turn)
    with suppress(EnoughError):
        read_sizing(question.design, own)
    reader.take_over(own.refused, "/design")
    return question


READINGS: dict[type, Read] = {
    questions.LoopVolumeQuestion: read_contents,
    questions.ExpansionQuestion: read_expansion,
    questions.VesselSizingQuestion: read_sizing,
    questions.LoopDesignQuestion: read_sizing,
    questions.StagnationCheckQuestion: read_check,
    questions_existing.StagnationCourseQuestion: read_course,
    questions_existing.VesselAuditQuestion: read_audit,
    LoopDesignBatchQuestion: read_batch,
    StreamHead: read_head,
    SheetQuestion: _read_sheet,
    FigureQuestion: _read_sheet,
}
"""By the type of question. A design of a batch is read with what it shares: see `many`."""
