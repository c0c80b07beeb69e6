"""A walk between two volumes: what it is made of, and its sentences for a customer.

A step has a code, numbers with their kinds, and a sentence in English with places for them, so that it can be shown
in any units and in any language. Nothing is computed here.
"""

from collections.abc import Callable, Mapping
from typing import Literal

from msgspec import Struct

from loopslack.calc.sizing.rules.rule import Fact
from loopslack.kernel import kinds
from loopslack.kernel.kinds import Kind

StepCode = Literal[
    "vaporisation",
    "pipe-steam",
    "final-pressure",
    "starting-pressure",
    "least-factor",
    "expansion",
    "reserve",
    "gas-temperature",
    "doubts",
    "fluid-allowance",
    "fill-window",
    "cooling-vessel",
    "without-boiling",
]
CHOICE_STEPS: tuple[StepCode, ...] = (
    "vaporisation",
    "pipe-steam",
    "final-pressure",
    "starting-pressure",
    "least-factor",
    "expansion",
    "reserve",
    "gas-temperature",
)
LAST_STEPS: tuple[StepCode, ...] = (
    "doubts",
    "fluid-allowance",
    "fill-window",
    "cooling-vessel",
    "without-boiling",
)

SENTENCES: Mapping[StepCode, str] = {
    "vaporisation": "Steam empties the collectors: {after} of their liquid are counted instead of {before}",
    "pipe-steam": "Steam also enters the pipes: {after} of their liquid are counted instead of {before}",
    "final-pressure": "The vessel may rise to {after} before the relief valve opens, not to {before}",
    "starting-pressure": "The gas of the vessel is charged to {after} instead of {before}",
    "least-factor": "A volume at least {after} times what is pushed out is asked for, not {before}",
    "expansion": "The liquid that stays liquid takes up {after} more room when hot, not {before}",
    "reserve": "The vessel holds {after} of liquid when the loop is filled, not {before}",
    "gas-temperature": "The gas is as warm as the plant room, {after}, not as on the day it was charged, {before}",
    "doubts": "The vessel must also hold if {subject}",
    "fluid-allowance": "Real liquids differ a little from the tables: {allowance} are set aside for that",
    "fill-window": "The installer needs a range to fill in, here from {lower} to {upper}",
    "cooling-vessel": "The membrane must stay at or below {limit}, with a cooling vessel of {content}",
    "without-boiling": "A loop that relies on not boiling never gets less than EN 12977 asks for, {least}",
}
SUBJECTS: Mapping[str, str] = {
    "base": "a stated figure is somewhat too favourable",
    "warm-gas": "its gas gets as warm as the liquid that arrives",
    "hotter-stagnation": "the collectors get hotter than their data say",
    "worse-emptying": "the collectors push out their liquid less readily than stated",
    "closed-branch": "a check valve keeps steam out of a pipe nobody has looked at",
    "all-doubts": "everything that is in doubt comes together",
}
_ENDS = {1: "adds {change}.", -1: "saves {change}.", 0: "makes no difference."}
_JOINT = "Taken together, since no vessel exists between them: "

_NOTHING = 1e-9  # share of the volume within which a change is the solvers' own rounding


class Step(Struct, frozen=True, kw_only=True):
    """One choice changed: nominal volume (m3) before and after.

    ``codes`` holds one code, or several in their order where no vessel exists between them; ``parameters`` are the
    numbers of its sentence, by code where there are several. ``subject`` is the scenario that asks for the most.
    """

    codes: tuple[StepCode, ...]
    before: float
    after: float
    parameters: Mapping[StepCode, Mapping[str, Fact]]
    subject: str = "base"

    @property
    def change(self) -> float:
        """What the choice adds to the nominal volume, m3."""
        return self.after - self.before

    @property
    def direction(self) -> int:
        """1 where the volume grows, -1 where it shrinks, 0 where it stays."""
        if abs(self.change) <= _NOTHING * max(self.before, self.after):
            return 0
        return 1 if self.change > 0 else -1

    def sentence(self, show: Callable[[Kind, float], str]) -> str:
        """One English sentence, numbers shown by ``show`` from their kind and SI number."""
        words = {"subject": SUBJECTS[self.subject]}
        parts = [
            SENTENCES[code].format(
                **words,
                **{name: show(fact.kind, fact.si) for name, fact in self.parameters.get(code, {}).items()},
            )
            for code in self.codes
        ]
        text = parts[0] if len(parts) == 1 else _JOINT + "; ".join(parts)
        change = show(kinds.NOMINAL_VOLUME, abs(self.change))
        return f"{text}. That {_ENDS[self.direction].format(change=change)}"


class Walk(Struct, frozen=True, kw_only=True):
    """From one answer to another, one choice at a time; volumes m3. The changes add up to the difference."""

    start: str
    end: str
    start_volume: float
    end_volume: float
    steps: tuple[Step, ...]
