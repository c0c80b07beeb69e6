"""The command line: the answers of the service, exit codes a script can rely on."""

import json
import os
import sys
from pathlib import Path
from typing import get_args

import pytest
from msgspec.structs import replace

from bulk.files import questions, run
from loopslack import cli
from loopslack.contract.answering import loop as answering
from loopslack.contract.answers.shared import Verdict
from loopslack.contract.encoding import encoded
from loopslack.contract.questions.operations import LoopDesignQuestion
from loopslack.contract.strict.decoding import decode
from loopslack.sheet import pdf, rendering

EXAMPLES = Path(__file__).parents[2] / "openapi" / "examples"
DESIGN = EXAMPLES / "loop-design.json"
FAILING = EXAMPLES / "designLoop" / "vessel-too-small.question.json"
CHECK = EXAMPLES / "checkStagnation" / "eighty-litres.question.json"


def printed(capfdbinary, *words):
    code = cli.main(list(map(str, words)))
    out, err = capfdbinary.readouterr()
    return code, out, err.decode()


def test_a_design_is_answered_as_the_service_answers_it(capfdbinary):
    code, out, err = printed(capfdbinary, "design", DESIGN)
    asked = decode(DESIGN.read_bytes(), LoopDesignQuestion)
    assert out == encoded(answering.design_loop(asked)) + b"\n"
    assert code == 0
    assert err == ""


def test_a_design_that_does_not_hold_ends_with_1(capfdbinary):
    code, out, _ = printed(capfdbinary, "design", FAILING)
    assert json.loads(out)["result"]["verdict"] == "does-not-hold"
    assert code == 1


def test_a_design_asked_for_without_doubts_ends_with_1(capfdbinary):
    code, out, _ = ask(capfdbinary, json.loads(DESIGN.read_bytes()) | {"doubtPolicy": "none"})
    assert json.loads(out)["result"]["verdict"] == "favourable-only"
    assert code == 1


@pytest.mark.parametrize("words", [[], ["--brief"]])
@pytest.mark.parametrize("verdict", get_args(Verdict))
def test_only_the_verdict_that_holds_ends_with_0(capfdbinary, monkeypatch, verdict, words):
    found = answering.design_loop(decode(DESIGN.read_bytes(), LoopDesignQuestion))
    forced = replace(found, result=replace(found.result, verdict=verdict))
    monkeypatch.setattr(cli.answering, "design_loop", lambda question: forced)
    code, out, _ = printed(capfdbinary, "design", DESIGN, *words)
    assert code == (0 if verdict == "holds" else 1)
    assert verdict.encode() in out


def ask(capfdbinary, question, *words, command="design"):
    """Ask with a question on standard input."""
    reader, writer = os.pipe()
    os.write(writer, json.dumps(question).encode())
    os.close(writer)
    held = sys.stdin
    sys.stdin = os.fdopen(reader)
    try:
        return printed(capfdbinary, command, "-", *words)
    finally:
        sys.stdin.close()
        sys.stdin = held


def test_a_check_of_a_given_vessel_is_answered(capfdbinary):
    code, out, _ = printed(capfdbinary, "check", CHECK)
    verdict = json.loads(out)["result"]["verdict"]
    assert code == (0 if verdict == "holds" else 1)


def test_in_brief_the_verdict_comes_first_and_the_vessel_after_it(capfdbinary):
    code, out, _ = printed(capfdbinary, "design", DESIGN, "--brief")
    first, second, *rest = out.decode().splitlines()
    assert code == 0
    assert first.split() == ["verdict", "holds,", "firm"]
    assert second.startswith("vessel")
    assert second.endswith("(chosen)")
    assert any(line.startswith("fill ") for line in rest)


def test_in_brief_a_vessel_that_does_not_hold_is_not_called_chosen(capfdbinary):
    code, out, _ = printed(capfdbinary, "design", FAILING, "--brief")
    assert code == 1
    assert b"not to be built" in out
    assert b"(chosen)" not in out
    assert b"\nfill " not in out
    assert b"\nstop" in out


def test_every_fault_of_a_question_is_told_on_a_line_of_its_own(capfdbinary):
    question = json.loads(DESIGN.read_bytes())
    question["staticHeigth"] = question.pop("staticHeight")
    question["units"] = "si"
    code, out, err = ask(capfdbinary, question)
    assert code == 2
    assert out == b""
    told = [line.split(":")[0].strip() for line in err.splitlines()[1:]]
    assert sorted(told) == ["/staticHeight", "/staticHeigth", "/units"]


