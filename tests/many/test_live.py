"""Streams and batches on the server they are served by, with clients that keep to no rule."""

import http.client
import json
import os
import socket
import time
from pathlib import Path

import pytest

from faults.server import serving
from load.server_facts import family, processor_seconds
from many.designs import BATCH_PATH, NDJSON, STREAM_PATH, batch, design, faulty, lines, read

TESTS = Path(__file__).parents[1]
ENVIRONMENT = {
    "PYTHONPATH": f"{TESTS.parent / 'service'}{os.pathsep}{TESTS}",
    "LOOPSLACK_SHED_LAG_SECONDS": "10",
    "LOOPSLACK_READER_SECONDS": "1",
    "LOOPSLACK_BATCHES_WAITING": "1",
}
STREAMS_ON_ONE_CONNECTION = 40
MEGABYTES_FOR_NINETEEN_THOUSAND_LINES = 6


@pytest.fixture(scope="module")
def server(tmp_path_factory):
    with serving(tmp_path_factory.mktemp("many"), "many.live_app:app", environment=ENVIRONMENT) as made:
        yield made


def connection(server):
    return http.client.HTTPConnection("127.0.0.1", server.port, timeout=60)


def stream(client, body):
    client.request("POST", STREAM_PATH, body, NDJSON)
    answer = client.getresponse()
    return answer.status, answer.read()


def raw(server, body):
    """A connection on which a stream was asked for, and of which nothing was read."""
    client = server.connect()
    head = (
        f"POST {STREAM_PATH} HTTP/1.1\r\nHost: x\r\nContent-Type: application/x-ndjson\r\n"
        f"Content-Length: {len(body)}\r\n\r\n"
    )
    client.sendall(head.encode() + body)
    return client


def read_all(client):
    text = bytearray()
    while part := client.recv(65_536):
        text += part
    return bytes(text)


def memory(server, field="VmRSS"):
    """Memory of the only worker and of what works beside it, in MB."""
    [worker] = server.workers()
    texts = [Path(f"/proc/{process}/status").read_text() for process in family(worker)]
    lines = [next(line for line in text.splitlines() if line.startswith(field)) for text in texts]
    return sum(int(line.split()[1]) for line in lines) / 1024


def becomes_idle(server, within=5.0):
    """Whether the worker and what works beside it stop working within a time."""
    [worker] = server.workers()
    deadline = time.monotonic() + within
    while time.monotonic() < deadline:
        before = processor_seconds(worker)
        time.sleep(0.4)
        if processor_seconds(worker) - before <= 0.04:
            return True
    return False


def test_many_streams_on_one_connection_are_all_answered(server):
    client = connection(server)
    for number in range(STREAMS_ON_ONE_CONNECTION):
        status, body = stream(client, lines(faulty(f"q-{number}"), faulty("b")))
        items, end = read(body)
        assert status == 200
        assert items[0]["id"] == f"q-{number}"
        assert end["complete"]
    client.request("POST", BATCH_PATH, batch(design("a")), {"content-type": "application/json"})
    assert json.loads(client.getresponse().read())["summary"]["designs"] == 1


def test_a_long_request_right_behind_an_answer_finds_the_connection_open(server):
    client = connection(server)
    body = lines(*(faulty(f"q-{number}") for number in range(300)))
    assert len(body) > 140_000
    client.connect()
    opened = client.sock.getsockname()
    for _ in range(25):
        client.request("POST", STREAM_PATH, body, NDJSON)
        # the next request is on its way before the server has put this one away
        assert b'"complete":true' in client.getresponse().read()
        assert client.sock.getsockname() == opened


def test_memory_does_not_grow_with_the_number_of_lines(server, capsys):
    client = connection(server)
    short = lines(*(faulty(f"q-{number}") for number in range(1000)))
    long = lines(*(faulty(f"q-{number}") for number in range(20_000)))
    stream(client, short)
    before = memory(server, "VmHWM")
    status, body = stream(client, long)
    grown = memory(server, "VmHWM") - before
    with capsys.disabled():
        print(f"\n20,000 lines instead of 1,000 ({len(long) / 1e6:.1f} MB): {grown:.1f} MB more")
    assert status == 200
    assert read(body)[1]["summary"]["designs"] == 20_000
    assert grown < MEGABYTES_FOR_NINETEEN_THOUSAND_LINES


