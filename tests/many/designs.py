"""Designs to be asked in numbers: the committed batch, varied."""

from __future__ import annotations

import json
from copy import deepcopy
from pathlib import Path
from typing import Any

EXAMPLE = Path(__file__).parents[2] / "openapi" / "examples" / "designLoops" / "three-roofs.question.json"
BATCH: dict[str, Any] = json.loads(EXAMPLE.read_text(encoding="utf-8"))
HEAD: dict[str, Any] = {"stock": BATCH["stock"], "defaults": BATCH["defaults"]}

JSON = {"content-type": "application/json"}
NDJSON = {"content-type": "application/x-ndjson"}
BATCH_PATH = "/v1/loop-design/batch"
STREAM_PATH = "/v1/loop-design/stream"


def design(name: str, **members: Any) -> dict[str, Any]:
    """A small design that is answered under `HEAD`; a member of None is left out."""
    whole = deepcopy(BATCH["designs"][1]) | {"id": name} | members
    return {key: value for key, value in whole.items() if value is not None}


def faulty(name: str) -> dict[str, Any]:
    """A design with a misspelt member, which is refused quickly."""
    return design(name, staticHeigth={"value": 8, "unit": "m"})


def lines(*designs: Any, head: Any = HEAD) -> bytes:
    """A stream: the head and a line for each design; bytes are taken as they are."""
    texts = [one if isinstance(one, bytes) else json.dumps(one).encode() for one in (head, *designs)]
    return b"\n".join(texts) + b"\n"


def batch(*designs: Any, **head: Any) -> bytes:
    return json.dumps({**HEAD, **head, "designs": list(designs)}).encode()


def read(body: bytes) -> tuple[list[dict[str, Any]], dict[str, Any]]:
    """The items of a stream and its last line."""
    *items, end = (json.loads(line) for line in body.splitlines())
    return items, end
