"""Names and meanings of the words in the costly parts of an answer: rules, walk, sensitivity, band, course.

A value that `loopslack.contract` has and this table has not is refused when the document is assembled.
"""

from __future__ import annotations

from loopslack.api.document.vocabulary import NamedUnion, NamedValues, named

ANALYSIS_LISTS: tuple[NamedValues, ...] = (
    named(
        "WalkChoice",
        "Choices in which the sizing rules differ.",
        {
            "vaporisation": "Whether the content of the collectors is counted as steam",
            "pipe-steam": "Whether steam in the pipes is counted",
            "final-pressure": "The pressure the vessel may end at",
            "starting-pressure": "The pressure the vessel starts from",
            "least-factor": "A pressure factor that may not be undercut",
            "expansion": "The expansion of the liquid",
            "reserve": "The liquid kept in reserve",
            "gas-temperature": "The temperature of the gas",
            "doubts": "The doubts to be survived",
            "fluid-allowance": "The doubt in fluid data",
            "fill-window": "Room for an installer to hit the fill pressure",
            "cooling-vessel": "The cooling vessel that goes with it",
            "without-boiling": "The least volume of a loop that relies on not boiling",
        },
    ),
    named(
        "ToleratedInput",
        "Inputs that a tolerance can be stated for.",
        {
            "pipe-length": "All pipe lengths",
            "collector-content": "Content of the collectors",
            "insulation-conductivity": "Conductivity of the insulation",
            "steam-power": "Steam power of the collectors",
            "stagnation-temperature": "Stagnation temperature",
            "static-height": "Static height",
            "fill-pressure": "Fill pressure",
            "precharge": "Precharge",
        },
    ),
    named(
        "RangeOrigin",
        "Where the range of an input comes from.",
        {
            "stated": "The tolerance that was stated",
            "default": "The range common in the trade",
            "own-assumption": "An assumption of this service",
        },
    ),
    named(
        "HeadRoomInput",
        "What is moved until the vessel fails.",
        {
            "pipe-length": "More pipe",
            "stagnation-temperature": "Hotter stagnation",
            "precharge-loss": "Precharge that leaks away",
            "precharge-loss-topped-up": "Precharge that leaks away while somebody tops up the filling",
        },
    ),
    named(
        "HeadRoomOutcome",
        "How the search for head room ended.",
        {
            "value": "The vessel fails beyond the value",
            "none": "The vessel fails as it is",
            "beyond-search": "The vessel still holds at the value, where the search ended",
        },
    ),
    named(
        "CourseFlag",
        "What can happen in a day without flow.",
        {
            "above-lowest-opening": "The pressure passes that at which the relief valve may open",
            "beyond-property-range": "A temperature passes the range of the fluid's properties",
            "discharge": "The relief valve lets liquid out",
            "liquid-freezes": "Liquid freezes",
            "membrane-full": "The vessel takes no more liquid",
            "residue-strength-extrapolated": "The liquid left is stronger than its boiling point is known for",
            "start-above-set": "The day begins above the set pressure of the relief valve",
            "steam-at-cooler": "Steam reaches the stagnation cooler",
            "steam-at-station": "Steam reaches the station",
            "valve-overloaded": "The relief valve cannot pass what it would have to",
            "vessel-empty": "The vessel is empty",
            "void": "A space without liquid stays behind: the loop may draw air",
        },
    ),
    named("DerivationScenario", "The case a derivation writes out.", {"base": "The base case"}),
    named(
        "DerivationChapter",
        "What a step of a derivation belongs to.",
        {
            "site": "The site",
            "fluid": "The fluid",
            "content": "The content of the loop",
            "collectors": "The collectors",
            "pipes": "The pipes",
            "relief-valve": "The relief valve",
            "states": "The states without steam",
            "precharge": "The precharge",
            "window": "The fill window",
            "filling": "The filling",
            "stagnation": "Stagnation",
            "cooling-vessel": "The cooling vessel",
            "volumes": "Nominal volumes",
            "order": "The order list",
        },
    ),
    named(
        "InputOrigin",
        "Where a number put into an equation comes from.",
        {
            "given": "Stated in the question",
            "assumed": "Stands in for what the question left open",
            "tabulated": "Read in a table",
            "step": "An earlier step",
        },
    ),
    named(
        "RemedyMeasure",
        "Measures that can make a loop hold.",
        {
            "fill-pressure": "Another fill pressure",
            "precharge": "Another precharge",
            "cut-off": "A lower cut-off temperature of the pump",
            "stronger-glycol": "More glycol",
            "vessel": "Another expansion vessel",
            "cooling-vessel": "A cooling vessel, or a larger one",
            "relief-valve": "A relief valve with another set pressure",
            "part-rating": "A part with a higher rating",
            "stagnation-cooler": "A stagnation cooler",
            "open-run": "A check valve looked at, or placed so that steam can enter a pipe run",
            "bare-pipe": "Insulation taken off some pipe",
            "bare-run": "Insulation taken off a whole pipe run",
            "extra-pipe": "More pipe",
        },
    ),
    named(
        "ChangeAction",
        "How a member of a question is changed.",
        {
            "set": "Put a value there",
            "remove": "Take the member away",
            "repeat": "Put a copy of a list entry right behind it",
        },
    ),
)
ANALYSIS_UNIONS: tuple[NamedUnion, ...] = ()
