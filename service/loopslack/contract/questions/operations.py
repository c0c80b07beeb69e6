"""The questions about a loop: what each operation takes.

Shared members are inherited, so that a member has one description and one range; the published document
shows each question in full. Reading a question into SI lives in ``reading``.
"""

from typing import Annotated

from msgspec import Meta

from loopslack.calc.judgement import DoubtPolicy
from loopslack.contract.quantity import Length, Pressure, Temperature, Volume
from loopslack.contract.questions.collectors import CollectorGroup, DesignSun, QuestionPart
from loopslack.contract.questions.criteria import (
    Criteria,
    Include,
    Rules,
    Tolerances,
    UnitSystem,
)
from loopslack.contract.questions.fields import quantity, text
from loopslack.contract.questions.fluid import Fluid
from loopslack.contract.questions.pipes import PipeRun, Zone
from loopslack.contract.questions.plant import (
    Construction,
    LoopTemperatures,
    PressureGauge,
    Pump,
    RatedPart,
    ReliefValve,
    Site,
    Station,
    VesselLine,
)
from loopslack.contract.questions.vessels import (
    CoolingVessel,
    ExpansionVessel,
    FixedCoolingVessel,
    Precharge,
    VesselChoice,
)

Collectors = Annotated[
    list[CollectorGroup],
    Meta(min_length=1, max_length=50, description="The collectors, in groups of equal ones."),
]
PipeRuns = Annotated[
    list[PipeRun],
    Meta(min_length=1, max_length=50, description="The pipes between collectors and station."),
]
Parts = Annotated[list[RatedPart], Meta(max_length=100)]


class Question(QuestionPart, frozen=True, kw_only=True):
    """What every question may say about its answer."""

    units: Annotated[UnitSystem | None, text("Units of the answer. If absent, `metric`.", "metric")] = None


class LoopVolumeQuestion(Question, frozen=True, kw_only=True):
    """The parts of a loop whose content is asked for."""

    collectors: Collectors
    pipe_runs: PipeRuns
    station: Annotated[Station | None, text("Pump group and heat exchanger.")] = None
    vessel_line: Annotated[VesselLine | None, text("The line to the vessel.")] = None
    cooling_vessel: Annotated[
        FixedCoolingVessel | None, text("A cooling vessel before the expansion vessel. If absent, none.")
    ] = None


class ExpansionQuestion(Question, frozen=True, kw_only=True):
    """A fluid and two temperatures: how much it expands, when it freezes and boils."""

    fluid: Annotated[Fluid, text("The fluid.")]
    start_temperature: Annotated[
        Temperature,
        quantity("Temperature to start from, at which the fluid is a liquid.", 15, "degC", -60, 250),
    ]
    end_temperature: Annotated[
        Temperature,
        quantity(
            "Temperature to end at, at which the fluid is a liquid whose density is known.",
            120,
            "degC",
            -60,
            250,
        ),
    ]
    content: Annotated[
        Volume | None,
        quantity("Volume at the start, to give the expansion as a volume.", 42.6, "L", 0, 100_000),
    ] = None
    pressure: Annotated[
        Pressure | None,
        quantity("Pressure at which it boils. If absent, the atmosphere.", 4.4, "barg", -0.9, 20),
    ] = None
    altitude: Annotated[
        Length | None,
        quantity("Height above mean sea level. If absent, sea level.", 0, "m", -430, 5000),
    ] = None


