"""The reference question and ways to vary it."""

import json
from copy import deepcopy
from pathlib import Path
from typing import Any

import msgspec

from loopslack.contract.questions.operations import LoopDesignQuestion

EXAMPLE = Path(__file__).parents[2] / "openapi" / "examples" / "loop-design.json"


def wash_house() -> dict[str, Any]:
    """The committed example as plain data, free to be changed."""
    return json.loads(EXAMPLE.read_text(encoding="utf-8"))


def least() -> dict[str, Any]:
    """A first quote: only what is required."""
    run = {
        "segments": [
            {
                "length": {"value": 23, "unit": "m"},
                "tube": {"kind": "standard", "standard": "en-1057", "size": "28x1.5"},
            }
        ]
    }
    return {
        "site": {"coldestOutdoorTemperature": {"value": -16, "unit": "degC"}},
        "collectors": [
            {
                "count": 8,
                "area": {"value": 2.3, "unit": "m2"},
                "areaBasis": "aperture",
                "type": "flat-plate",
            }
        ],
        "pipeRuns": [{"role": "flow", **deepcopy(run)}, {"role": "return", **deepcopy(run)}],
        "fluid": {
            "kind": "propylene-glycol",
            "concentration": {"kind": "by-volume", "share": {"value": 42, "unit": "volume-percent"}},
        },
        "staticHeight": {"value": 11, "unit": "m"},
        "reliefValve": {"setPressure": {"value": 6, "unit": "barg"}},
    }


def changed(question: dict[str, Any], pointer: str, value: object) -> dict[str, Any]:
    """A copy with one member set; numbers in the pointer index lists."""
    found = deepcopy(question)
    *path, last = pointer.strip("/").split("/")
    place: Any = found
    for step in path:
        place = place[int(step)] if isinstance(place, list) else place.setdefault(step, {})
    if isinstance(place, list):
        place[int(last)] = value
    else:
        place[last] = value
    return found


def question(data: dict[str, Any]) -> LoopDesignQuestion:
    """Decode as the service does: strictly."""
    return msgspec.json.decode(json.dumps(data), type=LoopDesignQuestion)
