"""From structs to component schemas.

Each struct becomes one named schema: its docstring the description, its fields the members, its bounds the
bounds. What generated clients cannot digest is refused here with the place that says it, not smoothed over:
nameless enums and unions, members without a description, unions of scalars, tuples. Must not live here: names
(see `vocabulary`), operations, examples.
"""

from __future__ import annotations

import inspect
import re
from collections.abc import Iterable, Mapping
from typing import Any, cast

import msgspec
from msgspec import inspect as types

from loopslack.api.document.vocabulary import CLASHING_NAMES, DocumentError, Vocabulary, constant_of

Schema = dict[str, Any]
NULL_IN_QUESTION = "Null counts as absent."
TAG_MEANING = "Says which kind this is."


class SchemaBook:
    """All component schemas of a document; `read` adds the structs reachable from the given types.

    A struct's name is the schema's, unless `names` has another.
    """

    def __init__(
        self,
        vocabulary: Vocabulary,
        names: Mapping[type, str] | None = None,
    ) -> None:
        self.vocabulary = vocabulary
        self._names = names or {}
        self.schemas: dict[str, Schema] = {}
        self._owners: dict[str, object] = {}

    def read(self, bodies: Iterable[Any]) -> list[Schema]:
        """References to the schemas of the given bodies, in order."""
        return [self._of(info, "body") for info in types.multi_type_info(list(bodies))]

    def _of(self, info: types.Type, place: str) -> Schema:
        match info:
            case types.Metadata():
                return self._of(info.type, place) | dict(info.extra_json_schema or {})
            case types.StructType():
                return self._struct(info)
            case types.LiteralType():
                entry = self.vocabulary.values(info.values, place)
                return self._component(entry.name, entry, entry.schema())
            case types.UnionType():
                return self._union(info, place)
            case types.ListType() | types.VarTupleType():
                return _array(info, self._of(info.item_type, f"{place}[]"))
            case types.DictType():
                return self._map(info, place)
            case _:
                return _scalar(info, place)

    def _component(self, name: str, owner: object, schema: Schema) -> Schema:
        if self._owners.setdefault(name, owner) is not owner:
            raise DocumentError(f"two different schemas are called {name}")
        if name in CLASHING_NAMES or not re.fullmatch(r"[A-Z][A-Za-z0-9]*", name):
            raise DocumentError(f"{name} is no name for a schema")
        self.schemas.setdefault(name, schema)
        return {"$ref": f"#/components/schemas/{name}"}

    def _struct(self, info: types.StructType) -> Schema:
        name = self._names.get(info.cls, info.cls.__name__)
        if name in self.schemas:
            return self._component(name, info.cls, {})
        schema: Schema = {"type": "object", "description": _prose(info.cls)}
        reference = self._component(name, info.cls, schema)
        members: dict[str, Schema] = {}
        required = []
        if info.tag_field is not None:
            members[info.tag_field] = {
                "type": "string",
                "const": info.tag,
                "description": TAG_MEANING,
                "x-enum-varnames": [constant_of(str(info.tag))],
            }
            required.append(info.tag_field)
        for field in info.fields:
            members[field.encode_name] = self._member(info, field)
            if field.required:
                required.append(field.encode_name)
        schema["properties"] = members
        if required:
            schema["required"] = required
        if info.forbid_unknown_fields:
            schema["additionalProperties"] = False
        return reference

    def _member(self, owner: types.StructType, field: types.Field) -> Schema:
        place = f"{owner.cls.__name__}.{field.encode_name}"
        schema, nullable = self._nullable(field.type, place)
        if "description" not in schema:
            raise DocumentError(f"{place} has no description")
        if not nullable or not owner.forbid_unknown_fields:
            # Answers leave out what they do not know, so their optional members are never null.
            return schema
        if isinstance(schema.get("type"), str) and schema["type"] not in {"array", "object"}:
            return schema | {"type": [schema["type"], "null"]}
        return schema | {"description": f"{schema['description']} {NULL_IN_QUESTION}"}

    def _nullable(self, info: types.Type, place: str) -> tuple[Schema, bool]:
        """The schema of a member without null, and whether null was among its types."""
        if isinstance(info, types.Metadata):
            schema, nullable = self._nullable(info.type, place)
            return schema | dict(info.extra_json_schema or {}), nullable
        if isinstance(info, types.UnionType) and any(isinstance(kind, types.NoneType) for kind in info.types):
            rest = tuple(kind for kind in info.types if not isinstance(kind, types.NoneType))
            return self._of(rest[0] if len(rest) == 1 else types.UnionType(rest), place), True
        return self._of(info, place), False

    def _union(self, info: types.UnionType, place: str) -> Schema:
        kinds = [kind.type if isinstance(kind, types.Metadata) else kind for kind in info.types]
        if not all(isinstance(kind, types.StructType) for kind in kinds):
            raise DocumentError(f"{place} mixes types that generated clients cannot tell apart")
        members = cast("list[types.StructType]", kinds)
        entry = self.vocabulary.union([member.cls for member in members], place)
        by_class = {member.cls: member for member in members}
        references = {str(by_class[cls].tag): self._struct(by_class[cls]) for cls in entry.members}
        tag_fields = {member.tag_field for member in members}
        if len(references) < len(members) or len(tag_fields) != 1 or None in tag_fields:
            raise DocumentError(f"{place}: the kinds of {entry.name} need one tag member and a tag each")
        schema: Schema = {
            "description": entry.meaning,
            "oneOf": list(references.values()),
            "discriminator": {
                "propertyName": tag_fields.pop(),
                "mapping": {tag: reference["$ref"] for tag, reference in references.items()},
            },
        }
        return self._component(entry.name, entry, schema)

    def _map(self, info: types.DictType, place: str) -> Schema:
        if not isinstance(info.key_type, types.StrType):
            raise DocumentError(f"{place}: a map needs names as keys")
        schema: Schema = {"type": "object", "additionalProperties": self._of(info.value_type, f"{place}{{}}")}
        return schema | _bounds(minProperties=info.min_length, maxProperties=info.max_length)


