"""The answers about a loop and its vessel: contents, states, stagnation, selection, settings.

Structs only; ``writing`` fills them. Verdicts come first in every result, and a vessel is called chosen only where
its verdict allows it.
"""

from typing import Annotated, Literal

from loopslack.calc.equilibrium import Regime
from loopslack.calc.judgement import DoubtVerdict
from loopslack.calc.reasons import ReasonCode
from loopslack.calc.selection import RankedBy
from loopslack.calc.states import StateId
from loopslack.contract import quantity as q
from loopslack.contract.answers.shared import AnswerPart, AnyQuantity, CheckVerdict, Verdict
from loopslack.contract.questions.fields import text

PartKind = Literal["collectors", "pipe-run", "station", "vessel-line", "cooling-vessel"]
ReadingState = Literal["fill", "cold", "operating", "stagnation", "stagnation-worst-doubt"]
ScenarioId = Literal["base", "warm-gas", "hotter-stagnation", "worse-emptying", "closed-branch", "all-doubts"]
DoubtId = Literal["warm-gas", "hotter-stagnation", "worse-emptying", "closed-branch"]
OmittedReason = Literal["fluid-frozen", "no-window", "vessel-empty-or-full"]


class PartContent(AnswerPart, frozen=True, kw_only=True, gc=False):
    """What one part holds."""

    kind: Annotated[PartKind, text("Kind of the part.", "pipe-run")]
    name: Annotated[str, text("Name of the part.", "flow")]
    content: Annotated[q.Volume, text("Liquid in the part.")]
    low: Annotated[q.Volume | None, text("Lower end of the range, where the content was assumed.")] = None
    high: Annotated[q.Volume | None, text("Upper end of the range, where the content was assumed.")] = None


class LoopContent(AnswerPart, frozen=True, kw_only=True):
    """What the loop holds without the expansion vessel."""

    total: Annotated[q.Volume, text("The whole loop.")]
    low: Annotated[q.Volume | None, text("Lower end, with every assumed part at its lower end.")] = None
    high: Annotated[q.Volume | None, text("Upper end, with every assumed part at its upper end.")] = None
    collectors: Annotated[q.Volume, text("All collectors.")]
    pipes: Annotated[q.Volume, text("All pipe runs.")]
    parts: Annotated[list[PartContent], text("What each part holds.")]


class FillWindow(AnswerPart, frozen=True, kw_only=True):
    """Fill pressures at the vessel that keep every check, with the loop at one temperature."""

    temperature: Annotated[q.Temperature, text("Temperature of loop and gas while filling.")]
    lower: Annotated[q.Pressure, text("Lowest fill pressure.")]
    recommended: Annotated[q.Pressure, text("Recommended fill pressure.")]
    upper: Annotated[q.Pressure, text("Highest fill pressure.")]
    width: Annotated[q.PressureDifference, text("Upper bound less lower bound.")]
    wide_enough: Annotated[bool, text("Whether an installer can hit it.", True)]
    lower_set_by: Annotated[str, text("The check that sets the lower bound.", "boiling-at-cut-off")]
    upper_set_by: Annotated[str, text("The check that sets the upper bound.", "relief-valve")]
    lower_under: Annotated[str, text("State or doubt under which it does.", "cut-off")]
    upper_under: Annotated[str, text("State or doubt under which it does.", "hotter-stagnation")]


class LiquidState(AnswerPart, frozen=True, kw_only=True):
    """A state of the loop without steam. Pressures are absent where the vessel is empty: they are not defined."""

    id: Annotated[StateId, text("The state.", "cold")]
    vessel_liquid: Annotated[q.Volume, text("Liquid in the vessel; negative is what is missing.")]
    vessel_pressure: Annotated[q.Pressure | None, text("Pressure at the vessel connection.")] = None
    top_pressure: Annotated[q.Pressure | None, text("Pressure at the highest point.")] = None
    gauge_reading: Annotated[q.Pressure | None, text("Pressure at the gauge.")] = None
    vessel_temperature: Annotated[q.Temperature, text("Temperature of gas and liquid in the vessel.")]
    frozen: Annotated[bool | None, text("True where it freezes: the state is at that point.", True)] = None


class SteamReach(AnswerPart, frozen=True, kw_only=True, gc=False):
    """How far steam fills one pipe run, measured from the collectors."""

    pipe_run: Annotated[str, text("The pipe run.", "flow")]
    reach: Annotated[q.Length, text("Length filled with steam.")]
    length: Annotated[q.Length, text("Length of the run.")]


