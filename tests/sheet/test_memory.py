"""Pages set one after another leave nothing behind."""

import gc
import os
import tracemalloc
from pathlib import Path

import pytest
from msgspec.structs import replace

from loopslack.sheet.pdf import pdf
from loopslack.sheet.rendering import render_html
from sheet.sheets import asked, sheet


def resident() -> int:
    """Memory this process occupies, MB."""
    return int(Path("/proc/self/statm").read_text().split()[1]) * os.sysconf("SC_PAGE_SIZE") // 2**20


@pytest.mark.apart
def test_pdf_after_pdf_keeps_no_memory() -> None:
    """What the typesetter remembers of a sheet would be 25 MB more with each."""
    of = sheet("wash-house")
    for number in range(3):
        pdf(replace(of, foot=f"first {number}"))
    before = resident()
    for number in range(10):
        pdf(replace(of, foot=f"then {number}"))
    assert resident() - before < 60


def test_sheet_after_sheet_keeps_no_memory() -> None:
    question, answer = asked("wash-house")
    render_html(answer, question)
    tracemalloc.start()
    try:
        for _ in range(3):
            render_html(answer, question)
        gc.collect()  # what nobody holds any more is not kept
        before = tracemalloc.get_traced_memory()[0]
        for _ in range(20):
            render_html(answer, question)
        most = tracemalloc.get_traced_memory()[1]
        gc.collect()
        after = tracemalloc.get_traced_memory()[0]
    finally:
        tracemalloc.stop()
    assert after - before < 200_000
    assert most < 20_000_000
