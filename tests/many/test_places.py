"""Places and turns: few batches at once, none starved, each gone without a trace however it ends."""

import asyncio
import json
import time

import pytest

from api.small_service import ask_raw
from loopslack.api import many_work
from loopslack.api.many_places import ManyPlaces
from loopslack.contract.refusals import Refused
from loopslack.observability import Readiness
from many.designs import STREAM_PATH, design, faulty, lines
from many.service import service as app


def places(waiting=1):
    return ManyPlaces(waiting, Readiness())


def test_one_more_than_may_wait_is_refused_and_a_place_is_free_again_after_an_error():
    many = places(waiting=1)

    def overfill():
        with many.place(), many.place():
            many.place().__enter__()

    with pytest.raises(Refused) as refused:
        overfill()
    assert refused.value.kind.status == 503
    assert refused.value.headers["Retry-After"] == "5"
    assert many.taken == 0
    with many.place():
        assert many.taken == 1


def test_slices_of_several_batches_take_turns_and_never_run_at_once():
    many = places()
    order, running, most = [], 0, 0

    def work(name):
        nonlocal running, most
        running += 1
        most = max(most, running)
        time.sleep(0.002)
        order.append(name)
        running -= 1

    async def batch(name):
        for _ in range(5):
            await many.run(lambda: work(name))

    async def both():
        await asyncio.gather(batch("a"), batch("b"))

    asyncio.run(both())
    many.close()
    assert most == 1
    assert order[:6] == ["a", "b"] * 3


SCOPE = {
    "path": STREAM_PATH,
    "raw_path": STREAM_PATH.encode(),
    "headers": [(b"content-type", b"application/x-ndjson")],
}


def message(body, *, more=False):
    return {"type": "http.request", "body": body, "more_body": more}


class Conversation:
    """A request whose client does what a test wants it to."""

    def __init__(self, service, body):
        self.service, self.body = service, body
        self.sent, self.left = [], asyncio.Event()
        self.may_go_on = asyncio.Event()
        self.may_go_on.set()
        self._sent_more = asyncio.Event()
        self._asked = False

    async def receive(self):
        if not self._asked:
            self._asked = True
            return message(self.body)
        await self.left.wait()
        return {"type": "http.disconnect"}

    async def send(self, part):
        self.sent.append(part)
        self._sent_more.set()
        await self.may_go_on.wait()

    async def has_sent(self, parts):
        while len(self.sent) < parts:
            self._sent_more.clear()
            await self._sent_more.wait()

    async def hold(self):
        scope = {
            "type": "http",
            "asgi": {"version": "3.0"},
            "http_version": "1.1",
            "method": "POST",
            "scheme": "http",
            "query_string": b"",
            "root_path": "",
            "client": ("127.0.0.1", 1),
            "server": ("127.0.0.1", 8000),
            **SCOPE,
        }
        await self.service(scope, self.receive, self.send)

    @property
    def text(self):
        return b"".join(part.get("body", b"") for part in self.sent)


def test_a_client_that_leaves_ends_the_work_and_frees_its_place():
    service = app()
    answered = 0
    real = many_work.answer_design

    def counted(*arguments, **more):
        nonlocal answered
        answered += 1
        return real(*arguments, **more)

    async def scene():
        talk = Conversation(service, lines(*(design(f"q-{number}") for number in range(400))))
        task = asyncio.create_task(talk.hold())
        await talk.has_sent(3)
        assert service.many.taken == 1
        talk.left.set()
        await asyncio.wait_for(task, 2)
        assert service.many.taken == 0
        return answered

    with pytest.MonkeyPatch.context() as patch:
        patch.setattr(many_work, "answer_design", counted)
        then = asyncio.run(scene())
        time.sleep(0.3)
    assert answered <= then + 1
    assert answered < 200


def test_a_client_that_does_not_read_stops_the_work_until_it_does():
    service = app()

    async def scene():
        talk = Conversation(service, lines(*(design(f"q-{number}") for number in range(60))))
        task = asyncio.create_task(talk.hold())
        await talk.has_sent(2)
        talk.may_go_on.clear()
        await asyncio.sleep(0.3)
        stalled = len(talk.sent)
        await asyncio.sleep(0.3)
        assert len(talk.sent) == stalled
        assert not task.done()
        other = Conversation(service, lines(design("quick")))
        await asyncio.wait_for(other.hold(), 5)
        assert json.loads(other.text.splitlines()[-1])["complete"] is True
        talk.may_go_on.set()
        await asyncio.wait_for(task, 20)
        return talk.text

    end = json.loads(asyncio.run(scene()).splitlines()[-1])
    assert end["summary"]["designs"] == 60


def test_a_cancelled_request_frees_its_place():
    service = app()

    async def scene():
        talk = Conversation(service, lines(*(design(f"q-{number}") for number in range(400))))
        task = asyncio.create_task(talk.hold())
        await talk.has_sent(2)
        task.cancel()
        with pytest.raises(asyncio.CancelledError):
            await task
        assert service.many.taken == 0

    asyncio.run(scene())


def test_a_body_that_does_not_arrive_frees_its_place():
    service = app(body_seconds=0.2)
    status, _, body, _ = ask_raw(service, [message(b'{"stock":', more=True)], **SCOPE)
    assert status == 408
    assert json.loads(body)["type"] == "/docs/problems/body-overdue"
    assert service.many.taken == 0


def test_a_batch_too_many_is_refused_after_its_body_has_come_or_before_it_was_sent():
    service = app(batches_waiting=0)
    body = lines(faulty("a"))
    with service.many.place():
        parts = [message(body[:50], more=True), message(body[50:])]
        status, headers, _, read = ask_raw(service, parts, **SCOPE)
        assert (status, headers["retry-after"], read) == (503, "5", 2)
        asks_first = SCOPE | {"headers": [*SCOPE["headers"], (b"expect", b"100-continue")]}
        status, _, _, read = ask_raw(service, parts, **asks_first)
        assert (status, read) == (503, 0)
    status, _, _, _ = ask_raw(service, parts, **SCOPE)
    assert status == 200


def test_the_event_loop_stays_free_however_long_one_design_takes(monkeypatch):
    real, turns = many_work.answer_design, []

    def long(*arguments, **more):
        until = time.thread_time() + 0.6
        while time.thread_time() < until:
            pass
        return real(*arguments, **more)

    async def watch(stop):
        while not stop.is_set():
            begun = time.perf_counter()
            await asyncio.sleep(0.005)
            turns.append(time.perf_counter() - begun)

    async def scene():
        stop = asyncio.Event()
        watching = asyncio.create_task(watch(stop))
        await Conversation(app(), lines(design("a"))).hold()
        stop.set()
        await watching

    monkeypatch.setattr(many_work, "answer_design", long)
    asyncio.run(scene())
    assert len(turns) > 20
    assert max(turns) < 0.3