class StagnationState(AnswerPart, frozen=True, kw_only=True):
    """The loop at rest in full sun, under the base case or a doubt."""

    scenario: Annotated[ScenarioId, text("Base case or doubt.", "base")]
    verdict: Annotated[CheckVerdict, text("Whether every check that decides holds in it.", "holds")]
    regime: Annotated[Regime, text("What the loop does.", "steam")]
    vessel_pressure: Annotated[
        q.Pressure | None, text("Pressure at the vessel. Absent when it is empty or its membrane full.")
    ] = None
    lower_bound: Annotated[
        bool | None,
        text("True where pressure and steam are lower bounds: valve open, or steam left over.", True),
    ] = None
    steam_temperature: Annotated[q.Temperature, text("Steam, or hottest liquid where nothing boils.")]
    stagnation_temperature: Annotated[
        q.Temperature, text("Stagnation temperature of the hottest collector group, with the doubt.")
    ]
    steam_power: Annotated[q.Power, text("What the collectors send out as steam.")]
    steam_volume: Annotated[q.Volume, text("Steam in collectors and pipes.")]
    reach: Annotated[list[SteamReach], text("Steam in each open pipe run.")]
    unspent_power: Annotated[q.Power, text("Steam power that nothing condenses: it reaches the station.")]
    vessel_liquid: Annotated[
        q.Volume, text("Liquid in the vessel, or what it would have to hold where its membrane is full.")
    ]
    gas_temperature: Annotated[q.Temperature, text("Temperature of the gas.")]
    mixed_temperature: Annotated[q.Temperature, text("Liquid in the vessel, mixed.")]
    last_arriving_temperature: Annotated[q.Temperature, text("Liquid that arrives in the vessel last.")]


class Doubt(AnswerPart, frozen=True, kw_only=True, gc=False):
    """One doubt about the base case, and whether the design survives it."""

    id: Annotated[DoubtId, text("The doubt.", "hotter-stagnation")]
    verdict: Annotated[DoubtVerdict, text("What came of it.", "holds")]
    meaning: Annotated[str, text("What is doubted.", "Stagnation 15 K hotter than computed.")]


class CoolingVesselResult(AnswerPart, frozen=True, kw_only=True, gc=False):
    """The cooling vessel that belongs to the expansion vessel. Without it the membrane would get too hot."""

    content: Annotated[q.Volume, text("Its content; the smallest that keeps the membrane within its limit.")]
    least_rated_pressure: Annotated[q.Pressure, text("Rated pressure it must have at least.")]
    place: Annotated[
        str, text("Where the cooling vessel goes.", "In the line before the expansion vessel, uninsulated.")
    ]


class VesselResult(AnswerPart, frozen=True, kw_only=True):
    """A vessel in the loop, with the cooling vessel it needs."""

    id: Annotated[str, text("The caller's name for the article, or the size.", "preferred-100")]
    pieces: Annotated[int, text("How many equal ones.", 1)]
    nominal_volume: Annotated[q.Volume, text("Nominal volume of one.")]
    total_nominal_volume: Annotated[q.Volume, text("Nominal volume of all.")]
    rated_pressure: Annotated[q.Pressure | None, text("Rated pressure, where stated.")] = None
    acceptance_volume: Annotated[q.Volume | None, text("Acceptance volume of one, where stated.")] = None
    price: Annotated[q.Price | None, text("Price of all, where stated.")] = None
    cooling_vessel: Annotated[CoolingVesselResult | None, text("The cooling vessel it needs.")] = None


class SizedVolume(AnswerPart, frozen=True, kw_only=True):
    """A nominal volume that holds, with the cooling vessel it needs."""

    smallest: Annotated[q.Volume, text("Smallest nominal volume.")]
    largest: Annotated[q.Volume | None, text("Largest nominal volume, where there is an upper end.")] = None
    cooling_content: Annotated[q.Volume, text("Content of the cooling vessel at the smallest.")]
    precharge: Annotated[q.Pressure, text("Precharge at the smallest.")]
    floor: Annotated[
        q.Volume | None,
        text("Least volume asked for of a loop that relies on not boiling, where that is what decides."),
    ] = None


class Volumes(AnswerPart, frozen=True, kw_only=True):
    """Nominal volumes by how much they survive. Absent where no volume does."""

    base: Annotated[SizedVolume | None, text("Holds the base case only: never recommended.")] = None
    recommended: Annotated[SizedVolume | None, text("Holds under every doubt the policy asks for.")] = None
    robust: Annotated[SizedVolume | None, text("Holds under all doubts at once.")] = None


class RefusalReason(AnswerPart, frozen=True, kw_only=True, gc=False):
    """Why a vessel was refused, and by how much. `unspent-power` is the loop's: the others are what it needs beside."""

    code: Annotated[ReasonCode, text("Why the vessel is refused.", "acceptance-volume")]
    value: Annotated[
        AnyQuantity | None, text("What the vessel has; steam power left over as `steam-at-station` has it.")
    ] = None
    limit: Annotated[AnyQuantity | None, text("What it would need, or the most that may be.")] = None
    short_by: Annotated[
        AnyQuantity | None, text("The change that settles it; steam power is what a cooler must take more.")
    ] = None


