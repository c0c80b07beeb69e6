"""Rules, sources, units, assumptions, cautions and codes: all of them, with what the service itself knows of each."""

import ast
from collections.abc import Iterator
from pathlib import Path
from typing import get_args

import pytest

import loopslack
from docs.pages import anchors, named, row, text
from docs.test_reference import plain
from loopslack.api.docs.contract import contract
from loopslack.api.docs.words import (
    ADVISORIES,
    CHECKS,
    LIMITS,
    METHOD_CODES,
    REASONS,
    TO_CONFIRM,
    UNIT_SIGNS,
    VERDICT_HINTS,
    shown,
)
from loopslack.calc.judgement import CheckCode, Verdict
from loopslack.calc.sizing.rules.register import RULES
from loopslack.contract.advice.words import FAILING, WITHOUT_NUMBER
from loopslack.contract.problems import FIELD_CODES
from loopslack.contract.quantity import STRUCT_OF
from loopslack.contract.writing.shared import CAUTIONS
from loopslack.kernel.kinds import KINDS
from loopslack.kernel.units import from_si, scale_of
from loopslack.library.defaults import choices, defaults
from loopslack.library.sources import sources
from loopslack.settings import Settings

PACKAGE = Path(loopslack.__file__).parent


@pytest.mark.parametrize("id", RULES)
def test_a_rule_is_told_with_its_law_its_range_and_its_sources(id: str) -> None:
    rule = RULES[id]
    assert id in anchors("/docs/rules")
    said = text("/docs/rules")
    for part in (rule.title, rule.law, plain(rule.counts), plain(rule.range)):
        assert part in said
    linked = [link.attributes["href"] for link in named("/docs/rules", "a")]
    for source in rule.sources:
        assert f"/docs/sources#{source.key}" in linked
        assert source.place in said


@pytest.mark.parametrize("key", sources())
def test_a_source_says_what_it_is_and_how_far_it_was_seen(key: str) -> None:
    found = sources()[key]
    said = row("/docs/sources", key)
    for part in (found.title, found.publisher, found.seen, plain(found.used_for)):
        assert " ".join(part.split()) in said
    assert found.year is None or str(found.year) in said


@pytest.mark.parametrize("key", defaults())
def test_a_default_number_has_value_range_reason_and_source(key: str) -> None:
    found = defaults()[key]
    said = row("/docs/assumptions", key)
    for si in (found.si, found.low, found.high):
        if si == found.si or found.low != found.high:
            assert shown(from_si(si, found.unit, found.kind), found.unit) in said
    assert plain(found.why) in said
    assert found.source.seen in said
    assert sources()[found.source.key].title in said


@pytest.mark.parametrize("key", choices())
def test_a_default_word_has_its_alternatives_reason_and_source(key: str) -> None:
    found = choices()[key]
    said = row("/docs/assumptions", key)
    assert all(word in said for word in (found.word, *found.among))
    assert plain(found.why) in said
    assert found.source.seen in said


@pytest.mark.parametrize("kind", [kind for kind in KINDS if kind.units], ids=lambda kind: kind.name)
def test_every_unit_of_a_kind_is_told_with_its_size(kind) -> None:
    for unit in kind.units:
        said = row("/docs/units", f"{STRUCT_OF[kind.name].__name__}.{unit}")
        scale, offset = scale_of(kind, unit)
        assert f"{scale:.7g}" in said
        if offset:
            assert f"{offset:.7g}" in said
        if unit in (kind.metric, kind.us):
            assert ("metric" if unit == kind.metric else "us") in said


@pytest.mark.parametrize("caution", CAUTIONS, ids=lambda caution: caution.code)
def test_every_caution_is_told(caution) -> None:
    assert plain(caution.message) in row("/docs/checks", f"caution.{caution.code}")


def test_every_check_is_explained_with_what_to_do() -> None:
    assert set(CHECKS) == set(get_args(CheckCode))
    for code, meaning in CHECKS.items():
        said = row("/docs/checks", code)
        assert plain(meaning) in said
        assert code not in FAILING or FAILING[code][1] in said


def test_every_verdict_is_explained() -> None:
    assert set(VERDICT_HINTS) == set(get_args(Verdict))
    for path in ("/docs", "/docs/checks"):
        assert all(word in text(path) and hint in text(path) for word, hint in VERDICT_HINTS.items())


def test_every_reason_for_a_missing_number_is_explained() -> None:
    given = {word for word in constants_named("reason", PACKAGE / "calc") if " " not in word}
    assert given | set(WITHOUT_NUMBER) == set(REASONS)
    assert all(plain(meaning) in row("/docs/checks", f"reason.{word}") for word, meaning in REASONS.items())


