"""A file of designs into a file of answers: in order, on several processes, and on again after any interruption."""

import json
import os
import signal
import subprocess
import sys
import time
import tracemalloc
from pathlib import Path

import pytest

from bulk.files import answers, asked, environment, questions, run, start
from loopslack.bulk.blocks import BLOCK_DESIGNS, LONGEST_LINE, Answered, Source, answer_block
from loopslack.bulk.crew import Alone
from loopslack.bulk.progress import Progress
from loopslack.bulk.run import answer_file
from loopslack.bulk.target import CannotResumeError
from loopslack.contract.refusals import Refused
from many.designs import HEAD, STREAM_PATH, design, faulty, lines
from many.service import serving

SILENT = Progress(None, 1)


class Counting(Alone):
    """Answers alone, notes what it was asked, and ends after so many blocks."""

    def __init__(self, most=1000):
        self.most, self.indices = most, []

    def answer(self, head, blocks):
        for place, block in enumerate(blocks):
            if place == self.most:
                raise KeyboardInterrupt
            self.indices += range(block.first, block.first + len(block.lines))
            yield answer_block(head, block)


def whole(folder, count, **more):
    """The answers of an uninterrupted run."""
    source = questions(folder, count, **more)
    target = folder / "whole.ndjson"
    answer_file(source, target, Alone(), SILENT)
    return source, target.read_bytes()


def test_the_lines_are_those_of_the_stream_of_the_service(tmp_path):
    source, text = whole(tmp_path, 25, bad=2)
    with serving() as client:
        streamed = client.post(
            STREAM_PATH, content=source.read_bytes(), headers={"content-type": "application/x-ndjson"}
        )
    assert text == streamed.content


def test_several_processes_give_the_same_bytes_as_one(tmp_path):
    source, text = whole(tmp_path, 70, bad=3)
    ran = run(source, tmp_path / "out", "--processes", 3)
    assert ran.returncode == 2
    assert (tmp_path / "out").read_bytes() == text
    assert b"70 designs" in ran.stderr
    assert b"21 refused" in ran.stderr
    assert not (tmp_path / "out.checkpoint").exists()


@pytest.mark.parametrize("blocks", [0, 1, 3])
def test_a_run_goes_on_where_it_was_interrupted_and_computes_nothing_twice(tmp_path, blocks):
    source, text = whole(tmp_path, 5 * BLOCK_DESIGNS + 3)
    target = tmp_path / "out"
    with pytest.raises(KeyboardInterrupt):
        answer_file(source, target, Counting(blocks), SILENT)
    assert target.read_bytes().count(b"\n") == blocks * BLOCK_DESIGNS
    crew = Counting()
    answer_file(source, target, crew, SILENT)
    assert crew.indices == list(range(blocks * BLOCK_DESIGNS, 5 * BLOCK_DESIGNS + 3))
    assert target.read_bytes() == text


@pytest.mark.parametrize("torn", [1, 500, 40_000])
def test_a_line_that_was_torn_is_written_again_and_the_whole_ones_before_it_are_kept(tmp_path, torn):
    source, text = whole(tmp_path, 2 * BLOCK_DESIGNS)
    target = tmp_path / "out"
    with pytest.raises(KeyboardInterrupt):
        answer_file(source, target, Counting(1), SILENT)
    more = text[target.stat().st_size :][:torn]
    with target.open("ab") as file:
        file.write(more)  # what a killed process wrote after its last checkpoint
    crew = Counting()
    answer_file(source, target, crew, SILENT)
    assert crew.indices == list(range(BLOCK_DESIGNS + more.count(b"\n"), 2 * BLOCK_DESIGNS))
    assert target.read_bytes() == text


def test_a_file_that_ends_in_rubbish_is_mended(tmp_path):
    source, text = whole(tmp_path, BLOCK_DESIGNS + 2)
    target = tmp_path / "out"
    with pytest.raises(KeyboardInterrupt):
        answer_file(source, target, Counting(1), SILENT)
    with target.open("ab") as file:
        file.write(b"\0" * 5000 + b'\n{"index":1,"id":"q-1"}\n')
    answer_file(source, target, Alone(), SILENT)
    assert target.read_bytes() == text


def test_a_run_that_was_killed_is_finished_by_the_next(tmp_path):
    source, text = whole(tmp_path, 110)
    target = tmp_path / "out"
    first = start(source, target, "--processes", 2)
    deadline = time.monotonic() + 60
    while not (target.exists() and target.stat().st_size > 200_000) and time.monotonic() < deadline:
        time.sleep(0.02)
    children = Path(f"/proc/{first.pid}/task/{first.pid}/children").read_text().split()
    first.send_signal(signal.SIGKILL)
    first.communicate()
    assert 200_000 < target.stat().st_size < len(text)
    ended = time.monotonic() + 10
    while any(alive(child) for child in children) and time.monotonic() < ended:
        time.sleep(0.05)
    assert not any(alive(child) for child in children)
    assert run(source, target, "--processes", 2).returncode in (0, 1)
    assert target.read_bytes() == text


