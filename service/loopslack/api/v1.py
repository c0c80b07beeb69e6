"""The register of operations of version 1: everything the contract offers, in the order of the document."""

from collections.abc import Iterable
from typing import Any

from loopslack.api.operations import Operation
from loopslack.api.v1_audit import AUDIT_OPERATIONS
from loopslack.api.v1_many import MANY_OPERATIONS
from loopslack.api.v1_sheet import SHEET_OPERATIONS
from loopslack.contract.answering import course as answering_course
from loopslack.contract.answering import loop as answering
from loopslack.contract.answering import reference as answering_reference
from loopslack.contract.answering import small as answering_small
from loopslack.contract.answers import operations as answers
from loopslack.contract.answers import reference as answers_reference
from loopslack.contract.questions import existing as questions_existing
from loopslack.contract.questions import operations as questions
from loopslack.contract.questions.vessels import FromStock

_PARTS = "Parts"
_DESIGN = "Design"
_CHECK = "Check"
_REFERENCE = "Reference"

_LONG_LIST = 200


def _judged(
    answer: answers.LoopDesignAnswer | answers.VesselSizingAnswer | answers.StagnationCheckAnswer,
) -> Iterable[tuple[str, Iterable[str]]]:
    """Verdict and advisory codes, for the metrics."""
    yield answer.result.verdict, [advisory.code for advisory in answer.advisories]


def _takes_long(question: questions.LoopQuestion) -> bool:
    """Whether an answer takes more than a few milliseconds: costly parts asked for, or a long stock list."""
    costly = bool(question.include)
    if isinstance(question, questions.SizingQuestion):
        vessel = question.vessel
        costly = costly or (isinstance(vessel, FromStock) and len(vessel.items) > _LONG_LIST)
    if isinstance(question, questions.SizingQuestion | questions.StagnationCheckQuestion):
        costly = costly or question.tolerances is not None
    return costly


_SINGLE: tuple[Operation[Any, Any], ...] = (
    Operation(
        operation_id="computeLoopVolume",
        path="/v1/loop-volume",
        tag=_PARTS,
        summary="Compute the content of a loop",
        description=(
            "Content by part and in total, with the range of every part whose content was assumed. "
            "Nothing is stored; retry freely."
        ),
        question=questions.LoopVolumeQuestion,
        answer=answers.LoopVolumeAnswer,
        ask=answering_small.compute_loop_volume,
    ),
    Operation(
        operation_id="computeExpansion",
        path="/v1/expansion",
        tag=_PARTS,
        summary="Compute the expansion of a fluid",
        description=(
            "Expansion between two temperatures, density, freezing point and boiling point of a fluid. A temperature "
            "at which the fluid is no liquid is refused. Nothing is stored; retry freely."
        ),
        question=questions.ExpansionQuestion,
        answer=answers.ExpansionAnswer,
        ask=answering_small.compute_expansion,
    ),
    Operation(
        operation_id="sizeVessel",
        path="/v1/vessel-sizing",
        tag=_DESIGN,
        summary="Size the expansion vessel",
        description=(
            "Nominal volume by every published rule side by side, what each rule's vessel would see in stagnation, "
            "why the rules differ, and the vessel that holds. Nothing is stored; retry freely."
        ),
        question=questions.VesselSizingQuestion,
        answer=answers.VesselSizingAnswer,
        ask=answering.size_vessel,
        costly=True,
        outcomes=_judged,
    ),
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
        ask=answering.check_stagnation_in_turns,
        costly=_takes_long,
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
        ask=answering.design_loop_in_turns,
        costly=_takes_long,
        outcomes=_judged,
    ),
    Operation(
        operation_id="computeStagnationCourse",
        path="/v1/stagnation-course",
        tag=_CHECK,
        summary="Follow a day without flow",
        description=(
            "A sunny day without flow, minute by minute, its phases dated, with the range that the assumptions about "
            "residue and reflux leave. The coupled balance stays the design case. Nothing is stored; retry freely."
        ),
        question=questions_existing.StagnationCourseQuestion,
        answer=answers.StagnationCourseAnswer,
        ask=answering_course.compute_stagnation_course,
        costly=True,
    ),
    Operation(
        operation_id="listFluids",
        method="GET",
        path="/v1/fluids",
        tag=_REFERENCE,
        summary="List the fluids",
        description="Fluids a question may name, with what is known of them, how well, and from where.",
        answer=answers_reference.FluidList,
        ask=answering_reference.list_fluids,
    ),
    Operation(
        operation_id="listTubes",
        method="GET",
        path="/v1/tubes",
        tag=_REFERENCE,
        summary="List the tubes",
        description="Tube standards and sizes a question may name.",
        answer=answers_reference.TubeList,
        ask=answering_reference.list_tubes,
    ),
    Operation(
        operation_id="listRules",
        method="GET",
        path="/v1/rules",
        tag=_REFERENCE,
        summary="List the sizing rules",
        description="Every sizing rule: what it counts, its law, where it holds and where it was published.",
        answer=answers_reference.RuleList,
        ask=answering_reference.list_rules,
    ),
    Operation(
        operation_id="listVesselSeries",
        method="GET",
        path="/v1/vessel-series",
        tag=_REFERENCE,
        summary="List the generic vessel sizes",
        description="The preferred numbers a design chooses from when it is given no stock. Generic, not an offer.",
        answer=answers_reference.VesselSeries,
        ask=answering_reference.list_vessel_series,
    ),
    Operation(
        operation_id="listSources",
        method="GET",
        path="/v1/sources",
        tag=_REFERENCE,
        summary="List the sources",
        description="Every publication the service cites, and how far its authors saw it.",
        answer=answers_reference.SourceList,
        ask=answering_reference.list_sources,
    ),
)

OPERATIONS: tuple[Operation[Any, Any], ...] = (
    *_SINGLE,
    *AUDIT_OPERATIONS,
    *MANY_OPERATIONS,
    *SHEET_OPERATIONS,
)
