"""Does a new schema keep what an old one promised? Direction-aware comparison of OpenAPI 3.1 schemas.

What a caller may send must stay accepted: every value of the old request schema is a value of the new one.
What a caller receives must stay understood: every value of the new response schema is a value of the old one.
Both are the same question, "does `wide` hold every value of `narrow`?", asked with the documents exchanged;
the rest of this module is what generated code needs beyond that (names).

Must not live here: paths, operations, anything of HTTP. A keyword this module cannot judge is refused with
`NotUnderstoodError`, never passed over: a check that skips what it does not know would look like a pass.
"""

from __future__ import annotations

from collections.abc import Mapping
from typing import Any, Literal, NamedTuple

Schema = Mapping[str, Any]
WORDS = {"title", "description", "example", "examples", "deprecated", "externalDocs", "xml", "$comment"}
JUDGED = {
    *("$ref", "type", "enum", "const", "format", "pattern", "multipleOf", "uniqueItems", "default"),
    *("minimum", "maximum", "exclusiveMinimum", "exclusiveMaximum", "minLength", "maxLength"),
    *("minItems", "maxItems", "minProperties", "maxProperties", "items", "oneOf", "anyOf", "discriminator"),
    *("properties", "required", "additionalProperties", "readOnly", "writeOnly"),
    *("contentMediaType", "contentEncoding"),
}
UPPER = ("maximum", "exclusiveMaximum", "maxLength", "maxItems", "maxProperties")
LOWER = ("minimum", "exclusiveMinimum", "minLength", "minItems", "minProperties")


class NotUnderstoodError(Exception):
    """A document says something this checker cannot judge."""


class Finding(NamedTuple):
    """One broken promise."""

    grade: Literal["wire", "source"]
    where: str
    what: str

    def __str__(self) -> str:
        return f"[{self.grade}] {self.where}: {self.what}"


class Document:
    """A document whose references can be followed."""

    def __init__(self, content: Mapping[str, Any]) -> None:
        self.content = content

    def resolve(self, node: Mapping[str, Any]) -> Mapping[str, Any]:
        """The node behind a reference; members beside `$ref` win, as 3.1 has it for schemas."""
        for _ in range(50):
            if "$ref" not in node:
                return node
            target: Any = self.content
            for step in node["$ref"].removeprefix("#/").split("/"):
                target = target[step.replace("~1", "/").replace("~0", "~")]
            node = {**target, **{key: value for key, value in node.items() if key != "$ref"}}
        raise NotUnderstoodError("references lead in a circle")


class Side(NamedTuple):
    """A schema in its document."""

    document: Document
    schema: Schema

    def at(self, schema: Schema) -> Side:
        return Side(self.document, schema)


