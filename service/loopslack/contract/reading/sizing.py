"""Reads a question about a vessel that is still to be chosen."""

from typing import NamedTuple

from loopslack.contract.questions.operations import SizingQuestion
from loopslack.contract.reading.again import refusing
from loopslack.contract.reading.loop import Reading, read_loop
from loopslack.contract.reading.reader import Reader
from loopslack.contract.reading.tolerances import Tolerances, read_tolerances
from loopslack.contract.reading.vessels import Choice, read_choice


class SizingReading(NamedTuple):
    """A loop, the vessels to choose from, and how far the inputs may be off."""

    reading: Reading
    choice: Choice
    tolerances: Tolerances


@refusing
def read_sizing(question: SizingQuestion, reader: Reader) -> SizingReading:
    """Read a question about sizing or design."""
    return SizingReading(
        read_loop(question, reader),
        read_choice(reader, question.vessel),
        read_tolerances(reader, question.tolerances),
    )