def alive(process):
    try:
        return Path(f"/proc/{process}/stat").read_text().rpartition(")")[2].split()[0] != "Z"
    except OSError:
        return False


@pytest.mark.parametrize("sent", [signal.SIGINT, signal.SIGTERM])
def test_a_run_that_is_told_to_end_says_how_to_go_on(tmp_path, sent):
    source = questions(tmp_path, 1000)
    target = tmp_path / "out"
    first = start(source, target, "--processes", 2, "--quiet")
    deadline = time.monotonic() + 60
    while not (target.exists() and target.stat().st_size > 100_000) and time.monotonic() < deadline:
        time.sleep(0.02)
    first.send_signal(sent)
    told = first.communicate(timeout=30)[1].decode()
    assert first.returncode == 3
    assert "Run it again" in told
    assert "Traceback" not in told
    checkpoint = json.loads((tmp_path / "out.checkpoint").read_bytes())
    assert checkpoint["length"] == target.stat().st_size


def test_a_process_that_is_killed_is_replaced_and_nothing_is_lost(tmp_path):
    source, text = whole(tmp_path, 110)
    target = tmp_path / "out"
    running = start(source, target, "--processes", 2, "--quiet")
    deadline = time.monotonic() + 60
    while not (target.exists() and target.stat().st_size > 50_000) and time.monotonic() < deadline:
        time.sleep(0.02)
    for child in Path(f"/proc/{running.pid}/task/{running.pid}/children").read_text().split():
        if b"multiprocessing.spawn" in Path(f"/proc/{child}/cmdline").read_bytes():
            os.kill(int(child), signal.SIGKILL)
            break
    else:
        raise AssertionError("there is no process to kill")
    assert running.wait(timeout=60) in (0, 1), running.communicate()
    assert target.read_bytes() == text


def interrupted(tmp_path):
    source = questions(tmp_path, 3 * BLOCK_DESIGNS)
    target = tmp_path / "out"
    with pytest.raises(KeyboardInterrupt):
        answer_file(source, target, Counting(2), SILENT)
    return source, target


def test_answers_are_not_gone_on_with_once_their_questions_have_changed(tmp_path):
    source, target = interrupted(tmp_path)
    text = source.read_bytes()
    source.write_bytes(text.replace(b'"q-3"', b'"Q-3"'))
    with pytest.raises(CannotResumeError, match="have changed"):
        answer_file(source, target, Alone(), SILENT)
    source.write_bytes(text.replace(b'"EV-50"', b'"EV-51"', 1))
    with pytest.raises(CannotResumeError, match="first line"):
        answer_file(source, target, Alone(), SILENT)


def test_questions_added_at_the_end_are_answered_after_the_others(tmp_path):
    source, target = interrupted(tmp_path)
    with source.open("ab") as file:
        file.write(json.dumps(faulty("late")).encode() + b"\n")
    crew = Counting()
    tally = answer_file(source, target, crew, SILENT)
    assert crew.indices[0] == 2 * BLOCK_DESIGNS
    assert tally.designs == 3 * BLOCK_DESIGNS + 1
    assert answers(target)[-2]["id"] == "late"


def test_answers_of_another_version_are_not_mixed_in(tmp_path, monkeypatch):
    source, target = interrupted(tmp_path)
    monkeypatch.setattr("loopslack.bulk.target.maker", lambda: "another")
    with pytest.raises(CannotResumeError, match="version"):
        answer_file(source, target, Alone(), SILENT)


def test_a_file_that_this_command_did_not_write_is_left_alone(tmp_path):
    source = questions(tmp_path, 3)
    target = tmp_path / "precious"
    target.write_text("not mine\n")
    with pytest.raises(CannotResumeError):
        answer_file(source, target, Alone(), SILENT)
    assert target.read_text() == "not mine\n"
    answer_file(source, target, Alone(), SILENT, afresh=True)
    assert len(answers(target)) == 4


def test_a_complete_file_is_left_alone(tmp_path):
    source, text = whole(tmp_path, 3)
    ran = run(source, tmp_path / "whole.ndjson")
    assert ran.returncode == 2
    assert b"complete" in ran.stderr
    assert (tmp_path / "whole.ndjson").read_bytes() == text


def test_answers_that_became_shorter_are_not_gone_on_with(tmp_path):
    source, target = interrupted(tmp_path)
    os.truncate(target, 1000)
    with pytest.raises(CannotResumeError, match="shorter"):
        answer_file(source, target, Alone(), SILENT)


