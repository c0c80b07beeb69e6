"""Ends a request with a problem document, and turns a calculation's own errors into one.

The text of an unforeseen exception is no part of any of this: it never reaches a caller.
"""

import math
import uuid
from collections.abc import Mapping, Sequence
from contextlib import suppress
from typing import TypeGuard

import msgspec

from loopslack.contract.order import in_order
from loopslack.contract.problems import MOST_COUNTED, MOST_FAULTS, PROBLEM_TYPES, FaultyField, Problem
from loopslack.kernel.errors import CalculationError, Refusals

_OF_ONE_FIELD = frozenset(
    {
        "missing",
        "wrong-type",
        "not-a-member",
        "out-of-range",
        "unknown-field",
        "invalid",
        "unknown-tube-standard",
        "unknown-tube-size",
    }
)


class Refused(Exception):
    """Ends a request with a problem document."""

    def __init__(
        self,
        slug: str,
        detail: str,
        *,
        faults: Sequence[FaultyField] = (),
        further: int = 0,
        headers: Mapping[str, str] | None = None,
    ) -> None:
        super().__init__(detail)
        self.kind = PROBLEM_TYPES[slug]
        self.detail = detail
        self.faults = tuple(faults[:MOST_FAULTS])
        self.further = further + max(0, len(faults) - MOST_FAULTS)
        self.headers = dict(headers or {})

    def in_order_of(self, body: bytes) -> "Refused":
        """The same refusal with its faults in the order of the body that was sent."""
        if len(self.faults) > 1:
            with suppress(msgspec.DecodeError, RecursionError):
                self.faults = tuple(in_order(self.faults, msgspec.json.decode(body)))
        return self

    def document(self, request_id: str) -> Problem:
        """The problem as it is sent, in answer to the request of this id."""
        return Problem(
            type=self.kind.uri,
            title=self.kind.title,
            status=self.kind.status,
            detail=self.detail,
            instance=occurrence(request_id),
            request_id=request_id,
            errors=self.faults,
            further_errors=self.further,
        )


def occurrence(request_id: str) -> str:
    """The URN of an occurrence: the request id itself if it is a UUID, else one derived from it."""
    try:
        return uuid.UUID(request_id).urn
    except ValueError:
        return uuid.uuid5(uuid.NAMESPACE_OID, request_id).urn


def refusal_of_fields(faults: Sequence[FaultyField]) -> Refused:
    """The refusal of a question with faulty fields, all of them counted and the first of them listed."""
    count = len(faults)
    detail = (
        "1 field of the question is faulty." if count == 1 else f"{count} fields of the question are faulty."
    )
    if count >= MOST_COUNTED:
        detail = f"{count} fields of the question are faulty, and there may be more."
    if count > MOST_FAULTS:
        detail += f" The first {MOST_FAULTS} are listed."
    return Refused("invalid-field", detail, faults=faults)


def refusal_of(error: CalculationError) -> Refused:
    """The refusal that a calculation's own error becomes, with every cause the caller should see.

    It is one of fields as soon as a single member is at fault; what the others contradict in each other stands beside.
    """
    causes = error.errors if isinstance(error, Refusals) else (error,)
    faults = [fault_of(cause) for cause in causes]
    if any(map(_is_of_one_field, causes)):
        return refusal_of_fields(faults)
    detail = (
        faults[0].message
        if len(faults) == 1
        else f"The question cannot be answered, for {len(faults)} reasons."
    )
    return Refused("unanswerable-question", detail, faults=faults)


def _is_of_one_field(cause: CalculationError) -> bool:
    """Whether a member by itself is at fault; one outside the range of a law, which the error then names, is not."""
    return bool(cause.pointer) and cause.code in _OF_ONE_FIELD and "rule" not in cause.facts


def fault_of(cause: CalculationError, within: str = "") -> FaultyField:
    """One cause as an entry of `errors`; `within` points at the object its own pointer starts from."""
    remedy = cause.remedy.strip()
    return FaultyField(
        pointer=within + cause.pointer,
        code=cause.code,
        message=f"{cause.message.rstrip()} {remedy}".rstrip(),
        parameters={name: _shown(fact) for name, fact in cause.facts.items() if _is_number(fact)},
        words={name: _said(fact) for name, fact in cause.facts.items() if not _is_number(fact)},
    )


def _is_number(fact: object) -> TypeGuard[float]:
    return isinstance(fact, int | float) and not isinstance(fact, bool) and math.isfinite(fact)


def _said(fact: object) -> str:
    """A list as its words, separated by commas."""
    return ", ".join(map(str, fact)) if isinstance(fact, list | tuple) else str(fact)


def _shown(fact: float) -> float:
    """Without the noise of unit conversion."""
    return float(f"{fact:.9g}")
