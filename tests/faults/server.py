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
from http import HTTPStatus
from http.client import HTTPConnection, HTTPException
from pathlib import Path

ROOT = Path(__file__).resolve().parents[2]
CONFIGURATION = ROOT / "deploy" / "gunicorn.conf.py"

READ_ONLY = """
mount -o remount,bind,ro / && mount -t tmpfs -o size=32m tmpfs /dev/shm && exec "$@"
"""
"""Gives a command a filesystem of its own in which only memory can be written."""


class Server:
    """A running master: its port, its process, and what it wrote."""

    def __init__(self, port: int, process: subprocess.Popen[bytes], log: Path) -> None:
        self.port = port
        self.process = process
        self.log = log

    def connect(self, timeout: float = 10.0) -> socket.socket:
        """A new connection to the server."""
        return socket.create_connection(("127.0.0.1", self.port), timeout=timeout)

    def wait_until_ready(self, workers: int, seconds: float = 30.0) -> None:
        """Return once all workers have started and one says it is ready; fail with the server's own words."""
        deadline = time.monotonic() + seconds
        while len(self.workers()) < workers or not self._is_ready():
            if self.process.poll() is not None or time.monotonic() > deadline:
                words = self.log.read_text() if self.log.is_file() else "(its log is not kept)"
                raise RuntimeError(f"the server is not ready:\n{words}")
            time.sleep(0.02)

    def _is_ready(self) -> bool:
        connection = HTTPConnection("127.0.0.1", self.port, timeout=5)
        try:
            connection.request("GET", "/readyz")
            return connection.getresponse().status == HTTPStatus.OK
        except (OSError, HTTPException):
            return False
        finally:
            connection.close()

    def workers(self) -> list[int]:
        """The process numbers of the workers that live now."""
        try:
            children = Path(f"/proc/{self.process.pid}/task/{self.process.pid}/children").read_text()
        except OSError:
            return []
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


@contextmanager
def serving(
    folder: Path,
    application: str | None = None,
    *,
    workers: int = 1,
    environment: dict[str, str] | None = None,
    log: Path | None = None,
    read_only: bool = False,
) -> Iterator[Server]:
    """Serve an application (the service itself by default) until the block ends, and leave no process.

    Its log goes to a file in the folder unless another one is named. With `read_only` the whole filesystem but
    the memory-backed part is read-only to it, which takes root.
    """
    port = free_port()
    log = log or folder / f"server-{port}.log"
    values = dict(os.environ, WEB_CONCURRENCY=str(workers), LOOPSLACK_BIND=f"127.0.0.1:{port}")
    paths = [str(Path(__file__).parents[1]), os.environ.get("PYTHONPATH", "")]
    values["PYTHONPATH"] = os.pathsep.join(path for path in paths if path)
    values.pop("PROMETHEUS_MULTIPROC_DIR", None)
    values.update(environment or {})
    command = [str(Path(sys.executable).with_name("gunicorn")), "--config", str(CONFIGURATION)]
    command += [application] if application else []
    if read_only:
        command = ["unshare", "--mount", "sh", "-c", READ_ONLY, "sh", *command]
    with log.open("ab") as output:
        process = subprocess.Popen(command, cwd=ROOT, env=values, stdout=output, stderr=output)
    try:
        server = Server(port, process, log)
        server.wait_until_ready(workers)
        yield server
    finally:
        if process.poll() is None:
            process.terminate()
            try:
                process.wait(timeout=25)
            except subprocess.TimeoutExpired:
                process.kill()
                process.wait()
