"""The file of answers: written in order, resumed after an interruption, never mixed from two runs that differ.

Beside the file lies its checkpoint, which says up to where it is safely on disk and what of the input stands
behind it. It is gone once the last line is written.
"""

from __future__ import annotations

import fcntl
import os
import time
from collections import Counter
from hashlib import sha256
from typing import TYPE_CHECKING, Self

import msgspec
from msgspec import Struct

from loopslack.bulk.blocks import Answered, Mark, Source
from loopslack.contract.answering.many import REFUSED, Tally, end_line, id_of
from loopslack.contract.writing.shared import provenance

if TYPE_CHECKING:
    from pathlib import Path
    from types import TracebackType

CHECKPOINT_SECONDS = 1.0


class CannotResumeError(Exception):
    """The file of answers is there already and does not belong to these questions; the message says why."""


class Checkpoint(Struct, frozen=True, kw_only=True, forbid_unknown_fields=True):
    """How far a file of answers has come."""

    made_by: str
    head: str
    source_size: int
    source_time: int
    mark: Mark
    length: int
    outcomes: dict[str, int]


class _Line(Struct):
    index: int
    id: str | None = None
    verdict: str = REFUSED


_checkpoint = msgspec.json.Decoder(Checkpoint)
_line = msgspec.json.Decoder(_Line)


class Target:
    """The answers to one source, open for writing and locked against a second run.

    Raises:
        CannotResumeError: the file belongs to something else, or another run is writing it.

    """

    def __init__(self, path: Path, source: Source, *, afresh: bool) -> None:
        self._path = path
        self._source = source
        self._checkpoint_path = path.with_name(path.name + ".checkpoint")
        self._file = path.open("ab+")
        self._outcomes: Counter[str] = Counter()
        self._mark = source.mark
        self._length = 0
        self._due = 0.0
        try:
            self._begin(afresh=afresh)
        except BaseException:
            self._file.close()
            raise
        self.resumed = self._outcomes.total()
        """Designs that were answered already."""

    def __enter__(self) -> Self:
        return self

    def __exit__(
        self, kind: type[BaseException] | None, error: BaseException | None, trace: TracebackType | None
    ) -> None:
        try:
            if self._length >= 0:
                self._save()
        finally:
            self._file.close()

    @property
    def tally(self) -> Tally:
        """What came out so far."""
        return Tally(self._outcomes)

    def add(self, answered: Answered, mark: Mark) -> None:
        """Write the answers of a block."""
        self._file.write(answered.lines)
        self._length += len(answered.lines)
        self._outcomes.update(answered.outcomes)
        self._mark = mark
        if time.monotonic() >= self._due:
            self._save()

    def finish(self) -> Tally:
        """Write the last line; the file is complete then."""
        self._file.write(end_line(self.tally) + b"\n")
        self._file.flush()
        os.fsync(self._file.fileno())
        self._checkpoint_path.unlink(missing_ok=True)
        self._length = -1
        return self.tally

    def _begin(self, *, afresh: bool) -> None:
        try:
            fcntl.flock(self._file, fcntl.LOCK_EX | fcntl.LOCK_NB)
        except OSError:
            raise CannotResumeError(f"another run is writing {self._path}") from None
        size = self._file.seek(0, os.SEEK_END)
        if afresh or size == 0:
            self._checkpoint_path.unlink(missing_ok=True)
            self._file.truncate(0)
        else:
            self._resume(size)
        self._save()

    def _resume(self, size: int) -> None:
        earlier = self._earlier()
        if earlier.made_by != maker():
            raise self._different("its answers were computed by another version of this package")
        if earlier.head != _text(self._source.head):
            raise self._different("the first line of the questions has changed")
        if size < earlier.length:
            raise self._different("it is shorter than it was")
        if not self._source.skip_to(earlier.mark):
            raise self._different("the questions answered so far have changed")
        self._outcomes.update(earlier.outcomes)
        self._mark, self._length = earlier.mark, earlier.length
        if (earlier.source_size, earlier.source_time) == self._source.state:
            self._keep_what_was_written_since()
        self._file.truncate(self._length)

    def _earlier(self) -> Checkpoint:
        try:
            return _checkpoint.decode(self._checkpoint_path.read_bytes())
        except FileNotFoundError:
            raise self._different("it is complete, or was not written by this command") from None
        except msgspec.DecodeError:
            raise self._different(f"{self._checkpoint_path} cannot be read") from None

    def _keep_what_was_written_since(self) -> None:
        """Keep the whole lines beyond the checkpoint that answer the next designs, one by one."""
        self._file.seek(self._length)
        for line in self._file:
            design = self._source.next_design()
            if design is None:
                return
            answer = _whole(line)
            if (
                answer is None
                or answer.index != self._outcomes.total()
                or answer.id != id_of(design.line or b"")
            ):
                self._source.give_back(design)
                return
            self._outcomes[answer.verdict] += 1
            self._length += len(line)
            self._mark = self._source.mark

    def _save(self) -> None:
        """Make sure of what is written, then say so."""
        self._file.flush()
        os.fsync(self._file.fileno())
        size, changed = self._source.state
        state = Checkpoint(
            made_by=maker(),
            head=_text(self._source.head),
            source_size=size,
            source_time=changed,
            mark=self._mark,
            length=self._length,
            outcomes=dict(self._outcomes),
        )
        fresh = self._checkpoint_path.with_name(self._checkpoint_path.name + ".new")
        fresh.write_bytes(msgspec.json.encode(state))
        fresh.replace(self._checkpoint_path)
        self._due = time.monotonic() + CHECKPOINT_SECONDS

    def _different(self, why: str) -> CannotResumeError:
        return CannotResumeError(
            f"{self._path} is there already, and cannot be gone on with: {why}. "
            "Name another file, or start afresh."
        )


def _whole(line: bytes) -> _Line | None:
    """What a line says; None for one that was torn."""
    if not line.endswith(b"\n"):
        return None
    try:
        return _line.decode(line)
    except msgspec.DecodeError:
        return None


def maker() -> str:
    """What computes answers here: equal makers give equal bytes."""
    made = provenance()
    return f"{made.service_version} {made.contract_version} {made.equations}"


def _text(head: bytes) -> str:
    return sha256(head).hexdigest()
