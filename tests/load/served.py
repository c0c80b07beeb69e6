"""What the served service does: throughput beside a bare route, scaling, latency under mixed load and overload,
start and memory. Clients run in this process, on the second core where there is one.
"""

from __future__ import annotations

import asyncio
import json
import os
import statistics
import time
from collections.abc import Iterator
from concurrent.futures import ProcessPoolExecutor
from contextlib import contextmanager
from pathlib import Path

import msgspec

from faults.server import Server, serving
from load.client import Report, Target, closed_loop, open_loop
from load.outcome import Figure, Run, at_least, at_most
from load.server_facts import descriptors, family, pin, processor_seconds, proportional_memory

QUIET = {"LOOPSLACK_ACCESS_LOG": "false"}
PATIENT = QUIET | {"LOOPSLACK_SHED_LAG_SECONDS": "10"}
"""For measuring capacity: a server that is kept busy on purpose must not refuse."""


@contextmanager
def service(run: Run, workers: int = 1, *, patient: bool = False) -> Iterator[Server]:
    """The service itself, without access log."""
    with serving(run.folder, workers=workers, environment=PATIENT if patient else QUIET) as server:
        yield server


def throughput(run: Run) -> list[Figure]:
    """Requests per second of holding designs beside a bare route, one worker each, in turns on one core."""
    corpus = run.corpus
    bodies = corpus.holding or corpus.bodies[:1]
    files = {"LOAD_BODIES": run.folder / "bodies.json", "LOAD_ANSWERS": run.folder / "answers.json"}
    files["LOAD_BODIES"].write_bytes(msgspec.json.encode([body.decode() for body in bodies]))
    files["LOAD_ANSWERS"].write_bytes(b"[" + b",".join(corpus.answers[body] for body in bodies) + b"]")
    environment = {name: str(path) for name, path in files.items()} | QUIET
    ratios, rates = [], []
    with (
        service(run, patient=True) as real,
        serving(run.folder, "load.bare:app", environment=environment) as bare,
    ):
        for server in (real, bare):
            for process in (process for worker in server.workers() for process in family(worker)):
                pin(process, {0})
        for number in range(3 if run.short else 8):
            rate = {}
            for server in (real, bare):
                right = corpus.right if number == 0 else None
                target = Target(server.port, bodies=bodies, right=right)
                report = asyncio.run(closed_loop(target, 8, run.seconds(3.0)))
                run.expect_answers("throughput", report)
                rate[server.port] = report.rate
            rates.append(rate[real.port])
            ratios.append(rate[real.port] / rate[bare.port])
    spread = f"{min(ratios):.3f}-{max(ratios):.3f}"
    return [
        at_least("requests/s beside a bare route", statistics.median(ratios), 0.5),
        Figure("  least and largest of the rounds", spread),
        Figure("holding designs served, one core", f"{statistics.median(rates):.0f} /s"),
    ]


def two_workers(run: Run) -> list[Figure]:
    """What two workers serve over what one does, in requests per second of processor time.

    The callers need a core of their own, and the machine may have other work: by the clock two workers cannot show
    on two cores what they can do. What they do with the time they get is shown by any machine: requests per second of
    a worker's processor time, two beside one, times how evenly the two are busy. A lock between them, or memory that
    is too slow for both, would lower the first; a worker that gets no connections, the second.
    """
    by_clock, by_processor = [], []
    with service(run, patient=True) as one, service(run, workers=2, patient=True) as two:
        for _ in range(2 if run.short else 5):
            rate, economy, evenness = [], [], 1.0
            for server in (one, two):
                target = Target(server.port, bodies=run.corpus.bodies)
                before = list(map(processor_seconds, server.workers()))
                report = asyncio.run(closed_loop(target, 16, run.seconds(4.0)))
                after = map(processor_seconds, server.workers())
                spent = [later - earlier for earlier, later in zip(before, after, strict=True)]
                run.expect_answers("two workers", report)
                rate.append(report.rate)
                economy.append(len(report.served) / sum(spent))
                evenness = sum(spent) / max(spent)
            by_clock.append(rate[1] / rate[0])
            by_processor.append(economy[1] / economy[0] * evenness)
    return [
        at_least("two workers over one, by processor time", statistics.median(by_processor), 1.8),
        Figure("  by the clock, callers and all on this machine", f"{statistics.median(by_clock):.2f}"),
    ]


