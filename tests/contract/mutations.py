"""Changes to the real document, each with what it does to those who use it: breaks the wire, the source, or nothing.

Kept apart from the checker and written from the point of view of a caller, so that neither bends to the other. Here are
the register and the ways around a document; the changes stand in the modules `changes_...`, which fill the register
when they are imported.
"""

from __future__ import annotations

from collections.abc import Callable
from typing import Any, Literal

Document = dict[str, Any]
Effect = Literal["wire", "source", "nothing"]
Change = Callable[[Document], None]

CHANGES: dict[str, tuple[Change, Effect]] = {}


def change(effect: Effect) -> Callable[[Change], Change]:
    """Register a change under its name in words."""

    def register(function: Change) -> Change:
        CHANGES[function.__name__.strip("_").replace("_", " ")] = (function, effect)
        return function

    return register


def schema(document: Document, name: str) -> dict[str, Any]:
    found: dict[str, Any] = document["components"]["schemas"][name]
    return found


def operation(document: Document, name: str) -> dict[str, Any]:
    for item in document["paths"].values():
        for found in item.values():
            if found["operationId"] == name:
                chosen: dict[str, Any] = found
                return chosen
    raise KeyError(name)


def body(document: Document, name: str) -> dict[str, Any]:
    found: dict[str, Any] = operation(document, name)["requestBody"]["content"]["application/json"]
    return found


def success(document: Document, name: str) -> dict[str, Any]:
    found: dict[str, Any] = operation(document, name)["responses"]["200"]
    return found


def question(document: Document, name: str = "designLoop") -> dict[str, Any]:
    return schema(document, body(document, name)["schema"]["$ref"].rsplit("/", 1)[-1])


def answer(document: Document, name: str = "designLoop") -> dict[str, Any]:
    content = success(document, name)["content"]["application/json"]
    return schema(document, content["schema"]["$ref"].rsplit("/", 1)[-1])


def renamed(document: Document, old: str, new: str) -> None:
    """Give a schema another name wherever it is used."""
    schemas = document["components"]["schemas"]
    schemas[new] = schemas.pop(old)

    def walk(node: Any) -> None:
        if isinstance(node, dict):
            for key, value in node.items():
                if value == f"#/components/schemas/{old}":
                    node[key] = f"#/components/schemas/{new}"
                walk(value)
        elif isinstance(node, list):
            for value in node:
                walk(value)

    walk(document)


TEXT = {"type": "string", "maxLength": 64, "description": "A text."}