class LoopQuestion(Question, frozen=True, kw_only=True):
    """A loop as far as its pressures depend on it."""

    site: Annotated[Site, text("Where the loop stands.")]
    collectors: Collectors
    pipe_runs: PipeRuns
    fluid: Annotated[Fluid, text("The fluid.")]
    static_height: Annotated[
        Length,
        quantity(
            "Height of the collectors above the vessel connection; negative below it.", 11, "m", -150, 150
        ),
    ]
    relief_valve: Annotated[ReliefValve, text("The relief valve.")]
    highest_point: Annotated[
        Length | None,
        quantity(
            "Height of the highest point of the loop above the vessel connection. If absent, that of the "
            "highest part, above which it lies.",
            11,
            "m",
            -150,
            160,
        ),
    ] = None
    station: Annotated[Station | None, text("Pump group and heat exchanger.")] = None
    vessel_line: Annotated[VesselLine | None, text("The line to the vessel.")] = None
    pump: Annotated[Pump | None, text("The pump.")] = None
    gauge: Annotated[PressureGauge | None, text("The gauge that is read.")] = None
    parts: Annotated[
        Parts | None,
        text("Parts with ratings: collectors, exchanger, fittings. Without ratings no full verdict."),
    ] = None
    construction: Annotated[Construction | None, text("How the loop is built, where that matters.")] = None
    temperatures: Annotated[LoopTemperatures | None, text("Temperatures of the states.")] = None
    vessel_zone: Annotated[
        Zone | None, text("Whether the vessel stands indoors. If absent, `indoor`.", "indoor")
    ] = None
    design_sun: Annotated[DesignSun | None, text("The sun of the stagnation designed for.")] = None
    criteria: Annotated[Criteria | None, text("What must hold.")] = None
    doubt_policy: Annotated[
        DoubtPolicy | None,
        text(
            "Which doubts a design must survive: each singly, all at once, or none (then nothing is ever "
            "called "
            "holding). If absent, `single`.",
            "single",
        ),
    ] = None
    accept_without_boiling: Annotated[
        bool | None,
        text(
            "Accept a vessel smaller than EN 12977 asks for because the collectors do not boil empty. "
            "Counts only with a "
            "measured stagnation temperature for every group. If absent, false.",
            False,
        ),
    ] = None
    include: Annotated[
        Include | None,
        text(
            "Costly parts of the answer to compute. If absent, remedies when the verdict is not `holds`.",
            ["rules", "derivation"],
        ),
    ] = None


class SizingQuestion(LoopQuestion, frozen=True, kw_only=True):
    """A loop and the vessels to choose from."""

    precharge: Annotated[Precharge | None, text("How to set the precharge. If absent, by rule.")] = None
    vessel: Annotated[
        VesselChoice | None, text("Which vessels may be chosen. If absent, the series of ISO 3.")
    ] = None
    vessels_in_parallel: Annotated[
        Annotated[int, Meta(ge=1, le=10)] | None,
        text("Up to how many equal vessels may stand in parallel. If absent, 1.", 1),
    ] = None
    cooling_vessel: Annotated[
        CoolingVessel | None, text("A cooling vessel before the expansion vessel. If absent, `size`.")
    ] = None
    tolerances: Annotated[Tolerances | None, text("How far inputs may be off.")] = None
    rules: Annotated[
        Rules | None,
        text(
            "The published rules to compute beside the recommendation. If absent, all. A design computes them where "
            "`include` has `rules`."
        ),
    ] = None


class VesselSizingQuestion(SizingQuestion, frozen=True, kw_only=True):
    """A loop whose vessel is to be sized by the published rules side by side."""


class LoopDesignQuestion(SizingQuestion, frozen=True, kw_only=True):
    """A loop to be designed in one call: vessel, settings, order list, checks."""


class VesselQuestion(LoopQuestion, frozen=True, kw_only=True):
    """A loop with its vessel."""

    vessel: Annotated[ExpansionVessel, text("The vessel.")]
    vessels_in_parallel: Annotated[
        Annotated[int, Meta(ge=1, le=10)] | None, text("How many equal ones there are. If absent, one.", 1)
    ] = None
    cooling_vessel: Annotated[
        FixedCoolingVessel | None, text("A cooling vessel before the expansion vessel. If absent, none.")
    ] = None


class StagnationCheckQuestion(VesselQuestion, frozen=True, kw_only=True):
    """A loop with its vessel and settings, to be checked in stagnation."""

    precharge: Annotated[Precharge | None, text("How the precharge is set. If absent, by rule.")] = None
    fill_pressure: Annotated[
        Pressure | None,
        quantity(
            "Pressure at the vessel when filled, at the fill temperature. If absent, the recommended one.",
            1.9,
            "barg",
            0,
            30,
        ),
    ] = None
    tolerances: Annotated[Tolerances | None, text("How far inputs may be off.")] = None
