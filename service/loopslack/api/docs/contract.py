"""The OpenAPI document as the pages read it: its operations, its schemas, and which page shows which schema.

Must not live here: HTML.
"""

from collections.abc import Iterator, Mapping
from functools import cache
from importlib.resources import files
from typing import Any

import msgspec
from msgspec import Struct

Schema = dict[str, Any]

GROUPS = {
    "questions": "What is sent",
    "answers": "What comes back",
    "quantities": "Numbers with their units",
    "words": "Closed lists of words",
}
"""The pages of the schemas, each with its title."""

_METHODS = ("get", "post")


class Described(Struct, frozen=True, kw_only=True):
    """An operation as the document has it."""

    method: str
    path: str
    written: Schema

    @property
    def id(self) -> str:
        """Its operationId."""
        return str(self.written["operationId"])

    @property
    def where(self) -> str:
        """The page of the documentation that describes it."""
        return f"/docs/operations/{self.id}"

    @property
    def tag(self) -> str:
        """The job it belongs to."""
        return str(self.written["tags"][0])

    def question(self) -> tuple[str, Schema] | None:
        """Media type and content of what it is sent, if it is sent anything."""
        return _first(self.written.get("requestBody", {}))

    def answer(self) -> tuple[str, Schema] | None:
        """Media type and content of its answer."""
        return _first(self.written["responses"]["200"])


class Contract:
    """The document, looked up by name."""

    def __init__(self, document: Schema) -> None:
        self.document = document
        self.schemas: Mapping[str, Schema] = document["components"]["schemas"]
        self.operations = tuple(
            Described(method=method.upper(), path=path, written=item[method])
            for path, item in document["paths"].items()
            for method in _METHODS
            if method in item
        )
        self._groups = dict(self._grouped())

    def operation(self, id: str) -> Described:
        """An operation by its id; KeyError if there is none."""
        return {operation.id: operation for operation in self.operations}[id]

    def resolved(self, part: Schema) -> Schema:
        """A component for a reference to one; anything else as it is."""
        reference = part.get("$ref")
        if reference is None:
            return part
        found: Any = self.document
        for step in str(reference).removeprefix("#/").split("/"):
            found = found[step]
        return dict(found)

    def examples(self, content: Schema) -> dict[str, Schema]:
        """The examples of a body by name."""
        return {name: self.resolved(each) for name, each in content.get("examples", {}).items()}

    def group(self, name: str) -> str:
        """The page that shows a schema."""
        return self._groups[name]

    def where(self, name: str) -> str:
        """The address of a schema in the documentation."""
        return f"/docs/schemas/{self._groups[name]}#{name}"

    def words(self, name: str) -> dict[str, str]:
        """The values of a closed list with their meanings."""
        schema = self.schemas[name]
        return dict(zip(schema["enum"], schema["x-enum-descriptions"], strict=True))

    def _grouped(self) -> Iterator[tuple[str, str]]:
        asked = set[str]()
        for operation in self.operations:
            self._reach(operation.written.get("requestBody", {}), asked)
        for name, schema in self.schemas.items():
            if "enum" in schema:
                yield name, "words"
            elif set(schema.get("properties", ())) in ({"value", "unit"}, {"amount", "currency"}):
                yield name, "quantities"
            else:
                yield name, "questions" if name in asked else "answers"

    def _reach(self, part: object, found: set[str]) -> None:
        """Collect the names of all schemas that a part of the document leads to."""
        if isinstance(part, list):
            for item in part:
                self._reach(item, found)
        elif isinstance(part, dict):
            reference = part.get("$ref")
            if isinstance(reference, str) and reference.startswith("#/components/schemas/"):
                name = name_of(reference)
                if name not in found:
                    found.add(name)
                    self._reach(self.schemas[name], found)
            for key, member in part.items():
                if key not in ("examples", "example"):
                    self._reach(member, found)


def name_of(reference: str) -> str:
    """The name at the end of a reference."""
    return reference.rsplit("/", 1)[-1]


def _first(message: Schema) -> tuple[str, Schema] | None:
    for media_type, content in message.get("content", {}).items():
        return media_type, content
    return None


@cache
def contract() -> Contract:
    """The contract this version serves; read once.

    Raises:
        FileNotFoundError: the package was built without the document.

    """
    path = files("loopslack.api") / "document" / "v1.json"
    return Contract(msgspec.json.decode(path.read_bytes()))
