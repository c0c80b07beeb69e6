"""The line that tells how far a run has come."""

import io

import pytest

from loopslack.bulk import progress
from loopslack.bulk.progress import Progress


class Terminal(io.StringIO):
    def isatty(self):
        return True


@pytest.fixture
def clock(monkeypatch):
    class Clock:
        now = 100.0

    monkeypatch.setattr(progress.time, "monotonic", lambda: Clock.now)
    return Clock


def test_on_a_terminal_one_line_is_written_over_and_over(clock):
    stream = Terminal()
    told = Progress(stream, 1000)
    told.start(0, 0)
    clock.now += 1
    told.tell(250, 50, 3)
    clock.now += 0.01
    told.tell(260, 52, 3)
    clock.now += 1
    told.tell(1000, 200, 3, last=True)
    first, second = stream.getvalue().split("\r")[1:]
    assert first == "[######..................]  25.0 %, 50 designs, 50/s, 3 s left, 3 refused"
    assert second.startswith("[########################] 100.0 %, 200 designs, 100/s, 3 refused")
    assert second.endswith("\n")
    assert stream.getvalue().count("\n") == 1


def test_a_resumed_run_tells_its_own_rate(clock):
    stream = Terminal()
    told = Progress(stream, 1000)
    told.start(500, 1000)
    clock.now += 10
    told.tell(600, 1200, 0)
    assert stream.getvalue().endswith("60.0 %, 1,200 designs, 20/s, 40 s left")


def test_into_a_log_a_line_goes_twice_a_minute(clock):
    stream = io.StringIO()
    told = Progress(stream, 1000)
    told.start(0, 0)
    for step in range(1, 101):
        clock.now += 1
        told.tell(10 * step, step, 0, last=step == 100)
    assert len(stream.getvalue().splitlines()) == 4
    assert "\r" not in stream.getvalue()


@pytest.mark.parametrize(("seconds", "text"), [(40, "40 s"), (600, "10 min"), (9000, "2.5 h")])
def test_a_length_of_time_is_told_in_the_unit_that_suits_it(seconds, text):
    assert progress._span(seconds) == text


def test_a_quiet_run_tells_nothing():
    told = Progress(None, 10)
    told.start(0, 0)
    told.tell(10, 1, 0, last=True)
