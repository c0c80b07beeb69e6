"""Too much work: refused early, and costly questions kept apart from the others."""

import asyncio
import threading
import time
from contextlib import contextmanager

import pytest

from api import small_service
from api.small_service import GOOD_BODY, JSON, serving
from loopslack.api.record import Record
from loopslack.api.reply import Reply
from loopslack.api.side_words import SideFault
from loopslack.api.wrappers import Shedding
from loopslack.contract.refusals import Refused
from loopslack.observability import LoopLag


@contextmanager
def small_app(**settings):
    """The costly questions of the small service, without a server."""
    app = small_service.small_app(**settings)
    try:
        yield app.costly
    finally:
        app.close()


def test_a_late_event_loop_sheds_requests_but_not_probes():
    with serving(shed_lag_seconds=0.1) as client:
        client.service.lag.seconds = 1e9
        refused = client.post("/v1/double", content=GOOD_BODY, headers=JSON)
        probes = [client.get(path).status_code for path in ("/livez", "/readyz", "/metrics")]
        client.service.lag.seconds = 0.0
    assert refused.status_code == 503
    assert refused.json()["type"] == "/docs/problems/overloaded"
    assert refused.headers["retry-after"] == "1"
    assert probes == [200, 200, 200]


def test_a_flood_that_arrives_in_one_turn_of_the_loop_is_shed_within_that_turn():
    async def busy(scope, receive, send):
        time.sleep(0.03)  # noqa: ASYNC251 - as a design holds the loop
        await Reply(b"", b"text/plain")(scope, receive, send)

    async def flood():
        lag = LoopLag()
        app = Record(Shedding(busy, lag, 0.1), None)
        watch = asyncio.create_task(lag.watch())
        await asyncio.sleep(0.05)
        statuses = []

        async def send(message):
            if message["type"] == "http.response.start":
                statuses.append(message["status"])

        await asyncio.gather(
            *(
                app({"type": "http", "method": "GET", "path": "/", "headers": []}, None, send)
                for _ in range(50)
            )
        )
        watch.cancel()
        return statuses

    statuses = asyncio.run(flood())
    served = statuses.count(200)
    assert 1 <= served <= 5
    assert statuses == [200] * served + [503] * (50 - served)


def test_lateness_is_measured_and_forgotten():
    async def measure():
        lag = LoopLag(period=0.005)
        watch = asyncio.create_task(lag.watch())
        await asyncio.sleep(0.02)
        time.sleep(0.2)  # noqa: ASYNC251 - the loop is held up on purpose
        await asyncio.sleep(0.001)
        late = lag.seconds
        await asyncio.sleep(0.3)
        watch.cancel()
        return late, lag.seconds

    late, later = asyncio.run(measure())
    assert late > 0.1
    assert later < 0.1


def test_a_costly_question_leaves_the_others_their_turn():
    with serving() as client:
        costly = threading.Thread(
            target=client.post, args=("/v1/slow",), kwargs={"content": GOOD_BODY, "headers": JSON}
        )
        costly.start()
        time.sleep(0.05)
        assert client.post("/v1/double", content=GOOD_BODY, headers=JSON).status_code == 200
        assert costly.is_alive()
        costly.join()


def test_of_many_costly_questions_those_beyond_the_places_are_refused_at_once():
    async def crowd():
        with small_app(costly_waiting=2) as costly:
            order = []

            async def one():
                try:
                    order.append((await costly.ask("slow", GOOD_BODY)).sent)
                except Refused as error:
                    order.append(error.kind.slug)

            await asyncio.gather(*(one() for _ in range(8)))
            await one()
            return order

    assert asyncio.run(crowd()) == ["overloaded"] * 5 + [b'{"double":12.0}'] * 4


def test_past_the_deadline_the_work_is_ended_and_its_place_is_free():
    async def late():
        with small_app(costly_waiting=0, deadline_seconds=1.0) as costly:
            began = time.perf_counter()
            for _ in range(2):
                with pytest.raises(Refused) as refused:
                    await costly.ask("endless", GOOD_BODY)
                assert refused.value.kind.slug == "deadline-passed"
            assert time.perf_counter() - began > 2.0
            return (await costly.ask("double", GOOD_BODY)).sent

    assert asyncio.run(late()) == b'{"double":12.0}'


def test_a_question_that_waits_in_vain_does_not_end_the_work_of_the_one_before():
    async def two():
        with small_app(deadline_seconds=5) as costly:
            first = asyncio.create_task(costly.ask("slow", GOOD_BODY))
            await asyncio.sleep(0.05)
            second = asyncio.create_task(costly.ask("slow", GOOD_BODY))
            await asyncio.sleep(0.05)
            second.cancel()
            with pytest.raises(asyncio.CancelledError):
                await second
            return (await first).sent

    assert asyncio.run(two()) == b'{"double":12.0}'


def test_refusals_and_faults_of_costly_work_are_its_own():
    async def failing():
        with small_app() as costly:
            with pytest.raises(Refused) as refused:
                await costly.ask("refuse", GOOD_BODY)
            assert [fault.pointer for fault in refused.value.faults] == ["/fluid/massPercent", ""]
            with pytest.raises(SideFault, match="the secret of the house"):
                await costly.ask("fault", GOOD_BODY)
            return (await costly.ask("double", GOOD_BODY)).judged

    assert asyncio.run(failing()) == (("holds", ("steam-at-station",)),)


def test_a_costly_question_that_kills_its_process_is_answered_500_and_the_next_one_is_answered():
    with serving() as client:
        lost = client.post("/v1/dying", content=GOOD_BODY, headers=JSON)
        assert lost.status_code == 500
        assert lost.json()["type"] == "/docs/problems/internal-fault"
        assert client.post("/v1/slow", content=GOOD_BODY, headers=JSON).status_code == 200
        assert "loopslack_side_processes_lost_total" in client.get("/metrics").text


def test_a_deadline_is_a_503_with_retry_after():
    with serving(deadline_seconds=0.1) as client:
        refused = client.post("/v1/slow", content=GOOD_BODY, headers=JSON)
    assert refused.status_code == 503
    assert refused.json()["type"] == "/docs/problems/deadline-passed"
    assert refused.headers["retry-after"] == "5"
