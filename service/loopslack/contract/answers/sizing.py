"""The answers about sizing rules: side by side, the walk between them, and what moves the volume."""

from typing import Annotated

from loopslack.calc.equilibrium import Regime
from loopslack.calc.head_room import HeadRoomId, Outcome
from loopslack.calc.levers.lever import RangeBasis
from loopslack.calc.sizing.rules.rule import RuleId
from loopslack.calc.sizing.walk import StepCode
from loopslack.contract import quantity as q
from loopslack.contract.answers.loop import ScenarioId
from loopslack.contract.answers.shared import AnswerPart, AnyQuantity, CheckVerdict, SourceNote, Verdict
from loopslack.contract.questions.fields import text


class SeenStagnation(AnswerPart, frozen=True, kw_only=True):
    """What a rule's vessel would see in stagnation under one scenario."""

    scenario: Annotated[ScenarioId, text("Base case or doubt.", "base")]
    verdict: Annotated[CheckVerdict, text("Whether it holds there.", "does-not-hold")]
    regime: Annotated[Regime | None, text("What the loop does.", "valve-opens")] = None
    pressure: Annotated[
        q.Pressure | None, text("Vessel pressure if the valve stayed shut, where it can be told.")
    ] = None
    at_least: Annotated[bool | None, text("True where the pressure is a lower bound.", True)] = None
    failing: Annotated[list[str], text("Checks that do not hold.", ["relief-valve"])]


class RuleComparison(AnswerPart, frozen=True, kw_only=True):
    """One rule's answer for this loop, and what its vessel would see."""

    rule: Annotated[RuleId, text("The rule.", "en-12977")]
    variant: Annotated[
        str | None, text("Which of two answers of one rule this is; absent for its own.", "printed-figures")
    ] = None
    title: Annotated[str, text("Name of the rule.", "EN 12977")]
    counts: Annotated[str, text("What the rule counts.", "Liquid expansion and collector content.")]
    source: Annotated[SourceNote, text("Where it was published.")]
    nominal_volume: Annotated[q.Volume | None, text("Its answer. Absent where it does not apply.")] = None
    reason: Annotated[
        str | None,
        text(
            "Why it gives no answer.",
            "The rule holds for water; this loop holds 42.92 % propylene glycol by mass.",
        ),
    ] = None
    displaced_volume: Annotated[q.Volume | None, text("What must find room in the vessel.")] = None
    pressure_factor: Annotated[q.Ratio | None, text("Nominal volume over displaced volume.")] = None
    start_pressure: Annotated[q.Pressure | None, text("The pressure it starts from.")] = None
    final_pressure: Annotated[q.Pressure | None, text("The pressure it ends at.")] = None
    verdict: Annotated[Verdict, text("Whether its vessel holds in this loop.", "does-not-hold")]
    cold_liquid: Annotated[
        q.Volume | None, text("Liquid left in its vessel when cold; negative is what is missing.")
    ] = None
    stagnation: Annotated[list[SeenStagnation], text("What its vessel would see in stagnation.")]


class WalkParameter(AnswerPart, frozen=True, kw_only=True):
    """A number of a step's sentence."""

    code: Annotated[StepCode, text("The choice it belongs to.", "final-pressure")]
    name: Annotated[str, text("Its place in the sentence.", "after")]
    value: Annotated[AnyQuantity, text("The number.")]


class WalkStep(AnswerPart, frozen=True, kw_only=True):
    """One choice changed and what that does to the nominal volume."""

    codes: Annotated[
        list[StepCode], text("The choice; several where no vessel exists between them.", ["vaporisation"])
    ]
    before: Annotated[q.Volume, text("Nominal volume before.")]
    after: Annotated[q.Volume, text("Nominal volume after.")]
    change: Annotated[q.Volume, text("What the choice adds.")]
    sentence: Annotated[
        str, text("The step in a sentence for a customer.", "Steam empties the collectors. That adds 20.1 L.")
    ]
    parameters: Annotated[list[WalkParameter], text("The numbers of the sentence, for translation.")]
    subject: Annotated[ScenarioId, text("The scenario that asks for the most.", "base")]


class Walk(AnswerPart, frozen=True, kw_only=True):
    """From one answer to another, one choice at a time in a fixed order; the changes add up to the difference."""

    start: Annotated[str, text("Rule the walk starts at.", "ashrae-diaphragm")]
    end: Annotated[str, text("Rule the walk ends at.", "mass-balance")]
    start_volume: Annotated[q.Volume, text("Nominal volume it starts at.")]
    end_volume: Annotated[q.Volume, text("Nominal volume it ends at.")]
    steps: Annotated[list[WalkStep], text("The steps.")]


class SensitivityEnd(AnswerPart, frozen=True, kw_only=True):
    """An input at one end of its range."""

    value: Annotated[AnyQuantity, text("The input at this end of its range.")]
    nominal_volume: Annotated[
        q.Volume | None, text("Recommended volume there. Absent where no vessel holds.")
    ] = None
    reason: Annotated[
        str | None, text("Why the loop could not be sized there.", "The fluid freezes at the site minimum.")
    ] = None


class SensitivityRow(AnswerPart, frozen=True, kw_only=True):
    """What one input does to the recommended volume over its range."""

    input: Annotated[str, text("The input that is moved.", "hot-liquid")]
    present: Annotated[AnyQuantity, text("What the input is now.")]
    range_from: Annotated[RangeBasis, text("Where the range comes from.", "default")]
    low: Annotated[SensitivityEnd, text("What follows at the lower end of its range.")]
    high: Annotated[SensitivityEnd, text("What follows at the upper end of its range.")]
    largest_change: Annotated[
        q.Volume | None,
        text("Largest change of the volume. Absent where it decides whether any vessel holds."),
    ] = None
    decides: Annotated[bool, text("Whether a vessel holds at one end and none at another.", False)]


class HeadRoomRow(AnswerPart, frozen=True, kw_only=True):
    """How far something may go before the vessel fails."""

    id: Annotated[HeadRoomId, text("The input that is moved.", "stagnation-temperature")]
    outcome: Annotated[
        Outcome,
        text(
            "`value` where it ends, `none` where the vessel fails as it is, `beyond-search` where it never did."
        ),
    ]
    value: Annotated[AnyQuantity | None, text("How far it can be moved.")] = None
    ended_by: Annotated[str | None, text("The check that ends it.", "relief-valve")] = None
    scenario: Annotated[str | None, text("The scenario under which it does.", "base")] = None


class Sensitivity(AnswerPart, frozen=True, kw_only=True):
    """Which inputs move the volume, and what the vessel still tolerates."""

    inputs: Annotated[list[SensitivityRow], text("The inputs, strongest first.")]
    head_room: Annotated[list[HeadRoomRow], text("What the vessel still tolerates.")]
