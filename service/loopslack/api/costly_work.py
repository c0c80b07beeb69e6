"""What the side process does with a costly question: read it again, ask the operation, encode the answer.

The question crosses as the bytes that came, since reading them takes less than passing on what was read. Nothing here
waits or knows a request.
"""

import ctypes
import time
from collections.abc import Callable, Iterable
from typing import Any

from loopslack.api.nursery import Work
from loopslack.api.operations import Operation, finished
from loopslack.api.side_words import Answered, encode, judged, read_question, told_of
from loopslack.contract.strict.decoding import decode

MOST_GROWN = 120_000_000
"""Bytes by which the process of costly questions may grow before a new one takes its place. The typesetter takes 70 to
95 MB with its first sheets and some 60 kB more with each (own measurement); giving freed memory back to the system does
not change that."""


def costly_work(operations: Iterable[Operation[Any, Any]], nesting: int) -> Work:
    """The work, for the operations there are."""
    by_id = {operation.operation_id: operation for operation in operations}
    give_back = _giving_back()

    def answer(message: bytes) -> bytes:
        asked = read_question(message)
        try:
            reply = encode(answered(by_id[asked.operation_id], asked.body, nesting))
        except Exception as error:  # noqa: BLE001 - whatever it is, the worker must be told
            reply = encode(told_of(error))
        give_back()
        return reply

    return answer


def _giving_back() -> Callable[[], object]:
    """What returns freed memory to the system, where the C library can: a sheet leaves 25 MB of it behind."""
    trim = getattr(ctypes.CDLL(None), "malloc_trim", None)
    return (lambda: trim(0)) if trim is not None else (lambda: None)


def answered(operation: Operation[Any, Any], body: bytes, nesting: int) -> Answered:
    """The answer of an operation to a body."""
    if operation.question is None or operation.ask is None:
        raise TypeError(f"{operation.operation_id} answers no question by itself")
    question = decode(body, operation.question, nesting)
    begun = time.perf_counter()
    told, sent = finished(operation.ask(question))
    designs = judged(operation.outcomes(told)) if operation.outcomes is not None else ()
    return Answered(sent, designs, time.perf_counter() - begun)
