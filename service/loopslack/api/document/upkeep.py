"""What the document says of the service's own pages: probes, metrics and the document itself.

They are no questions about a loop and stand in no register, so they are described by hand; a test asks each.
"""

from __future__ import annotations

from typing import Annotated, Any, Literal

from msgspec import Meta, Struct

from loopslack.api.document.headers import header_references, parameter_references
from loopslack.api.document.problem_responses import ProblemResponses
from loopslack.api.document.schemas import SchemaBook
from loopslack.api.document.vocabulary import NamedValues, named

Schema = dict[str, Any]
TAG = "Service"
HealthStatus = Literal["pass", "fail"]
HEALTH_LISTS: tuple[NamedValues, ...] = (
    named(
        "HealthStatus",
        "What a probe found.",
        {"pass": "The service is as it should be", "fail": "The service should get no requests"},
    ),
)


class Health(Struct, frozen=True, kw_only=True, omit_defaults=True):
    """What a probe found."""

    status: Annotated[HealthStatus, Meta(description="Whether it is as it should be.", examples=["pass"])]
    reason: Annotated[str | None, Meta(description="Why not, for a person.", examples=["shutting down"])] = (
        None
    )


class OpenApiDocument(Struct, frozen=True, kw_only=True):
    """An OpenAPI document, as far as a program must know before it reads on."""

    openapi: Annotated[str, Meta(description="Version of OpenAPI it is written in.", examples=["3.1.0"])]


_ANY = ("bad-request", "method-not-allowed", "internal-fault")
_SHED = (*_ANY, "overloaded", "too-many-requests")


def upkeep_paths(schemas: SchemaBook, responses: ProblemResponses) -> dict[str, Schema]:
    """Path items of the service's own pages."""
    health = {"application/json": {"schema": schemas.read([Health])[0]}}
    fresh = header_references("RequestId", "NoStore")

    def page(
        operation: str, summary: str, description: str, answers: Schema, slugs: tuple[str, ...]
    ) -> Schema:
        return {
            "get": {
                "operationId": operation,
                "tags": [TAG],
                "summary": summary,
                "description": description,
                "parameters": parameter_references("RequestId"),
                "security": [],
                "responses": answers | responses.references(slugs),
            }
        }

    def document(operation: str, form: str, media_type: str, schema: Schema) -> Schema:
        kept = header_references("RequestId", "EntityTag", "Cacheable")
        answers = {
            "200": {
                "description": "The document.",
                "headers": kept,
                "content": {media_type: {"schema": schema}},
            },
            "304": {"description": "The document you have is current. There is no body.", "headers": kept},
        }
        described = f"The bytes committed as `openapi/v1.{form.lower()}` of this version of the service."
        item = page(operation, f"Read this document as {form}", described, answers, _SHED)
        item["get"]["parameters"] = parameter_references("RequestId", "IfNoneMatch")
        return item

    def probe(status: str, example: Schema) -> Schema:
        shown = {"application/json": {**health["application/json"], "example": example}}
        return {"description": status, "headers": fresh, "content": shown}

    alive = {"200": probe("The process answers.", {"status": "pass"})}
    ready = {
        "200": probe("Send requests.", {"status": "pass"}),
        "503": probe("Send no requests.", {"status": "fail", "reason": "shutting down"})
        | {"headers": fresh | header_references("RetryAfter")},
    }
    metrics = {
        "200": {
            "description": "The counts of all workers.",
            "headers": fresh,
            "content": {"text/plain": {"schema": {"type": "string"}, "example": "# HELP"}},
        }
    }
    whole = schemas.read([OpenApiDocument])[0]
    return {
        "/v1/openapi.json": document("readContractJson", "JSON", "application/json", whole),
        "/v1/openapi.yaml": document("readContractYaml", "YAML", "application/yaml", whole),
        "/livez": page(
            "probeLiveness", "Is the process alive", "Whether the process answers at all.", alive, _ANY
        ),
        "/readyz": page(
            "probeReadiness", "Is the service ready", "Whether to send it requests.", ready, _ANY
        ),
        "/metrics": page(
            "readMetrics", "Read the counts", "Counts in the text format of Prometheus.", metrics, _ANY
        ),
    }
