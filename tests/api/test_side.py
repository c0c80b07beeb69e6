"""The process beside the event loop: asked in turn, ended when it is given up, gone when its worker is."""

import asyncio
import os
import signal
import subprocess
import sys
import time
from contextlib import suppress
from pathlib import Path

import pytest

from loopslack.api.side import Side, SideLostError
from loopslack.contract.refusals import Refused
from loopslack.observability import Readiness


def work(message: bytes) -> bytes:
    word, _, number = message.decode().partition(" ")
    if word == "sleep":
        time.sleep(float(number))
    elif word == "exit":
        os._exit(int(number))
    elif word == "nice":
        return str(os.getpriority(os.PRIO_PROCESS, 0)).encode()
    elif word == "handles":
        return str(len(list(Path("/dev/fd").iterdir()))).encode()
    elif word == "echo":
        return message
    return str(os.getpid()).encode()


@pytest.fixture
def side():
    made = Side(lambda: work, Readiness())
    yield made
    made.close()


def lives(process: int) -> bool:
    """Whether a process is there and not merely waiting to be buried."""
    with suppress(OSError):
        return Path(f"/proc/{process}/stat").read_text().rpartition(")")[2].split()[0] != "Z"
    return False


def dies(process: int, within: float = 3.0) -> bool:
    deadline = time.monotonic() + within
    while lives(process) and time.monotonic() < deadline:
        time.sleep(0.01)
    return not lives(process)


def test_one_process_answers_one_question_after_the_other(side):
    async def scene():
        return await asyncio.gather(*(side.ask(b"who", 5) for _ in range(5)))

    answers = asyncio.run(scene())
    assert len(set(answers)) == 1
    assert int(answers[0]) != os.getpid()


def test_long_messages_and_answers_arrive_whole(side):
    message = b"echo " + bytes(range(256)) * 20_000
    message = message.replace(b"\x80", b"").decode("latin-1").encode()
    assert asyncio.run(side.ask(message, 5)) == message


def test_it_stands_back_behind_its_worker(side):
    most = 19
    assert int(asyncio.run(side.ask(b"nice", 5))) == min(os.getpriority(os.PRIO_PROCESS, 0) + 10, most)


def test_it_holds_nothing_of_what_its_worker_has_open(side, tmp_path):
    with (tmp_path / "a").open("w"), (tmp_path / "b").open("w"), (tmp_path / "c").open("w"):
        # its three standard streams, the connection to the worker, and the folder it counts in
        assert int(asyncio.run(side.ask(b"handles", 5))) == 5


def test_work_that_is_given_up_is_ended_at_once_and_the_next_question_gets_another_process(side):
    async def scene():
        first = int(await side.ask(b"who", 5))
        with pytest.raises(TimeoutError):
            async with asyncio.timeout(0.1):
                await side.ask(b"sleep 60", 5)
        ended = dies(first)
        return first, ended, int(await side.ask(b"who", 5))

    first, ended, second = asyncio.run(scene())
    assert ended
    assert second != first


def test_work_ends_by_itself_where_nobody_is_left_to_end_it(side, monkeypatch):
    monkeypatch.setattr("loopslack.api.side.GRACE_SECONDS", 0.0)

    async def scene():
        began = time.perf_counter()
        with pytest.raises(SideLostError):
            await side.ask(b"sleep 60", 0.2)
        return time.perf_counter() - began

    assert 0.15 < asyncio.run(scene()) < 10


def test_a_process_that_ends_in_the_middle_is_told_and_replaced(side):
    async def scene():
        with pytest.raises(SideLostError):
            await side.ask(b"exit 3", 5)
        return await side.ask(b"who", 5)

    assert int(asyncio.run(scene())) > 0


def test_a_process_that_was_killed_while_it_waited_costs_no_question(side):
    async def scene():
        first = int(await side.ask(b"who", 5))
        os.kill(first, signal.SIGKILL)
        assert dies(first)
        await asyncio.sleep(0.05)
        return first, int(await side.ask(b"who", 5))

    first, second = asyncio.run(scene())
    assert first != second


