"""The answer to a vessel audit: does it hold as found, what does the gauge say, what to set instead. Structs only."""

from typing import Annotated

from loopslack.calc.audit.states import Cause
from loopslack.calc.audit.whole import Certainty, Explains, Position, Reference, SetBy
from loopslack.contract import quantity as q
from loopslack.contract.answers.loop import (
    Doubt,
    FillWindow,
    LiquidState,
    LoopContent,
    Provisional,
    StagnationState,
    VesselResult,
)
from loopslack.contract.answers.operations import Answer
from loopslack.contract.answers.shared import AnswerPart, AnyQuantity, Basis, Check, Verdict
from loopslack.contract.questions.fields import text


class VesselStanding(AnswerPart, frozen=True, kw_only=True):
    """A way the vessel may stand today, and what that would mean."""

    verdict: Annotated[Verdict, text("Whether the loop holds so.", "does-not-hold")]
    precharge: Annotated[q.Pressure, text("Gas pressure of the drained vessel, read on site today.")]
    vessel_liquid: Annotated[q.Volume, text("Liquid in the vessel today.")]
    vessel_empty: Annotated[
        bool | None,
        text(
            "True where the reading is below the precharge: the vessel is empty and more may be missing.",
            True,
        ),
    ] = None
    liquid_missing: Annotated[
        q.Volume,
        text("Liquid lost since filling, at the fill temperature; negative where there is too much."),
    ]
    precharge_lost: Annotated[
        q.PressureDifference,
        text("Precharge lost since it was set, at the temperature of then; negative where there is more."),
    ]
    cold_reserve: Annotated[
        q.Volume, text("Liquid left in the vessel when coldest; negative is what is missing.")
    ]


class ReadingExplanation(AnswerPart, frozen=True, kw_only=True):
    """One explanation of the reading: liquid lost or added, or gas lost or added."""

    cause: Annotated[Cause, text("What has changed.", "liquid")]
    possible: Annotated[bool, text("Whether anything in the vessel could bear it out.", True)]
    meaning: Annotated[str, text("The explanation in a sentence, with its numbers.", "12.4 L are missing.")]
    standing: Annotated[VesselStanding | None, text("How the vessel would then stand.")] = None
    isolated_reading: Annotated[
        q.Pressure | None,
        text("What a gauge on the isolated and drained vessel would show today, were this the explanation."),
    ] = None
    refill: Annotated[
        q.Volume | None,
        text(
            "Liquid to add, negative to drain, until the gauge shows what it should, were this the explanation. "
            "Absent where it cannot show that."
        ),
    ] = None


class GaugeFinding(AnswerPart, frozen=True, kw_only=True):
    """What the gauge says."""

    reading: Annotated[q.Pressure, text("What the gauge shows.")]
    temperature: Annotated[q.Temperature, text("Temperature of the loop then.")]
    expected: Annotated[
        q.Pressure | None, text("What it should show at that temperature. Absent where that is not defined.")
    ] = None
    difference: Annotated[q.PressureDifference | None, text("Reading less what it should show.")] = None
    readable: Annotated[
        q.PressureDifference,
        text(
            "Difference within which gauge and eye may be off (own assumption): less than that says nothing."
        ),
    ]
    reference: Annotated[
        Reference,
        text(
            "What it is held against: the record of the commissioning, or the filling recommended here.",
            "record",
        ),
    ]
    precharge_set: Annotated[q.Pressure, text("Precharge of the reference, read on site at its temperature.")]
    precharge_set_by: Annotated[SetBy, text("Where that precharge comes from.", "record")]
    explains: Annotated[
        Explains,
        text(
            "Which explanation the evidence bears out; `neither` where nothing has to be explained.", "open"
        ),
    ]
    certainty: Annotated[Certainty, text("How sure that is; `shown` only by a measured precharge.", "open")]
    deciding_measurement: Annotated[
        str | None,
        text(
            "The measurement that would decide, where the evidence does not.",
            "Isolate and drain the vessel and measure its precharge.",
        ),
    ] = None
    explanations: Annotated[list[ReadingExplanation], text("Both explanations, liquid first.")]


