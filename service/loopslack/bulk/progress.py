"""One line on a terminal that says how far a run has come; on anything else a line now and then.

Written here rather than taken from a library: it is a carriage return and a bar, and needs nothing installed.
"""

import time
from typing import TextIO

WIDTH = 24
TERMINAL_SECONDS = 0.2
LOG_SECONDS = 30.0


class Progress:
    """Tells how far a run has come. The file is measured in bytes, as its lines are not counted beforehand."""

    def __init__(self, stream: TextIO | None, total_bytes: int) -> None:
        self._stream = stream
        self._total = max(1, total_bytes)
        self._on_terminal = stream is not None and stream.isatty()
        self._period = TERMINAL_SECONDS if self._on_terminal else LOG_SECONDS
        self._began: float | None = None
        self._due = 0.0
        self._shown = 0

    def start(self, done_bytes: int, designs: int) -> None:
        """Note where the run starts, which is not the beginning where it was resumed."""
        self._began = time.monotonic()
        self._due = self._began + self._period
        self._first_bytes, self._first_designs = done_bytes, designs

    def tell(self, done_bytes: int, designs: int, refused: int, *, last: bool = False) -> None:
        """Show the state, if it is time to."""
        now = time.monotonic()
        if self._stream is None or self._began is None or (now < self._due and not last):
            return
        self._due = now + self._period
        text = self._text(now - self._began, done_bytes, designs, refused)
        if self._on_terminal:
            blank = " " * max(0, self._shown - len(text))
            self._stream.write(f"\r{text}{blank}" + ("\n" if last else ""))
            self._shown = len(text)
        else:
            self._stream.write(text + "\n")
        self._stream.flush()

    def _text(self, seconds: float, done_bytes: int, designs: int, refused: int) -> str:
        share = min(1.0, done_bytes / self._total)
        filled = int(share * WIDTH)
        bar = "#" * filled + "." * (WIDTH - filled)
        rate = (designs - self._first_designs) / seconds if seconds > 0 else 0.0
        parts = [f"[{bar}] {100 * share:5.1f} %", f"{designs:,} designs", f"{rate:,.0f}/s"]
        gained = done_bytes - self._first_bytes
        if gained > 0 and share < 1:
            parts.append(f"{_span(seconds * (self._total - done_bytes) / gained)} left")
        if refused:
            parts.append(f"{refused:,} refused")
        return ", ".join(parts)


def _span(seconds: float) -> str:
    """A length of time in the unit that suits it."""
    if seconds < 90:
        return f"{seconds:.0f} s"
    if seconds < 5400:
        return f"{seconds / 60:.0f} min"
    return f"{seconds / 3600:.1f} h"
