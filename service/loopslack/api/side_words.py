"""What a worker and its side processes say to each other, and how an error passes from one to the other.

A side process has no part in metrics and logs: what there is to count or to tell comes back with its answer.
"""

import traceback
from collections.abc import Iterable, Mapping

import msgspec
from msgspec import Struct

from loopslack.contract.problems import FaultyField
from loopslack.contract.refusals import Refused, refusal_of
from loopslack.kernel.errors import CalculationError

Judged = tuple[str, tuple[str, ...]]
"""A design for the metrics: its verdict and the codes of its advisories."""


class Refusal(Struct, frozen=True, tag=True):
    """The question is refused."""

    slug: str
    detail: str
    faults: tuple[FaultyField, ...]
    further: int
    headers: Mapping[str, str]

    def error(self) -> Refused:
        """The refusal as it is raised."""
        return Refused(self.slug, self.detail, faults=self.faults, further=self.further, headers=self.headers)


class Fault(Struct, frozen=True, tag=True):
    """The service has a bug; the text is for the log."""

    text: str

    def error(self) -> "SideFault":
        """The fault as it is raised."""
        return SideFault(self.text)


class SideFault(Exception):
    """A bug of ours met by a side process; its message is the traceback there."""


class Answered(Struct, frozen=True, tag=True):
    """The answer to one costly question."""

    sent: bytes
    judged: tuple[Judged, ...]
    seconds: float


class Begun(Struct, frozen=True, tag=True):
    """A batch or stream has been taken in."""


class Unknown(Struct, frozen=True, tag=True):
    """The batch or stream is not known here: the process that knew it has ended."""


class Told(Struct, frozen=True):
    """How one design of many is counted, and what there is to log of it."""

    verdict: str
    advisories: tuple[str, ...] = ()
    fault: str = ""


class Slice(Struct, frozen=True, tag=True):
    """What a turn of work came to: bytes to send, the outcomes in them, and the time it took."""

    piece: bytes
    outcomes: tuple[Told, ...]
    is_last: bool
    seconds: float


class Question(Struct, frozen=True, tag=True):
    """A costly question, as it came."""

    operation_id: str
    body: bytes


class Begin(Struct, frozen=True, tag=True):
    """A batch or stream to be answered, under a number of its own.

    `ended` names those that nobody waits for any more.
    """

    number: int
    form: str
    parts: tuple[bytes, ...]
    seconds: float
    ended: tuple[int, ...] = ()


class Next(Struct, frozen=True, tag=True):
    """The next slice of a batch or stream; a server that stops wants it to come to an end."""

    number: int
    is_stopping: bool
    ended: tuple[int, ...] = ()


encode = msgspec.msgpack.Encoder().encode
read_costly_reply = msgspec.msgpack.Decoder(Answered | Refusal | Fault).decode
read_many_reply = msgspec.msgpack.Decoder(Begun | Slice | Unknown | Refusal | Fault).decode
read_question = msgspec.msgpack.Decoder(Question).decode
read_many_order = msgspec.msgpack.Decoder(Begin | Next).decode


def told_of(error: Exception) -> Refusal | Fault:
    """An error as it is told to the worker. Called where it is caught."""
    if isinstance(error, CalculationError):
        error = refusal_of(error)
    if isinstance(error, Refused):
        return Refusal(error.kind.slug, error.detail, error.faults, error.further, error.headers)
    return Fault("".join(traceback.format_exception(error)))


def judged(designs: Iterable[tuple[str, Iterable[str]]]) -> tuple[Judged, ...]:
    """Designs for the metrics, in the form they are sent in."""
    return tuple((verdict, tuple(codes)) for verdict, codes in designs)
