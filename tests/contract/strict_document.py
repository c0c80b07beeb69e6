"""The document as strict as its prose: what generated clients could not digest is put into the schemas for the fuzzer.

    python -m contract.strict_document TARGET

Two things the published document says in words only. *Null counts as absent*: an optional member that is an object, a
list or a word also takes null. *Answers may gain members*: they may in a later version, but today they have no member
the document does not name. A fuzzer needs both as schemas, so that it does not take truth for a fault nor a fault for
truth. Must not live here: anything that makes the service look better than the document says.
"""

import copy
import json
import sys
from pathlib import Path
from typing import Any

DOCUMENT = Path(__file__).parents[2] / "openapi" / "v1.json"
IN_WORDS = "Null counts as absent."
OPEN = {"OpenApiDocument"}
"""Schemas of documents that are described elsewhere."""


def strict(document: dict[str, Any]) -> dict[str, Any]:
    """A copy with both put into the schemas."""
    written = copy.deepcopy(document)
    for name_of_schema, schema in written["components"]["schemas"].items():
        if "properties" not in schema:
            continue
        for name, member in schema["properties"].items():
            if IN_WORDS in member.get("description", ""):
                schema["properties"][name] = {"anyOf": [member, {"type": "null"}]}
        if name_of_schema not in OPEN:
            schema["additionalProperties"] = False
    return written


def main(target: str) -> None:
    """Write the strict document."""
    document = json.loads(DOCUMENT.read_bytes())
    Path(target).write_text(json.dumps(strict(document)), encoding="utf-8")


if __name__ == "__main__":
    main(sys.argv[1])
