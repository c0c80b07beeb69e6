"""The answers about many designs at once: one item for each design, and how they came out.

An item is the same wherever it is written: in a batch, as a line of a stream, as a line of a file. It names no
request, so that the same designs give the same bytes.
"""

from typing import Annotated

from msgspec import Meta

from loopslack.contract.answers.operations import LoopDesignAnswer
from loopslack.contract.answers.shared import AnswerPart, Verdict
from loopslack.contract.problems import MOST_COUNTED, MOST_FAULTS, FaultyField
from loopslack.contract.questions.fields import text

Count = Annotated[int, Meta(ge=0)]


class DesignProblem(AnswerPart, frozen=True, kw_only=True):
    """Why one design among many was not answered; the members have the meaning RFC 9457 gives them."""

    type: Annotated[str, text("Stable path of the kind of problem.", "/docs/problems/invalid-field")]
    title: Annotated[str, text("The kind of problem in words.", "Fields refused")]
    status: Annotated[
        int,
        Meta(
            ge=400,
            le=599,
            description="The HTTP status the design would have been answered with on its own.",
            examples=[422],
        ),
    ]
    detail: Annotated[str, text("What is wrong with this design.", "1 field of the question is faulty.")]
    errors: Annotated[
        tuple[FaultyField, ...],
        Meta(
            max_length=MOST_FAULTS,
            description=(
                f"All faults, the first {MOST_FAULTS} where there are more. Pointers start at the design, completed "
                "by the defaults."
            ),
        ),
    ] = ()
    further_errors: Annotated[
        int,
        Meta(
            ge=0,
            description=f"Faults beyond those listed; absent when all are. Counted up to {MOST_COUNTED} in all.",
            examples=[3],
        ),
    ] = 0


class DesignOutcome(AnswerPart, frozen=True, kw_only=True):
    """What came of one design: its answer, or the problem that stood in the way."""

    index: Annotated[Count, text("Place of the design among all, counted from 0.", 0)]
    id: Annotated[
        str | None, text("The caller's name for it. Absent where it could not be read.", "quote-4711")
    ] = None
    verdict: Annotated[
        Verdict | None, text("The verdict of its answer. Absent where there is a problem instead.", "holds")
    ] = None
    answer: Annotated[
        LoopDesignAnswer | None,
        text("What `POST /v1/loop-design` answers to it, remedies left out unless they were asked for."),
    ] = None
    problem: Annotated[DesignProblem | None, text("Why there is no answer.")] = None


class OutcomeSummary(AnswerPart, frozen=True, kw_only=True, gc=False):
    """How many designs came out how."""

    designs: Annotated[Count, text("Designs in all; the sum of the other counts.", 3)]
    holds: Annotated[Count, text("Designs that hold.", 1)]
    favourable_only: Annotated[
        Count, text("Designs that hold in the base case only, or were asked for without doubts.", 0)
    ]
    does_not_hold: Annotated[Count, text("Designs that do not hold.", 1)]
    not_assessed: Annotated[Count, text("Designs of which a core check could not be computed.", 0)]
    refused: Annotated[Count, text("Designs that were not answered, for a problem of theirs or ours.", 1)]


class LoopDesignBatchAnswer(AnswerPart, frozen=True, kw_only=True):
    """The answer to a batch: every design in the order it was asked, each on its own."""

    designs: Annotated[list[DesignOutcome], text("One entry for each design, in the order asked.")]
    summary: Annotated[OutcomeSummary, text("How they came out.")]


class StreamEnd(AnswerPart, frozen=True, kw_only=True):
    """The last line of a stream. A stream without it broke off on its way."""

    complete: Annotated[bool, text("Whether every line was looked at.", True)]
    summary: Annotated[OutcomeSummary, text("How the designs came out.")]
    problem: Annotated[DesignProblem | None, text("Why the stream ends before its lines do.")] = None
