"""Whole sheets, word by word: what a customer would read today is what was read and found right.

Where a number or a word was meant to change, `plain_text.py` says how to keep the new ones.
"""

import difflib

import pytest

from sheet.plain_text import FOLDER, KEPT, plain_text
from sheet.sheets import sheet


@pytest.mark.parametrize("name", KEPT)
def test_a_sheet_reads_as_it_was_read(name: str) -> None:
    kept = (FOLDER / f"{name}.txt").read_text(encoding="utf-8")
    found = plain_text(sheet(name))
    difference = list(
        difflib.unified_diff(kept.splitlines(), found.splitlines(), "kept", "found", lineterm="", n=0)
    )
    assert difference == []


def test_no_kept_sheet_is_forgotten() -> None:
    assert {path.stem for path in FOLDER.glob("*.txt")} == set(KEPT)
