"""The answer of each operation: its result, and beside it assumptions, advisories, cautions and provenance.

Parts that cost time to compute are members of their own, present only when asked for.
"""

from typing import Annotated

from loopslack.contract import quantity as q
from loopslack.contract.answers.band import ToleranceBand
from loopslack.contract.answers.course import CourseSummary, StagnationCourseResult
from loopslack.contract.answers.derivation import Derivation
from loopslack.contract.answers.loop import (
    Doubt,
    FillWindow,
    LiquidState,
    LoopContent,
    Provisional,
    Selection,
    SettingsCard,
    StagnationState,
    VesselResult,
    Volumes,
)
from loopslack.contract.answers.order import OrderList
from loopslack.contract.answers.remedies import Discharge, Remedies, RobustCooler
from loopslack.contract.answers.shared import (
    Advisory,
    AnswerPart,
    Assumption,
    Basis,
    Caution,
    Check,
    Provenance,
    Verdict,
)
from loopslack.contract.answers.sizing import RuleComparison, Sensitivity, Walk
from loopslack.contract.questions.fields import text

_NEAREST = (
    "The candidate all numbers are of, where none is chosen: the one that fails least, by its verdict, then by the "
    "number of core checks that fail in the base case and under the doubts that count, then by what they miss in all, "
    "then by the number of reasons against it, then by rank. Of more than eight kinds some eight are judged. Do not "
    "build it."
)
_WINDOW = (
    "It counts the base case and every doubt that `doubtPolicy` asks for, as the check `fill-window` of "
    "`required-doubts` does. Absent where it is empty or too narrow to recommend a fill pressure in it."
)


class Answer(AnswerPart, frozen=True, kw_only=True):
    """What stands beside every result."""

    result: Annotated[AnswerPart, text("What was asked for; where it is judged, with the verdict first.")]
    assumptions: Annotated[list[Assumption], text("Every default that was used.")]
    advisories: Annotated[list[Advisory], text("What to know about this loop, gravest first.")]
    cautions: Annotated[list[Caution], text("Dangers that every such loop has.")]
    provenance: Annotated[Provenance, text("What computed the answer.")]


class LoopVolumeResult(AnswerPart, frozen=True, kw_only=True):
    """The content of a loop."""

    content: Annotated[LoopContent, text("By part and in total.")]


class LoopVolumeAnswer(Answer, frozen=True, kw_only=True):
    """The answer to a loop volume question."""

    result: Annotated[LoopVolumeResult, text("The content.")]


class FluidState(AnswerPart, frozen=True, kw_only=True):
    """The fluid at one temperature."""

    temperature: Annotated[q.Temperature, text("The temperature.")]
    density: Annotated[q.Density, text("Liquid density.")]
    bubble_pressure: Annotated[
        q.Pressure | None, text("Pressure below which it boils, where the bubble line is known.")
    ] = None
    heat_capacity: Annotated[q.SpecificHeat | None, text("Heat capacity, where known.")] = None


class ExpansionResult(AnswerPart, frozen=True, kw_only=True):
    """How a fluid expands between two temperatures."""

    mass_concentration: Annotated[q.MassPercent, text("Glycol by mass.")]
    volume_concentration: Annotated[q.VolumePercent, text("Glycol by volume before mixing.")]
    start: Annotated[FluidState, text("The fluid at the start.")]
    end: Annotated[FluidState, text("The fluid at the end.")]
    relative_expansion: Annotated[q.Ratio, text("Growth in volume as a share of the start.")]
    expansion_volume: Annotated[q.Volume | None, text("Growth of the stated content.")] = None
    freezing_point: Annotated[q.Temperature, text("Where the first ice appears.")]
    boiling_point: Annotated[
        q.Temperature | None, text("Where it boils at the stated pressure, or at the site's atmosphere.")
    ] = None
    boiling_pressure: Annotated[q.Pressure | None, text("The pressure that boiling point is for.")] = None


class ExpansionAnswer(Answer, frozen=True, kw_only=True):
    """The answer to an expansion question."""

    result: Annotated[ExpansionResult, text("The expansion.")]


class JudgedResult(AnswerPart, frozen=True, kw_only=True):
    """A judged vessel. The verdict is the worst of the core checks under the doubts the policy asks for."""

    verdict: Annotated[Verdict, text("Whether the design holds.", "holds")]
    basis: Annotated[Basis, text("`provisional` while anything is still to be confirmed.", "firm")]
    robust: Annotated[bool, text("Whether all doubts at once are survived.", False)]
    doubts: Annotated[list[Doubt], text("Every doubt and what came of it.")]
    checks: Annotated[list[Check], text("Every check.")]
    to_confirm: Annotated[list[Provisional], text("What makes the basis provisional.")]
    content: Annotated[LoopContent, text("The content of the loop.")]
    window: Annotated[FillWindow | None, text("The fill window. " + _WINDOW)] = None
    states: Annotated[list[LiquidState], text("The states without steam.")]
    stagnation: Annotated[
        list[StagnationState], text("Stagnation in the base case, under each doubt and under all at once.")
    ]
    band: Annotated[ToleranceBand | None, text("What the stated tolerances do. Absent without any.")] = None


