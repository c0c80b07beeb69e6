"""The scripts of two callers do their work against a running service, seen from outside."""

import csv
import subprocess
import sys
from collections.abc import Iterator
from pathlib import Path

import pytest

from faults.server import serving

EXAMPLES = Path(__file__).parents[2] / "openapi" / "examples"


@pytest.fixture(scope="module")
def url(tmp_path_factory: pytest.TempPathFactory) -> Iterator[str]:
    patient = {"LOOPSLACK_SHED_LAG_SECONDS": "10"}
    with serving(tmp_path_factory.mktemp("service"), environment=patient) as server:
        yield f"http://127.0.0.1:{server.port}"


def run(script: str, *arguments: object) -> subprocess.CompletedProcess[str]:
    # Isolated mode: nothing of this project may be within reach of a caller's script.
    command = [sys.executable, "-I", str(EXAMPLES / script), *map(str, arguments)]
    return subprocess.run(command, capture_output=True, text=True, timeout=120, check=False)


def test_a_nights_quotes_are_designed_one_row_each(url: str, tmp_path: Path) -> None:
    result = tmp_path / "designs.csv"
    done = run("nightly_quotes.py", url, EXAMPLES / "quotes.csv", result)
    assert done.returncode == 0, done.stdout + done.stderr
    quotes = list(csv.DictReader((EXAMPLES / "quotes.csv").open(encoding="utf-8")))
    rows = list(csv.DictReader(result.open(encoding="utf-8")))
    assert [row["quote"] for row in rows] == [quote["quote"] for quote in quotes]
    for row in rows:
        assert bool(row["vessel_litres"]) == (row["verdict"] == "holds"), row
        assert row["verdict"] == "holds" or row["remark"], row
    by_quote = {row["quote"]: row for row in rows}
    assert by_quote["Q-1010"]["verdict"] == "refused", "a site at 12 km"
    assert by_quote["Q-1011"]["verdict"] == "refused", "no collectors"
    assert sum(row["verdict"] == "holds" for row in rows) >= 3


def test_a_row_that_is_no_quote_keeps_no_other_from_its_design(url: str, tmp_path: Path) -> None:
    rows = (EXAMPLES / "quotes.csv").read_text(encoding="utf-8").splitlines()
    table = tmp_path / "quotes.csv"
    table.write_text("\n".join([rows[0], rows[1].replace(",12,", ",twelve,"), rows[2], rows[3][:12]]) + "\n")
    done = run("nightly_quotes.py", url, table, tmp_path / "designs.csv")
    assert done.stdout == "3 quotes: 1 holds, 2 unreadable\n", done.stderr
    told = list(csv.DictReader((tmp_path / "designs.csv").open(encoding="utf-8")))
    assert [row["verdict"] for row in told] == ["unreadable", "holds", "unreadable"]
    assert [row["quote"] for row in told] == ["Q-1001", "Q-1002", "Q-1003"]


def test_the_shelf_is_checked_and_every_vessel_passed_over_says_why(url: str) -> None:
    done = run(
        "stock_check.py", url, EXAMPLES / "designLoop" / "wash-house.question.json", EXAMPLES / "stock.csv"
    )
    assert done.returncode == 0, done.stdout + done.stderr
    lines = done.stdout.splitlines()
    assert lines[0].startswith("verdict: holds")
    assert "take: EV-100, 100 L" in lines
    short = [line for line in lines if line.startswith("passed over: EV-100-S")]
    assert "acceptance-volume short by" in short[0], (
        "large enough by nominal volume, but not by what it takes"
    )
    assert "EV-140" not in done.stdout, "none of it is on the shelf"


def test_a_shelf_without_a_fitting_vessel_ends_with_an_error(url: str, tmp_path: Path) -> None:
    shelf = tmp_path / "stock.csv"
    rows = (EXAMPLES / "stock.csv").read_text(encoding="utf-8").splitlines()
    shelf.write_text("\n".join(rows[:3]) + "\n", encoding="utf-8")
    done = run("stock_check.py", url, EXAMPLES / "designLoop" / "wash-house.question.json", shelf)
    assert done.returncode == 1
    assert "verdict: does-not-hold" in done.stdout
    assert "take:" not in done.stdout


def test_a_refused_loop_is_told_with_all_its_faults(url: str) -> None:
    done = run(
        "stock_check.py", url, EXAMPLES / "designLoop" / "misspelt.question.json", EXAMPLES / "stock.csv"
    )
    assert done.returncode == 2
    for pointer in ("/reliefValve/setPresure", "/staticHeight/unit", "/collectors/0/count"):
        assert pointer in done.stderr


def test_what_could_not_be_found_out_is_no_shelf_without_a_fitting_vessel(url: str, tmp_path: Path) -> None:
    loop = EXAMPLES / "designLoop" / "wash-house.question.json"
    rows = (EXAMPLES / "stock.csv").read_text(encoding="utf-8").splitlines()
    shelf = tmp_path / "stock.csv"
    told = {}
    for name, text in {"no number": rows[1].replace(",35,", ",large,"), "nothing": ""}.items():
        shelf.write_text(f"{rows[0]}\n{text}\n", encoding="utf-8")
        told[name] = run("stock_check.py", url, loop, shelf)
    told["no service"] = run("stock_check.py", "http://127.0.0.1:1", loop, EXAMPLES / "stock.csv")
    assert {name: done.returncode for name, done in told.items()} == dict.fromkeys(told, 2)
    assert f"{shelf}, line 2: could not convert string to float: 'large'" in told["no number"].stderr
    assert "nothing is on the shelf" in told["nothing"].stderr
    assert "no answer from http://127.0.0.1:1" in told["no service"].stderr
    assert not [name for name, done in told.items() if "Traceback" in done.stderr]
