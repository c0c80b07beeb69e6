"""The operation that audits an existing vessel."""

from collections.abc import Iterable
from typing import Any

from loopslack.api.operations import Operation
from loopslack.contract.answering import audit as answering_audit
from loopslack.contract.answers import audit as answers_audit
from loopslack.contract.questions import existing as questions_existing


def _judged(answer: answers_audit.VesselAuditAnswer) -> Iterable[tuple[str, Iterable[str]]]:
    """Verdict and advisory codes, for the metrics."""
    yield answer.result.verdict, [advisory.code for advisory in answer.advisories]


AUDIT_OPERATIONS: tuple[Operation[Any, Any], ...] = (
    Operation(
        operation_id="auditVessel",
        path="/v1/vessel-audit",
        tag="Check",
        summary="Audit an existing vessel",
        description=(
            "From what the gauge of a loop shows at a temperature: whether its vessel holds as it stands, whether "
            "liquid or gas was lost and how much of it, which measurement would decide, and what to set instead. "
            "Nothing is stored; retry freely."
        ),
        question=questions_existing.VesselAuditQuestion,
        answer=answers_audit.VesselAuditAnswer,
        ask=answering_audit.audit_vessel,
        costly=True,
        outcomes=_judged,
    ),
)
"""What `v1` adds to its register."""
