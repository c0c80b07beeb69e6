"""The whole document: operations, schemas, refusals, examples and introduction put together.

`assembled` is the one function; the command and the tests call it. Must not live here: text and rules, which
have their own modules.
"""

from __future__ import annotations

import json
from collections.abc import Iterable
from pathlib import Path
from typing import Any

from loopslack.api.document.analysis_names import ANALYSIS_LISTS, ANALYSIS_UNIONS
from loopslack.api.document.answer_names import ANSWER_LISTS, ANSWER_UNIONS, SCHEMA_NAMES
from loopslack.api.document.audit_names import AUDIT_LISTS
from loopslack.api.document.examples import ExampleBook, Harvest
from loopslack.api.document.headers import HEADERS, KEY, PARAMETERS, SCHEME
from loopslack.api.document.overview import DESCRIPTION, SUMMARY, TAGS, TITLE
from loopslack.api.document.paths import PathBook
from loopslack.api.document.problem_responses import ProblemResponses
from loopslack.api.document.question_names import QUESTION_LISTS, QUESTION_UNIONS
from loopslack.api.document.schemas import SchemaBook, unwrapped
from loopslack.api.document.unit_names import UNIT_LISTS
from loopslack.api.document.upkeep import HEALTH_LISTS, upkeep_paths
from loopslack.api.document.vocabulary import DocumentError, Vocabulary
from loopslack.api.document.yaml_text import yaml_text
from loopslack.api.operations import Operation
from loopslack.contract.problems import Problem
from loopslack.contract.writing.shared import CONTRACT_VERSION

VALUES = (*UNIT_LISTS, *QUESTION_LISTS, *ANSWER_LISTS, *ANALYSIS_LISTS, *AUDIT_LISTS, *HEALTH_LISTS)
UNIONS = (*QUESTION_UNIONS, *ANSWER_UNIONS, *ANALYSIS_UNIONS)
Schema = dict[str, Any]


def assembled(operations: Iterable[Operation[Any, Any]], examples: Path) -> Schema:
    """The document of the given operations, with the examples of a folder.

    Raises:
        DocumentError: something has no name, no description or no clean place.

    """
    operations = list(operations)
    schemas, book = SchemaBook(Vocabulary(VALUES, UNIONS), SCHEMA_NAMES), ExampleBook(examples)
    responses = ProblemResponses(schemas.read([Problem])[0], _faults(book))
    paths = PathBook(schemas, responses, book)
    paths.add(operations)
    paths.paths |= upkeep_paths(schemas, responses)
    _illustrate(schemas, paths)
    return {
        "openapi": "3.1.0",
        "info": {
            "title": TITLE,
            "summary": SUMMARY,
            "description": unwrapped(DESCRIPTION),
            "version": CONTRACT_VERSION,
            "contact": {"name": "Whoever runs the service that sent this document"},
            "license": {"name": "MIT", "identifier": "MIT"},
        },
        "servers": [{"url": "/", "description": "The service that sent this document."}],
        "security": [{}, {KEY: []}],
        "tags": _tags(paths.paths),
        "paths": paths.paths,
        "components": {
            "schemas": dict(sorted(schemas.schemas.items())),
            "responses": dict(sorted(responses.responses.items())),
            "parameters": PARAMETERS,
            "headers": {name: header for name, (_, header) in HEADERS.items()},
            "securitySchemes": {KEY: SCHEME},
            "examples": paths.examples,
        },
    }


def json_text(document: Schema) -> str:
    """The document as it is committed and served in JSON."""
    return json.dumps(document, ensure_ascii=False, indent=1) + "\n"


def written(document: Schema) -> dict[str, bytes]:
    """The files of a document by name."""
    return {"v1.json": json_text(document).encode(), "v1.yaml": yaml_text(document).encode()}


def _faults(book: ExampleBook) -> dict[str, list[Schema]]:
    """Faulty fields as they were really answered, by the problem type's slug."""
    found: dict[str, list[Schema]] = {}
    for entry in book.entries:
        answer = book.answer(entry)
        if entry.status >= 400 and isinstance(answer, dict):
            faults = answer.get("errors", [])
            found.setdefault(answer["type"].rsplit("/", 1)[-1], faults)
    return found


def _illustrate(schemas: SchemaBook, paths: PathBook) -> None:
    """Give every schema an example, out of the examples of the operations where they have one."""
    harvest = Harvest(schemas.schemas)
    for item in paths.paths.values():
        for operation in item.values():
            bodies = [operation.get("requestBody", {}), *operation["responses"].values()]
            for body in bodies:
                for content in body.get("content", {}).values():
                    for example in content.get("examples", {}).values():
                        name = example["$ref"].rsplit("/", 1)[-1]
                        harvest.gather(content["schema"], paths.examples[name]["value"])
    harvest.place()


def _tags(paths: Schema) -> list[Schema]:
    used = {tag for item in paths.values() for operation in item.values() for tag in operation["tags"]}
    if unknown := used - set(TAGS):
        raise DocumentError(f"tags without a description: {sorted(unknown)}")
    return [{"name": name, "description": meaning} for name, meaning in TAGS.items() if name in used]
