"""Names and meanings of the words that questions use.

A value that `loopslack.contract` has and this table has not is refused when the document is assembled.
"""

from __future__ import annotations

from loopslack.api.document.vocabulary import NamedUnion, NamedValues, named
from loopslack.contract.questions import existing, fluid, pipes, plant, vessels
from loopslack.contract.questions.collectors import EMPTYING_CLASSES

QUESTION_LISTS: tuple[NamedValues, ...] = (
    named(
        "UnitSystem",
        "Systems of units an answer can be given in.",
        {
            "metric": "Metre, litre, bar, degree Celsius, watt",
            "us": "Foot, US gallon, psi, degree Fahrenheit, BTU per hour",
        },
    ),
    named(
        "AreaBasis",
        "Which of a collector's areas is meant.",
        {
            "gross": "Outer area of the collector with its frame",
            "aperture": "Area through which sunlight enters",
            "absorber": "Area of the absorber itself",
        },
    ),
    named(
        "CollectorType",
        "Builds of collectors.",
        {
            "flat-plate": "Flat plate behind glass",
            "evacuated-tube-direct": "Evacuated tubes with the loop's liquid flowing through them",
            "evacuated-tube-heat-pipe": "Evacuated tubes with heat pipes that give their heat to a header",
        },
    ),
    named(
        "EmptyingClass",
        "How well a collector field lets its steam push the liquid out; the rest boils off.",
        EMPTYING_CLASSES,
    ),
    named(
        "DoubtPolicy",
        "Which doubts about the inputs a design must survive to be said to hold.",
        {
            "single": "Each doubt by itself",
            "combined": "All doubts at once",
            "none": "None; a design is then at best favourable only",
        },
    ),
    named(
        "SizingRule",
        "Rules for the size of an expansion vessel. `GET /v1/rules` gives their sources.",
        {
            "ashrae-diaphragm": "Diaphragm vessel after the ASHRAE handbook: expansion only",
            "ashrae-closed": "Plain tank with an air cushion after the ASHRAE handbook: expansion only",
            "us-mechanical-code": "Plain tank after US mechanical codes: expansion of water only",
            "en-12828": "EN 12828 for heating systems: expansion and reserve",
            "collector-boil-off": "Textbook rule for glycol loops: collectors and a tenth of the content",
            "en-12977": "EN 12977 for solar systems: expansion, reserve, 1.1 times the collectors",
            "idae-asit": "Spanish guide for solar systems: collectors and the pipes above them",
            "ufc": "Unified Facilities Criteria (US): collectors and all pipe at or above their bottom",
            "steam-range": "Expansion, reserve, collectors and the reach of steam along the pipes",
            "mass-balance": "The balance of liquid, steam and gas this service solves",
        },
    ),
    named(
        "DesignExtra",
        "Costly parts of an answer that are computed when asked for.",
        {
            "rules": "Published rules side by side and the walk between them",
            "remedies": "Changes that would make the design hold, each solved for its smallest amount",
            "sensitivity": "Inputs by how far they move the result",
            "course": "A day without flow",
            "derivation": "Every computed number with its equation, inputs and source",
        },
    ),
    named(
        "Glycol",
        "Glycols whose mixtures with water are known.",
        {
            "propylene-glycol": "Propylene glycol (propane-1,2-diol)",
            "ethylene-glycol": "Ethylene glycol, poisonous",
        },
    ),
    named(
        "GasBehaviour",
        "How the gas of the vessel behaves over a day.",
        {
            "isothermal": "It keeps the temperature of the room",
            "follows-liquid": "It takes on the temperature of the liquid in the vessel",
        },
    ),
    named("SheetLanguage", "Languages of a sheet.", {"en": "English", "de": "German"}),
    named("PaperSize", "Paper of a sheet.", {"a4": "ISO A4", "letter": "US Letter"}),
    named(
        "FigureName",
        "Figures of a sheet.",
        {
            "loop-schematic": "The loop to scale of heights, with the content of its parts",
            "pressure-over-height": "Pressure over height in each state",
            "pressure-over-liquid": "Pressure in the vessel against the liquid it holds",
            "fill-pressure-over-temperature": "Fill pressure against the temperature of the day",
            "rules": "Rules side by side",
            "walk": "The walk from the smallest to the recommended volume",
            "steam-reach": "How far steam reaches along the pipes",
            "day-course": "The day without flow",
            "sensitivity": "Inputs by how far they move the result",
        },
    ),
    named(
        "Zone",
        "Surroundings of a part.",
        {"indoor": "Inside a building", "outdoor": "In the open"},
    ),
    named(
        "PipeRole",
        "What a pipe run carries.",
        {"flow": "Hot liquid from the collectors", "return": "Liquid back to the collectors"},
    ),
    named(
        "SteamAccess",
        "Whether steam can push liquid down a pipe run.",
        {
            "open": "Nothing stands in its way",
            "closed": "A check valve stands in its way",
            "unknown": "Not known: both are computed",
        },
    ),
    named(
        "AllowanceRule",
        "Published rules for how far below its set pressure a relief valve must be expected to open.",
        {
            "en-12828": "EN 12828: 0.5 bar up to 5 bar, 10 % above",
            "ten-percent": "10 % of the set pressure",
            "task-26": "IEA SHC Task 26: 20 % up to 3 bar, 10 % above",
            "five-psi": "5 psi",
            "iso-4126-1": "The set tolerance of ISO 4126-1: 3 %, at least 0.1 bar",
        },
    ),
    named(
        "ReliefSize",
        "Nominal sizes of a relief valve's inlet.",
        {size: f"Nominal diameter {size[2:]}" for size in ("DN15", "DN20", "DN25", "DN32", "DN40", "DN50")},
    ),
    named(
        "PumpSide",
        "Side of the pump on which the vessel is connected.",
        {"suction": "Before the pump", "discharge": "Behind the pump"},
    ),
)