class RefusedVessel(AnswerPart, frozen=True, kw_only=True, gc=False):
    """A candidate that was refused."""

    id: Annotated[str, text("Identifier of the vessel in its list.", "preferred-80")]
    pieces: Annotated[int, text("How many equal ones were looked at.", 1)]
    verdict: Annotated[Verdict, text("Always `does-not-hold` for the policy asked for.", "does-not-hold")]
    reasons: Annotated[list[RefusalReason], text("Every reason.")]
    as_sized: Annotated[
        bool | None,
        text(
            "True where it was only looked at, with the cooling vessel of the smallest volume and larger ones, and "
            "might do after all: of a long list not every vessel is solved for itself. Ask for it as the given "
            "vessel to be sure.",
            True,
        ),
    ] = None


class Alternative(AnswerPart, frozen=True, kw_only=True, gc=False):
    """A candidate ranked after the chosen one that would do too, with a cooling vessel where it needs one."""

    id: Annotated[str, text("Identifier of the vessel in its list.", "preferred-125")]
    pieces: Annotated[int, text("How many equal ones.", 1)]


class Selection(AnswerPart, frozen=True, kw_only=True):
    """How the vessel was chosen from the candidates."""

    ranked_by: Annotated[
        RankedBy, text("By price where all have one in one currency, else by volume.", "volume")
    ]
    considered: Annotated[int, text("How many candidates.", 21)]
    refused: Annotated[list[RefusedVessel], text("Every refused candidate.")]
    alternatives: Annotated[list[Alternative], text("Others that would do, in rank; the first twenty.")]
    alternatives_omitted: Annotated[int, text("How many more would do.", 0)]


class FillRow(AnswerPart, frozen=True, kw_only=True):
    """Fill pressures by the temperature of the day."""

    temperature: Annotated[q.Temperature, text("Temperature of loop and gas.")]
    lower: Annotated[q.Pressure | None, text("Lowest fill pressure at this temperature.")] = None
    recommended: Annotated[q.Pressure | None, text("Recommended fill pressure at this temperature.")] = None
    upper: Annotated[q.Pressure | None, text("Highest fill pressure at this temperature.")] = None
    reading: Annotated[q.Pressure | None, text("What the gauge shows at the recommended one.")] = None
    omitted: Annotated[OmittedReason | None, text("Why there are no numbers.", "fluid-frozen")] = None


class GaugeReading(AnswerPart, frozen=True, kw_only=True, gc=False):
    """What the gauge should show."""

    state: Annotated[ReadingState, text("The state.", "cold")]
    reading: Annotated[q.Pressure | None, text("The reading. Absent where the vessel is empty.")] = None
    at_least: Annotated[bool | None, text("True where the reading may be higher.", True)] = None


class ClosedForms(AnswerPart, frozen=True, kw_only=True, gc=False):
    """Fill pressures by the closed forms of EN 12828, for liquid expansion only: no bound for a loop that boils."""

    lower: Annotated[q.Pressure, text("Lowest fill pressure by the closed form.")]
    upper: Annotated[q.Pressure, text("Highest fill pressure by the closed form.")]


class SettingsCard(AnswerPart, frozen=True, kw_only=True):
    """What to hand to the installer."""

    precharge: Annotated[
        q.Pressure, text("Gas pressure of the empty vessel at `prechargeTemperature`, read on site.")
    ]
    precharge_temperature: Annotated[q.Temperature, text("Temperature it is set at.")]
    fill_pressure: Annotated[
        q.Pressure, text("Recommended at the vessel at `temperatures.fill`; on other days `byTemperature`.")
    ]
    window: Annotated[FillWindow, text("The fill window.")]
    by_temperature: Annotated[list[FillRow], text("Fill pressures by the temperature of the day.")]
    readings: Annotated[list[GaugeReading], text("What the gauge should show in each state.")]
    gauge_range: Annotated[q.Pressure | None, text("Upper end of a suitable gauge.")] = None
    final_pressure: Annotated[q.Pressure, text("Highest vessel pressure with the valve sure to stay shut.")]
    relief_set_pressure: Annotated[q.Pressure, text("Set pressure of the relief valve.")]
    top_pressure_cold: Annotated[q.Pressure | None, text("Pressure at the highest point when cold.")] = None
    static_height: Annotated[q.Length, text("Highest point above the vessel connection.")]
    relief_height: Annotated[q.Length, text("Relief valve above the vessel connection.")]
    gauge_height: Annotated[q.Length, text("Gauge above the vessel connection.")]
    closed_forms: Annotated[ClosedForms | None, text("EN 12828's closed forms, for comparison.")] = None
    instructions: Annotated[
        list[str], text("What to do and check, in order.", ["Fill only with the collectors covered."])
    ]


class Provisional(AnswerPart, frozen=True, kw_only=True, gc=False):
    """Why the answer is provisional."""

    code: Annotated[
        str, text("Why: a stable code, shown with its meaning under /docs/codes.", "rating-unstated")
    ]
    field: Annotated[
        str | None,
        text(
            "The member that would settle it, as JSON Pointer (RFC 6901) into the design; absent where none would.",
            "/station/ratedPressure",
        ),
    ] = None
    subject: Annotated[
        str | None, text("The part concerned, or else the reason why its check could not be made.", "station")
    ] = None
