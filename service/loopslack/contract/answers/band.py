"""The answer about tolerances: the band they give."""

from typing import Annotated

from loopslack.calc.band import ToleranceId
from loopslack.contract import quantity as q
from loopslack.contract.answers.shared import AnswerPart, Verdict
from loopslack.contract.questions.fields import text


class BandOutcome(AnswerPart, frozen=True, kw_only=True):
    """Stagnation in the base case with inputs off; numbers are absent where they cannot be computed."""

    verdict: Annotated[Verdict, text("Whether the vessel would hold.", "holds")]
    vessel_pressure: Annotated[q.Pressure | None, text("Vessel pressure if the valve stayed shut.")] = None
    steam_volume: Annotated[q.Volume | None, text("Steam in collectors and pipes.")] = None
    reach: Annotated[q.Length | None, text("Farthest reach of steam.")] = None
    mixed_temperature: Annotated[q.Temperature | None, text("Liquid in the vessel, mixed.")] = None
    unspent_power: Annotated[q.Power | None, text("Steam power that reaches the station.")] = None


class BandRow(AnswerPart, frozen=True, kw_only=True):
    """One input off by its tolerance."""

    input: Annotated[ToleranceId, text("The input that may be off.", "fill-pressure")]
    low: Annotated[BandOutcome, text("With the input lower.")]
    high: Annotated[BandOutcome, text("With the input higher.")]


class ToleranceBand(AnswerPart, frozen=True, kw_only=True):
    """What the stated tolerances do to stagnation. They do not turn the verdict of the design."""

    verdict: Annotated[
        Verdict, text("Verdict with every input off the way that raises the pressure.", "holds")
    ]
    rows: Annotated[list[BandRow], text("One input off at a time.")]
    unfavourable: Annotated[BandOutcome, text("All off the way that raises the pressure.")]
    favourable: Annotated[BandOutcome, text("All off the other way.")]
