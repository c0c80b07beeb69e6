"""What the operating system says about a server: its processes' memory, descriptors and processor time."""

from __future__ import annotations

import os
from pathlib import Path


def children(process: int) -> list[int]:
    """The processes that a process has started and that are still there; of one that has gone, none."""
    try:
        return [int(child) for child in Path(f"/proc/{process}/task/{process}/children").read_text().split()]
    except OSError:
        return []


def family(process: int) -> list[int]:
    """A process and all that descend from it: a worker, and what works beside it."""
    return [process, *(number for child in children(process) for number in family(child))]


def proportional_memory(worker: int) -> float:
    """Proportional set size of a worker and what works beside it, MB: what would be free if it went."""
    return sum(map(_proportional_memory, family(worker)))


def _proportional_memory(process: int) -> float:
    try:
        text = Path(f"/proc/{process}/smaps_rollup").read_text()
    except OSError:  # it has gone meanwhile
        return 0.0
    return (
        next((int(line.split()[1]) for line in text.splitlines() if line.startswith("Pss:")), 0) * 1024 / 1e6
    )


def descriptors(worker: int) -> int:
    """How many files and sockets a worker and what works beside it hold open."""
    return sum(len(os.listdir(f"/proc/{process}/fd")) for process in family(worker))  # noqa: PTH208 - only counted


def processor_seconds(worker: int) -> float:
    """Processor time a worker and what works beside it have used so far, of those that still run."""
    return sum(
        int(Path(f"/proc/{process}/schedstat").read_text().split()[0]) / 1e9 for process in family(worker)
    )


def never_accepted() -> int:
    """Connections the system turned away so far because a queue of those to be accepted was full."""
    names, values = [
        line.split()
        for line in Path("/proc/net/netstat").read_text().splitlines()
        if line.startswith("TcpExt:")
    ]
    return int(values[names.index("ListenDrops")])


def pin(process: int, cores: set[int]) -> None:
    """Keep a process, and what it starts later, on some cores, where there are that many."""
    present = os.sched_getaffinity(0)
    if cores <= present:
        os.sched_setaffinity(process, cores)
