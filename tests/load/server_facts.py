"""What the operating system says about a server: its processes' memory, descriptors and processor time."""

from __future__ import annotations

import os
from pathlib import Path


def proportional_memory(process: int) -> float:
    """Proportional set size, MB: what a process would free if it went."""
    for line in Path(f"/proc/{process}/smaps_rollup").read_text().splitlines():
        if line.startswith("Pss:"):
            return int(line.split()[1]) * 1024 / 1e6
    raise RuntimeError(f"the system does not tell the memory of process {process}")


def descriptors(process: int) -> int:
    """How many files and sockets a process holds open."""
    return len(os.listdir(f"/proc/{process}/fd"))  # noqa: PTH208 - only counted


def processor_seconds(process: int) -> float:
    """Processor time a process has used."""
    return int(Path(f"/proc/{process}/schedstat").read_text().split()[0]) / 1e9


def pin(process: int, cores: set[int]) -> None:
    """Keep a process, and what it starts later, on some cores, where there are that many."""
    present = os.sched_getaffinity(0)
    if cores <= present:
        os.sched_setaffinity(process, cores)
