"""The answers about what would make a loop hold, and about what the relief valve lets out.

Structs only. A remedy says what to change as members of the question: set, repeated or removed one after the other
they make a new question, whose answer holds.
"""

from typing import Annotated, Literal

from loopslack.calc.remedies.measure import RemedyCode
from loopslack.calc.states import StateId
from loopslack.contract import quantity as q
from loopslack.contract.answers.loop import ScenarioId, VesselResult
from loopslack.contract.answers.shared import AnswerPart, AnyQuantity, Caution
from loopslack.contract.questions.fields import text

ChangeAction = Literal["set", "remove", "repeat"]


class QuestionChange(AnswerPart, frozen=True, kw_only=True, gc=False):
    """One step that turns the question asked into one that holds. Steps are taken in their order.

    `set` puts the value, word or number at the field, making the objects on the way; `remove` takes the member away
    if it is there; `repeat` puts a copy of a list entry right behind it.
    """

    action: Annotated[ChangeAction, text("What to do with the field.", "set")]
    field: Annotated[
        str, text("The member of the question, as JSON Pointer (RFC 6901).", "/station/steamCooler")
    ]
    value: Annotated[AnyQuantity | None, text("The quantity to set.")] = None
    word: Annotated[str | None, text("The word to set.", "given")] = None
    number: Annotated[int | None, text("The whole number to set.", 2)] = None


class RemedyStep(AnswerPart, frozen=True, kw_only=True):
    """One measure with its smallest amount."""

    code: Annotated[RemedyCode, text("The measure.", "stagnation-cooler")]
    rank: Annotated[int, text("Place by how small the intervention is, 1 being the smallest.", 11)]
    sentence: Annotated[str, text("What to do.", "Fit a stagnation cooler of 565 W at the station.")]
    amount: Annotated[
        AnyQuantity, text("The smallest amount that does, moved to the safe side by a practical step.")
    ]
    present: Annotated[AnyQuantity | None, text("What there is now.")] = None
    cautions: Annotated[list[Caution], text("What to mind with it.")]


class Remedy(RemedyStep, frozen=True, kw_only=True):
    """A measure that makes the loop hold by itself. It was judged whole: every check, every doubt asked for."""

    vessel: Annotated[
        VesselResult | None,
        text("The vessel that then holds. Absent where a long list was thinned for the search."),
    ] = None
    fill_pressure: Annotated[q.Pressure | None, text("How it is then to be filled.")] = None
    robust: Annotated[bool, text("Whether it then survives all doubts at once.", False)]
    changes: Annotated[list[QuestionChange], text("The same as changes of the question.")]


class RemedyPair(AnswerPart, frozen=True, kw_only=True):
    """Two measures that make the loop hold only together, the smaller intervention first."""

    steps: Annotated[list[RemedyStep], text("The two measures.")]
    vessel: Annotated[VesselResult | None, text("The vessel that then holds.")] = None
    fill_pressure: Annotated[q.Pressure | None, text("How it is then to be filled.")] = None
    robust: Annotated[bool, text("Whether it then survives all doubts at once.", False)]
    changes: Annotated[list[QuestionChange], text("Both as changes of the question.")]


class ToBeProved(AnswerPart, frozen=True, kw_only=True):
    """Something that would help if it could be shown. No verdict rests on it before it is measured."""

    code: Annotated[str, text("What it is.", "better-emptying")]
    sentence: Annotated[
        str,
        text(
            "What would have to be shown, and how.",
            "Collectors that send out no more than 63 W/m2 of steam, where 80 W/m2 are counted, would do.",
        ),
    ]
    amount: Annotated[q.Irradiance, text("Steam power per aperture that a measurement must not exceed.")]
    present: Annotated[q.Irradiance, text("What is counted now.")]


class Remedies(AnswerPart, frozen=True, kw_only=True):
    """What would make the loop hold, each solved for its smallest change and judged anew."""

    single: Annotated[list[Remedy], text("Measures that do by themselves, the smallest intervention first.")]
    pair: Annotated[
        RemedyPair | None, text("The smallest pair, sought only where no single measure does.")
    ] = None
    to_be_proved: Annotated[list[ToBeProved], text("What might help but must be measured first.")]
    none_found: Annotated[bool, text("Whether neither a measure nor a pair of them was found.", False)]
    summary: Annotated[str, text("The outcome in a sentence.", "Five measures do by themselves.")]
    evaluations: Annotated[int, text("How many changed loops were tried.", 71)]
    complete: Annotated[
        bool, text("False where the work allowed was used up before everything was tried.", True)
    ]


class RobustCooler(AnswerPart, frozen=True, kw_only=True):
    """The stagnation cooler with which a vessel would survive all doubts at once, where none does without."""

    power: Annotated[q.Power, text("Heat it must take from steam at its boiling temperature, in all.")]
    unspent_power: Annotated[q.Power, text("What all doubts at once leave at the station without it.")]
    nominal_volume: Annotated[q.Volume, text("The smallest vessel that is robust with it.")]
    sentence: Annotated[
        str,
        text(
            "The same in a sentence.",
            "A stagnation cooler of 566 W would let a vessel of 141.8 L or more survive them.",
        ),
    ]


class LeftState(AnswerPart, frozen=True, kw_only=True):
    """A state without steam after the discharge. Pressures are absent where the vessel is empty."""

    id: Annotated[StateId, text("The state.", "cold")]
    vessel_liquid: Annotated[q.Volume, text("Liquid in the vessel; negative is what the loop lacks.")]
    vessel_pressure: Annotated[q.Pressure | None, text("Pressure at the vessel connection.")] = None
    top_pressure: Annotated[q.Pressure | None, text("Pressure at the highest point.")] = None
    draws_air: Annotated[bool, text("Whether the loop sucks air then.", True)]


class Discharge(AnswerPart, frozen=True, kw_only=True):
    """What leaves through the relief valve where it opens, and what is left of the loop afterwards."""

    scenario: Annotated[ScenarioId, text("Base case or doubt.", "base")]
    volume: Annotated[q.Volume, text("What leaves, as hot liquid.")]
    mass: Annotated[q.Mass, text("Mass that leaves.")]
    at_least: Annotated[
        bool | None, text("True where steam reaches the station, so that more leaves.", True)
    ] = None
    vents_steam: Annotated[
        bool | None, text("True where steam can stand at the valve, which then blows steam.", True)
    ] = None
    closing_pressure: Annotated[q.Pressure, text("Vessel pressure at which the valve has shut.")]
    stays_open: Annotated[
        bool | None, text("True where the valve shuts only when nothing presses any more.", True)
    ] = None
    vessel_liquid: Annotated[q.Volume, text("Liquid in the vessel when it has shut.")]
    afterwards: Annotated[list[LeftState], text("The loop cooled down, at the fill temperature and cold.")]
    draws_air: Annotated[bool, text("Whether the loop sucks air in either.", True)]
    refill: Annotated[q.Volume, text("What must be filled in again, at the fill temperature.")]
    sentence: Annotated[
        str, text("The same in a sentence.", "The relief valve lets out 23.91 L of hot liquid.")
    ]
