"""Files of designs, and a run of the command in a process of its own."""

from __future__ import annotations

import json
import os
import signal
import subprocess
import sys
from pathlib import Path
from typing import Any

from many.designs import HEAD, design, faulty, lines

SERVICE = Path(__file__).parents[2] / "service"


def questions(folder: Path, count: int, *, bad: int = 0, head: Any = HEAD) -> Path:
    """A file of designs; of every ten, so many are faulty."""
    path = folder / "in.ndjson"
    path.write_bytes(lines(*(asked(number, bad) for number in range(count)), head=head))
    return path


def asked(number: int, bad: int) -> dict[str, Any]:
    name = f"q-{number}"
    return faulty(name) if number % 10 < bad else design(name)


def command(*words: Any, module: str = "loopslack.bulk") -> list[str]:
    return [sys.executable, "-m", module, *map(str, words)]


def environment() -> dict[str, str]:
    paths = [str(SERVICE), str(Path(__file__).parents[1]), os.environ.get("PYTHONPATH", "")]
    return dict(os.environ, PYTHONPATH=os.pathsep.join(path for path in paths if path))


def run(*words: Any, module: str = "loopslack.bulk", **more: Any) -> subprocess.CompletedProcess[bytes]:
    """Run a command to its end."""
    return subprocess.run(
        command(*words, module=module),
        env=environment(),
        capture_output=True,
        check=False,
        timeout=120,
        **more,
    )


def start(*words: Any) -> subprocess.Popen[bytes]:
    """Start a run that a test will end."""
    # A suite that runs in the background of a shell ignores the interrupt, and its children would inherit that.
    before = signal.signal(signal.SIGINT, signal.default_int_handler)
    try:
        return subprocess.Popen(command(*words), env=environment(), stderr=subprocess.PIPE)
    finally:
        signal.signal(signal.SIGINT, before)


def answers(path: Path) -> list[dict[str, Any]]:
    return [json.loads(line) for line in path.read_bytes().splitlines()]
