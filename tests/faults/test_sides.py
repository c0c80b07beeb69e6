"""Faults of what works beside a worker: its end costs the questions it had in hand, and leaves nothing behind."""

from __future__ import annotations

import asyncio
import json
import os
import re
import signal
import threading
import time
from collections.abc import Callable, Iterator
from contextlib import suppress
from http.client import HTTPConnection
from pathlib import Path

import pytest

from faults.server import ROOT, Server, serving
from load.client import Target, closed_loop, open_loop
from load.questions import drawn
from load.server_facts import family

EXAMPLES = ROOT / "openapi" / "examples"
COURSE = (EXAMPLES / "computeStagnationCourse" / "clear-day.question.json").read_bytes()
DESIGN = json.loads((EXAMPLES / "loop-design.json").read_bytes())
ENVIRONMENT = {"LOOPSLACK_SHED_LAG_SECONDS": "10", "LOOPSLACK_DEADLINE_SECONDS": "60"}
"""One caller at a time: nothing here is to be refused, however slow the machine."""


@pytest.fixture
def server(tmp_path: Path) -> Iterator[Server]:
    with serving(tmp_path, environment=ENVIRONMENT) as started:
        yield started


def post(server: Server, path: str, body: bytes) -> tuple[int, bytes]:
    connection = HTTPConnection("127.0.0.1", server.port, timeout=60)
    connection.request("POST", path, body, {"content-type": "application/json"})
    answer = connection.getresponse()
    return answer.status, answer.read()


def metrics(server: Server) -> str:
    connection = HTTPConnection("127.0.0.1", server.port, timeout=60)
    connection.request("GET", "/metrics")
    return connection.getresponse().read().decode()


def sides(server: Server) -> list[int]:
    """The processes that do the long work: what the nurseries have begun."""
    return [
        side for worker in server.workers() for nursery in family(worker)[1:] for side in family(nursery)[1:]
    ]


def becomes(fact: Callable[[], bool], seconds: float = 30.0) -> bool:
    deadline = time.monotonic() + seconds
    while not fact() and time.monotonic() < deadline:
        time.sleep(0.02)
    return fact()


def is_gone(process: int) -> bool:
    return not Path(f"/proc/{process}").exists()


def asked_meanwhile(server: Server) -> tuple[threading.Thread, list[int]]:
    """A long question in a thread of its own, which is computed when this returns; what comes of it is a status."""
    answers: list[int] = []

    def ask() -> None:
        with suppress(OSError):  # its worker may be killed meanwhile
            answers.append(post(server, "/v1/stagnation-course", COURSE)[0])

    thread = threading.Thread(target=ask)
    thread.start()
    assert becomes(lambda: bool(sides(server)))
    time.sleep(0.1)
    return thread, answers


def test_a_side_process_that_is_killed_costs_the_question_it_had_and_no_other(
    server: Server, capsys: pytest.CaptureFixture[str]
) -> None:
    corpus = drawn(10, 2, include=[])
    small = Target(server.port, bodies=corpus.bodies, right=corpus.right)
    costly = Target(server.port, "/v1/stagnation-course", [COURSE])

    async def scene():
        loop = asyncio.get_running_loop()
        loop.call_later(2.0, lambda: [os.kill(side, signal.SIGKILL) for side in sides(server)])
        return await asyncio.gather(open_loop(small, 10, 5), closed_loop(costly, 1, 6))

    designs, courses = asyncio.run(scene())
    with capsys.disabled():
        print(
            f"\nside process killed: {len(designs.served)} designs served, {len(designs.refused)} refused, "
            f"{designs.failed} failed, {designs.wrong} wrong; courses by status {dict(courses.statuses)}"
        )
    assert (len(designs.served), designs.failed, designs.wrong) == (50, 0, 0)
    assert courses.failed == 0
    assert courses.statuses[500] <= 1
    assert courses.statuses[200] >= 1
    assert set(courses.statuses) <= {200, 500}


def test_a_question_past_its_deadline_is_ended_with_its_process(tmp_path: Path) -> None:
    with serving(tmp_path, environment=ENVIRONMENT | {"LOOPSLACK_DEADLINE_SECONDS": "0.1"}) as server:
        status, body = post(server, "/v1/stagnation-course", COURSE)
        assert status == 503
        assert json.loads(body)["type"] == "/docs/problems/deadline-passed"
        assert becomes(lambda: not sides(server), 5)


def test_a_killed_worker_takes_what_works_beside_it_along(server: Server) -> None:
    thread, answers = asked_meanwhile(server)
    [worker] = server.workers()
    whole = family(worker)
    assert len(whole) >= 4  # itself, two nurseries, a side process
    os.kill(worker, signal.SIGKILL)
    assert becomes(lambda: all(map(is_gone, whole)))
    thread.join()
    assert answers == []


def test_a_worker_without_its_nurseries_is_replaced(server: Server) -> None:
    [worker] = server.workers()
    for nursery in family(worker)[1:]:
        os.kill(nursery, signal.SIGKILL)
    status, body = post(server, "/v1/stagnation-course", COURSE)
    assert status == 503
    assert json.loads(body)["type"] == "/docs/problems/overloaded"
    assert becomes(lambda: len(server.workers()) == 1 and server.workers() != [worker])
    assert becomes(lambda: is_gone(worker))
    server.wait_until_ready(1)
    assert post(server, "/v1/stagnation-course", COURSE)[0] == 200


def test_a_graceful_stop_waits_for_long_work_and_leaves_no_process(server: Server) -> None:
    thread, answers = asked_meanwhile(server)
    whole = family(server.process.pid)
    server.stop(within=25.0)
    thread.join()
    assert answers == [200]
    assert becomes(lambda: all(map(is_gone, whole)))


def test_what_side_processes_answer_is_counted_by_their_workers(server: Server) -> None:
    sheet = json.dumps({"design": DESIGN}).encode()
    for _ in range(3):
        assert post(server, "/v1/calculation-sheet/html", sheet)[0] == 200
    designs = [{"id": f"q-{number}", **DESIGN} for number in range(4)]
    assert post(server, "/v1/loop-design/batch", json.dumps({"designs": designs}).encode())[0] == 200
    sizing = json.dumps({name: part for name, part in DESIGN.items() if name != "include"}).encode()
    assert post(server, "/v1/vessel-sizing", sizing)[0] == 200
    told = metrics(server)

    def total(pattern: str) -> float:
        return sum(float(found) for found in re.findall(pattern + r"\} (\S+)", told))

    assert total(r'loopslack_designs_total\{operation="designLoops",[^}]*') == 4
    assert total(r'loopslack_designs_total\{operation="sizeVessel",[^}]*') == 1
    assert total(r'loopslack_http_request_seconds_count\{[^}]*calculation-sheet/html"[^}]*') == 3
    assert total(r"loopslack_advisories_total\{[^}]*") > 0