class SchemaComparison:
    """Compares pairs of schemas; `findings` grows. Each pair of schemas is judged once per direction."""

    def __init__(self, old: Document, new: Document) -> None:
        self._old, self._new = old, new
        self.findings: list[Finding] = []
        self._judged: set[tuple[str | int, str | int, bool]] = set()

    def request(self, where: str, old: Schema, new: Schema) -> None:
        """A schema of something callers send."""
        self._compare(where, old, new, sent=True)

    def response(self, where: str, old: Schema, new: Schema) -> None:
        """A schema of something callers receive."""
        self._compare(where, old, new, sent=False)

    def _say(self, where: str, what: str, grade: Literal["wire", "source"] = "wire") -> None:
        self.findings.append(Finding(grade, where, what))

    def _compare(self, where: str, old: Schema, new: Schema, *, sent: bool) -> None:
        key = (_identity(old), _identity(new), sent)
        if key in self._judged:
            return
        self._judged.add(key)
        if isinstance(old, bool) or isinstance(new, bool):
            raise NotUnderstoodError(f"{where}: boolean schemas are not compared")
        before, after = Side(self._old, self._old.resolve(old)), Side(self._new, self._new.resolve(new))
        for side in (before, after):
            unread = {name for name in side.schema if not name.startswith("x-")} - WORDS - JUDGED
            if unread:
                raise NotUnderstoodError(f"{where}: {sorted(unread)} not compared by this checker")
        self._names(where, old, new, before, after)
        wide, narrow = (after, before) if sent else (before, after)
        said = len(self.findings)
        for what in _values_lost(wide.schema, narrow.schema, sent=sent):
            self._say(where, what)
        if said == len(self.findings):
            # Only where the wire agrees: a changed type is said once, not once more as a changed format.
            for what in _code_changed(before.schema, after.schema):
                self._say(where, what, "source")
        self._members(where, before, after, sent=sent)
        self._map(where, before, after, sent=sent)
        if "items" in before.schema and "items" in after.schema:
            self._compare(f"{where}[]", before.schema["items"], after.schema["items"], sent=sent)
        elif "items" in wide.schema and "array" in (_types(narrow.schema) or {"array"}):
            self._say(where, "items are restricted" if sent else "items may be anything now")
        self._variants(where, before, after, sent=sent)

    def _names(self, where: str, old: Schema, new: Schema, before: Side, after: Side) -> None:
        names = [ref.rsplit("/", 1)[-1] for ref in (old.get("$ref"), new.get("$ref")) if ref]
        if len(names) == 2 and names[0] != names[1] and _becomes_a_class(before.schema):
            self._say(where, f"schema {names[0]} is called {names[1]}", "source")
        if _becomes_a_class(before.schema) and len(names) == 1:
            self._say(where, "a named schema became an inline one or the reverse", "source")

    def _members(self, where: str, before: Side, after: Side, *, sent: bool) -> None:
        old, new = before.schema.get("properties", {}), after.schema.get("properties", {})
        hidden = "readOnly" if sent else "writeOnly"
        for name, schema in old.items():
            if name not in new:
                self._say(f"{where}.{name}", "member removed")
                continue
            self._compare(f"{where}.{name}", schema, new[name], sent=sent)
            if new[name].get(hidden) and not schema.get(hidden):
                self._say(f"{where}.{name}", f"now {hidden}")
        was, is_now = set(before.schema.get("required", [])), set(after.schema.get("required", []))
        changed, what = (is_now - was, "now required") if sent else (was - is_now, "no longer always present")
        for name in sorted(changed & set(new)):
            self._say(f"{where}.{name}", what)
        if not sent and before.schema.get("additionalProperties") is False:
            for name in sorted(set(new) - set(old)):
                self._say(f"{where}.{name}", "new member of an answer that was declared complete")

    def _map(self, where: str, before: Side, after: Side, *, sent: bool) -> None:
        """`additionalProperties`: absent or true is open, false is closed, a schema is a map."""
        wide, narrow = (after, before) if sent else (before, after)
        outer, inner = (side.schema.get("additionalProperties", True) for side in (wide, narrow))
        if not _may_be_object(narrow.schema) or inner is False:
            return
        if outer is False:
            what = "closed to unknown members" if sent else "an answer declared complete is open now"
            self._say(where, what)
        elif isinstance(outer, Mapping):
            if isinstance(inner, Mapping):
                old, new = (inner, outer) if sent else (outer, inner)
                self._compare(f"{where}{{}}", old, new, sent=sent)
            else:
                what = "values of the map are restricted" if sent else "values of the map may be anything now"
                self._say(where, what)

    def _variants(self, where: str, before: Side, after: Side, *, sent: bool) -> None:
        old, new = _variants(where, before), _variants(where, after)
        if (old is None) != (new is None):
            self._say(where, "one of several kinds became a single one or the reverse")
        if old is None or new is None:
            return
        if before.schema["discriminator"]["propertyName"] != after.schema["discriminator"]["propertyName"]:
            self._say(where, "the member that names the kind was renamed")
        for tag, schema in old.items():
            if tag in new:
                self._compare(f"{where}<{tag}>", schema, new[tag], sent=sent)
            elif sent:
                self._say(where, f"kind {tag} no longer accepted")
        if not sent:
            for tag in new:
                if tag not in old:
                    self._say(where, f"new kind {tag} in an answer")


