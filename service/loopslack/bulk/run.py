"""From a file of questions to a file of answers. Who does the work in between is the caller's choice."""

from __future__ import annotations

from collections import deque
from collections.abc import Iterator
from typing import TYPE_CHECKING

from loopslack.bulk.blocks import Block, Mark, Source
from loopslack.bulk.target import Target
from loopslack.contract.answering.many import REFUSED, Tally, read_shared

if TYPE_CHECKING:
    from pathlib import Path

    from loopslack.bulk.crew import Crew
    from loopslack.bulk.progress import Progress


def answer_file(
    source_path: Path, target_path: Path, crew: Crew, progress: Progress, *, afresh: bool = False
) -> Tally:
    """Answer a file of designs, going on where an earlier run ended.

    Whatever ends it early, the next run goes on from there; nothing that was answered is computed again.

    Raises:
        Refused: the first line cannot be read.
        CannotResumeError: the file of answers belongs to something else.
        OSError: one of the files cannot be read or written.

    """
    with Source(source_path) as source:
        read_shared(source.head)
        with Target(target_path, source, afresh=afresh) as target:
            marks: deque[Mark] = deque()
            progress.start(source.mark.offset, target.resumed)
            for answered in crew.answer(source.head, _noted(source, marks)):
                mark = marks.popleft()
                target.add(answered, mark)
                progress.tell(mark.offset, target.tally.designs, target.tally.count(REFUSED))
            tally = target.finish()
            progress.tell(source.mark.offset, tally.designs, tally.count(REFUSED), last=True)
            return tally


def _noted(source: Source, marks: deque[Mark]) -> Iterator[Block]:
    for block, mark in source.blocks():
        marks.append(mark)
        yield block
