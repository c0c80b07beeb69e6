"""What a run of figures carries along: its questions, its findings, and the faults that make it fail."""

from __future__ import annotations

from dataclasses import dataclass, field
from functools import cached_property
from pathlib import Path

from load.client import Report
from load.questions import Corpus, drawn


@dataclass(frozen=True)
class Figure:
    """One figure as printed. Without a bound it is there to be read."""

    name: str
    found: str
    bound: str = ""
    met: bool | None = None

    @property
    def outcome(self) -> str:
        """A word for whether the bound is kept."""
        return "" if self.met is None else "met" if self.met else "MISSED"


def at_most(name: str, value: float, bound: float, unit: str = "") -> Figure:
    """A figure that should not exceed its bound."""
    return Figure(name, f"{value:.3g} {unit}".strip(), f"at most {bound:g} {unit}".strip(), value <= bound)


def at_least(name: str, value: float, bound: float, unit: str = "") -> Figure:
    """A figure that should reach its bound."""
    return Figure(name, f"{value:.3g} {unit}".strip(), f"at least {bound:g} {unit}".strip(), value >= bound)


@dataclass
class Run:
    """One run of the figures."""

    folder: Path
    short: bool
    faults: list[str] = field(default_factory=list)
    profiles: list[str] = field(default_factory=list)

    @cached_property
    def corpus(self) -> Corpus:
        """The questions, drawn once, asked without any costly part."""
        return drawn(*((24, 6) if self.short else (60, 20)), include=[])

    def seconds(self, full: float) -> float:
        """The length of a measurement, shortened where asked for."""
        return full / 3 if self.short else full

    def expect_answers(self, what: str, report: Report, *, refusals: bool = False) -> None:
        """Note a fault where an answer was wrong, never came, or was neither 200 nor (if allowed) a refusal."""
        allowed = {200, 503} if refusals else {200}
        others = {status: count for status, count in report.statuses.items() if status not in allowed}
        if others:
            self.faults.append(f"{what}: answers with status {others}")
        if report.failed:
            self.faults.append(f"{what}: {dict(report.failures)} without an answer")
        if report.wrong:
            self.faults.append(f"{what}: {report.wrong} wrong answers")
