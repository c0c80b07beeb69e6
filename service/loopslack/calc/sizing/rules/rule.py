"""What a rule is and what it answers. Plain data; the rules stand in files of their own."""

from collections.abc import Callable, Mapping
from typing import Literal, NamedTuple

from msgspec import Struct

from loopslack.calc.sizing.rules.basis import Basis
from loopslack.calc.sizing.rules.choices import Choices
from loopslack.kernel.citations import Cite
from loopslack.kernel.equation import papers
from loopslack.kernel.errors import CalculationError, NotApplicable
from loopslack.kernel.kinds import Kind

RuleId = Literal[
    "ashrae-diaphragm",
    "ashrae-closed",
    "us-mechanical-code",
    "en-12828",
    "collector-boil-off",
    "en-12977",
    "idae-asit",
    "ufc",
    "steam-range",
    "mass-balance",
]


class Applied(NamedTuple):
    """A law of the register with the SI numbers it was given, by the name of its arguments, and its result."""

    equation: str
    inputs: Mapping[str, float]
    result: float


class Fact(NamedTuple):
    """A number that goes with an answer without entering its volume."""

    kind: Kind
    si: float


class Answer(NamedTuple):
    """What one rule makes of a loop.

    ``laws`` derive the volume, the last of them giving it; ``precharge`` and ``fill`` (Pa absolute, at the fill
    temperature) are what the rule itself sets, None where it is silent. ``refusal`` says why there is no volume:
    the rule then gives none and nothing else of the answer counts.
    """

    variant: str
    laws: tuple[Applied, ...] = ()
    choices: Choices | None = None
    start_pressure: float | None = None
    precharge: float | None = None
    fill: float | None = None
    facts: Mapping[str, Fact] = {}
    refusal: CalculationError | None = None

    @property
    def nominal_volume(self) -> float | None:
        """Nominal volume, m3; None where the rule refuses."""
        return self.laws[-1].result if self.laws and self.refusal is None else None


class Rule(Struct, frozen=True, kw_only=True):
    """A published rule: what it counts, where it is from, where it holds, and how it runs.

    ``sources`` name the publications, the first of them the rule's own. ``range`` tells in words where it holds.
    """

    id: RuleId
    title: str
    counts: str
    law: str
    sources: tuple[Cite, ...]
    range: str
    run: Callable[[Basis], tuple[Answer, ...]]


def applied(law: Callable[..., float], **inputs: float) -> Applied:
    """Apply a law to numbers and keep both."""
    return Applied(papers(law).id, inputs, law(**inputs))


def refused(message: str, remedy: str, *, variant: str = "", **facts: object) -> Answer:
    """No volume: the rule does not describe this loop."""
    return Answer(variant, refusal=NotApplicable(message, remedy=remedy, facts=facts))
