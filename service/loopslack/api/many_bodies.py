"""The bodies of batches and streams, taken apart into their head and their designs without reading a design.

A batch is one JSON value: its designs stay slices of the body until they are answered. A stream arrives line by
line and is kept compressed until then, so that memory hardly grows with the number of lines. The worker takes bodies
in (`Spool`), the side process takes them apart. Nothing here answers anything.
"""

import zlib
from collections.abc import Iterable, Iterator

import msgspec
from msgspec import Struct

from loopslack.contract.answering.many import read_shared
from loopslack.contract.problems import FaultyField
from loopslack.contract.questions.many import LoopDesignBatchQuestion
from loopslack.contract.reading.many import Shared
from loopslack.contract.refusals import Refused, refusal_of_fields
from loopslack.contract.strict.decoding import decode
from loopslack.contract.strict.duplicates import refusal_of_duplicates, stated_twice
from loopslack.settings import Settings

Designs = Iterator[bytes | Refused]
"""The designs in order; a refusal stands for one that is too long to be looked at."""


class _Envelope(Struct, frozen=True, forbid_unknown_fields=True):
    designs: list[msgspec.Raw]
    stock: msgspec.Raw = msgspec.Raw()
    defaults: msgspec.Raw = msgspec.Raw()


_envelope = msgspec.json.Decoder(_Envelope)


def batch_parts(body: bytes, settings: Settings) -> tuple[Shared, Designs]:
    """What the designs of a batch share, and the designs.

    Raises:
        Refused: the batch as a whole cannot be read, with every fault found.

    """
    try:
        if not body.isascii():
            body.decode()
        parts = _envelope.decode(body)
    except (msgspec.DecodeError, RecursionError, UnicodeDecodeError):
        decode(body, LoopDesignBatchQuestion, settings.nesting)
        raise AssertionError("a batch was refused in which no fault can be found") from None
    _refuse_repeated_members(body, parts)
    count = len(parts.designs)
    if not 1 <= count <= settings.batch_designs:
        code = "too-many" if count else "too-few"
        message = f"There are {count} designs; a batch takes from 1 to {settings.batch_designs}."
        raise refusal_of_fields([FaultyField(pointer="/designs", code=code, message=message)])
    members = [
        b'"%b":%b' % (name, bytes(raw))
        for name, raw in ((b"stock", parts.stock), (b"defaults", parts.defaults))
        if bytes(raw)
    ]
    head = b"{%b}" % b",".join(members)
    shared = read_shared(head, most_stock=settings.stock_items, nesting=settings.nesting)
    return shared, _bounded(map(bytes, parts.designs), settings.single_body_bytes)


def _refuse_repeated_members(body: bytes, parts: _Envelope) -> None:
    """Refuse a batch that states one of its own members twice, which shows in its quotation marks."""
    raws = [*parts.designs, parts.stock, parts.defaults]
    inside = sum(bytes(raw).count(b'"') for raw in raws)
    names = 2 * (1 + bool(bytes(parts.stock)) + bool(bytes(parts.defaults)))
    if inside + names != body.count(b'"'):
        twice = stated_twice(body, "")
        if twice:
            raise refusal_of_duplicates(twice)


def _bounded(designs: Iterable[bytes], most_bytes: int) -> Designs:
    for design in designs:
        yield design if len(design) <= most_bytes else too_long(most_bytes)


def too_long(most_bytes: int) -> Refused:
    """The refusal of one design that is longer than allowed."""
    return Refused("body-too-large", f"The design is longer than the {most_bytes} bytes allowed.")


class Spool:
    """The body of a stream, compressed as it arrives.

    Lines of designs repeat one another, so that a stream takes about a twentieth of its length; a body that does
    not is no longer than the limit of its operation.
    """

    def __init__(self) -> None:
        self._press = zlib.compressobj(level=1)
        self._parts: list[bytes] = []
        self._line_ends = 0
        self._last = b"\n"

    @property
    def line_count(self) -> int:
        """Lines of the body, blank ones and the first included."""
        return self._line_ends + (self._last != b"\n")

    def take(self, part: bytes) -> None:
        """Take a part of the body; 64 kB of it cost about a millisecond."""
        self._line_ends += part.count(b"\n")
        self._last = part[-1:] or self._last
        pressed = self._press.compress(part)
        if pressed:
            self._parts.append(pressed)

    def pressed(self) -> tuple[bytes, ...]:
        """The whole, compressed; to be asked for once, when all is there."""
        return (*self._parts, self._press.flush())


def lines_of(pressed: Iterable[bytes], first_most: int, most: int) -> Designs:
    """The lines of a compressed body that are not blank, each released as it is handed out.

    A line longer than allowed (the first has a limit of its own) is skipped without being kept.
    """
    allowed = first_most
    held = b""
    skipping = False
    for text in _unpacked(pressed):
        *whole, held_next = (held + text).split(b"\n")
        held = held_next
        for line in whole:
            if skipping or len(line) > allowed:
                yield too_long(allowed)
            elif line.strip():
                yield line
            else:
                continue
            skipping, allowed = False, most
        if len(held) > allowed:
            skipping, held = True, b""
    if skipping or len(held) > allowed:
        yield too_long(allowed)
    elif held.strip():
        yield held


def _unpacked(pressed: Iterable[bytes]) -> Iterator[bytes]:
    """The text in pieces of bounded length, however well it was compressed."""
    parts = list(pressed)
    parts.reverse()
    unpack = zlib.decompressobj()
    while parts:
        waiting = parts.pop()
        while waiting:
            yield unpack.decompress(waiting, 65_536)
            waiting = unpack.unconsumed_tail
    yield unpack.flush()


def check_length(spool: Spool, most: int) -> None:
    """Refuse a stream of more designs than allowed.

    Raises:
        Refused: 413.

    """
    if spool.line_count > most + 1:
        raise Refused("body-too-large", f"The stream has more than {most} designs.")


def stream_parts(pressed: Iterable[bytes], settings: Settings) -> tuple[Shared, Designs]:
    """What the designs of a stream share, told by its first line, and the designs.

    Raises:
        Refused: the first line cannot be read, with every fault found.

    """
    lines = lines_of(pressed, settings.single_body_bytes, settings.line_bytes)
    head = next(lines, b"")
    if isinstance(head, Refused):
        raise Refused("body-too-large", f"The first line is longer than {settings.single_body_bytes} bytes.")
    return read_shared(head, most_stock=settings.stock_items, nesting=settings.nesting), lines
