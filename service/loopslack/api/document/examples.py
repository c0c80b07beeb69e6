"""Examples: questions that were really asked and the answers they really got.

They are files under `openapi/examples`, one folder per operation, `NAME.question.json` beside
`NAME.answer.json`, and an `index.json` with a title and a sentence for each. A test sends every question to
the service and compares the answer. Here they are read, put on their operations, and drawn on for an example
of every schema, so that a reader sees the same roof everywhere. Must not live here: any number of its own.
"""

from __future__ import annotations

import json
from collections.abc import Mapping
from pathlib import Path
from typing import Any

import msgspec

from loopslack.api.document.vocabulary import DocumentError

Schema = dict[str, Any]
MOST_CHARACTERS = 2_000
"""Longest example of a schema, as compact JSON; what is larger is shown at its operation."""


class Example(msgspec.Struct, frozen=True, kw_only=True, forbid_unknown_fields=True):
    """One entry of `index.json`."""

    operation: str
    name: str
    title: str
    sentence: str
    status: int = 200
    shortened: bool = False
    """The answer is shown with the first two entries of each list."""


class ExampleBook:
    """The examples of a folder. A folder without an index has none."""

    def __init__(self, folder: Path) -> None:
        index = folder / "index.json"
        self.entries = (
            msgspec.json.decode(index.read_bytes(), type=list[Example], strict=True) if index.exists() else []
        )
        self._folder = folder

    def of(self, operation: str, status: int | None = None) -> list[Example]:
        """Examples of one operation, all or those answered with one status."""
        return [
            entry
            for entry in self.entries
            if entry.operation == operation and (status is None or entry.status == status)
        ]

    def question(self, entry: Example) -> object:
        """What is sent; `None` for an operation that takes no body."""
        return self._read(entry, "question")

    def answer(self, entry: Example) -> object:
        """What comes back; `None` where the answer is a page or a drawing."""
        return self._read(entry, "answer")

    def _read(self, entry: Example, part: str) -> object:
        path = self._folder / entry.operation / f"{entry.name}.{part}"
        if (lines := path.with_name(f"{path.name}.ndjson")).exists():
            return lines.read_text(encoding="utf-8")
        if (value := path.with_name(f"{path.name}.json")).exists():
            return json.loads(value.read_bytes())
        return None


class Harvest:
    """Finds an example for every named schema inside the examples of the operations."""

    def __init__(self, schemas: Mapping[str, Schema]) -> None:
        self._schemas = schemas
        self.found: dict[str, object] = {}

    def gather(self, schema: Schema, value: object) -> None:
        """Walk a value along its schema and keep the first value of every named schema on the way."""
        if "$ref" in schema:
            name = schema["$ref"].rsplit("/", 1)[-1]
            self._keep(name, value)
            schema = self._schemas[name]
        if "oneOf" in schema and isinstance(value, dict):
            discriminator = schema["discriminator"]
            target = discriminator["mapping"].get(value.get(discriminator["propertyName"]))
            if target:
                self.gather({"$ref": target}, value)
        if isinstance(value, dict):
            members = schema.get("properties", {})
            for key, member in value.items():
                if key in members:
                    self.gather(members[key], member)
                elif isinstance(schema.get("additionalProperties"), dict):
                    self.gather(schema["additionalProperties"], member)
        elif isinstance(value, list) and "items" in schema:
            for item in value:
                self.gather(schema["items"], item)

    def _keep(self, name: str, value: object) -> None:
        if name not in self.found and "enum" not in self._schemas[name]:
            shortened = cut(value, 1)
            if len(json.dumps(shortened)) <= MOST_CHARACTERS:
                self.found[name] = shortened

    def place(self) -> None:
        """Put what was found on its schemas, and on the others an example made of those of their members."""
        for name, schema in self._schemas.items():
            if "examples" not in schema:
                schema["examples"] = [self.found[name] if name in self.found else self._composed(schema)]

    def _composed(self, schema: Schema) -> object:
        if schema.get("examples"):
            return schema["examples"][0]
        if "const" in schema:
            return schema["const"]
        if "$ref" in schema:
            name = schema["$ref"].rsplit("/", 1)[-1]
            return self.found[name] if name in self.found else self._composed(self._schemas[name])
        if "oneOf" in schema:
            return self._composed(schema["oneOf"][0])
        if schema.get("type") == "array":
            items, least = schema["items"], schema.get("minItems", 0)
            return [self._composed(items)] * max(1, least) if least or "$ref" in items else []
        if schema.get("type") == "object":
            members = schema.get("properties", {})
            return {name: self._composed(members[name]) for name in schema.get("required", [])}
        if schema.get("type") == "string":
            # A sentence that no example happens to show: what it tells stands in for what it says.
            return schema["description"]
        raise DocumentError(f"no example for {schema}")


def cut(value: object, most: int = 2) -> object:
    """The value with every list cut to its first entries, enough to show what they look like."""
    if isinstance(value, dict):
        return {key: cut(member, most) for key, member in value.items()}
    if isinstance(value, list):
        return [cut(item, most) for item in value[:most]]
    return value
