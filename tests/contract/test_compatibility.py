"""The document keeps what the last released one promised, and the checker of that sees every planted break."""

import json
from pathlib import Path
from typing import Any, NamedTuple

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from contract import changes_of_answers, changes_of_operations, changes_of_questions, changes_without_harm
from contract.compatibility import breaks, version_faults
from contract.mutations import CHANGES

FILLED_BY = (changes_of_answers, changes_of_operations, changes_of_questions, changes_without_harm)
OPENAPI = Path(__file__).parents[2] / "openapi"


class Correction(NamedTuple):
    """A keyword of a member as a released document had it, and as it was from the first day."""

    schema: str
    member: str
    keyword: str
    promised: int
    kept: int


NEVER_KEPT: dict[str, tuple[Correction, ...]] = {
    # A boiling curve needs three points, so that two were refused by every version, though with other words.
    "1.0.0": (Correction("BoilingTable", "points", "minItems", promised=2, kept=3),),
}
"""What a released document allowed and the service it was released with refused all the same."""


def promises(path: Path) -> dict[str, Any]:
    document: dict[str, Any] = json.loads(path.read_bytes())
    del document["components"]["examples"]  # promise nothing, and are most of the bytes
    for wrong in NEVER_KEPT.get(path.stem, ()):
        member = document["components"]["schemas"][wrong.schema]["properties"][wrong.member]
        assert member[wrong.keyword] == wrong.promised
        member[wrong.keyword] = wrong.kept
    return document


DOCUMENT = promises(OPENAPI / "v1.json")
TEXT = json.dumps(DOCUMENT)
RELEASED = sorted(
    (OPENAPI / "released").glob("*.json"), key=lambda path: [int(part) for part in path.stem.split(".")]
)
HARMLESS = sorted(name for name, (_, effect) in CHANGES.items() if effect == "nothing")
HURTFUL = sorted(set(CHANGES) - set(HARMLESS))


def changed_by(*names: str) -> dict[str, Any]:
    document: dict[str, Any] = json.loads(TEXT)
    for name in names:
        CHANGES[name][0](document)
    return document


@pytest.mark.parametrize("name", sorted(CHANGES))
def test_each_planted_change_is_judged_as_what_it_is(name: str) -> None:
    document = changed_by(name)
    if name != "everything changes its order":
        assert document != DOCUMENT, "the change changed nothing, so that it proves nothing"
    grades = {finding.grade for finding in breaks(DOCUMENT, document)}
    effect = CHANGES[name][1]
    assert ("wire" in grades) == (effect == "wire"), grades
    assert bool(grades) == (effect != "nothing"), grades


def test_the_set_of_changes_is_large_and_has_both_sorts() -> None:
    assert len(HURTFUL) >= 40
    assert len(HARMLESS) >= 20


@given(st.sets(st.sampled_from(HARMLESS), min_size=2, max_size=6))
@settings(max_examples=30, deadline=None, derandomize=True)
def test_harmless_changes_stay_harmless_together(names: set[str]) -> None:
    assert breaks(DOCUMENT, changed_by(*sorted(names))) == []


@given(st.sets(st.sampled_from(HARMLESS), min_size=2, max_size=5), st.sampled_from(HURTFUL))
@settings(max_examples=60, deadline=None, derandomize=True)
def test_a_break_is_seen_among_harmless_changes(names: set[str], hurtful: str) -> None:
    assert breaks(DOCUMENT, changed_by(*sorted(names), hurtful)) != []


def test_a_document_breaks_no_promise_to_itself() -> None:
    assert breaks(DOCUMENT, DOCUMENT) == []


def test_there_is_a_released_document() -> None:
    assert RELEASED, "openapi/released holds no document"


@pytest.mark.parametrize("path", RELEASED, ids=lambda path: path.stem)
def test_no_promise_of_a_released_document_is_broken(path: Path) -> None:
    released = promises(path)
    assert released["info"]["version"] == path.stem
    assert [str(finding) for finding in breaks(released, DOCUMENT)] == []


def test_the_version_rises_with_the_document() -> None:
    assert version_faults(promises(RELEASED[-1]), DOCUMENT) == []
