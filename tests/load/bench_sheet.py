"""How long a sheet takes beyond its design, in time of the processor: other work on the machine does not count.

PYTHONPATH=service:tests python tests/load/bench_sheet.py
"""

import time
from collections.abc import Callable

from msgspec.structs import replace

from loopslack.sheet.pdf import pdf
from loopslack.sheet.rendering import render_html
from sheet.sheets import NAMES, asked, sheet

HTML_SECONDS = 0.030
PDF_SECONDS = 0.400


def least(of: Callable[[], object], times: int = 5) -> float:
    """Processor time of the quickest of some runs, s."""

    def once() -> float:
        began = time.process_time()
        of()
        return time.process_time() - began

    return min(once() for _ in range(times))


def pdf_seconds(name: str) -> float:
    """Each time another sheet: the typesetter remembers what it has set, and would give the same one in a tenth."""
    number = iter(range(1000))

    def another() -> bytes:
        return pdf(replace(sheet(name), foot=f"{sheet(name).foot} {next(number)}"))

    another()
    return least(another, 4)


if __name__ == "__main__":
    for name in NAMES:
        question, answer = asked(name)
        html, paper = least(lambda q=question, a=answer: render_html(a, q)), pdf_seconds(name)
        print(
            f"{name:28} html {html * 1e3:5.1f} ms of {HTML_SECONDS * 1e3:.0f} ms"
            f"   pdf {paper * 1e3:5.0f} ms of {PDF_SECONDS * 1e3:.0f} ms"
        )