def mixed_load(run: Run) -> list[Figure]:
    """The p99 of small requests while batches, courses and sheets run, over that of quiet times, in turns."""
    rate, seconds = 50.0, run.seconds(4.5)
    quiet, busy = Report(), Report()
    with (
        service(run, workers=2) as server,
        ProcessPoolExecutor(1, initializer=os.nice, initargs=(5,)) as others,
    ):
        example = json.loads(Path("openapi/examples/loop-design.json").read_bytes())
        small = {"fluid": example["fluid"], "startTemperature": {"value": 15, "unit": "degC"}}
        small["endTemperature"] = {"value": 120, "unit": "degC"}
        asked = Target(server.port, "/v1/expansion", [msgspec.json.encode(small)])
        heavy = heavy_targets(server, example, run)
        meanwhile = [Report() for _ in heavy]
        others.submit(callers_of, heavy, 0.5).result()  # what is loaded at the first question is loaded
        for _ in range(6):
            quiet.add(asyncio.run(open_loop(asked, rate, seconds)))
            busily = others.submit(callers_of, heavy, seconds)
            busy.add(asyncio.run(open_loop(asked, rate, seconds)))
            for total, part in zip(meanwhile, busily.result(), strict=True):
                total.add(part)
    run.expect_answers("small requests, quiet", quiet, refusals=True)
    run.expect_answers("small requests, busy", busy, refusals=True)
    table = [
        Figure("p99 of small requests, quiet", f"{quiet.latency(0.99):.1f} ms"),
        Figure("p99 of small requests, busy", f"{busy.latency(0.99):.1f} ms"),
        at_most("p99 busy over quiet", busy.latency(0.99) / quiet.latency(0.99), 3.0),
        Figure("  the same for the median", f"{busy.latency(0.5) / quiet.latency(0.5):.2f}"),
        Figure("small requests refused, quiet and busy", f"{len(quiet.refused)}, {len(busy.refused)}"),
    ]
    for target, report in zip(heavy, meanwhile, strict=True):
        run.expect_answers(target.path, report, refusals=True)
        table.append(Figure(f"  meanwhile {target.path}", f"{len(report.served)} served"))
    return table


def callers_of(targets: list[Target], seconds: float) -> list[Report]:
    """One busy caller for each target; in a process of their own, so that they hold up nobody else's clock."""

    async def all_of_them() -> list[Report]:
        return list(await asyncio.gather(*(closed_loop(target, 1, seconds) for target in targets)))

    return asyncio.run(all_of_them())


def heavy_targets(server: Server, example: dict[str, object], run: Run) -> list[Target]:
    """A batch, a course and a sheet."""
    designs = [json.loads(body) | {"id": str(number)} for number, body in enumerate(run.corpus.bodies)]
    return [
        Target(server.port, "/v1/loop-design/batch", [msgspec.json.encode({"designs": designs})]),
        Target(server.port, "/v1/stagnation-course", [course_question()]),
        Target(server.port, "/v1/calculation-sheet/pdf", [msgspec.json.encode({"design": example})]),
    ]


def course_question() -> bytes:
    """The question of the published example."""
    (question,) = sorted(Path("openapi/examples/computeStagnationCourse").glob("clear-day.question.json"))
    return question.read_bytes()


def overload(run: Run) -> list[Figure]:
    """Twice what two workers can serve, and what comes of the requests."""
    corpus = run.corpus
    with service(run, workers=2, patient=True) as server:
        target = Target(server.port, bodies=corpus.bodies)
        capacity = asyncio.run(closed_loop(target, 16, run.seconds(4.0))).rate
    with service(run, workers=2) as server:
        target = Target(server.port, bodies=corpus.bodies)
        target.right = corpus.right
        report = asyncio.run(open_loop(target, 2.0 * capacity, run.seconds(10.0)))
        run.expect_answers("overload", report, refusals=True)
        after = asyncio.run(open_loop(target, 0.3 * capacity, run.seconds(4.0)))
        run.expect_answers("after the overload", after, refusals=True)
    return [
        at_most("p99 of the served, 2x overload", report.latency(0.99), 400.0, "ms"),
        Figure("served under 2x overload", f"{report.rate / capacity:.2f} of capacity"),
        Figure("refused with 503", f"{len(report.refused)} of {sum(report.statuses.values())}"),
        Figure("p99 after the overload", f"{after.latency(0.99):.0f} ms, {len(after.refused)} refused"),
    ]


def cold_start(run: Run) -> list[Figure]:
    """Seconds from the command to ready."""
    times = []
    for _ in range(3 if run.short else 5):
        began = time.monotonic()
        with service(run, workers=2):
            times.append(time.monotonic() - began)
    return [
        at_most("cold start to ready", statistics.median(times), 2.0, "s"),
        Figure("  the quickest", f"{min(times):.2f} s"),
    ]


def memory(run: Run) -> list[Figure]:
    """Proportional memory of a worker after designs and after sheets, and whether it grows."""
    requests = 300 if run.short else 1000
    example = json.loads(Path("openapi/examples/loop-design.json").read_bytes())
    sheet = msgspec.json.encode({"design": example})
    with service(run, workers=2) as server:
        designs = asyncio.run(many(Target(server.port, bodies=run.corpus.bodies), requests))
        run.expect_answers("memory, designs", designs)
        before = max(map(proportional_memory, server.workers()))
        target = Target(server.port, "/v1/calculation-sheet/pdf", [sheet], timeout=60)
        half = asyncio.run(many(target, requests // 2))
        run.expect_answers("memory, sheets", half, refusals=True)
        middle = max(map(proportional_memory, server.workers()))
        run.expect_answers("memory, sheets", asyncio.run(many(target, requests // 2)), refusals=True)
        after = max(map(proportional_memory, server.workers()))
        held = max(map(descriptors, server.workers()))
    return [
        at_most("memory of a worker, no sheets", before, 80.0, "MB"),
        at_most(f"memory of a worker, {requests // 2} sheets each", after, 160.0, "MB"),
        at_most("growth over the second half", after - middle, 3.0, "MB"),
        Figure("descriptors held by a worker", f"{held}"),
    ]


async def many(target: Target, requests: int) -> Report:
    """Two busy callers until a number of requests has been answered."""
    total = Report()
    while sum(total.statuses.values()) + total.failed < requests:
        total.add(await closed_loop(target, 2, 1.0))
    return total
