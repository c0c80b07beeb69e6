"""Too much work: refused early, and costly questions kept apart from the others."""

import asyncio
import threading
import time

import pytest

from api.small_service import GOOD_BODY, JSON, serving
from loopslack.api.costly import Costly
from loopslack.contract.refusals import Refused
from loopslack.observability import LoopLag


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
        costly = Costly(waiting=2, deadline_seconds=5)
        order = []

        async def one():
            try:
                order.append(await costly.run(lambda: time.sleep(0.05) or "done"))
            except Refused as error:
                order.append(error.kind.slug)

        await asyncio.gather(*(one() for _ in range(8)))
        await one()
        costly.close()
        return order

    assert asyncio.run(crowd()) == ["overloaded"] * 5 + ["done"] * 4


def test_past_the_deadline_the_caller_is_told_and_the_place_stays_taken_until_the_work_ends():
    async def late():
        costly = Costly(waiting=0, deadline_seconds=0.05)
        slugs = []
        for _ in range(2):
            try:
                await costly.run(lambda: time.sleep(0.2))
            except Refused as error:
                slugs.append(error.kind.slug)
        await asyncio.sleep(0.3)
        answer = await costly.run(lambda: "free again")
        costly.close()
        return slugs, answer

    assert asyncio.run(late()) == (["deadline-passed", "overloaded"], "free again")


def test_an_error_of_costly_work_is_its_own():
    async def failing():
        costly = Costly(waiting=0, deadline_seconds=1)
        with pytest.raises(ZeroDivisionError):
            await costly.run(lambda: 1 / 0)
        with pytest.raises(TimeoutError):
            await costly.run(raise_timeout)
        answer = await costly.run(lambda: "still there")
        costly.close()
        return answer

    assert asyncio.run(failing()) == "still there"


def raise_timeout():
    raise TimeoutError


def test_a_deadline_is_a_503_with_retry_after():
    with serving(deadline_seconds=0.1) as client:
        refused = client.post("/v1/slow", content=GOOD_BODY, headers=JSON)
    assert refused.status_code == 503
    assert refused.json()["type"] == "/docs/problems/deadline-passed"
    assert refused.headers["retry-after"] == "5"
