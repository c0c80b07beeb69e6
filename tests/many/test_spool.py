"""The body of a stream on its way from the socket to its lines."""

import json
import tracemalloc

from hypothesis import given, settings
from hypothesis import strategies as some

from loopslack.api.many_bodies import Spool, lines_of
from loopslack.contract.refusals import Refused
from many.designs import HEAD, faulty

MOST = 12


def spooled(body, size):
    spool = Spool()
    for start in range(0, len(body), size):
        spool.take(body[start : start + size])
    return spool


@given(
    some.lists(some.binary(max_size=20).map(lambda line: line.replace(b"\n", b"")), max_size=12),
    some.integers(1, 40),
    some.booleans(),
)
@settings(deadline=None, max_examples=200)
def test_its_lines_are_those_of_the_body_and_long_ones_are_refused(texts, size, ended):
    body = b"\n".join(texts) + (b"\n" if ended else b"")
    spool = spooled(body, size)
    found = list(lines_of(spool.pressed(), 30, MOST))
    wanted = [line for line in body.split(b"\n") if line.strip() or len(line) > MOST]
    expected = [line if len(line) <= (MOST if place else 30) else None for place, line in enumerate(wanted)]
    assert [None if isinstance(line, Refused) else line for line in found] == expected
    assert spool.line_count == len(body.split(b"\n")) - (body == b"" or body.endswith(b"\n"))


def test_a_body_of_one_endless_line_is_never_held_in_one_piece():
    pressed = spooled(b"x" * 20_000_000, 65_536).pressed()
    tracemalloc.start()
    found = list(lines_of(pressed, 100_000, 100_000))
    peak = tracemalloc.get_traced_memory()[1]
    tracemalloc.stop()
    assert [type(line) for line in found] == [Refused]
    assert peak < 1_000_000


def test_lines_of_designs_are_kept_in_a_tenth_of_their_length():
    body = b"\n".join(json.dumps(one).encode() for one in (HEAD, *(faulty(f"q-{n}") for n in range(4000))))
    kept = sum(map(len, spooled(body, 65_536).pressed()))
    assert kept < len(body) / 10