def test_signals_for_the_whole_group_do_not_end_the_work_before_the_worker_ends(side):
    async def scene():
        process = int(await side.ask(b"who", 5))
        asked = asyncio.create_task(side.ask(b"sleep 0.3", 5))
        await asyncio.sleep(0.1)
        for number in (signal.SIGINT, signal.SIGTERM, signal.SIGQUIT, signal.SIGHUP):
            os.kill(process, number)
        return process, int(await asked)

    before, after = asyncio.run(scene())
    assert before == after


def test_without_its_nursery_a_worker_refuses_and_says_that_it_has_failed():
    readiness = Readiness()
    readiness.loaded = True
    lost = Side(lambda: work, readiness)

    async def scene():
        side_process = int(await lost.ask(b"who", 5))
        os.kill(lost._nursery._process, signal.SIGKILL)
        os.kill(side_process, signal.SIGKILL)
        assert dies(side_process)
        await asyncio.sleep(0.05)
        with pytest.raises(Refused) as refused:
            await lost.ask(b"who", 5)
        return refused.value.kind.slug

    assert asyncio.run(scene()) == "overloaded"
    assert readiness.reason
    lost.close()


WORKER = """
import asyncio, os, sys, time
from loopslack.api.side import Side
from loopslack.observability import Readiness

def work(message):
    if message == b"sleep":
        time.sleep(60)
    return str(os.getpid()).encode()

async def main():
    side = Side(lambda: work, Readiness())
    print((await side.ask(b"who", 5)).decode(), side._nursery._process, flush=True)
    await side.ask(b"sleep", 60)

asyncio.run(main())
"""


def test_a_worker_that_is_killed_leaves_no_process_behind():
    worker = subprocess.Popen([sys.executable, "-c", WORKER], stdout=subprocess.PIPE, text=True)
    assert worker.stdout is not None
    processes = [int(number) for number in worker.stdout.readline().split()]
    assert len(processes) == 2
    assert all(map(lives, processes))
    time.sleep(0.2)  # it is in the middle of its work by now
    worker.kill()
    worker.wait()
    worker.stdout.close()
    assert all(map(dies, processes))


def test_a_closed_side_has_no_process_left():
    side = Side(lambda: work, Readiness())

    async def scene():
        return int(await side.ask(b"who", 5))

    process = asyncio.run(scene())
    nursery = side._nursery._process
    side.close()
    assert dies(process)
    assert dies(nursery)


def test_where_it_is_too_late_to_fork_the_question_fails_at_once_and_says_why():
    side = Side(lambda: work, Readiness(), lambda: "fork before")
    with pytest.raises(RuntimeError, match="fork before"):
        asyncio.run(side.ask(b"who", 5))


def test_what_was_forked_in_time_goes_on_when_it_is_too_late_for_another():
    reasons = [""]
    side = Side(lambda: work, Readiness(), lambda: reasons[0])
    side.start()
    reasons[0] = "fork before"

    async def scene():
        first = await side.ask(b"who", 5)
        with suppress(SideLostError):
            await side.ask(b"exit 1", 5)
        return first, await side.ask(b"who", 5)

    first, second = asyncio.run(scene())
    assert first != second
    side.close()


def growing(message: bytes) -> bytes:
    """Keep as many bytes as it is told, and say who keeps them."""
    KEPT.append(b"x" * int(message))
    return str(os.getpid()).encode()


KEPT: list[bytes] = []


def test_a_process_that_has_grown_too_much_is_ended_after_its_answer_and_none_is_lost():
    side = Side(lambda: growing, Readiness(), most_grown=30_000_000)

    async def scene():
        return [int(await side.ask(size, 5)) for size in (b"1000", b"1000", b"50000000", b"1000", b"1000")]

    one, same, grown, new, again = asyncio.run(scene())
    assert one == same == grown
    assert new == again != one
    assert dies(one)
    side.close()


def test_a_process_that_keeps_something_may_grow():
    side = Side(lambda: growing, Readiness())

    async def scene():
        return [int(await side.ask(size, 5)) for size in (b"1000", b"50000000", b"1000")]

    assert len(set(asyncio.run(scene()))) == 1
    side.close()
