"""How long a sheet takes beyond its design, in time of the processor: other work on the machine does not count."""

import os
import time
import tracemalloc
from collections.abc import Callable
from pathlib import Path

import pytest
from msgspec.structs import replace

from loopslack.sheet.pdf import pdf
from loopslack.sheet.rendering import render_html
from sheet.sheets import NAMES, asked, sheet

HTML_SECONDS = 0.030
PDF_SECONDS = 0.400


def least(of: Callable[[], object], times: int = 5) -> float:
    def once() -> float:
        began = time.process_time()
        of()
        return time.process_time() - began

    return min(once() for _ in range(times))


@pytest.mark.parametrize("name", NAMES)
def test_a_page_takes_thirty_milliseconds_at_most(name: str) -> None:
    question, answer = asked(name)
    assert least(lambda: render_html(answer, question)) <= HTML_SECONDS


@pytest.mark.parametrize("name", NAMES)
def test_a_pdf_takes_four_hundred_milliseconds_at_most_once_warm(name: str) -> None:
    """Each time another sheet: the typesetter remembers what it has set, and would give the same one in a tenth."""
    number = iter(range(1000))

    def another() -> bytes:
        return pdf(replace(sheet(name), foot=f"{sheet(name).foot} {next(number)}"))

    another()
    assert least(another, 4) <= PDF_SECONDS


def resident() -> int:
    """Memory this process occupies, MB."""
    return int(Path("/proc/self/statm").read_text().split()[1]) * os.sysconf("SC_PAGE_SIZE") // 2**20


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
        before = tracemalloc.get_traced_memory()[0]
        for _ in range(20):
            render_html(answer, question)
        after, most = tracemalloc.get_traced_memory()
    finally:
        tracemalloc.stop()
    assert after - before < 200_000
    assert most < 20_000_000
