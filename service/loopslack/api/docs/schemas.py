"""The pages of the schemas: every one with its members, limits, words and an example.

Must not live here: anything the OpenAPI document does not say.
"""

import json
from collections.abc import Iterator

from loopslack.api.docs.contract import GROUPS, Contract, Schema, name_of
from loopslack.api.docs.frame import Section, framed
from loopslack.api.docs.markup import (
    Html,
    anchored,
    code,
    commas,
    disclosure,
    joined,
    json_text,
    link,
    listing,
    table,
    tag,
)
from loopslack.api.docs.prose import phrase, prose
from loopslack.api.reference import Page

_LEADS = {
    "questions": "Objects of a question and of everything inside it. They are closed: a member that is not "
    "listed here is refused, with a hint at the nearest name that is.",
    "answers": "Objects of an answer. They are open: members may be added within version 1, so a reader passes "
    "over those it does not know. A member that would be empty is absent.",
    "quantities": "A number and its unit. The unit is one of a closed list and no text is ever parsed; the same "
    "object is used in questions and answers.",
    "words": "Values that a member may have, the constant a generated client gives each, and what it means.",
}
_SCALARS = {"string": "text", "number": "number", "integer": "whole number", "boolean": "true or false"}
_LIMITS = {
    "minimum": "at least {}",
    "maximum": "at most {}",
    "exclusiveMinimum": "above {}",
    "exclusiveMaximum": "below {}",
    "minLength": "at least {} characters",
    "maxLength": "at most {} characters",
    "minItems": "at least {} entries",
    "maxItems": "at most {} entries",
    "minProperties": "at least {} members",
    "maxProperties": "at most {} members",
    "pattern": "form {}",
}


def schema_pages(contract: Contract) -> Iterator[Page]:
    """The index of the schemas and the page of each group."""
    yield _index(contract)
    for group, title in GROUPS.items():
        sections = [
            Section(anchor=name, title=name, body=_schema(contract, name, schema))
            for name, schema in sorted(contract.schemas.items())
            if contract.group(name) == group
        ]
        yield framed(f"/docs/schemas/{group}", title, _LEADS[group], sections)


def _index(contract: Contract) -> Page:
    sections = []
    for group, title in GROUPS.items():
        names = [name for name in sorted(contract.schemas) if contract.group(name) == group]
        entries = [tag("li", link(contract.where(name), name)) for name in names]
        body = joined(
            tag("p", _LEADS[group]),
            tag("ul", entries, class_="columns"),
        )
        sections.append(Section(anchor=group, title=title, body=body))
    lead = "Every object and every list of words of the contract, by what it is for."
    return framed("/docs/schemas", "Schemas", lead, sections)


def _schema(contract: Contract, name: str, schema: Schema) -> Html:
    return joined(
        prose(schema["description"].partition("\n\n")[0] if "enum" in schema else schema["description"]),
        _one_of(contract, schema) if "oneOf" in schema else None,
        _words(name, schema) if "enum" in schema else None,
        members(contract, name, schema) if "properties" in schema else None,
        _example(name, schema) if "enum" not in schema else None,
    )


def members(contract: Contract, name: str, schema: Schema) -> Html:
    """The members of an object, each with its type, limits, meaning and example."""
    required = set(schema.get("required", ()))
    entries: list[object] = []
    for key, member in schema["properties"].items():
        told = "required" if key in required else "optional"
        entries.append(
            tag(
                "dt",
                tag("code", key, class_="member"),
                " ",
                tag("span", kind_of(contract, member), class_="kind"),
                " ",
                tag("span", told, class_=told),
                id=f"{name}.{key}",
            )
        )
        limits = list(_limits(member))
        shown = member.get("examples")
        entries.append(
            tag(
                "dd",
                tag("p", phrase(" ".join(member.get("description", "").split()))),
                tag("p", commas(limits), ".", class_="limits") if limits else None,
                tag("p", "Example: ", code(json.dumps(shown[0], ensure_ascii=False)), class_="example")
                if shown
                else None,
            )
        )
    closed = schema.get("additionalProperties") is False
    note = "No other members are taken." if closed else None
    return joined(tag("dl", entries, class_="members"), tag("p", note, class_="note") if note else None)


def kind_of(contract: Contract, member: Schema) -> Html:
    """The type of a member in words, linked to its schema."""
    if "$ref" in member:
        name = name_of(member["$ref"])
        return link(contract.where(name), name)
    if "const" in member:
        return joined("always ", code(json.dumps(member["const"])))
    kinds = member["type"] if isinstance(member["type"], list) else [member["type"]]
    absent = " or null" if "null" in kinds else ""
    kind = next(kind for kind in kinds if kind != "null")
    if kind == "array":
        return joined("list of ", kind_of(contract, member["items"]), absent)
    if kind == "object":
        inner = member.get("additionalProperties")
        if isinstance(inner, dict):
            return joined("map of names to ", kind_of(contract, inner), absent)
        return joined("object", absent)
    if member.get("format") == "binary":
        return joined("bytes", absent)
    return joined(_SCALARS[kind], absent)


def _limits(member: Schema) -> Iterator[Html]:
    for keyword, sentence in _LIMITS.items():
        if keyword in member:
            before, after = sentence.split("{}")
            yield joined(before, code(member[keyword]), after)


def _one_of(contract: Contract, schema: Schema) -> Html:
    told = schema["discriminator"]
    rows = [
        (code(json.dumps(value)), link(contract.where(name_of(target)), name_of(target)))
        for value, target in told["mapping"].items()
    ]
    label = joined("One of these, told by its member ", code(told["propertyName"]))
    return table(label, (told["propertyName"], "schema"), rows)


def _words(name: str, schema: Schema) -> Html:
    rows = [
        (anchored(f"{name}.{value}", code(value)), meaning, code(constant))
        for value, constant, meaning in zip(
            schema["enum"], schema["x-enum-varnames"], schema["x-enum-descriptions"], strict=True
        )
    ]
    return table(f"Values of {name}", ("value", "meaning", "constant"), rows)


def _example(name: str, schema: Schema) -> Html | None:
    shown = schema.get("examples")
    if not shown:
        return None
    return disclosure("An example", listing(json_text(shown[0]), f"Example of {name}"))
