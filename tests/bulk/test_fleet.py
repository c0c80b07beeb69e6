"""The fleet: the same file, the same bytes, on a cluster of processes that come and go."""

import os
import signal
import subprocess
import sys
import time

import pytest
from distributed import Client, LocalCluster

from bulk.files import SERVICE, environment, questions, run
from loopslack.bulk.crew import Alone
from loopslack.bulk.progress import Progress
from loopslack.bulk.run import answer_file

SCRIPT = SERVICE.parent / "deploy" / "fleet" / "designs_on_dask.py"


@pytest.fixture(scope="module")
def address():
    with pytest.MonkeyPatch.context() as patch:
        patch.setenv("PYTHONPATH", environment()["PYTHONPATH"])
        with LocalCluster(
            n_workers=2, threads_per_worker=1, host="127.0.0.1", dashboard_address=None, silence_logs=50
        ) as cluster:
            yield cluster.scheduler_address


def start(address, source, target):
    return subprocess.Popen(
        [sys.executable, SCRIPT, address, source, target],
        env=environment(),
        stdout=subprocess.PIPE,
        stderr=subprocess.STDOUT,
    )


def alone(folder, count, **more):
    source = questions(folder, count, **more)
    answer_file(source, folder / "alone", Alone(), Progress(None, 1))
    return source, (folder / "alone").read_bytes()


def wait_for(target, length):
    deadline = time.monotonic() + 60
    while not (target.exists() and target.stat().st_size > length) and time.monotonic() < deadline:
        time.sleep(0.02)


def test_a_cluster_gives_the_same_bytes_as_one_process(tmp_path, address):
    source, text = alone(tmp_path, 90, bad=2)
    ran = start(address, source, tmp_path / "out")
    told = ran.communicate(timeout=120)[0]
    assert ran.returncode == 0, told
    assert (tmp_path / "out").read_bytes() == text
    assert not (tmp_path / "out.checkpoint").exists()


def test_a_worker_that_is_lost_costs_no_design(tmp_path, address):
    source, text = alone(tmp_path, 96)
    ran = start(address, source, tmp_path / "out")
    wait_for(tmp_path / "out", 10_000)
    with Client(address) as client:
        process = next(iter(client.run(os.getpid).values()))
    os.kill(process, signal.SIGKILL)
    told = ran.communicate(timeout=120)[0]
    assert ran.returncode == 0, told
    assert (tmp_path / "out").read_bytes() == text


def test_a_run_ended_on_the_cluster_is_finished_on_one_machine(tmp_path, address):
    source, text = alone(tmp_path, 96)
    ran = start(address, source, tmp_path / "out")
    wait_for(tmp_path / "out", 10_000)
    ran.send_signal(signal.SIGKILL)
    ran.communicate()
    begun = (tmp_path / "out").read_bytes()
    assert 0 < len(begun) < len(text)
    assert run(source, tmp_path / "out", "--processes", 1).returncode in (0, 1)
    assert (tmp_path / "out").read_bytes() == text


def test_a_worker_with_another_version_answers_nothing(tmp_path, address):
    source = questions(tmp_path, 3)
    with Client(address) as client:
        client.run(_pretend)
        try:
            ran = start(address, source, tmp_path / "out")
            told = ran.communicate(timeout=120)[0].decode()
        finally:
            client.run(_be_honest)
    assert ran.returncode != 0
    assert "another" in told
    assert (tmp_path / "out").read_bytes() == b""


def _pretend():
    from loopslack.bulk import target  # noqa: PLC0415 - runs in the worker

    target.honest, target.maker = target.maker, lambda: "another version"


def _be_honest():
    from loopslack.bulk import target  # noqa: PLC0415 - runs in the worker

    target.maker = target.honest
