"""Places and turns: few batches at once, none starved, each gone without a trace however it ends."""

import asyncio
import json
import time
from mmap import mmap

import pytest

from api.small_service import ask_raw
from loopslack.api import many_work
from loopslack.api.many_bodies import Spool
from loopslack.api.many_places import ManyPlaces
from loopslack.api.side import Side, SideLostError
from loopslack.api.side_words import Begin, Begun, Slice, encode, read_many_order
from loopslack.contract.refusals import Refused
from loopslack.observability import Readiness
from many.designs import STREAM_PATH, design, faulty, lines
from many.service import service


def places(waiting=1, work=None):
    readiness = Readiness()
    return ManyPlaces(Side(lambda: work, readiness), waiting, 5.0, readiness)


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


def test_slices_of_several_batches_take_turns():
    taken = []

    def work(message):
        order = read_many_order(message)
        if isinstance(order, Begin):
            return encode(Begun())
        taken.append(order.number)
        return encode(Slice(bytes(taken), (), is_last=False, seconds=0.0))

    async def both():
        many = places(work=work)
        first, second = await many.begin("lines", (), 5.0), await many.begin("lines", (), 5.0)

        async def batch(number):
            for _ in range(5):
                done = await many.next_slice(number)
            return done.piece

        return (first, second), await asyncio.gather(batch(first), batch(second))

    (first, second), pieces = asyncio.run(both())
    assert max(pieces) == bytes([first, second] * 5)


def test_a_batch_that_is_forgotten_is_no_longer_known_from_the_next_turn_on():
    async def scene():
        many = service().many
        body = lines(*(design(f"q-{number}") for number in range(9)))
        spool = Spool()
        spool.take(body)
        first = await many.begin("lines", spool.pressed(), 5.0)
        spool = Spool()
        spool.take(body)
        second = await many.begin("lines", spool.pressed(), 5.0)
        many.forget(first)
        assert not (await many.next_slice(second)).is_last
        with pytest.raises(SideLostError):
            await many.next_slice(first)

    asyncio.run(scene())


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
    app = service()
    answered = mmap(-1, 2)  # memory that the side process shares with this one
    real = many_work.answer_design

    def counted(*arguments, **more):
        answered[:] = (int.from_bytes(answered) + 1).to_bytes(2)
        return real(*arguments, **more)

    async def scene():
        talk = Conversation(app, lines(*(design(f"q-{number}") for number in range(400))))
        task = asyncio.create_task(talk.hold())
        await talk.has_sent(3)
        assert app.many.taken == 1
        talk.left.set()
        await asyncio.wait_for(task, 2)
        assert app.many.taken == 0
        await asyncio.sleep(0.2)  # what was begun is finished
        then = int.from_bytes(answered)
        await asyncio.sleep(0.3)
        assert int.from_bytes(answered) == then < 200

    with pytest.MonkeyPatch.context() as patch:
        patch.setattr(many_work, "answer_design", counted)
        asyncio.run(scene())


def test_a_client_that_does_not_read_stops_the_work_until_it_does():
    app = service()

    async def scene():
        talk = Conversation(app, lines(*(design(f"q-{number}") for number in range(60))))
        task = asyncio.create_task(talk.hold())
        await talk.has_sent(2)
        talk.may_go_on.clear()
        await asyncio.sleep(0.3)
        stalled = len(talk.sent)
        await asyncio.sleep(0.3)
        assert len(talk.sent) == stalled
        assert not task.done()
        other = Conversation(app, lines(design("quick")))
        await asyncio.wait_for(other.hold(), 5)
        assert json.loads(other.text.splitlines()[-1])["complete"] is True
        talk.may_go_on.set()
        await asyncio.wait_for(task, 20)
        return talk.text

    end = json.loads(asyncio.run(scene()).splitlines()[-1])
    assert end["summary"]["designs"] == 60


def test_a_cancelled_request_frees_its_place():
    app = service()

    async def scene():
        talk = Conversation(app, lines(*(design(f"q-{number}") for number in range(400))))
        task = asyncio.create_task(talk.hold())
        await talk.has_sent(2)
        task.cancel()
        with pytest.raises(asyncio.CancelledError):
            await task
        assert app.many.taken == 0

    asyncio.run(scene())


def test_a_body_that_does_not_arrive_frees_its_place():
    app = service(body_seconds=0.2)
    status, _, body, _ = ask_raw(app, [message(b'{"stock":', more=True)], **SCOPE)
    assert status == 408
    assert json.loads(body)["type"] == "/docs/problems/body-overdue"
    assert app.many.taken == 0


def test_a_batch_too_many_is_refused_after_its_body_has_come_or_before_it_was_sent():
    app = service(batches_waiting=0)
    body = lines(faulty("a"))
    with app.many.place():
        parts = [message(body[:50], more=True), message(body[50:])]
        status, headers, _, read = ask_raw(app, parts, **SCOPE)
        assert (status, headers["retry-after"], read) == (503, "5", 2)
        asks_first = SCOPE | {"headers": [*SCOPE["headers"], (b"expect", b"100-continue")]}
        status, _, _, read = ask_raw(app, parts, **asks_first)
        assert (status, read) == (503, 0)
    status, _, _, _ = ask_raw(app, parts, **SCOPE)
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
        await Conversation(service(), lines(design("a"))).hold()
        stop.set()
        await watching

    monkeypatch.setattr(many_work, "answer_design", long)
    asyncio.run(scene())
    assert len(turns) > 20
    assert max(turns) < 0.3