@pytest.mark.parametrize("body", [b"", b"{", b"[]", b"\xff"])
def test_what_is_no_question_ends_with_2(capfdbinary, tmp_path, body):
    path = tmp_path / "question"
    path.write_bytes(body)
    assert printed(capfdbinary, "design", path)[0] == 2


def test_a_file_that_is_not_there_ends_with_2(capfdbinary, tmp_path):
    code, _, err = printed(capfdbinary, "design", tmp_path / "none")
    assert code == 2
    assert "none" in err


def test_a_question_that_cannot_be_answered_ends_with_2(capfdbinary):
    question = json.loads(DESIGN.read_bytes())
    question["staticHeight"]["value"] = 9000
    code, _, err = ask(capfdbinary, question)
    assert code == 2
    assert "/staticHeight" in err


def test_a_bug_ends_with_3_and_never_with_a_verdict(capfdbinary, monkeypatch):
    def broken(question):
        raise ZeroDivisionError

    monkeypatch.setattr(cli.answering, "design_loop", broken)
    assert printed(capfdbinary, "design", DESIGN)[0] == 3


@pytest.mark.parametrize("form", ["json", "yaml"])
def test_the_document_is_printed_as_it_is_committed(capfdbinary, form):
    words = ["openapi"] + (["--yaml"] if form == "yaml" else [])
    code, out, _ = printed(capfdbinary, *words)
    assert code == 0
    assert out == (EXAMPLES.parent / f"v1.{form}").read_bytes()


def test_serving_is_explained(capfdbinary):
    code, out, _ = printed(capfdbinary, "serve")
    assert code == 0
    assert b"loopslack.app:app" in out


@pytest.mark.parametrize("words", [[], ["unknown"], ["design"], ["sheet", "--pdf", "--html", "x"]])
def test_a_command_that_cannot_be_read_ends_with_2(words):
    with pytest.raises(SystemExit) as ended:
        cli.main(words)
    assert ended.value.code == 2


def test_files_of_many_designs_have_a_door_of_their_own(tmp_path):
    source = questions(tmp_path, 3, bad=10)
    ran = run("bulk", source, tmp_path / "out", "--processes", 1, "--quiet", module="loopslack.cli")
    assert ran.returncode == 2
    assert (tmp_path / "out").read_bytes().count(b"\n") == 4


def test_its_help_is_reached_from_the_command_line():
    ran = run("bulk", "--help", module="loopslack.cli")
    assert ran.returncode == 0
    assert b"--processes" in ran.stdout


def test_the_sheet_of_a_design_is_written_from_the_question_of_the_design_alone(capfdbinary, tmp_path):
    target = tmp_path / "sheet.html"
    code, out, err = printed(capfdbinary, "sheet", DESIGN, "--into", target)
    assert (code, out, err) == (0, b"", "")
    page = target.read_bytes()
    assert page.lower().startswith(b"<!doctype html>")


def test_the_sheet_and_its_figures_are_printed_from_their_own_questions(capfdbinary):
    question = EXAMPLES / "renderSheetHtml" / "wash-house.question.json"
    code, out, _ = printed(capfdbinary, "sheet", question, "--html")
    assert code == 0
    assert b"</html>" in out
    figure = EXAMPLES / "renderFigure" / "pressure-over-liquid.question.json"
    code, out, _ = printed(capfdbinary, "sheet", figure, "--figure")
    assert code == 0
    assert b"</svg>" in out


@pytest.mark.apart
def test_the_sheet_is_printed_as_pdf(capfdbinary):
    code, out, _ = printed(capfdbinary, "sheet", DESIGN, "--pdf")
    assert code == 0
    assert out.startswith(b"%PDF")


def test_a_sheet_that_cannot_be_set_is_refused_with_the_reason(capfdbinary, monkeypatch):
    def missing(question):
        raise pdf.NotInstalled("There is no typesetter.", remedy="Install one.")

    monkeypatch.setattr(rendering, "sheet_pdf", missing)
    code, out, err = printed(capfdbinary, "sheet", DESIGN, "--pdf")
    assert code == 2
    assert out == b""
    assert "There is no typesetter. Install one." in err
