"""Operations as path items: question, answer, headers, refusals and examples of each.

The operations stand in `loopslack.api.v1`; what is said here holds for all of them. Must not live here:
schemas, and anything about one particular operation.
"""

from __future__ import annotations

from collections.abc import Iterable
from typing import Any

from loopslack.api.document.examples import Example, ExampleBook
from loopslack.api.document.headers import header_references, parameter_references
from loopslack.api.document.problem_responses import ProblemResponses
from loopslack.api.document.schemas import SchemaBook
from loopslack.api.document.vocabulary import DocumentError
from loopslack.api.operations import BodySize, Operation, problems_of

Schema = dict[str, Any]
JSON = "application/json"
TEXT_BODIES: dict[str, Schema] = {
    "text/html": {
        "type": "string",
        "description": "One self-contained page, no script, no outside resource.",
    },
    "image/svg+xml": {
        "type": "string",
        "description": "One drawing with title and description for screen readers.",
    },
    "application/pdf": {"type": "string", "format": "binary", "description": "A tagged, archival PDF."},
    "application/x-ndjson": {
        "type": "string",
        "description": "One JSON object a line, lines ended by a line feed.",
    },
}
"""Bodies that are no JSON object, by media type."""


class PathBook:
    """Path items of operations, in their order."""

    def __init__(self, schemas: SchemaBook, responses: ProblemResponses, examples: ExampleBook) -> None:
        self._schemas = schemas
        self._responses = responses
        self._examples = examples
        self.paths: dict[str, Schema] = {}
        self.examples: dict[str, Schema] = {}

    def add(self, operations: Iterable[Operation[Any, Any]]) -> None:
        """Add the operations; two for one path and method are refused."""
        for operation in operations:
            item = self.paths.setdefault(operation.path, {})
            if operation.method.lower() in item:
                raise DocumentError(f"{operation.method} {operation.path} is there twice")
            item[operation.method.lower()] = self._operation(operation)

    def _operation(self, operation: Operation[Any, Any]) -> Schema:
        asked = operation.method == "POST"
        written: Schema = {
            "operationId": operation.operation_id,
            "tags": [operation.tag],
            "summary": operation.summary,
            "description": operation.description,
            "parameters": parameter_references(
                "RequestId", "TraceParent", *(() if asked else ("IfNoneMatch",))
            ),
        }
        if operation.deprecated_since is not None:
            written["deprecated"] = True
        if asked:
            written["requestBody"] = self._question(operation)
        written["responses"] = {"200": self._answer(operation)}
        if not asked:
            written["responses"]["304"] = {
                "description": "The answer you have is current. There is no body.",
                "headers": header_references("RequestId", "EntityTag", "Cacheable"),
            }
        written["responses"] |= self._responses.references(kind.slug for kind in problems_of(operation))
        return written

    def _question(self, operation: Operation[Any, Any]) -> Schema:
        if operation.body_size is BodySize.STREAM:
            media_type, schema = operation.media_type, dict(TEXT_BODIES[operation.media_type])
        else:
            media_type, schema = JSON, self._schemas.read([operation.question])[0]
        body: Schema = {"schema": schema}
        examples = self._examples.of(operation.operation_id, 200)
        if examples:
            body["examples"] = {
                entry.name: self._shown(entry, "question", self._examples.question(entry))
                for entry in examples
            }
        return {"description": "The question.", "required": True, "content": {media_type: body}}

    def _answer(self, operation: Operation[Any, Any]) -> Schema:
        if operation.media_type == JSON:
            schema = self._schemas.read([operation.answer])[0]
        elif operation.media_type in TEXT_BODIES:
            schema = dict(TEXT_BODIES[operation.media_type])
        else:
            raise DocumentError(f"{operation.operation_id}: nothing is known of {operation.media_type}")
        body: Schema = {"schema": schema}
        shown = {
            entry.name: self._shown(entry, "answer", value)
            for entry in self._examples.of(operation.operation_id, 200)
            if (value := self._examples.answer(entry)) is not None
        }
        if shown:
            body["examples"] = shown
        carried: tuple[str, ...] = ("EntityTag", "Cacheable")
        if operation.method == "POST":
            # An answer that is sent while it is computed goes out before its time is known.
            carried = ("NoStore",) if operation.respond else ("ServerTiming", "NoStore")
        answer: Schema = {
            "description": "The answer.",
            "headers": header_references("RequestId", *carried),
            "content": {operation.media_type: body},
        }
        if operation.method == "GET":
            answer["links"] = {
                "AskAgain": {
                    "operationId": operation.operation_id,
                    "description": "Sent back, the tag spares an unchanged answer.",
                    "parameters": {"header.If-None-Match": "$response.header.ETag"},
                }
            }
        return answer

    def _shown(self, entry: Example, part: str, value: object) -> Schema:
        """A reference to the example, which stands with the components so that operations stay short to read."""
        name = f"{entry.operation}.{entry.name}.{part}"
        self.examples[name] = {"summary": entry.title, "description": entry.sentence, "value": value}
        return {"$ref": f"#/components/examples/{name}"}