class VesselSizingResult(AnswerPart, frozen=True, kw_only=True):
    """How large the vessel must be, by every rule, and which one to take."""

    verdict: Annotated[Verdict, text("Whether the chosen, or the nearest, vessel holds.", "holds")]
    basis: Annotated[Basis, text("`provisional` while anything is still to be confirmed.", "firm")]
    chosen_vessel: Annotated[
        VesselResult | None, text("The vessel to take. Absent unless the verdict allows one.")
    ] = None
    nearest_vessel: Annotated[VesselResult | None, text(_NEAREST)] = None
    volumes: Annotated[Volumes, text("Nominal volumes by how much they survive.")]
    rules: Annotated[list[RuleComparison], text("Every rule side by side.")]
    walk: Annotated[
        Walk | None,
        text("From the smallest rule to the recommended volume. Absent where no volume holds."),
    ] = None
    window: Annotated[FillWindow | None, text("The fill window of that vessel. " + _WINDOW)] = None
    precharge: Annotated[q.Pressure, text("Precharge at the temperature it is set at, read on site.")]
    selection: Annotated[Selection, text("How the vessel was chosen.")]
    checks: Annotated[list[Check], text("Every check of that vessel.")]
    to_confirm: Annotated[list[Provisional], text("What makes the basis provisional.")]
    doubts: Annotated[list[Doubt], text("Every doubt and what came of it.")]
    band: Annotated[ToleranceBand | None, text("What the stated tolerances do. Absent without any.")] = None


class VesselSizingAnswer(Answer, frozen=True, kw_only=True):
    """The answer to a vessel sizing question."""

    result: Annotated[VesselSizingResult, text("The sizing.")]
    derivation: Annotated[Derivation | None, text("Every number with its equation, if asked for.")] = None


class StagnationCheckResult(JudgedResult, frozen=True, kw_only=True):
    """What a given vessel does in stagnation."""

    vessel: Annotated[VesselResult, text("The vessel.")]
    precharge: Annotated[q.Pressure, text("Its precharge, read on site.")]
    fill_pressure: Annotated[
        q.Pressure | None,
        text("The fill pressure it was judged at, at the vessel and at `temperatures.fill`."),
    ] = None
    discharge: Annotated[
        list[Discharge], text("What leaves through the valve, in every case in which it opens.")
    ]


class StagnationCheckAnswer(Answer, frozen=True, kw_only=True):
    """The answer to a stagnation check."""

    result: Annotated[StagnationCheckResult, text("The check.")]
    remedies: Annotated[Remedies | None, text("What would make it hold.")] = None
    derivation: Annotated[Derivation | None, text("Every number with its equation, if asked for.")] = None
    course: Annotated[CourseSummary | None, text("A day without flow, if asked for.")] = None


class StagnationCourseAnswer(Answer, frozen=True, kw_only=True):
    """The answer to a question about a day without flow."""

    result: Annotated[StagnationCourseResult, text("The day.")]


class LoopDesignResult(JudgedResult, frozen=True, kw_only=True):
    """A designed loop."""

    chosen_vessel: Annotated[
        VesselResult | None, text("The vessel to take. Absent unless the verdict allows one.")
    ] = None
    nearest_vessel: Annotated[
        VesselResult | None,
        text(_NEAREST),
    ] = None
    volumes: Annotated[Volumes, text("Nominal volumes by how much they survive.")]
    selection: Annotated[Selection, text("How the vessel was chosen.")]
    settings: Annotated[
        SettingsCard | None, text("Settings for the installer. Absent where `window` is.")
    ] = None
    order: Annotated[OrderList, text("What to order.")]
    discharge: Annotated[
        list[Discharge], text("What leaves through the valve, in every case in which it opens.")
    ]


class LoopDesignAnswer(Answer, frozen=True, kw_only=True):
    """The answer to a loop design question."""

    result: Annotated[LoopDesignResult, text("The design.")]
    remedies: Annotated[Remedies | None, text("What would make the loop hold.")] = None
    robust_cooler: Annotated[
        RobustCooler | None, text("The cooler that would let a vessel survive all doubts, with `remedies`.")
    ] = None
    derivation: Annotated[Derivation | None, text("Every number with its equation, if asked for.")] = None
    rules: Annotated[list[RuleComparison] | None, text("Every rule side by side, if asked for.")] = None
    walk: Annotated[Walk | None, text("From the smallest rule to the recommended volume, with `rules`.")] = (
        None
    )
    sensitivity: Annotated[Sensitivity | None, text("What moves the volume, if asked for.")] = None
    course: Annotated[CourseSummary | None, text("A day without flow, if asked for.")] = None
