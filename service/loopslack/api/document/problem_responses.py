"""Refusals as component responses: per status, the problem types that can be behind it, each with an example.

What the problem types mean is said in `loopslack.contract.problems`; here is only their place in the document.
"""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from typing import Any

from loopslack.api.document.headers import header_references
from loopslack.api.document.vocabulary import DocumentError
from loopslack.contract.problems import PROBLEM_MEDIA_TYPE, PROBLEM_TYPES, ProblemType

Schema = dict[str, Any]

_NAMES = {
    400: "BadRequest",
    401: "KeyMissing",
    403: "KeyRefused",
    404: "NotFound",
    405: "MethodNotAllowed",
    406: "NotAcceptable",
    408: "BodyOverdue",
    413: "BodyTooLarge",
    415: "UnsupportedBody",
    422: "QuestionRefused",
    429: "TooManyRequests",
    500: "InternalFault",
    503: "Overloaded",
}
_HEADERS = {
    401: ("Authenticate",),
    405: ("Allow",),
    415: ("AcceptedMediaTypes",),
    429: ("RetryAfter",),
    503: ("RetryAfter",),
}
_REQUEST_ID = "6b1f0c3e-2d8b-4f1a-9a53-0f6c2f0d7a11"


class ProblemResponses:
    """Component responses, made as operations ask for them: one per status and set of problem types."""

    def __init__(self, problem: Schema, faults: Mapping[str, list[Schema]]) -> None:
        self._problem = problem
        self._faults = faults
        self._by_slugs: dict[tuple[str, ...], str] = {}
        self.responses: dict[str, Schema] = {}

    def references(self, slugs: Iterable[str]) -> dict[str, Schema]:
        """The refusals of one operation by status, in order of status."""
        by_status: dict[int, list[ProblemType]] = {}
        wanted = set(slugs)
        if unknown := wanted - set(PROBLEM_TYPES):
            raise DocumentError(f"no problem types: {sorted(unknown)}")
        for slug, kind in PROBLEM_TYPES.items():
            if slug in wanted:
                by_status.setdefault(kind.status, []).append(kind)
        return {
            str(status): {"$ref": f"#/components/responses/{self._named(status, kinds)}"}
            for status, kinds in sorted(by_status.items())
        }

    def _named(self, status: int, kinds: list[ProblemType]) -> str:
        slugs = tuple(kind.slug for kind in kinds)
        if slugs not in self._by_slugs:
            name = _NAMES[status]
            if name in self.responses:
                # A second set of problem types for the same status, such as for operations without a body.
                name = f"{name}{sum(known.startswith(name) for known in self.responses) + 1}"
            self._by_slugs[slugs] = name
            self.responses[name] = self._response(status, kinds)
        return self._by_slugs[slugs]

    def _response(self, status: int, kinds: list[ProblemType]) -> Schema:
        meanings = [f"* [`{kind.uri}`]({kind.uri}): {kind.meaning} {kind.remedy}" for kind in kinds]
        return {
            "description": "\n".join(["Problem types:", "", *meanings]),
            "headers": header_references("RequestId", *_HEADERS.get(status, ())),
            "content": {
                PROBLEM_MEDIA_TYPE: {
                    "schema": self._problem,
                    "examples": {
                        kind.slug: {"summary": kind.title, "value": self._example(kind)} for kind in kinds
                    },
                }
            },
        }

    def _example(self, kind: ProblemType) -> Schema:
        faults = self._faults.get(kind.slug)
        example: Schema = {
            "type": kind.uri,
            "title": kind.title,
            "status": kind.status,
            "detail": kind.meaning,
            "instance": f"urn:uuid:{_REQUEST_ID}",
            "requestId": _REQUEST_ID,
        }
        return example | ({"errors": faults} if faults else {})
