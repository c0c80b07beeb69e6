"""The rules of the house that no linter knows."""

import ast
import re
import subprocess
import sys
from pathlib import Path

import pytest

import loopslack

ROOT = Path(loopslack.__file__).parent
REPOSITORY = Path(__file__).parents[2]
MODULES = sorted(ROOT.rglob("*.py"))
TESTS = sorted((REPOSITORY / "tests").rglob("*.py"))

# Names that say nothing, and names that say what every function does.
EMPTY_NAMES = {"utils", "util", "common", "misc", "lib", "stuff"}
EMPTY_PREFIXES = ("get_", "calc_", "do_")
# Marks of work that is not done. Spelt in two halves so that this file does not find itself.
UNFINISHED = re.compile("|".join(("TO" + "DO", "FIX" + "ME", "XX" + "X", "NotImplemented" + "Error")))
MACHINE_PATH = re.compile(r"(?<![\w.])/(?:home|root|Users|opt|mnt)/\w")


def name(path: Path) -> str:
    return str(path.relative_to(REPOSITORY))


@pytest.mark.parametrize("path", MODULES, ids=name)
def test_a_module_says_what_it_is_for_and_is_read_in_one_sitting(path: Path) -> None:
    text = path.read_text(encoding="utf-8")
    docstring = ast.get_docstring(ast.parse(text))
    assert docstring
    assert docstring.splitlines()[0].endswith((".", ":", ";"))
    assert len(text.splitlines()) <= 300


@pytest.mark.parametrize("path", MODULES, ids=name)
def test_names_are_words_of_the_trade(path: Path) -> None:
    tree = ast.parse(path.read_text(encoding="utf-8"))
    functions = [
        node.name for node in ast.walk(tree) if isinstance(node, ast.FunctionDef | ast.AsyncFunctionDef)
    ]
    assert [function for function in functions if function.lstrip("_").startswith(EMPTY_PREFIXES)] == []
    assert path.stem not in EMPTY_NAMES
    assert not EMPTY_NAMES & set(path.relative_to(ROOT).parts)


@pytest.mark.parametrize("path", [*MODULES, *TESTS], ids=name)
def test_nothing_is_left_unfinished_and_no_machine_is_named(path: Path) -> None:
    text = path.read_text(encoding="utf-8")
    assert UNFINISHED.findall(text) == []
    assert MACHINE_PATH.findall(text) == []


@pytest.mark.parametrize("path", MODULES, ids=name)
def test_imports_stand_at_the_top_of_a_module(path: Path) -> None:
    """An import inside a function hides a circle. Start-up cost is the one good reason, and is written beside it."""
    text = path.read_text(encoding="utf-8")
    lines = text.splitlines()
    hidden = [
        lines[inner.lineno - 1].strip()
        for node in ast.walk(ast.parse(text))
        if isinstance(node, ast.FunctionDef | ast.AsyncFunctionDef)
        for inner in ast.walk(node)
        if isinstance(inner, ast.Import | ast.ImportFrom) and "# noqa: PLC0415" not in lines[inner.lineno - 1]
    ]
    assert hidden == []


@pytest.mark.parametrize("floor", ["physics", "library", "kernel"])
def test_the_lower_floors_print_nothing_and_read_no_environment(floor: str) -> None:
    for path in sorted((ROOT / floor).rglob("*.py")):
        for node in ast.walk(ast.parse(path.read_text(encoding="utf-8"))):
            called = node.func if isinstance(node, ast.Call) else None
            assert not (
                isinstance(called, ast.Name) and called.id in {"print", "open", "input", "exec", "eval"}
            ), path
            assert not (isinstance(node, ast.Attribute) and node.attr in {"environ", "getenv"}), path


def test_the_imports_go_down_only() -> None:
    ran = subprocess.run(
        [
            sys.executable,
            "-c",
            "from importlinter.cli import lint_imports_command; lint_imports_command()",
            "--no-cache",
        ],
        cwd=REPOSITORY,
        env={"PYTHONPATH": str(REPOSITORY / "service"), "PATH": "/usr/bin:/bin", "PYTHONIOENCODING": "utf-8"},
        capture_output=True,
        text=True,
        check=False,
    )
    assert ran.returncode == 0, ran.stdout + ran.stderr
    assert re.search(r"Contracts: [1-9]\d* kept, 0 broken", ran.stdout), ran.stdout


def test_the_top_level_holds_what_a_newcomer_expects_and_nothing_else() -> None:
    top = {path.name for path in REPOSITORY.iterdir() if not path.name.startswith(".")}
    expected = {
        "README.md",
        "DEVELOPERS.md",
        "pyproject.toml",
        "service",
        "openapi",
        "tests",
        "deploy",
        "LICENSE",
    }
    assert top == expected