def _array(info: types.ListType | types.VarTupleType, items: Schema) -> Schema:
    schema: Schema = {"type": "array", "items": items}
    return schema | _bounds(minItems=info.min_length, maxItems=info.max_length)


def _scalar(info: types.Type, place: str) -> Schema:
    match info:
        case types.BoolType():
            return {"type": "boolean"}
        case types.StrType():
            bounds = _bounds(minLength=info.min_length, maxLength=info.max_length, pattern=info.pattern)
            return {"type": "string"} | bounds
        case types.IntType() | types.FloatType():
            whole = isinstance(info, types.IntType)
            schema: Schema = {"type": "integer"} if whole else {"type": "number", "format": "double"}
            return schema | _bounds(
                minimum=info.ge,
                exclusiveMinimum=info.gt,
                maximum=info.le,
                exclusiveMaximum=info.lt,
                multipleOf=info.multiple_of,
            )
        case _:
            raise DocumentError(f"{place}: {type(info).__name__} has no place in the document")


def _bounds(**bounds: float | str | None) -> Schema:
    """The bounds that are stated; whole numbers written without a point."""
    stated = {keyword: bound for keyword, bound in bounds.items() if bound is not None}
    return {
        keyword: int(bound) if isinstance(bound, float) and bound.is_integer() else bound
        for keyword, bound in stated.items()
    }


def _prose(struct: type[msgspec.Struct]) -> str:
    """A docstring as Markdown: paragraphs on one line, lists kept."""
    docstring = struct.__dict__.get("__doc__")
    if not docstring:
        raise DocumentError(f"{struct.__name__} has no docstring")
    return unwrapped(docstring)


def unwrapped(text: str) -> str:
    """Text without the line breaks that only fit it to the width of a source file."""
    lines: list[str] = []
    for line in inspect.cleandoc(text).splitlines():
        starts_anew = not line.strip() or re.match(r"\s*([*-]|\d+\.|\|)\s", line)
        if lines and lines[-1].strip() and not starts_anew:
            lines[-1] = f"{lines[-1]} {line.strip()}"
        else:
            lines.append(line.rstrip())
    return "\n".join(lines).strip()