QUESTION_UNIONS: tuple[NamedUnion, ...] = (
    NamedUnion(
        name="Fluid",
        meaning="The fluid of the loop: a known one, or one of the caller's own.",
        members=(fluid.Water, fluid.PropyleneGlycol, fluid.EthyleneGlycol, fluid.OwnFluid),
    ),
    NamedUnion(
        name="Concentration",
        meaning="How much glycol a mixture holds.",
        members=(fluid.ByMass, fluid.ByVolume, fluid.ProtectTo),
    ),
    NamedUnion(
        name="BoilingBehaviour",
        meaning="How a fluid of the caller's own boils.",
        members=(fluid.BoilingTable, fluid.BoilingLike),
    ),
    NamedUnion(
        name="Tube",
        meaning="A tube, by standard and size, by bore, or by content per length.",
        members=(pipes.StandardTube, pipes.BoreTube, pipes.ContentTube),
    ),
    NamedUnion(
        name="Insulation",
        meaning="What stands between a pipe and its surroundings.",
        members=(pipes.NoInsulation, pipes.Insulated, pipes.Weathered),
    ),
    NamedUnion(
        name="OpeningAllowance",
        meaning="How far below its set pressure a relief valve must be expected to open.",
        members=(plant.AllowanceByRule, plant.AllowanceStated),
    ),
    NamedUnion(
        name="Precharge",
        meaning="How the precharge of a vessel is set.",
        members=(vessels.PrechargeByRule, vessels.PrechargeStated, vessels.PrechargeOptimised),
    ),
    NamedUnion(
        name="VesselChoice",
        meaning="The vessels a design may choose from.",
        members=(vessels.FromStock, vessels.FromSeries, vessels.GivenVessel),
    ),
    NamedUnion(
        name="CoolingVessel",
        meaning="A cooling vessel before the expansion vessel.",
        members=(vessels.CoolingVesselGiven, vessels.CoolingVesselNone, vessels.CoolingVesselSize),
    ),
    NamedUnion(
        name="FixedCoolingVessel",
        meaning="A cooling vessel that is there, or none.",
        members=(vessels.CoolingVesselGiven, vessels.CoolingVesselNone),
    ),
    NamedUnion(
        name="Weather",
        meaning="The sun and the air of a day.",
        members=(existing.ClearDay, existing.GivenDay),
    ),
    NamedUnion(
        name="CourseStart",
        meaning="How a day without flow begins.",
        members=(existing.ColdDawn, existing.PumpStop),
    ),
)
