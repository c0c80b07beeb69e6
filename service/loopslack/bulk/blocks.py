"""The file of designs, read block by block with bounded memory, and how a block is answered.

A block is what one process or machine is handed at a time. Everything about it can be pickled.
"""

from __future__ import annotations

import os
from collections import deque
from collections.abc import Iterator
from hashlib import sha256
from typing import TYPE_CHECKING, NamedTuple, Self

from loopslack.contract.answering.many import answer_lines, id_of
from loopslack.contract.names import Names

if TYPE_CHECKING:
    from pathlib import Path
    from types import TracebackType

BLOCK_DESIGNS = 16
BLOCK_BYTES = 1_000_000
LONGEST_LINE = 2_000_000
LONGEST_HEAD = 32_000_000


class Design(NamedTuple):
    """A line of the file; None stands for one that is longer than allowed."""

    line: bytes | None
    repeated: bool


class Mark(NamedTuple):
    """How far the file was read: bytes, a digest of them, and designs."""

    offset: int
    digest: str
    designs: int


class Block(NamedTuple):
    """Designs that are answered in one go."""

    first: int
    lines: list[bytes | None]
    repeated: frozenset[int]


class Answered(NamedTuple):
    """The lines that answer a block, and how many came out how."""

    lines: bytes
    outcomes: dict[str, int]


def answer_block(head: bytes, block: Block) -> Answered:
    """Answer a block under the first line of its file. Any process that has this package can do it."""
    return Answered(*answer_lines(block.lines, block.first, head, block.repeated))


class Source:
    """The file of designs, read once from its beginning to its end."""

    def __init__(self, path: Path) -> None:
        self._file = path.open("rb", buffering=1_000_000)
        self._digest = sha256()
        self._names = Names()
        self._returned: deque[Design] = deque()
        self._offset = 0
        self._designs = 0
        head = self._next_line(LONGEST_HEAD)
        if head is None:
            raise ValueError(f"the first line of {path} is longer than {LONGEST_HEAD} bytes")
        self.head = head

    def __enter__(self) -> Self:
        return self

    def __exit__(
        self, kind: type[BaseException] | None, error: BaseException | None, trace: TracebackType | None
    ) -> None:
        self._file.close()

    @property
    def mark(self) -> Mark:
        """How far it has been read."""
        return Mark(self._offset, self._digest.hexdigest(), self._designs)

    @property
    def state(self) -> tuple[int, int]:
        """Size and time of the last change of the file."""
        status = os.fstat(self._file.fileno())
        return status.st_size, status.st_mtime_ns

    def next_design(self) -> Design | None:
        """The next design, or None at the end."""
        if self._returned:
            return self._returned.popleft()
        while True:
            before = self._offset
            line = self._next_line(LONGEST_LINE)
            if line is not None and not line.strip():
                if self._offset == before:
                    return None
                continue
            self._designs += 1
            name = None if line is None else id_of(line)
            return Design(line, name is not None and not self._names.is_new(name))

    def skip_to(self, mark: Mark) -> bool:
        """Read on to a mark of an earlier reading; False if the file is not the same up to there."""
        while self._offset < mark.offset and self.next_design() is not None:
            pass
        return self.mark == mark

    def give_back(self, design: Design) -> None:
        """Put back the design that was read last."""
        self._returned.appendleft(design)

    def blocks(self) -> Iterator[tuple[Block, Mark]]:
        """What is left of the file in blocks, each with the mark at its end."""
        first = self._designs - len(self._returned)
        while True:
            lines: list[bytes | None] = []
            repeated = set()
            length = 0
            while len(lines) < BLOCK_DESIGNS and length < BLOCK_BYTES:
                design = self.next_design()
                if design is None:
                    break
                if design.repeated:
                    repeated.add(len(lines))
                lines.append(design.line)
                length += len(design.line or b"")
            if not lines:
                return
            yield Block(first, lines, frozenset(repeated)), self.mark
            first += len(lines)

    def _next_line(self, most: int) -> bytes | None:
        """The next line without its end, or None for one that is longer than allowed; empty at the end."""
        line = self._take(most + 1)
        if len(line) <= most or line.endswith(b"\n"):
            return line.rstrip(b"\r\n")
        while line and not line.endswith(b"\n"):
            line = self._take(1_000_000)
        return None

    def _take(self, most: int) -> bytes:
        line = self._file.readline(most)
        self._digest.update(line)
        self._offset += len(line)
        return line
