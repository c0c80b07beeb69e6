"""Every kind of problem the service answers with, in one table, and the document that carries it (RFC 9457).

Here live the table, the stable codes of faulty fields and the two structures of the document. How a request
comes to be refused is told in `refusals`.
"""

from typing import Annotated

from msgspec import Meta, Struct

PROBLEM_MEDIA_TYPE = "application/problem+json"
MOST_FAULTS = 50
"""Faulty fields listed in one document; beyond it they are only counted."""

MOST_COUNTED = 1_000
"""Faults after which a question is looked at no further: so many are one mistake made everywhere."""


class ProblemType(Struct, frozen=True, kw_only=True):
    """One kind of problem: what it means and what a caller can do about it."""

    slug: str
    title: str
    status: int
    meaning: str
    remedy: str

    @property
    def uri(self) -> str:
        """The stable `type` of the document, which is also where the problem is explained."""
        return f"/docs/problems/{self.slug}"


def _table(*rows: tuple[int, str, str, str, str]) -> dict[str, ProblemType]:
    return {
        slug: ProblemType(slug=slug, title=title, status=status, meaning=meaning, remedy=remedy)
        for status, slug, title, meaning, remedy in rows
    }


PROBLEM_TYPES = _table(
    (
        400,
        "bad-request",
        "Bad request",
        "The request breaks a rule of HTTP itself.",
        "Correct the request line or header that `detail` names.",
    ),
    (
        400,
        "malformed-body",
        "Body is not JSON",
        "The body is empty, not UTF-8, not JSON, or holds NaN or Infinity, which JSON has not.",
        "Send one JSON object in UTF-8 without byte order mark.",
    ),
    (
        400,
        "nested-too-deeply",
        "Body nested too deeply",
        "Objects and lists lie deeper inside one another than any question needs.",
        "Send the question as the document describes it.",
    ),
    (
        400,
        "duplicate-keys",
        "Member stated twice",
        "An object of the body has two members of the same name, so that it is unclear which counts.",
        "Leave one of the two out at each place listed.",
    ),
    (
        400,
        "unexpected-query",
        "Query not expected",
        "The operation takes no query parameters and would otherwise ignore what was meant.",
        "Put what you mean into the body, and nothing behind the path.",
    ),
    (
        401,
        "key-missing",
        "Key missing or unknown",
        "The service asks for an API key, and none it knows was sent.",
        "Send `Authorization: Bearer` and your key.",
    ),
    (
        403,
        "key-refused",
        "Key not allowed",
        "The key is known but has been switched off.",
        "Ask the operator of the service.",
    ),
    (
        404,
        "not-found",
        "Nothing here",
        "No resource has this path. Paths are taken literally: no slash may be doubled or added at the end.",
        "Compare the path with the document at /v1/openapi.json.",
    ),
    (
        405,
        "method-not-allowed",
        "Method not allowed",
        "The path exists, but not for this method; `Allow` lists those it has.",
        "Use a method listed in `Allow`.",
    ),
    (
        406,
        "not-acceptable",
        "No acceptable representation",
        "The `Accept` header excludes the only media type of the operation.",
        "Accept the media type named in `detail`.",
    ),
    (
        408,
        "body-overdue",
        "Body did not arrive in time",
        "The body was announced, but did not arrive completely in the time allowed.",
        "Send it again; nothing was computed.",
    ),
    (
        413,
        "body-too-large",
        "Body too large",
        "The body is longer than the operation takes.",
        "Split the work, or send fewer designs or stock items at once.",
    ),
    (
        415,
        "unsupported-media-type",
        "Media type not supported",
        "The body is not declared as JSON in UTF-8.",
        "Send `Content-Type: application/json`.",
    ),
    (
        415,
        "unsupported-encoding",
        "Content encoding not supported",
        "The body is compressed.",
        "Send it as it is, without `Content-Encoding`.",
    ),
    (
        422,
        "invalid-field",
        "Fields refused",
        (
            "One or more members are missing, unknown, of the wrong type or outside their range. What the sound "
            "members contradict in each other is listed beside them."
        ),
        "Mend every entry of `errors`: each names the place, the rule and the remedy.",
    ),
    (
        422,
        "unanswerable-question",
        "Question cannot be answered",
        "Every member is well formed, but together they contradict each other or leave the range of a method.",
        "Mend every entry of `errors`.",
    ),
    (
        429,
        "too-many-requests",
        "Too many requests",
        "The caller has used up its rate.",
        "Wait as long as `Retry-After` says.",
    ),
    (
        500,
        "internal-fault",
        "Fault of the service",
        "A fault of the service, not of the question. It has been logged under the request id.",
        "Report the request id; sending the same question again will not help.",
    ),
    (
        503,
        "overloaded",
        "Too much work at once",
        "The service refuses work early rather than let it wait without bound.",
        "Send it again after the seconds `Retry-After` names.",
    ),
    (
        503,
        "deadline-passed",
        "Deadline passed",
        "The computation did not end in the time allowed and was given up.",
        "Ask for less at once, or try again when the service is less busy.",
    ),
)
"""Problem types by slug; the documentation and the OpenAPI document list exactly these."""

