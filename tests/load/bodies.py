"""Questions as callers send them, one for each loop of the distribution that the sizing tests are drawn from.

Turns a loop in SI into the JSON of a loop design question. Loops that no vessel makes hold are among them, since
callers send those too. Nothing is chosen by its result.
"""

from __future__ import annotations

import json
from typing import Any

from calc.loops import random_loop
from loopslack.calc.model import Branch, CollectorGroup, Loop, Segment

ZERO = 273.15

Json = dict[str, Any]


def design_question(seed: int) -> Json:
    """The question about the loop of a seed."""
    loop = random_loop(seed)
    spaces = len({group.space for group in loop.groups}) > 1
    question: Json = {
        "site": {
            "coldestOutdoorTemperature": celsius(loop.temperatures.site_minimum),
            "altitude": metres(loop.altitude),
        },
        "collectors": [collectors(group, spaces) for group in loop.groups],
        "pipeRuns": [pipe_run(branch, spaces) for branch in loop.branches],
        "fluid": fluid(loop),
        "staticHeight": metres(max(group.height for group in loop.groups)),
        "highestPoint": metres(loop.top),
        "reliefValve": {
            "setPressure": {"value": loop.relief.set_pressure / 1e5, "unit": "barg"},
            "height": metres(loop.relief.height),
        },
        "station": {
            "content": litres(loop.station.content),
            "height": metres(loop.station.height),
            "ratedPressure": {"value": 10, "unit": "barg"},
        },
        "vesselLine": {"content": litres(loop.line_content)},
        "temperatures": {
            "cutOff": celsius(loop.temperatures.cut_off),
            "fill": celsius(loop.temperatures.fill),
        },
        "vessel": {"kind": "series", "ratedPressure": {"value": 10, "unit": "barg"}},
        "precharge": {"kind": "optimised" if loop.precharge.kind == "optimised" else "rule"},
    }
    if loop.pump_head:
        question["pump"] = {"head": {"value": loop.pump_head / 1e5, "unit": "bar"}, "side": loop.pump_side}
    return question


def design_bodies(count: int, first_seed: int = 0) -> list[bytes]:
    """The questions of consecutive seeds, as bytes."""
    return [encoded(design_question(first_seed + index)) for index in range(count)]


def encoded(question: Json) -> bytes:
    """A question as the bytes of a body."""
    return json.dumps(question, separators=(",", ":")).encode()


def collectors(group: CollectorGroup, spaces: bool) -> Json:
    """One group of collectors."""
    told: Json = {
        "id": group.name,
        "count": group.count,
        "area": {"value": round(group.aperture / group.count, 3), "unit": "m2"},
        "areaBasis": "aperture",
        "type": group.build,
        "content": litres(group.content / group.count),
        "coefficients": {
            "eta0": round(group.peak_efficiency, 3),
            "a1": {"value": round(group.linear_loss, 3), "unit": "W/m2K"},
            "a2": {"value": round(group.quadratic_loss, 4), "unit": "W/m2K2"},
            "basis": "aperture",
        },
        "ratedPressure": {"value": 10, "unit": "barg"},
        "height": metres(group.height),
    }
    if group.emptying == "measured":
        told["measuredSteamPower"] = {"value": round(group.steam_power, 1), "unit": "W/m2"}
    else:
        told["emptyingClass"] = group.emptying
    if spaces:
        told["steamSpace"] = f"space {group.space}"
    return told


def pipe_run(branch: Branch, spaces: bool) -> Json:
    """One pipe run with its stretches."""
    told: Json = {
        "id": branch.name,
        "role": branch.role,
        "segments": [stretch(segment) for segment in branch.segments],
        "steamAccess": branch.access,
    }
    if spaces:
        told["steamSpace"] = f"space {branch.space}"
    return told


def stretch(segment: Segment) -> Json:
    """One stretch of pipe."""
    insulation: Json = {"kind": "none"}
    if segment.insulation > 0.0:
        insulation = {
            "kind": "insulated",
            "thickness": {"value": round(segment.insulation * 1e3, 1), "unit": "mm"},
            "conductivity": {"value": segment.conductivity, "unit": "W/mK"},
        }
    return {
        "length": metres(segment.length),
        "tube": {
            "kind": "content",
            "contentPerLength": {"value": round(segment.area * 1e3, 4), "unit": "L/m"},
            "outerDiameter": {"value": round(segment.outer_diameter * 1e3, 2), "unit": "mm"},
        },
        "insulation": insulation,
        "zone": "outdoor" if segment.outdoor else "indoor",
        "ambient": celsius(segment.ambient),
        "endHeight": metres(segment.end_height),
    }


def fluid(loop: Loop) -> Json:
    """Water, or the glycol that protects as far as the loop's own."""
    if loop.fluid.freezing_point > ZERO - 0.5:
        return {"kind": "water"}
    freezing = celsius(loop.fluid.freezing_point)
    return {"kind": "propylene-glycol", "concentration": {"kind": "protect-to", "temperature": freezing}}


def celsius(kelvin: float) -> Json:
    """A temperature."""
    return {"value": round(kelvin - ZERO, 2), "unit": "degC"}


def metres(length: float) -> Json:
    """A length or a height."""
    return {"value": round(length, 3), "unit": "m"}


def litres(volume: float) -> Json:
    """A volume."""
    return {"value": round(max(volume * 1e3, 0.01), 4), "unit": "L"}
