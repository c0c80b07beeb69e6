"""Starts the service as its systemd unit says, reloads it, stops it, and holds what it did against the unit's limits.

There is no systemd in a container or on a machine for builds. Here the unit's own command line runs with its own
environment on a filesystem that cannot be written to, without capabilities and without the means to gain any, under
a kernel that refuses writable memory that is executed. It must say that it is ready the way `Type=notify` waits for it,
`ExecReload` must renew its workers, and no system call may be one that the unit's filter kills for.

    python tests/deployment/unit.py UNIT FOLDER-OF-PROGRAMS
"""

from __future__ import annotations

import ctypes
import json
import os
import re
import resource
import shlex
import socket
import subprocess
import sys
import tempfile
import time
from collections.abc import Callable
from http.client import HTTPConnection
from pathlib import Path

from faults.server import ROOT, free_port

EXAMPLE = ROOT / "openapi" / "examples" / "loop-design.json"
LOCKED = """
mount -o remount,bind,ro / && mount -t tmpfs -o size=16m tmpfs /dev/shm && mount -t tmpfs -o size=16m tmpfs "$1" &&
shift && exec setpriv --no-new-privs --bounding-set=-all --inh-caps=-all strace -D -f -qq -o "$@"
"""
PR_SET_MDWE, MDWE_REFUSE_EXEC_GAIN = 65, 1


def unit_of(path: Path) -> dict[str, list[str]]:
    """The settings of a unit, each with its values in order."""
    found: dict[str, list[str]] = {}
    for line in path.read_text().splitlines():
        name, separator, value = line.partition("=")
        if separator and not line.startswith(("#", "[")):
            found.setdefault(name, []).append(value)
    return found


def allowed_calls(filters: list[str]) -> set[str]:
    """The system calls that a list of `SystemCallFilter` lines lets through."""
    allowed: set[str] = set()
    for line in filters:
        calls = {call for word in line.removeprefix("~").split() for call in expanded(word)}
        allowed = allowed - calls if line.startswith("~") else allowed | calls
    return allowed


def expanded(word: str) -> set[str]:
    """A system call, or all those of a group and of the groups within."""
    if not word.startswith("@"):
        return {word}
    text = subprocess.run(
        ["systemd-analyze", "syscall-filter", word], check=True, capture_output=True, text=True
    ).stdout
    words = [line.strip() for line in text.splitlines()[1:] if line.strip() and "#" not in line]
    return {call for inner in words for call in expanded(inner)}


def started(
    unit: dict[str, list[str]], programs: Path, port: int, record: Path, notify: str
) -> subprocess.Popen[bytes]:
    """The service, started by the unit's command line; what exists only where it is installed is taken from here."""
    (line,) = unit["ExecStart"]
    program, option, configuration = shlex.split(line)
    assert (Path(program).name, option) == ("gunicorn", "--config"), f"ExecStart is another command: {line}"
    command = [str(programs / "gunicorn"), option, str(ROOT / "deploy" / Path(configuration).name)]
    environment = dict(setting.split("=", 1) for setting in unit["Environment"])
    environment |= {
        "LOOPSLACK_BIND": f"127.0.0.1:{port}",
        "NOTIFY_SOCKET": notify,
        "PATH": os.environ["PATH"],
    }
    environment |= {"PYTHONPATH": str(ROOT / "service"), "PYTHONDONTWRITEBYTECODE": "1"}
    environment |= {"LOOPSLACK_SHED_LAG_SECONDS": "10"}  # it is slow under the record of its calls

    def limited() -> None:
        os.umask(int(unit["UMask"][0], 8))
        files = int(unit["LimitNOFILE"][0])
        resource.setrlimit(resource.RLIMIT_NOFILE, (files, files))
        if unit.get("MemoryDenyWriteExecute") == ["yes"]:
            refused = ctypes.CDLL(None).prctl(PR_SET_MDWE, MDWE_REFUSE_EXEC_GAIN, 0, 0, 0)
            assert refused == 0, "the kernel is older than 6.3 and cannot refuse memory written and executed"

    locked = ["unshare", "--mount", "sh", "-c", LOCKED, "sh", str(record.parent), str(record)]
    return subprocess.Popen(
        [*locked, *command],
        cwd="/",
        env=environment,
        preexec_fn=limited,  # noqa: PLW1509 - there is one thread here
    )


def becomes(fact: Callable[[], bool], seconds: float = 60.0) -> None:
    """Return once something is so."""
    deadline = time.monotonic() + seconds
    while not fact():
        if time.monotonic() > deadline:
            sys.exit(f"it did not come to pass within {seconds:g} s")
        time.sleep(0.05)


def asked(port: int, path: str, body: bytes | None = None) -> int:
    """The status of one request."""
    connection = HTTPConnection("127.0.0.1", port, timeout=60)
    connection.request("GET" if body is None else "POST", path, body, {"Content-Type": "application/json"})
    answer = connection.getresponse()
    answer.read()
    return answer.status


def workers_of(process: int) -> set[str]:
    """The workers of a master."""
    return set(Path(f"/proc/{process}/task/{process}/children").read_text().split())


def main(path: str, programs: str) -> None:
    """Everything in the order of a life."""
    unit = unit_of(Path(path))
    design = json.loads(EXAMPLE.read_bytes())
    questions = [
        ("/readyz", None),
        ("/v1/loop-design", design),
        ("/v1/calculation-sheet/pdf", {"design": design}),
        ("/v1/loop-design/batch", {"designs": [{"id": "a", **design}]}),
        ("/metrics", None),
    ]
    port = free_port()
    with socket.socket(socket.AF_UNIX, socket.SOCK_DGRAM) as notes, tempfile.TemporaryDirectory() as folder:
        notes.bind(f"\0loopslack-{os.getpid()}")
        notes.settimeout(60)
        record = Path(folder) / "calls"
        process = started(unit, Path(programs), port, record, f"@loopslack-{os.getpid()}")
        try:
            while b"READY=1" not in notes.recv(4096):
                pass
            becomes(lambda: bool(workers_of(process.pid)))
            becomes(lambda: answers(port))
            for where, question in questions:
                status = asked(port, where, None if question is None else json.dumps(question).encode())
                print(f"{where}: {status}")
                assert status == 200
            before = workers_of(process.pid)
            (reload,) = unit["ExecReload"]
            subprocess.run(shlex.split(reload.replace("$MAINPID", str(process.pid))), check=True)
            becomes(lambda: bool(workers_of(process.pid)) and not before & workers_of(process.pid))
            becomes(lambda: answers(port))
            calls = Path(f"/proc/{process.pid}/root{record}").read_text()
            began = time.monotonic()
            process.terminate()
            status = process.wait(timeout=float(unit["TimeoutStopSec"][0]))
            print(f"reloaded, and stopped with exit code {status} in {time.monotonic() - began:.1f} s")
            assert status == 0
        finally:
            process.kill()
    used = set(re.findall(r"^\d+ +([a-z_0-9]+)\(", calls, re.MULTILINE))
    assert {"setpriority", "accept4"} <= used, "the record of system calls is not whole"
    refused = used - allowed_calls(unit["SystemCallFilter"]) - OF_THE_START
    print(
        f"{len(used)} different system calls, {len(refused)} that the unit's filter kills for: {sorted(refused)}"
    )
    assert not refused


OF_THE_START = {"execve"}
"""Calls that bring the program to run before the filter is in force, where they are not allowed anyway."""


def answers(port: int) -> bool:
    """Whether the service is ready."""
    try:
        return asked(port, "/readyz") == 200
    except OSError:
        return False


if __name__ == "__main__":
    main(*sys.argv[1:])