def test_everything_that_makes_a_basis_provisional_is_explained() -> None:
    given = {call.args[0].value for call in calls("doubtful", PACKAGE / "contract")}
    assert given == set(TO_CONFIRM)
    assert all(plain(text) in row("/docs/checks", f"confirm.{word}") for word, text in TO_CONFIRM.items())


def test_every_advisory_is_explained_with_its_severity() -> None:
    given = {}
    for call in calls("_say", PACKAGE / "contract"):
        if len(call.args) > 2 and isinstance(call.args[1], ast.Constant):
            given[call.args[1].value] = call.args[0].value
    for call in calls("Advisory", PACKAGE / "contract"):
        stated = {word.arg: word.value for word in call.keywords}
        if isinstance(stated.get("code"), ast.Constant):
            given[stated["code"].value] = stated["severity"].value
    given |= advisories_in_tables(PACKAGE / "contract")
    assert given == {code: severity for code, (severity, _) in ADVISORIES.items()}
    for code, (severity, meaning) in ADVISORIES.items():
        said = row("/docs/checks", f"advisory.{code}")
        assert severity in said
        assert plain(meaning) in said


def codes_of_errors(floor: Path) -> set[str]:
    """The codes that kinds of errors of a floor have by themselves."""
    return {
        entry.value.value
        for module in floor.rglob("*.py")
        for kind in ast.walk(ast.parse(module.read_text(encoding="utf-8")))
        if isinstance(kind, ast.ClassDef)
        for entry in kind.body
        if isinstance(entry, ast.Assign)
        and isinstance(entry.targets[0], ast.Name)
        and entry.targets[0].id == "code"
        and isinstance(entry.value, ast.Constant)
    }


def test_every_reason_to_refuse_a_vessel_is_explained() -> None:
    said = text("/docs/checks")
    for word, meaning in contract().words("VesselRefusal").items():
        assert word in said
        assert meaning in said


def test_every_code_that_a_method_adds_to_a_refusal_is_explained() -> None:
    given = set()
    for floor in ("calc", "contract", "library", "physics"):
        for error in ("OutOfRange", "Contradiction", "Missing", "NotApplicable", "CalculationError"):
            for call in calls(error, PACKAGE / floor):
                given |= {
                    word.value.value
                    for word in call.keywords
                    if word.arg == "code" and isinstance(word.value, ast.Constant)
                }
    given |= codes_of_errors(PACKAGE / "sheet")
    assert given - set(FIELD_CODES) == set(METHOD_CODES)
    assert all(plain(text) in row("/docs/problems", f"code.{code}") for code, text in METHOD_CODES.items())


def test_the_limits_a_caller_meets_are_those_delivered() -> None:
    said = text("/docs")
    for name in LIMITS:
        assert f"LOOPSLACK_{name.upper()}" in said
    assert f"{Settings().single_body_bytes:,}" in said
    assert f"{Settings().batch_designs:,}" in said


def test_signs_are_given_to_units_that_exist_only() -> None:
    assert set(UNIT_SIGNS) <= {unit for kind in KINDS for unit in kind.units}
    assert shown(-0.000123456, "bar") == "\u22120.0001235 bar"
    assert shown(12345.6, "m2") == "12346 m²"
    assert shown(0.5, "1") == "0.5"


def calls(name: str, folder: Path) -> Iterator[ast.Call]:
    """Every call of a function or method of a name in the modules of a folder."""
    for path in sorted(folder.rglob("*.py")):
        for node in ast.walk(ast.parse(path.read_text(encoding="utf-8"))):
            if isinstance(node, ast.Call):
                called = node.func
                if (called.attr if isinstance(called, ast.Attribute) else getattr(called, "id", "")) == name:
                    yield node


def advisories_in_tables(folder: Path) -> dict[str, str]:
    """Code and severity of the advisories that stand in tables of this name."""
    found = {}
    for path in sorted(folder.rglob("*.py")):
        for node in ast.walk(ast.parse(path.read_text(encoding="utf-8"))):
            target = node.target if isinstance(node, ast.AnnAssign) else None
            if isinstance(target, ast.Name) and target.id == "_ADVISORIES":
                for code, row in ast.literal_eval(node.value).items():
                    found[code] = row[0]
    return found


def constants_named(argument: str, folder: Path) -> Iterator[str]:
    """Every text that is given to an argument, or to a variable, of a name."""
    for path in sorted(folder.rglob("*.py")):
        for node in ast.walk(ast.parse(path.read_text(encoding="utf-8"))):
            is_argument = isinstance(node, ast.keyword) and node.arg == argument
            is_variable = isinstance(node, ast.Assign) and getattr(node.targets[0], "id", "") == argument
            given = node.value if is_argument or is_variable else None
            for part in (given.body, given.orelse) if isinstance(given, ast.IfExp) else (given,):
                if isinstance(part, ast.Constant) and isinstance(part.value, str):
                    yield part.value
