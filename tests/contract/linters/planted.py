"""Plants one defect for each rule the linters are relied on for, to see that they still find it.

    python planted.py DOCUMENT PLANTED            writes the document with all defects at once
    python planted.py --check REPORT LINTER       reads what a linter said and names the rules it did not report

A linter whose configuration went wrong says nothing, which looks like a document without findings.
"""

import copy
import json
import sys
from pathlib import Path
from typing import Any

FOUND_BY = {
    "redocly": [
        "struct",
        "operation-tag-defined",
        "no-invalid-media-type-examples",
        "no-invalid-schema-examples",
        "operation-operationId-unique",
        "no-unused-components",
        "no-required-schema-properties-undefined",
        "security-defined",
    ],
    "spectral": [
        "operation-operationId-unique",
        "oas3-unused-component",
        "oas3-valid-media-example",
        "operation-tag-defined",
        "schema-is-named",
        "number-says-its-width",
        "member-is-described",
        "schema-is-described",
        "constants-are-named",
        "tag-is-a-string",
        "no-inheritance-nor-defaults",
        "list-is-bounded",
        "text-is-bounded",
        "operation-has-problems",
    ],
}


def planted(document: dict[str, Any]) -> dict[str, Any]:
    """The document with every defect."""
    wrong = copy.deepcopy(document)
    schemas, paths = wrong["components"]["schemas"], wrong["paths"]
    del wrong["security"]
    design, check = paths["/v1/loop-design"]["post"], paths["/v1/stagnation-check"]["post"]
    check["operationId"] = design["operationId"]
    check["tags"] = ["Nowhere"]
    del check["responses"]["422"]
    example = wrong["components"]["examples"]["designLoop.wash-house.question"]
    example["value"]["staticHeight"] = {"value": 11, "unit": "fathom"}
    schemas["Orphan"] = {"type": "object", "description": "Used by nothing."}
    schemas["Length"]["properties"]["value"] = {"type": "number", "description": "A number."}
    schemas["Area"]["properties"]["value"]["minimun"] = 0
    schemas["Area"]["examples"] = [{"value": "two", "unit": "m2"}]
    schemas["Site"]["required"].append("street")
    schemas["Site"]["properties"]["owner"] = {"type": "object", "properties": {"name": {"type": "string"}}}
    schemas["Site"]["properties"]["notes"] = {
        "type": "array",
        "items": {"type": "string"},
        "description": "Notes.",
    }
    schemas["Site"]["properties"]["remark"] = {"type": "string", "description": "A remark."}
    schemas["Site"]["properties"]["slope"] = {"type": "boolean", "default": False, "description": "A slope."}
    del schemas["Volume"]["description"]
    del schemas["VolumeUnit"]["x-enum-varnames"]
    del schemas["Water"]["properties"]["kind"]["type"]
    return wrong


def main(arguments: list[str]) -> int:
    """Write the planted document, or read a report."""
    if arguments[0] != "--check":
        source, target = map(Path, arguments)
        target.write_text(json.dumps(planted(json.loads(source.read_bytes()))), encoding="utf-8")
        return 0
    report, linter = Path(arguments[1]).read_text(encoding="utf-8"), arguments[2]
    missed = [rule for rule in FOUND_BY[linter] if rule not in report]
    if missed:
        sys.stderr.write(f"{linter} did not find what was planted for: {', '.join(missed)}\n")
    return int(bool(missed))


if __name__ == "__main__":
    sys.exit(main(sys.argv[1:]))
