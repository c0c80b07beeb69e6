"""Does a new OpenAPI document keep the promises of a released one?

Lives here: everything above the schemas (paths, operations, parameters, bodies, responses, headers, security,
version). What a schema promises is compared in `schema_compatibility`. Must not live here: knowledge of this
service; both documents are plain data.

Two grades of break. `wire`: a client that works today may fail without being touched. `source`: it keeps
working, but the code generated from the new document no longer fits the code written against the old one (a
renamed operation, schema, tag or enum constant). Both are refused within a major version, because clients are
generated from this document.

Run by hand: `PYTHONPATH=tests python -m contract.compatibility OLD.json NEW.json`; exit code 1 if anything
breaks.
"""

from __future__ import annotations

import json
import re
import sys
from collections.abc import Iterator, Mapping
from pathlib import Path
from typing import Any

from contract.schema_compatibility import Document, Finding, NotUnderstoodError, SchemaComparison

METHODS = ("get", "put", "post", "delete", "patch", "head", "options", "trace")
HARMLESS_OPERATION_KEYS = {"summary", "description", "externalDocs", "deprecated"}
COMPARED_OPERATION_KEYS = {
    "operationId",
    "tags",
    "parameters",
    "requestBody",
    "responses",
    "security",
    "servers",
}


class Comparison:
    """One released document against one new one. `findings()` lists every break, `[]` means compatible."""

    def __init__(self, released: Mapping[str, Any], new: Mapping[str, Any]) -> None:
        self.old, self.new = Document(released), Document(new)
        self.schemas = SchemaComparison(self.old, self.new)
        self._findings: list[Finding] = []

    def findings(self) -> list[Finding]:
        """Every break, wire before source, in the order of the released document."""
        for document in (self.old.content, self.new.content):
            for unread in ("webhooks",):
                if document.get(unread):
                    raise NotUnderstoodError(f"{unread} are not compared by this checker")
        self._servers("document", self.old.content, self.new.content)
        for where, old_item, new_item, method in self._operations():
            self._operation(where, old_item, new_item, method)
        everything = self._findings + self.schemas.findings
        return sorted(dict.fromkeys(everything), key=lambda finding: finding.grade != "wire")

    def _wire(self, where: str, what: str) -> None:
        self._findings.append(Finding("wire", where, what))

    def _source(self, where: str, what: str) -> None:
        self._findings.append(Finding("source", where, what))

    def _operations(self) -> Iterator[tuple[str, Mapping[str, Any], Mapping[str, Any], str]]:
        """Operations of the released document beside their successors; names of path parameters are no part
        of a URL.
        """
        successors = {_shape(path): item for path, item in self.new.content.get("paths", {}).items()}
        for path, old_item in self.old.content.get("paths", {}).items():
            new_item = successors.get(_shape(path), {})
            for method in METHODS:
                if method not in old_item:
                    continue
                where = f"{method.upper()} {path}"
                if method in new_item:
                    yield where, old_item, new_item, method
                else:
                    self._wire(where, "operation removed")

    def _operation(
        self, where: str, old_item: Mapping[str, Any], new_item: Mapping[str, Any], method: str
    ) -> None:
        old, new = old_item[method], new_item[method]
        for operation in (old, new):
            unread = {key for key in operation if not key.startswith("x-")}
            unread -= HARMLESS_OPERATION_KEYS | COMPARED_OPERATION_KEYS
            if unread:
                raise NotUnderstoodError(f"{where}: {sorted(unread)} not compared by this checker")
        if old.get("operationId") != new.get("operationId"):
            self._source(where, f"operationId {old.get('operationId')} became {new.get('operationId')}")
        if old.get("tags") != new.get("tags"):
            self._source(
                where, f"tags {old.get('tags')} became {new.get('tags')}: generated classes are named by tag"
            )
        self._servers(where, old, new)
        self._parameters(where, old_item, new_item, method)
        self._request_body(where, old.get("requestBody"), new.get("requestBody"))
        self._responses(where, old.get("responses", {}), new.get("responses", {}))
        self._security(where, old, new)

    def _servers(self, where: str, old: Mapping[str, Any], new: Mapping[str, Any]) -> None:
        gone = {s["url"] for s in old.get("servers", [])} - {s["url"] for s in new.get("servers", [])}
        for url in sorted(gone):
            self._wire(where, f"server {url} removed")

    def _parameters(
        self, where: str, old_item: Mapping[str, Any], new_item: Mapping[str, Any], method: str
    ) -> None:
        old = _parameters(self.old, old_item, method)
        new = _parameters(self.new, new_item, method)
        for key, parameter in old.items():
            label = f"{where} {key[0]} parameter {parameter['name']}"
            successor = new.get(key)
            if successor is None:
                self._wire(label, "removed")
                continue
            if successor["name"] != parameter["name"] and key[0] == "path":
                self._source(label, f"renamed {successor['name']}")
            if successor.get("required") and not parameter.get("required"):
                self._wire(label, "now required")
            for key_of_style in ("style", "explode", "allowReserved"):
                if parameter.get(key_of_style) != successor.get(key_of_style):
                    self._wire(label, f"{key_of_style} changed")
            self.schemas.request(label, parameter.get("schema", {}), successor.get("schema", {}))
            self._content(label, parameter.get("content"), successor.get("content"), sent=True)
        for key, parameter in new.items():
            if key not in old and parameter.get("required"):
                self._wire(f"{where} {key[0]} parameter {parameter['name']}", "new and required")

    def _request_body(self, where: str, old: Any, new: Any) -> None:
        old_body, new_body = self.old.resolve(old or {}), self.new.resolve(new or {})
        label = f"{where} request"
        if old_body and not new_body:
            self._wire(label, "body no longer read")
            return
        if new_body.get("required") and not old_body.get("required"):
            self._wire(label, "body now required")
        self._content(label, old_body.get("content"), new_body.get("content"), sent=True)

    def _responses(self, where: str, old: Mapping[str, Any], new: Mapping[str, Any]) -> None:
        for status, response in old.items():
            label = f"{where} {status}"
            if status in new:
                self._response(label, self.old.resolve(response), self.new.resolve(new[status]))
            elif _succeeds(status):
                self._wire(label, "success removed")
            else:
                self._source(label, "documented status removed")
        for status in new:
            if status not in old and _succeeds(status):
                self._wire(f"{where} {status}", "new success, which released clients do not expect")

    def _response(self, label: str, old: Mapping[str, Any], new: Mapping[str, Any]) -> None:
        headers = {name.lower(): self.new.resolve(header) for name, header in new.get("headers", {}).items()}
        for name, reference in old.get("headers", {}).items():
            header, successor = self.old.resolve(reference), headers.get(name.lower())
            if successor is None:
                self._wire(label, f"header {name} removed")
                continue
            if header.get("required") and not successor.get("required"):
                self._wire(label, f"header {name} no longer always present")
            before, after = header.get("schema", {}), successor.get("schema", {})
            self.schemas.response(f"{label} header {name}", before, after)
        self._content(label, old.get("content"), new.get("content"), sent=False)

    def _content(self, label: str, old: Any, new: Any, *, sent: bool) -> None:
        """Media types by name. Generators read only the first of several: its place belongs to the source."""
        old_content, new_content = old or {}, new or {}
        for media_type, body in old_content.items():
            if media_type not in new_content:
                self._wire(label, f"media type {media_type} removed")
                continue
            compare = self.schemas.request if sent else self.schemas.response
            successor = new_content[media_type]
            compare(f"{label} {media_type}", body.get("schema", {}), successor.get("schema", {}))
        if old_content and new_content and next(iter(old_content)) != next(iter(new_content)):
            self._source(label, f"{next(iter(new_content))} is now read first by generators")
        if not old_content and new_content and not sent:
            self._wire(label, "has a body now")

    def _security(self, where: str, old: Mapping[str, Any], new: Mapping[str, Any]) -> None:
        """Every way in that was enough must still be enough."""
        new_ways = _ways_in(self.new, new)
        for way in _ways_in(self.old, old):
            if not any(successor <= way for successor in new_ways):
                named = ", ".join(sorted(name for name, *_ in way)) or "no key"
                self._wire(where, f"security: {named} is no longer enough")


