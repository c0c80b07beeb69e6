"""How gunicorn serves loopslack: every value that differs from gunicorn's default, and why.

Times and sizes are settings of the environment where an operator may have to change them; DEVELOPERS.md lists
them. Measured figures behind a choice are own measurements on two cores, repeated by `sh tests/load/run.sh`.
"""

# ruff: noqa: ANN401, ARG001 - gunicorn calls its hooks with these arguments, whose classes have no types
import atexit
import gc
import os
import shutil
import tempfile
from pathlib import Path
from typing import Any

bind = os.environ.get("LOOPSLACK_BIND", "127.0.0.1:8000")
wsgi_app = "loopslack.app:app"
# gunicorn's own ASGI worker: it keeps to the limits on request line and header fields, which the usual
# alternative ignores. The guarded form adds time limits and the connection limit (see its module).
worker_class = "loopslack.worker.Worker"
workers = int(os.environ.get("WEB_CONCURRENCY") or len(os.sched_getaffinity(0)))
# The application shares a key's rate out among the workers, so it must know how many there are.
os.environ["WEB_CONCURRENCY"] = str(workers)
# The application is loaded once and forked: workers share its memory and start at once. A reload that must
# load new code therefore replaces the master (USR2, then TERM to the old one) or restarts the unit. For USR2
# start the program `gunicorn`, not `python -m gunicorn`: the new master would look for modules inside gunicorn.
preload_app = True

worker_connections = int(os.environ.get("LOOPSLACK_CONNECTIONS") or 256)
backlog = 2048  # a connection that finds the queue full is tried again by its system after 1, 3, 7 and 15 s
timeout = 30  # a worker whose event loop stands still this long is replaced
graceful_timeout = 20
# Must differ from the idle limit of a proxy in front, which should be the shorter one.
keepalive = int(os.environ.get("LOOPSLACK_KEEPALIVE_SECONDS") or 15)
max_requests = 0  # replacing a worker resets a few connections, and there is no leak to hide

asgi_lifespan = "on"
asgi_disconnect_grace_period = 1
limit_request_line = 4094
limit_request_fields = 50
limit_request_field_size = 8190

control_socket_disable = True  # otherwise one is created in the home directory, which may be read-only
accesslog = None  # the service writes its own line as JSON; gunicorn's costs about a third of a request
errorlog = "-"
forwarded_allow_ips = os.environ.get("FORWARDED_ALLOW_IPS", "127.0.0.1")

# Heartbeat files and metrics belong in memory: a slow disk must not look like a hanging worker.
_MEMORY = "/dev/shm"  # noqa: S108 - files and folders in it are made by mkstemp and mkdtemp
worker_tmp_dir = _MEMORY if os.access(_MEMORY, os.W_OK) else None

# The typesetter starts a thread for each core of the machine: on a large one more tasks than the unit or the container
# may have. It sets one sheet at a time for each worker, and workers share the cores.
os.environ.setdefault("RAYON_NUM_THREADS", "2")

# Several workers count into one directory, which must be named before the metrics library is imported. One
# made here is marked with its master: a master started by USR2 inherits the name, but not the directory.
_MAKER = "LOOPSLACK_METRICS_MADE_BY"
_this_master = str(os.getpid())
if os.environ.get(_MAKER, _this_master) != _this_master or not os.environ.get("PROMETHEUS_MULTIPROC_DIR"):
    os.environ["PROMETHEUS_MULTIPROC_DIR"] = tempfile.mkdtemp(prefix="loopslack-", dir=worker_tmp_dir)
    os.environ[_MAKER] = _this_master
_metrics_directory = Path(os.environ["PROMETHEUS_MULTIPROC_DIR"])


def _remove_metrics_directory() -> None:
    """Remove a metrics directory that this very process made, also where the service failed to load."""
    if os.environ.get(_MAKER) == str(os.getpid()):
        shutil.rmtree(_metrics_directory, ignore_errors=True)


atexit.register(_remove_metrics_directory)


# Loading makes a million objects that stay; walking through them again and again takes a tenth of the start.
gc.disable()


def on_starting(server: Any) -> None:
    """Forget the counts of an earlier run, but not those of a master that this one replaces."""
    _metrics_directory.mkdir(parents=True, exist_ok=True)
    if "GUNICORN_PID" not in os.environ:
        for counts in _metrics_directory.glob("*.db"):
            counts.unlink()


def when_ready(server: Any) -> None:
    """Take everything loaded so far out of the collector's walks: it stays for good."""
    gc.collect()
    gc.freeze()
    gc.enable()


def post_fork(server: Any, worker: Any) -> None:
    """Collect young objects less often: a batch makes many that live a moment, and takes half the time."""
    gc.set_threshold(50_000, 20, 50)


def child_exit(server: Any, worker: Any) -> None:
    """Stop counting the gauges of a worker that has gone."""
    from prometheus_client import multiprocess  # noqa: PLC0415 - reads the variable set above

    multiprocess.mark_process_dead(worker.pid)