def test_a_client_that_leaves_ends_the_work(server):
    client = raw(server, lines(*(design(f"q-{number}") for number in range(2000))))
    assert client.recv(1000).startswith(b"HTTP/1.1 200")
    client.close()
    assert becomes_idle(server)


def test_a_client_that_stops_reading_stops_the_work_and_is_cut(server):
    client = raw(server, lines(*(design(f"q-{number}") for number in range(2000))))
    client.recv(1000)
    assert becomes_idle(server)
    time.sleep(1.5)  # longer than a reader may pause
    client.settimeout(5)
    with pytest.raises(OSError, match=r"reset|Broken"):
        read_all(client)
    status, _ = stream(connection(server), lines(faulty("a")))
    assert status == 200


def test_a_client_that_closes_its_sending_side_still_gets_every_line(server):
    client = raw(server, lines(*(design(f"q-{number}") for number in range(20))))
    client.shutdown(socket.SHUT_WR)
    client.settimeout(30)
    text = read_all(client)
    assert b'"complete":true' in text
    assert text.endswith(b"0\r\n\r\n")


def test_beyond_the_places_there_are_a_stream_is_told_when_to_come_again(server):
    busy = [raw(server, lines(*(design(f"q-{number}") for number in range(1000)))) for _ in range(2)]
    for client in busy:
        client.recv(100)
    third = connection(server)
    third.request("POST", STREAM_PATH, lines(design("a")) + b"\n" * 3_000_000, NDJSON)
    answer = third.getresponse()
    assert (answer.status, answer.headers["retry-after"]) == (503, "5")
    assert json.loads(answer.read())["type"] == "/docs/problems/overloaded"
    for client in busy:
        client.close()
    assert becomes_idle(server)
    assert stream(connection(server), lines(faulty("a")))[0] == 200


def test_a_body_of_fifty_megabytes_is_refused_before_it_is_read(server):
    before = memory(server)
    client = server.connect()
    client.sendall(
        f"POST {STREAM_PATH} HTTP/1.1\r\nHost: x\r\nContent-Type: application/x-ndjson\r\n"
        f"Content-Length: 50000000\r\nExpect: 100-continue\r\n\r\n".encode()
    )
    assert client.recv(4096).startswith(b"HTTP/1.1 413")
    assert memory(server) - before < 2


def test_a_sender_of_fifty_megabytes_that_were_not_announced_reads_why_they_are_refused(server):
    before, told = memory(server, "VmHWM"), server.log.read_text().count('"status":413')
    client = server.connect(timeout=30)
    client.sendall(
        f"POST {STREAM_PATH} HTTP/1.1\r\nHost: x\r\nContent-Type: application/x-ndjson\r\n"
        f"Transfer-Encoding: chunked\r\n\r\n".encode()
    )
    piece = b"10000\r\n" + b"x" * 65_536 + b"\r\n"
    client.sendall(piece * (50_000_000 // 65_536))
    assert client.recv(4096).startswith(b"HTTP/1.1 413")
    assert memory(server, "VmHWM") - before < 8
    assert stream(connection(server), lines(faulty("a")))[0] == 200
    assert server.log.read_text().count('"status":413') == told + 1


def test_an_upload_that_breaks_off_frees_its_place(server):
    for _ in range(6):
        client = server.connect()
        client.sendall(
            f"POST {STREAM_PATH} HTTP/1.1\r\nHost: x\r\nContent-Type: application/x-ndjson\r\n"
            f"Content-Length: 1000000\r\n\r\n".encode()
            + b'{"stock":'
        )
        client.close()
    time.sleep(0.5)
    assert stream(connection(server), lines(faulty("a")))[0] == 200