def _shape(path: str) -> str:
    return re.sub(r"\{[^}]*\}", "{}", path)


def _succeeds(status: str) -> bool:
    return status.startswith("2")


def _parameters(
    document: Document, item: Mapping[str, Any], method: str
) -> dict[tuple[str, str], Mapping[str, Any]]:
    """Parameters by place and name; header names in lower case, path parameters by position."""
    own: dict[tuple[str, str], Mapping[str, Any]] = {}
    position = 0
    for reference in [*item.get("parameters", []), *item[method].get("parameters", [])]:
        parameter = document.resolve(reference)
        name = parameter["name"]
        if parameter["in"] == "header":
            name = name.lower()
        elif parameter["in"] == "path":
            name, position = f"{position}", position + 1
        own[(parameter["in"], name)] = parameter
    return own


def _ways_in(document: Document, operation: Mapping[str, Any]) -> list[frozenset[tuple[str, str, str]]]:
    """Each way as the set of (scheme, scope, definition) it asks for; the empty set asks for nothing."""
    schemes = document.content.get("components", {}).get("securitySchemes", {})
    ways = operation.get("security", document.content.get("security", []))
    read = []
    for way in ways:
        demands = set()
        for name, scopes in way.items():
            scheme = {key: value for key, value in schemes.get(name, {}).items() if key != "description"}
            demands |= {(name, scope, json.dumps(scheme, sort_keys=True)) for scope in (scopes or [""])}
        read.append(frozenset(demands))
    return read or [frozenset()]


