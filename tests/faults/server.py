"""A gunicorn on a free loopback port for one test, started from the project's own configuration."""

from __future__ import annotations

import os
import signal
import socket
import subprocess
import sys
import time
from collections.abc import Iterator
from contextlib import contextmanager
from pathlib import Path

ROOT = Path(__file__).resolve().parents[2]
CONFIGURATION = ROOT / "deploy" / "gunicorn.conf.py"


class Server:
    """A running master: its port, its process, and what it wrote."""

    def __init__(self, port: int, process: subprocess.Popen[bytes], log: Path) -> None:
        self.port = port
        self.process = process
        self.log = log

    def connect(self, timeout: float = 10.0) -> socket.socket:
        """A new connection to the server."""
        return socket.create_connection(("127.0.0.1", self.port), timeout=timeout)

    def workers(self) -> list[int]:
        """The process numbers of the workers that live now."""
        children = Path(f"/proc/{self.process.pid}/task/{self.process.pid}/children").read_text()
        return [int(number) for number in children.split()]

    def stop(self, *, within: float) -> float:
        """Ask for a graceful stop; answers the seconds it took, and fails if it takes longer than allowed."""
        began = time.monotonic()
        self.process.send_signal(signal.SIGTERM)
        self.process.wait(timeout=within)
        return time.monotonic() - began


def free_port() -> int:
    """A loopback port nobody listens on at this moment."""
    with socket.socket() as probe:
        probe.bind(("127.0.0.1", 0))
        port: int = probe.getsockname()[1]
        return port


def accepts(port: int) -> bool:
    """Whether something listens on the port."""
    try:
        socket.create_connection(("127.0.0.1", port), timeout=1).close()
    except OSError:
        return False
    return True


@contextmanager
def serving(
    folder: Path,
    application: str | None = None,
    *,
    workers: int = 1,
    environment: dict[str, str] | None = None,
) -> Iterator[Server]:
    """Serve an application (the service itself by default) until the block ends, and leave no process."""
    port = free_port()
    log = folder / f"server-{port}.log"
    values = dict(os.environ, WEB_CONCURRENCY=str(workers), LOOPSLACK_BIND=f"127.0.0.1:{port}")
    paths = [str(Path(__file__).parents[1]), os.environ.get("PYTHONPATH", "")]
    values["PYTHONPATH"] = os.pathsep.join(path for path in paths if path)
    values.pop("PROMETHEUS_MULTIPROC_DIR", None)
    values.update(environment or {})
    command = [sys.executable, "-m", "gunicorn", "--config", str(CONFIGURATION)]
    command += [application] if application else []
    with log.open("wb") as output:
        process = subprocess.Popen(command, cwd=ROOT, env=values, stdout=output, stderr=output)
    try:
        wait_until_accepting(process, port, log)
        yield Server(port, process, log)
    finally:
        if process.poll() is None:
            process.terminate()
            try:
                process.wait(timeout=25)
            except subprocess.TimeoutExpired:
                process.kill()
                process.wait()


def wait_until_accepting(
    process: subprocess.Popen[bytes], port: int, log: Path, seconds: float = 30.0
) -> None:
    """Return once the port accepts; fail with the server's own words if it stops or takes too long."""
    deadline = time.monotonic() + seconds
    while not accepts(port):
        if process.poll() is not None or time.monotonic() > deadline:
            raise RuntimeError(f"the server does not listen:\n{log.read_text()}")
        time.sleep(0.05)