class FillingToday(AnswerPart, frozen=True, kw_only=True):
    """Where the present filling lies in the fill window, as readings at the temperature of the reading."""

    position: Annotated[Position, text("Where the filling lies in the window.", "below")]
    reading: Annotated[q.Pressure, text("What the gauge shows today.")]
    lower: Annotated[
        q.Pressure | None, text("Lowest reading that keeps every check. Absent without a window.")
    ] = None
    upper: Annotated[
        q.Pressure | None, text("Highest reading that keeps every check. Absent without a window.")
    ] = None
    above_lower: Annotated[q.PressureDifference | None, text("Reading less the lowest.")] = None
    below_upper: Annotated[q.PressureDifference | None, text("Highest less the reading.")] = None


class SetInstead(AnswerPart, frozen=True, kw_only=True):
    """What to set on this vessel, and whether it then holds."""

    verdict: Annotated[Verdict, text("Whether the loop holds once set so.", "holds")]
    keep_precharge: Annotated[bool, text("Whether the precharge can stay as it is.", False)]
    precharge: Annotated[q.Pressure, text("Precharge, read on site today with the vessel drained.")]
    fill_pressure: Annotated[
        q.Pressure | None,
        text("Reading to fill to at today's temperature. Absent where the vessel is empty or full at it."),
    ] = None
    temperature: Annotated[q.Temperature, text("The temperature both hold for.")]
    add: Annotated[
        q.Volume | None,
        text(
            "Liquid to add to what loop and vessel hold, negative to drain. Absent until a measurement has decided how "
            "the vessel stands."
        ),
    ] = None
    at_least: Annotated[
        bool | None, text("True where more may have to be added: the vessel is empty.", True)
    ] = None
    window: Annotated[FillWindow | None, text("The fill window with that precharge.")] = None
    smallest_volume: Annotated[
        q.Volume | None,
        text("Smallest nominal volume that would hold, where this one does not. Absent where none would."),
    ] = None


class AuditAction(AnswerPart, frozen=True, kw_only=True):
    """Something to do, in the order given."""

    code: Annotated[str, text("Stable code.", "measure-precharge")]
    message: Annotated[str, text("What to do, with its numbers.", "Isolate and drain the vessel.")]
    parameters: Annotated[
        dict[str, AnyQuantity],
        text(
            "The numbers of the message by name, for translation.",
            {"precharge": {"value": 1.627, "unit": "barg"}},
        ),
    ]


class VesselAuditResult(AnswerPart, frozen=True, kw_only=True):
    """An audited vessel. The verdict is the worst of the ways in which the evidence lets the vessel stand."""

    verdict: Annotated[Verdict, text("Whether the loop holds as found.", "does-not-hold")]
    basis: Annotated[Basis, text("`provisional` while anything is still to be confirmed.", "provisional")]
    finding: Annotated[GaugeFinding, text("What the gauge says.")]
    standing: Annotated[
        VesselStanding, text("How the vessel stands: as measured, else the worst that the evidence allows.")
    ]
    filling: Annotated[FillingToday, text("Where the filling lies in the window.")]
    set_instead: Annotated[SetInstead, text("What to set instead.")]
    actions: Annotated[list[AuditAction], text("What to do, in order.")]
    checks: Annotated[list[Check], text("Every check of the vessel as it stands.")]
    doubts: Annotated[list[Doubt], text("Every doubt and what came of it.")]
    to_confirm: Annotated[list[Provisional], text("What makes the basis provisional.")]
    vessel: Annotated[VesselResult, text("The vessel.")]
    content: Annotated[LoopContent, text("The content of the loop.")]
    window: Annotated[FillWindow | None, text("The fill window as it stands. Absent where it is empty.")] = (
        None
    )
    states: Annotated[list[LiquidState], text("The states without steam.")]
    stagnation: Annotated[
        list[StagnationState], text("Stagnation in the base case, under each doubt and under all at once.")
    ]


class VesselAuditAnswer(Answer, frozen=True, kw_only=True):
    """The answer to a vessel audit."""

    result: Annotated[VesselAuditResult, text("The audit.")]