def test_two_runs_do_not_write_one_file(tmp_path):
    source = questions(tmp_path, 3)
    target = tmp_path / "out"

    class Intruder(Alone):
        def answer(self, head, blocks):
            with pytest.raises(CannotResumeError, match="another run"):
                answer_file(source, target, Alone(), SILENT)
            yield from super().answer(head, blocks)

    assert answer_file(source, target, Intruder(), SILENT).designs == 3


def test_a_full_disk_breaks_the_run_off_and_the_next_one_goes_on(tmp_path):
    source, text = whole(tmp_path, 60)
    target = tmp_path / "out"
    script = (
        "import resource, sys; resource.setrlimit(resource.RLIMIT_FSIZE, (300_000, 300_000)); "
        "from loopslack.bulk.__main__ import main; sys.exit(main(sys.argv[1:]))"
    )
    words = [sys.executable, "-c", script, source, target, "--processes", "1"]
    broken = subprocess.run(words, env=environment(), capture_output=True, check=False, timeout=60)
    assert broken.returncode == 3, broken.stderr
    assert b"broken off" in broken.stderr
    assert target.stat().st_size <= 300_000
    assert run(source, target, "--processes", 1).returncode in (0, 1)
    assert target.read_bytes() == text


def test_a_name_used_before_is_refused_also_after_an_interruption(tmp_path):
    source = questions(tmp_path, BLOCK_DESIGNS)
    with source.open("ab") as file:
        file.write(json.dumps(design("q-0")).encode() + b"\n")
    target = tmp_path / "out"
    with pytest.raises(KeyboardInterrupt):
        answer_file(source, target, Counting(1), SILENT)
    answer_file(source, target, Alone(), SILENT)
    last = answers(target)[-2]
    assert last["id"] == "q-0"
    assert last["problem"]["errors"][0]["pointer"] == "/id"


def test_lines_of_any_kind_are_answered_one_for_one(tmp_path):
    source = tmp_path / "in"
    source.write_bytes(
        lines(design("a"), b"{", b"", b"x" * (LONGEST_LINE + 1), b"\xff", b"   ", design("b")).rstrip(b"\n")
    )
    answer_file(source, tmp_path / "out", Alone(), SILENT)
    *items, end = answers(tmp_path / "out")
    assert [item["index"] for item in items] == list(range(5))
    assert [item.get("problem", {}).get("status") for item in items] == [None, 400, 413, 400, None]
    assert end["summary"]["designs"] == 5


def test_an_endless_line_is_never_held_in_memory(tmp_path):
    source = tmp_path / "in"
    with source.open("wb") as file:
        file.write(json.dumps(HEAD).encode() + b"\n")
        for _ in range(40):
            file.write(b"x" * 1_000_000)
    tracemalloc.start()
    with Source(source) as reading:
        assert reading.next_design() == (None, False)
        assert reading.next_design() is None
    peak = tracemalloc.get_traced_memory()[1]
    tracemalloc.stop()
    assert peak < 8_000_000


@pytest.mark.parametrize("head", [{"defaults": {"units": "si"}}, {"x": 1}, design("a")])
def test_a_first_line_that_cannot_be_read_ends_the_run_before_anything_is_written(tmp_path, head):
    source = questions(tmp_path, 2, head=head)
    with pytest.raises(Refused):
        answer_file(source, tmp_path / "out", Alone(), SILENT)
    assert not (tmp_path / "out").exists()
    ran = run(source, tmp_path / "out")
    assert ran.returncode == 2
    assert b"first line" in ran.stderr


def test_blocks_are_fetched_as_they_are_answered_and_not_before(tmp_path):
    """Memory does not grow with the file: the source is never far ahead of the target."""
    source = questions(tmp_path, 12 * BLOCK_DESIGNS, bad=10)
    ahead = 0

    class Watching(Alone):
        def answer(self, head, blocks):
            nonlocal ahead
            out = 0
            for block in blocks:
                out += 1
                yield Answered(b"".join(b"{}\n" for _ in block.lines), {"refused": len(block.lines)})
                out -= 1
                ahead = max(ahead, out)

    answer_file(source, tmp_path / "out", Watching(), SILENT)
    assert ahead == 0


def test_exit_codes_tell_how_the_designs_came_out(tmp_path):
    holding = design("a")
    cases = {
        0: [holding],
        1: [holding, design("b", reliefValve={"setPressure": {"value": 1.5, "unit": "barg"}})],
        2: [holding, faulty("b")],
    }
    for code, designs in cases.items():
        source = tmp_path / f"in-{code}"
        source.write_bytes(lines(*designs))
        assert run(source, tmp_path / f"out-{code}", "--processes", 1, "--quiet").returncode == code
    assert run(tmp_path / "none", tmp_path / "out").returncode in (2, 3)
    assert run("--processes", "0", "a", "b").returncode == 2


def test_the_questions_of_the_tests_are_what_they_seem():
    assert asked(0, 1)["id"] == "q-0"
    assert "staticHeigth" in asked(0, 1)
    assert "staticHeigth" not in asked(1, 1)
