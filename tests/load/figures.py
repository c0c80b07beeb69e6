"""Prints the figures of speed, memory and overload, each beside its bound: `sh tests/load/run.sh [--short] [NAME...]`.

Ratios are taken within one run on one machine, so that they mean the same on another. A figure that misses its
bound is printed as a miss, with a profile where one helps; it does not end the run with an error, since a shared
machine must not. Wrong answers, answers that never came and faults of the service do.
"""

from __future__ import annotations

import argparse
import os
import sys
import tempfile
import time
from collections.abc import Callable
from pathlib import Path

from load import in_process, served
from load.outcome import Figure, Run

FIGURES: dict[str, Callable[[Run], list[Figure]]] = {
    "in-process": in_process.figures,
    "throughput": served.throughput,
    "workers": served.two_workers,
    "mixed": served.mixed_load,
    "overload": served.overload,
    "start": served.cold_start,
    "memory": served.memory,
}


def main(arguments: list[str] | None = None) -> int:
    """Measure what is asked for, all by default, and print the table."""
    parser = argparse.ArgumentParser(prog="sh tests/load/run.sh", description=__doc__)
    parser.add_argument("names", nargs="*", help=f"of {', '.join(FIGURES)}; all if none")
    parser.add_argument("--short", action="store_true", help="fewer and shorter rounds")
    asked = parser.parse_args(arguments)
    unknown = set(asked.names) - set(FIGURES)
    if unknown:
        parser.error(f"no figure is called {', '.join(sorted(unknown))}; there are {', '.join(FIGURES)}")
    print(f"{os.cpu_count()} cores, load {os.getloadavg()[0]:.1f}, Python {sys.version.split()[0]}")
    with tempfile.TemporaryDirectory(prefix="loopslack-load-") as folder:
        run = Run(folder=Path(folder), short=asked.short)
        print(f"Questions by verdict: {dict(run.corpus.verdicts)}")
        table: list[Figure] = []
        for name in asked.names or FIGURES:
            began = time.monotonic()
            table += FIGURES[name](run)
            print(f"{name}: measured in {time.monotonic() - began:.0f} s", flush=True)
    print()
    width = max(len(figure.name) for figure in table)
    for figure in table:
        print(f"{figure.name:<{width}}  {figure.found:>12}  {figure.bound:<16} {figure.outcome}")
    for profile in run.profiles:
        print(f"\n{profile}")
    for fault in run.faults:
        print(f"FAULT: {fault}")
    return 1 if run.faults else 0


if __name__ == "__main__":
    sys.exit(main())
