"""The derivation of an answer: every computed number as a line that a reader can redo by hand.

Steps refer to the equations and the fitted constants listed beside them, so that each is printed once. Structs only;
``writing.derivation`` fills them.
"""

from typing import Annotated, Literal

from loopslack.calc.derivation.book import Chapter
from loopslack.contract.answers.shared import AnswerPart, AnyQuantity, SourceNote
from loopslack.contract.questions.fields import text

InputOrigin = Literal["given", "assumed", "tabulated", "step"]


class DerivationInput(AnswerPart, frozen=True, kw_only=True, gc=False):
    """A number put into an equation, and where it comes from."""

    name: Annotated[str, text("Name of the input in the equation.", "optical efficiency")]
    symbol: Annotated[str | None, text("Its symbol in the law, where the law names it alone.", "eta_0")] = (
        None
    )
    meaning: Annotated[str, text("What the number is here.", "peak efficiency")]
    value: Annotated[AnyQuantity, text("The number put in.")]
    origin: Annotated[
        InputOrigin,
        text(
            "Stated in the question, assumed for want of a statement, read in a table, or an earlier step.",
            "given",
        ),
    ]
    step: Annotated[int | None, text("Number of the step it comes from.", 9)] = None
    pointer: Annotated[
        str | None,
        text("Member of the question that states it or left it open.", "/collectors/0/coefficients/eta0"),
    ] = None
    table: Annotated[str | None, text("Table it was read in.", "en-1057")] = None
    row: Annotated[str | None, text("Row of that table.", "28x1.5")] = None
    source: Annotated[SourceNote | None, text("Where an assumed or a tabulated number comes from.")] = None


class DerivationSymbol(AnswerPart, frozen=True, kw_only=True, gc=False):
    """A symbol of a law."""

    symbol: Annotated[str, text("As the law prints it.", "T_a")]
    meaning: Annotated[str, text("What it stands for.", "ambient")]


class DerivationRange(AnswerPart, frozen=True, kw_only=True, gc=False):
    """A range that an equation was published, or makes sense, for."""

    of: Annotated[str, text("Name of the input, or `result`.", "optical efficiency")]
    low: Annotated[AnyQuantity | None, text("Lower end, where there is one.")] = None
    high: Annotated[AnyQuantity | None, text("Upper end, where there is one.")] = None


class DerivationEquation(AnswerPart, frozen=True, kw_only=True):
    """An equation with its papers. Its law is written in SI: m, m2, m3, s, kg, K, Pa, W and what is made of them."""

    id: Annotated[str, text("Stable name.", "stagnation-temperature")]
    law: Annotated[str, text("The law.", "p = p_0 * V_N / (V_N - V_l) * T / T_0")]
    symbols: Annotated[list[DerivationSymbol], text("Its symbols.")]
    source: Annotated[SourceNote, text("Where it was published.")]
    valid: Annotated[list[DerivationRange], text("Ranges it holds in; none is listed that has no end.")]
    note: Annotated[
        str | None, text("What to know about it.", "The vessel liquid solved for the pressure.")
    ] = None


class DerivationConstant(AnswerPart, frozen=True, kw_only=True):
    """Fitted numbers of a law, in the order in which the law numbers them."""

    id: Annotated[str, text("Name by which steps refer to it.", "c0 to c7 of mixing")]
    values: Annotated[list[float], text("The numbers, in full.", [1.0001, 0.0445])]
    unit: Annotated[str | None, text("Unit of what the law makes of them, where it is not SI.", "L/kg")] = (
        None
    )
    source: Annotated[SourceNote, text("Where they come from.")]


class DerivationSystem(AnswerPart, frozen=True, kw_only=True):
    """Equations that hold at once, whose root this step is: put in, it leaves over no more than the residual."""

    id: Annotated[str, text("Name of the system of equations.", "steam-at-rest")]
    meaning: Annotated[str, text("What must hold.", "The steam's pressure is the vessel's.")]
    equations: Annotated[
        list[int], text("Steps of the system, with their numbers put in at the root.", [53, 77])
    ]
    residual: Annotated[AnyQuantity | None, text("What the root leaves over.")] = None
    residual_step: Annotated[int | None, text("Step that computes what the root leaves over.", 82)] = None


class DerivationStep(AnswerPart, frozen=True, kw_only=True):
    """One line: an equation with its numbers put in, or the root of a system whose equations follow."""

    number: Annotated[int, text("Number of the step.", 9)]
    chapter: Annotated[Chapter, text("What it belongs to.", "collectors")]
    name: Annotated[str, text("What is computed.", "stagnation temperature of the roof")]
    value: Annotated[AnyQuantity, text("The number.")]
    equation: Annotated[
        str | None,
        text("The equation, listed under `equations`. Absent for a root.", "stagnation-temperature"),
    ] = None
    law: Annotated[str | None, text("Its law, in SI.", "T = max(T_1, T_2)")] = None
    inputs: Annotated[list[DerivationInput], text("The numbers put in.")]
    constants: Annotated[
        list[str] | None,
        text("Fitted numbers it uses, listed under `constants`.", ["f0 to f4, inhibited glycol"]),
    ] = None
    outside: Annotated[
        list[str] | None,
        text(
            "Inputs, or `result`, beyond the range of the equation: the number then stands for no state of the loop.",
            ["temperature"],
        ),
    ] = None
    system: Annotated[DerivationSystem | None, text("For a root: what it solves.")] = None
    answers: Annotated[
        list[str] | None, text("Members of the answer that show this number.", ["/result/content/total"])
    ] = None


class Derivation(AnswerPart, frozen=True, kw_only=True):
    """Every computed number of the answer in the order in which a reader would redo them."""

    scenario: Annotated[Literal["base"], text("The case written out.", "base")]
    doubts: Annotated[str, text("How the doubts relate to these steps.", "The base case is written out.")]
    redoing: Annotated[
        str,
        text("What to know before redoing a step.", "Turn every number into SI before it goes into a law."),
    ]
    steps: Annotated[list[DerivationStep], text("The steps.")]
    equations: Annotated[list[DerivationEquation], text("Every equation used.")]
    constants: Annotated[list[DerivationConstant], text("Every set of fitted numbers used.")]