def breaks(released: Mapping[str, Any], new: Mapping[str, Any]) -> list[Finding]:
    """Every promise of the released document that the new one breaks."""
    return Comparison(released, new).findings()


def version_faults(released: Mapping[str, Any], new: Mapping[str, Any]) -> list[str]:
    """What is wrong with the new version number: a changed document needs a higher one, a broken promise a
    new major.
    """
    before, after = (tuple(map(int, d["info"]["version"].split("."))) for d in (released, new))
    if released == new:
        return []
    if after <= before:
        return [f"the document differs from the released {released['info']['version']}: number it higher"]
    if after[0] == before[0] and breaks(released, new):
        return ["a promise is broken within a major version"]
    if after[:2] == before[:2] and _without_words(released) != _without_words(new):
        return ["more than wording changed, so the minor number must rise"]
    return []


def _without_words(node: Any) -> Any:
    """The document without what only people read."""
    if isinstance(node, dict):
        words = {"description", "summary", "title", "example", "examples", "x-enum-descriptions", "info"}
        named = {"properties", "schemas", "responses", "headers", "parameters", "paths"}
        return {
            key: _members(value) if key in named and isinstance(value, dict) else _without_words(value)
            for key, value in node.items()
            if key not in words
        }
    return [_without_words(item) for item in node] if isinstance(node, list) else node


def _members(node: dict[str, Any]) -> dict[str, Any]:
    """A map whose keys are names, so that a member called `description` is not taken for wording."""
    return {key: _without_words(value) for key, value in node.items()}


if __name__ == "__main__":
    before, after = (json.loads(Path(name).read_text(encoding="utf-8")) for name in sys.argv[1:3])
    found = [str(finding) for finding in breaks(before, after)] + version_faults(before, after)
    sys.stdout.write("\n".join(found or ["compatible"]) + "\n")
    sys.exit(bool(found))
