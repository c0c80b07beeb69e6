"""Who answers blocks: this process alone, or several beside it. Blocks come back in the order they went out.

Only as many blocks are out as keep everybody busy, so that memory does not grow with the file.
"""

from __future__ import annotations

import multiprocessing
import signal
from collections import deque
from collections.abc import Iterable, Iterator
from multiprocessing.connection import Connection, wait
from typing import TYPE_CHECKING, Protocol

from loopslack.bulk.blocks import Answered, Block, answer_block

if TYPE_CHECKING:
    from multiprocessing.context import SpawnProcess

BLOCKS_AHEAD = 4
"""Blocks per process that may be answered before the one that is waited for."""

ATTEMPTS = 2
"""How often a block is tried whose process ends without an answer."""


class LostWorkerError(Exception):
    """A process ended in the middle of a block, and another one did so again."""


class Crew(Protocol):
    """Answers blocks in order."""

    def answer(self, head: bytes, blocks: Iterable[Block]) -> Iterator[Answered]:
        """The answers of the blocks, in their order; blocks are fetched as they can be dealt with."""


class Alone:
    """No others: this process does the work."""

    def answer(self, head: bytes, blocks: Iterable[Block]) -> Iterator[Answered]:
        """Answer one block after the other."""
        for block in blocks:
            yield answer_block(head, block)


class Processes:
    """Several processes of this machine.

    They are started afresh rather than forked, so that each ends when its own pipe is closed: also when this
    process is killed and can no longer tell them.
    """

    def __init__(self, count: int) -> None:
        self._count = count

    def answer(self, head: bytes, blocks: Iterable[Block]) -> Iterator[Answered]:
        """Answer blocks side by side.

        Raises:
            LostWorkerError: a process was ended from outside, twice over the same block.

        """
        workers = [_Worker(head) for _ in range(self._count)]
        try:
            yield from _in_order(workers, iter(blocks))
        finally:
            for worker in workers:
                worker.stop()


def _in_order(workers: list[_Worker], blocks: Iterator[Block]) -> Iterator[Answered]:
    answered: dict[int, Answered] = {}
    out: deque[int] = deque()
    idle, busy = list(workers), set[_Worker]()
    most_out = len(workers) * (1 + BLOCKS_AHEAD)
    is_more = True
    while is_more or out:
        while is_more and idle and len(out) < most_out:
            block = next(blocks, None)
            if block is None:
                is_more = False
                break
            worker = idle.pop()
            worker.hand(block)
            busy.add(worker)
            out.append(block.first)
        for worker in _ready(busy):
            result = worker.result()
            if result is not None:
                answered[worker.block.first] = result
                busy.discard(worker)
                idle.append(worker)
        while out and out[0] in answered:
            yield answered.pop(out.popleft())


def _ready(busy: set[_Worker]) -> list[_Worker]:
    by_pipe = {worker.pipe: worker for worker in busy}
    return [by_pipe[pipe] for pipe in wait(list(by_pipe)) if isinstance(pipe, Connection)]


class _Worker:
    """One process, and the block it is busy with."""

    def __init__(self, head: bytes) -> None:
        self._head = head
        self._attempts = 0
        self.block = Block(0, [], frozenset())
        self._start()

    def _start(self) -> None:
        context = multiprocessing.get_context("spawn")
        self.pipe, theirs = context.Pipe()
        self._process: SpawnProcess = context.Process(target=_serve, args=(theirs, self._head), daemon=True)
        self._process.start()
        theirs.close()

    def hand(self, block: Block) -> None:
        """Hand over a block."""
        self.block = block
        self._attempts = 1
        self._send()

    def result(self) -> Answered | None:
        """What the process answered; None if it has ended and another one was given the block.

        Raises:
            LostWorkerError: that has happened before with this block.

        """
        try:
            answered: Answered = self.pipe.recv()
        except (EOFError, OSError):
            self._process.join()
            if self._attempts == ATTEMPTS:
                first = self.block.first
                code = self._process.exitcode
                raise LostWorkerError(f"a process ended with code {code} over designs from {first}") from None
            self.pipe.close()
            self._attempts += 1
            self._start()
            self._send()
            return None
        return answered

    def _send(self) -> None:
        try:
            self.pipe.send(self.block)
        except OSError:  # it has ended, which `result` finds out
            return

    def stop(self) -> None:
        """End the process, whatever it is doing."""
        self.pipe.close()
        self._process.terminate()
        self._process.join()


def _serve(pipe: Connection, head: bytes) -> None:
    """Answer blocks until the other end of the pipe is closed."""
    signal.signal(signal.SIGINT, signal.SIG_IGN)  # a key pressed at the terminal reaches the whole group
    while True:
        try:
            block: Block = pipe.recv()
            pipe.send(answer_block(head, block))
        except (EOFError, OSError):
            return