FIELD_CODES = {
    "missing": "A required member is absent.",
    "unknown-field": "The member is not part of this object.",
    "wrong-type": "The value is of another JSON type than the member takes.",
    "not-a-member": "The text is none of the words the member takes.",
    "out-of-range": "The number lies outside its range.",
    "too-long": "The text is longer than allowed.",
    "too-short": "The text is shorter than allowed.",
    "too-many": "The list or object has more entries than allowed.",
    "too-few": "The list or object has fewer entries than needed.",
    "pattern": "The text does not have the form the member takes.",
    "contradiction": "Members contradict one another.",
    "not-applicable": "The method asked for does not describe this loop.",
    "unanswerable": "The question cannot be answered for another reason, which the message names.",
    "invalid": "The value breaks a rule of its member, which the message names.",
    "duplicate-key": "The member is stated more than once.",
    "not-json": "The body stops being JSON here.",
    "not-utf-8": "The body is not UTF-8.",
    "byte-order-mark": "The body begins with a byte order mark.",
    "not-finite": "NaN and Infinity are not numbers of JSON.",
    "empty-body": "There is no body.",
}
"""The stable codes of `errors` that do not depend on a method; a method may add its own."""


class FaultyField(Struct, frozen=True, kw_only=True, omit_defaults=True):
    """One fault of the question: where, which rule, and what to do."""

    pointer: Annotated[
        str,
        Meta(
            description="JSON Pointer (RFC 6901) into the body; empty for the body as a whole.",
            examples=["/reliefValve/setPressure/unit"],
        ),
    ]
    code: Annotated[
        str,
        Meta(
            description="Stable code of the rule that was broken, in kebab-case.", examples=["not-a-member"]
        ),
    ]
    message: Annotated[
        str,
        Meta(
            description="The value, the rule it breaks and the remedy, for a person.",
            examples=['"celsius" is none of "degC", "degF", "K". Did you mean "degC"?'],
        ),
    ]
    parameters: Annotated[
        dict[str, float],
        Meta(
            description="The numbers behind the message, by name, for a translation; physical ones in SI base units.",
            examples=[{"limit": 60}],
        ),
    ] = {}
    words: Annotated[
        dict[str, str],
        Meta(
            description="The words behind the message, by name, for a translation.",
            examples=[{"near": "degC"}],
        ),
    ] = {}


class Problem(Struct, frozen=True, kw_only=True, rename="camel", omit_defaults=True):
    """Problem details as in RFC 9457: why a request was not answered."""

    type: Annotated[
        str,
        Meta(description="Stable path of the kind of problem.", examples=["/docs/problems/invalid-field"]),
    ]
    title: Annotated[str, Meta(description="The kind of problem in words.", examples=["Fields refused"])]
    status: Annotated[int, Meta(ge=400, le=599, description="The HTTP status, repeated.", examples=[422])]
    detail: Annotated[
        str,
        Meta(
            description="What is wrong with this request.", examples=["2 fields of the question are faulty."]
        ),
    ]
    instance: Annotated[
        str,
        Meta(
            description="Names this one occurrence, as a URN.",
            examples=["urn:uuid:6b1f0c3e-2d8b-4f1a-9a53-0f6c2f0d7a11"],
        ),
    ]
    request_id: Annotated[
        str,
        Meta(
            description="The request id, as in the X-Request-Id header.",
            examples=["6b1f0c3e-2d8b-4f1a-9a53-0f6c2f0d7a11"],
        ),
    ]
    errors: Annotated[
        tuple[FaultyField, ...],
        Meta(
            max_length=MOST_FAULTS,
            description=(
                "All faults that can be found at once, in the order of the body; the first "
                f"{MOST_FAULTS} where there are more. A contradiction with a member that is itself faulty shows once "
                "that is mended."
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
