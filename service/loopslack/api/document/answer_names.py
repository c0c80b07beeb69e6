"""Names and meanings of the words that answers use, and of structs whose own name is taken.

A value that `loopslack.contract` has and this table has not is refused when the document is assembled.
"""

from __future__ import annotations

from loopslack.api.document.vocabulary import NamedUnion, NamedValues, named
from loopslack.contract.answers import loop

SCHEMA_NAMES: dict[type, str] = {
    loop.GaugeReading: "ExpectedReading",
}

_SCENARIOS = {
    "base": "The base case",
    "warm-gas": "Gas in the vessel as warm as the liquid mixed",
    "hotter-stagnation": "Collectors that stagnate hotter than computed",
    "worse-emptying": "Collectors that empty one class worse",
    "closed-branch": "Pipe runs whose check valve is unknown, closed to steam",
    "all-doubts": "All doubts at once",
}

ANSWER_LISTS: tuple[NamedValues, ...] = (
    named(
        "Verdict",
        "Whether a design holds: the worst of all core checks, under the doubts asked for.",
        {
            "holds": "Every core check holds, under every doubt asked for",
            "favourable-only": "The base case holds, a doubt asked for does not or none was asked for",
            "does-not-hold": "The base case fails a core check",
            "not-assessed": "A core check could not be computed; never a pass",
        },
    ),
    named(
        "CheckVerdict",
        "What came of one check.",
        {
            "holds": "The value is on the safe side of its limit",
            "does-not-hold": "The value is beyond its limit",
            "not-assessed": "Not computed, or no limit was stated; never a pass",
        },
    ),
    named(
        "DoubtVerdict",
        "What came of one doubt.",
        {
            "holds": "The design survives it",
            "does-not-hold": "The design does not survive it",
            "not-assessed": "Not computed; never a pass",
            "not-applicable": "The loop gives no reason for it",
        },
    ),
    named(
        "Severity",
        "How grave an advisory is.",
        {
            "stop": "The design must not be built like this",
            "warning": "To be settled before building",
            "note": "Good to know",
        },
    ),
    named(
        "Basis",
        "How firm the ground of a verdict is.",
        {
            "firm": "Everything it rests on was stated",
            "provisional": "Something it rests on is still to be confirmed",
        },
    ),
    named(
        "CheckGroup",
        "What a check counts for.",
        {"core": "It decides the verdict", "confirm": "Somebody must confirm it"},
    ),
    named(
        "SourceSeen",
        "How far the authors of this service saw a source.",
        {
            "read": "Read at the place given",
            "read-in-part": "Read in part",
            "read-second-hand": "Read as quoted by another publication",
            "from-memory": "From memory, not read again",
            "derived": "Derived here from laws that have their own sources",
            "own-assumption": "An assumption of this service",
            "common-practice": "Common in the trade, without a source",
        },
    ),
    named(
        "KnownFluid",
        "Fluids whose properties the service knows.",
        {
            "water": "Water",
            "propylene-glycol": "Propylene glycol and water",
            "ethylene-glycol": "Ethylene glycol and water, poisonous",
        },
    ),
    named(
        "PartKind",
        "Parts of a loop that hold liquid.",
        {
            "collectors": "Collectors",
            "pipe-run": "A pipe run",
            "station": "Pump group and heat exchanger",
            "vessel-line": "The line to the vessel",
            "cooling-vessel": "The cooling vessel",
        },
    ),
    named(
        "LiquidStateName",
        "States of the loop without steam.",
        {
            "fill": "When it is filled",
            "cold": "At the coldest the site must expect",
            "operating": "With the pump running",
            "cut-off": "When the controller stops the pump",
        },
    ),
    named(
        "ReadingState",
        "States in which the gauge is read.",
        {
            "fill": "When it is filled",
            "cold": "At the coldest the site must expect",
            "operating": "With the pump running",
            "stagnation": "At rest in full sun",
            "stagnation-worst-doubt": "At rest in full sun, under the doubt with the highest pressure",
        },
    ),
    named("ScenarioName", "The base case of stagnation and the doubts about it.", _SCENARIOS),
    named(
        "DoubtName",
        "Doubts about the base case of stagnation.",
        {
            name: _SCENARIOS[name]
            for name in ("warm-gas", "hotter-stagnation", "worse-emptying", "closed-branch")
        },
    ),
    named(
        "StagnationRegime",
        "What the loop does in stagnation.",
        {
            "no-boiling": "Nothing boils",
            "pinned": "Steam in the collectors keeps them at their stagnation temperature and goes no further",
            "steam": "Steam fills the collectors and reaches into the pipes",
            "valve-opens": "The pressure reaches that at which the relief valve may open",
        },
    ),
    named(
        "RowOmission",
        "Why a row of the fill table has no numbers.",
        {
            "fluid-frozen": "The fluid freezes at this temperature",
            "no-window": "No fill pressure keeps every check",
            "vessel-empty-or-full": "The vessel would be empty or full",
        },
    ),
    named(
        "VesselRefusal",
        "Reasons why a vessel is refused.",
        {
            "nominal-volume": "Its nominal volume is too small",
            "nominal-volume-beyond-interval": "Its nominal volume is above the largest that holds",
            "acceptance-volume": "Its membrane cannot take the liquid",
            "rated-pressure": "Its rated pressure is below what the relief valve allows",
            "membrane-temperature": "Its membrane would get too hot",
            "precharge-as-delivered": "Its precharge does not fit and cannot be changed",
            "unspent-power": "Steam would be left over that nothing condenses",
            "no-window": "No fill pressure keeps every check",
        },
    ),
    named(
        "RankedBy",
        "What the candidates were ranked by.",
        {"price": "Price, lowest first", "volume": "Total nominal volume, smallest first"},
    ),
    named(
        "PressureEquipmentCategory",
        "Category of a vessel by directive 2014/68/EU.",
        {
            "sound-engineering-practice": "Article 4(3), sound engineering practice",
            "i": "Category I",
            "ii": "Category II",
            "iii": "Category III",
            "iv": "Category IV",
        },
    ),
)
ANSWER_UNIONS: tuple[NamedUnion, ...] = ()