def _values_lost(wide: Schema, narrow: Schema, *, sent: bool) -> list[str]:
    """Why some value of `narrow` is no value of `wide`, in words of what happened to the document."""
    lost = []
    verb = "narrowed" if sent else "widened"
    outer, inner = _types(wide), _types(narrow)
    if outer is not None and (inner is None or not inner <= outer):
        lost.append(f"type {verb}: {_named(inner)} does not fit {_named(outer)}")
    outer_values, inner_values = _listed(wide), _listed(narrow)
    extensible = wide.get("x-extensible-enum") and not sent
    if outer_values is not None and not extensible:
        extra = None if inner_values is None else [v for v in inner_values if v not in outer_values]
        if extra is None or extra:
            lost.append(f"values {verb}: {extra or 'any'} outside {outer_values}")
    for keyword in UPPER + LOWER:
        edge, inside = wide.get(keyword), narrow.get(keyword)
        if edge is None or (inner_values is not None and outer_values is not None):
            continue
        beyond = inside is None or (inside > edge if keyword in UPPER else inside < edge)
        if beyond and not _implied(keyword, edge, narrow):
            lost.append(f"{keyword} {verb}: {inside} against {edge}")
    lost += [
        f"{keyword} {verb}: {narrow.get(keyword)} against {wide[keyword]}"
        for keyword in ("pattern", "format", "contentMediaType", "contentEncoding")
        if keyword in wide and wide[keyword] != narrow.get(keyword)
    ]
    step, inside = wide.get("multipleOf"), narrow.get("multipleOf")
    if step is not None and (inside is None or abs(inside / step - round(inside / step)) > 1e-9):
        lost.append(f"multipleOf {verb}: {inside} against {step}")
    if wide.get("uniqueItems") and not narrow.get("uniqueItems"):
        lost.append(f"uniqueItems {verb}")
    if sent and wide.get("default") != narrow.get("default"):
        lost.append(f"default changed: {narrow.get('default')} to {wide.get('default')}")
    return lost


def _code_changed(old: Schema, new: Schema) -> list[str]:
    """What generated code shows although the wire agrees."""
    changed = []
    if old.get("format") != new.get("format"):
        changed.append(f"format {old.get('format')} became {new.get('format')}")
    if ("number" in (_types(old) or ())) != ("number" in (_types(new) or ())):
        changed.append("an integer became a number or the reverse")
    before = dict(zip(old.get("enum", []), old.get("x-enum-varnames", []), strict=False))
    after = dict(zip(new.get("enum", []), new.get("x-enum-varnames", []), strict=False))
    for value, name in before.items():
        if value in new.get("enum", []) and after.get(value) != name:
            changed.append(f"constant {name} of {value} became {after.get(value)}")
    return changed


def _implied(keyword: str, edge: float, narrow: Schema) -> bool:
    """Is a bound kept by its twin: `exclusiveMinimum: 0` lies inside `minimum: 0`, `minimum: 1` in
    `exclusiveMinimum: 0`.
    """
    twin = {
        "minimum": "exclusiveMinimum",
        "exclusiveMinimum": "minimum",
        "maximum": "exclusiveMaximum",
        "exclusiveMaximum": "maximum",
    }.get(keyword)
    inside = narrow.get(twin) if twin else None
    if inside is None:
        return False
    if keyword.startswith("exclusive"):
        return bool(inside < edge if keyword in UPPER else inside > edge)
    return bool(inside <= edge if keyword in UPPER else inside >= edge)


def _identity(schema: Schema) -> str | int:
    """A reference is what it refers to; any other schema is itself, and its document outlives the comparison."""
    return schema["$ref"] if set(schema) <= {"$ref", *WORDS} and "$ref" in schema else id(schema)


def _types(schema: Schema) -> set[str] | None:
    declared = schema.get("type")
    if declared is None:
        values = _listed(schema)
        if values is None:
            return None
        names = {str: "string", bool: "boolean", int: "integer", float: "number", type(None): "null"}
        declared = [names[type(value)] for value in values]
    types = {declared} if isinstance(declared, str) else set(declared)
    return types | {"integer"} if "number" in types else types


def _named(types: set[str] | None) -> str:
    return "any type" if types is None else " or ".join(sorted(types))


def _listed(schema: Schema) -> list[Any] | None:
    return [schema["const"]] if "const" in schema else schema.get("enum")


def _may_be_object(schema: Schema) -> bool:
    types = _types(schema)
    return "oneOf" not in schema and (types is None or "object" in types) and _listed(schema) is None


def _becomes_a_class(schema: Schema) -> bool:
    return "properties" in schema or "enum" in schema or "oneOf" in schema


def _variants(where: str, side: Side) -> dict[str, Schema] | None:
    """The members of a tagged union by tag, `None` for any other schema."""
    members = side.schema.get("oneOf") or side.schema.get("anyOf")
    if members is None:
        return None
    if "discriminator" not in side.schema:
        raise NotUnderstoodError(f"{where}: alternatives without discriminator are not compared")
    tag_name = side.schema["discriminator"]["propertyName"]
    variants: dict[str, Schema] = {}
    for member in members:
        tag = side.document.resolve(side.document.resolve(member).get("properties", {}).get(tag_name, {}))
        for value in _listed(tag) or []:
            variants[value] = member
    if len(variants) < len(members):
        raise NotUnderstoodError(f"{where}: a member of the union has no tag of its own")
    return variants
