"""The register of operations of version 1: everything the contract offers, in the order of the document."""

from collections.abc import Iterable
from typing import Any

from loopslack.api.operations import Operation
from loopslack.contract import answering, answers, questions

_DESIGN = "Design"
_CHECK = "Check"


def _judged(
    answer: answers.LoopDesignAnswer | answers.StagnationCheckAnswer,
) -> Iterable[tuple[str, Iterable[str]]]:
    """Verdict and advisory codes, for the metrics."""
    yield answer.result.verdict, [advisory.code for advisory in answer.advisories]


OPERATIONS: tuple[Operation[Any, Any], ...] = (
    Operation(
        operation_id="checkStagnation",
        path="/v1/stagnation-check",
        tag=_CHECK,
        summary="Check a vessel in stagnation",
        description=(
            "Solves the coupled equilibrium of steam, pipes and vessel for a loop with a given vessel, in the base "
            "case, under every doubt and under all at once, and checks every margin. Nothing is stored; retry freely."
        ),
        question=questions.StagnationCheckQuestion,
        answer=answers.StagnationCheckAnswer,
        ask=answering.check_stagnation,
        outcomes=_judged,
    ),
    Operation(
        operation_id="designLoop",
        path="/v1/loop-design",
        tag=_DESIGN,
        summary="Design a loop",
        description=(
            "The whole job in one call: content, states, vessel sizing, the choice of a vessel, stagnation under every "
            "doubt, settings for the installer and an order list. Nothing is stored; retry freely."
        ),
        question=questions.LoopDesignQuestion,
        answer=answers.LoopDesignAnswer,
        ask=answering.design_loop,
        outcomes=_judged,
    ),
)
