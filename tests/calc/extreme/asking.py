"""Asks a drawn question and says everything that is wrong with its answer; nothing wrong is an empty list.

What an answer has to satisfy stands here, apart from how the questions are drawn.
"""

import json
from math import inf, isfinite
from typing import Any, NamedTuple

import msgspec

from calc.extreme.rest import wrong_with_rest
from calc.extreme.shapes import Data, q
from loopslack.calc.fit import Fit
from loopslack.calc.judgement import Judgement
from loopslack.contract.answering import audit as answering_audit
from loopslack.contract.answering import course as answering_course
from loopslack.contract.answering import loop as answering
from loopslack.contract.questions.existing import StagnationCourseQuestion, VesselAuditQuestion
from loopslack.contract.questions.operations import (
    LoopDesignQuestion,
    StagnationCheckQuestion,
    VesselSizingQuestion,
)
from loopslack.contract.refusals import Refused
from loopslack.kernel import kinds
from loopslack.kernel.errors import CalculationError
from loopslack.kernel.units import scale_of
from loopslack.physics.statics import GRAVITY

ROUTES: dict[type, Any] = {
    LoopDesignQuestion: answering.design_loop,
    VesselSizingQuestion: answering.size_vessel,
    StagnationCheckQuestion: answering.check_stagnation,
    VesselAuditQuestion: answering_audit.audit_vessel,
    StagnationCourseQuestion: answering_course.compute_stagnation_course,
}
BAR, ZERO = 1e5, 273.15
# Vacuum and absolute zero. Gauge readings may lie below vacuum: what a check would need, and what it finds lacking.
_LEAST = {"bara": 0.0, "psia": 0.0, "kPaa": 0.0, "degC": -273.15, "degF": -459.67}
SIZING_ONLY = ("vessel", "vesselsInParallel", "coolingVessel", "precharge", "tolerances", "rules", "include")


class Asked(NamedTuple):
    """What came of a question: its outcome in a word or two, and what is wrong."""

    outcome: str
    wrong: list[str]


def decoded(data: Data, kind: type) -> Any:
    return msgspec.json.decode(json.dumps(data), type=kind)


def ask(data: Data, kind: type) -> Asked:
    """Ask one question; the documented refusals are outcomes, any other exception is let through."""
    question = decoded(data, kind)
    try:
        answer = msgspec.to_builtins(ROUTES[kind](question))
    except (Refused, CalculationError) as error:
        unsolved = [f"not solved: {error}"] if "no state of rest" in str(error) else []
        return Asked(f"refused: {type(error).__name__}", unsolved)
    wrong = list(_not_finite(answer, ""))
    # A derivation may pass through a pressure below vacuum that a check would put up with; a result may not.
    told = {name: part for name, part in answer.items() if name != "derivation"}
    wrong += [f"{place}: {text}" for place, text in _impossible(told, "")]
    result = answer["result"]
    for refused in result.get("checks", []):
        if "no state of rest" in refused.get("reason", ""):
            wrong.append(f"not solved: {refused['scenario']}")
    if kind is not StagnationCourseQuestion:
        wrong += _verdict_wrong(result, kind)
    wrong += _units_wrong(data, kind, answer)
    if kind is LoopDesignQuestion:
        asked = answering.designed(question)
        shown = asked.design.shown
        if shown.vessel.precharge_adjustable and shown.gas.precharge < shown.analysis.loop.atmosphere * (
            1 - 1e-9
        ):
            wrong.append(f"a precharge of {shown.gas.precharge} Pa is set")
        wrong += wrong_with_rest(asked.design.shown.analysis, asked.design.judgement, asked.design.shown)
        if asked.design.chosen is not None:
            wrong += _asked_again(data, asked.design.chosen, asked.design.judgement)
    if kind is StagnationCheckQuestion:
        found = answering.checked(question).found
        wrong += wrong_with_rest(found.fitted.analysis, found.judgement, found.fitted, found.mass)
    return Asked(str(result.get("verdict")), wrong)


def _not_finite(found: Any, place: str) -> Any:
    if isinstance(found, float) and not isfinite(found):
        yield f"{place} is {found}"
    elif isinstance(found, dict):
        for name, value in found.items():
            yield from _not_finite(value, f"{place}/{name}")
    elif isinstance(found, list):
        for k, value in enumerate(found):
            yield from _not_finite(value, f"{place}/{k}")


def _impossible(found: Any, place: str) -> Any:
    """Pressures below vacuum, temperatures below absolute zero, reaches beyond their pipes."""
    if isinstance(found, list):
        for k, value in enumerate(found):
            yield from _impossible(value, f"{place}/{k}")
    elif isinstance(found, dict):
        unit, value = found.get("unit"), found.get("value")
        if isinstance(value, float) and value < _LEAST.get(unit, -inf):
            yield place, f"{value} {unit}"
        if "pipeRun" in found and "reach" in found:
            reach, length = found["reach"]["value"], found["length"]["value"]
            if not 0 <= reach <= length * (1 + 1e-5):
                yield place, f"steam reaches {reach} in a run of {length}"
        for name, inner in found.items():
            yield from _impossible(inner, f"{place}/{name}")


def _verdict_wrong(result: Data, kind: type) -> Any:
    """A verdict that its checks and doubts do not bear out."""
    core = [check for check in result["checks"] if check["group"] == "core"]
    bad = [c for c in core if c["verdict"] != "holds" and c.get("scenario") != "all-doubts"]
    doubted = [d["id"] for d in result["doubts"] if d["verdict"] not in ("holds", "not-applicable")]
    verdict = result["verdict"]
    if verdict == "holds" and (bad or doubted):
        yield f"holds with {[(c['code'], c.get('scenario'), c['verdict']) for c in bad]} and {doubted}"
    if verdict == "holds" and "window" in result and not result["window"]["wideEnough"]:
        yield "holds without a window"
    if verdict != "holds" and not bad and not doubted and verdict != "favourable-only":
        failing = [c for c in core if c["verdict"] != "holds"]
        if not failing:
            yield f"{verdict} though every check and doubt holds"
    acceptance = {c["scenario"]: c["verdict"] for c in core if c["code"] == "acceptance"}
    for state in result.get("stagnation", []):
        full = acceptance[state["scenario"]] != "holds" and state["regime"] != "valve-opens"
        if ("vesselPressure" in state) != (state["vesselLiquid"]["value"] >= 0 and not full):
            yield f"{state['scenario']}: a pressure with {state['vesselLiquid']} in the vessel, or none"
    for check in core:
        margin = check.get("margin", {}).get("value")
        if margin is not None and check["verdict"] == "holds" and margin < 0:
            yield f"{check['code']} holds with a margin of {margin}"
    if kind in (LoopDesignQuestion, VesselSizingQuestion):
        if "chosenVessel" in result and verdict not in ("holds", "favourable-only"):
            yield f"a vessel is chosen, the verdict is {verdict}"
        if verdict == "holds" and "chosenVessel" not in result and "nearestVessel" not in result:
            yield "holds without any vessel"


def _units_wrong(data: Data, kind: type, answer: Data) -> Any:
    """The same question answered in the other units says the same."""
    other = dict(data, units="metric" if data.get("units") == "us" else "us")
    again = msgspec.to_builtins(ROUTES[kind](decoded(other, kind)))
    yield from _differ(answer["result"], again["result"], "/result")


def _differ(one: Any, two: Any, place: str) -> Any:
    if isinstance(one, dict) and isinstance(two, dict):
        if isinstance(one.get("value"), float) and "unit" in one:
            if not _same(one, two):
                yield f"{place}: {one['value']} {one['unit']} and {two['value']} {two['unit']}"
            return
        if set(one) != set(two):
            yield f"{place}: members {sorted(set(one) ^ set(two))} in one system of units only"
        for name in set(one) & set(two):
            if name not in ("message", "remedy", "reason", "text", "name"):
                yield from _differ(one[name], two[name], f"{place}/{name}")
    elif isinstance(one, list) and isinstance(two, list):
        if len(one) != len(two):
            yield f"{place}: {len(one)} and {len(two)} items"
        for k, (a, b) in enumerate(zip(one, two, strict=False)):
            yield from _differ(a, b, f"{place}/{k}")
    elif isinstance(one, str) and isinstance(two, str) and one != two and "verdict" in place:
        yield f"{place}: {one} and {two}"


_KIND_OF_UNIT = {unit: kind for kind in reversed(kinds.KINDS) for unit in kind.units}


def _same(one: Data, two: Data) -> bool:
    """Equal within what is shown: six figures of each, of the size of the absolute value behind it."""
    kind = next(k for k in kinds.KINDS if one["unit"] in k.units and two["unit"] in k.units)
    values, slack = [], 0.0
    for shown in (one, two):
        scale, offset = scale_of(kind, shown["unit"])
        values.append(scale * shown["value"] + offset)
        slack += 1e-5 * abs(scale * shown["value"]) + 1e-9 * abs(values[-1])
    return abs(values[0] - values[1]) <= slack + 1e-12


def _asked_again(data: Data, chosen: Fit, judged: Judgement) -> Any:
    """The chosen vessel with its settings, asked as one that is there, and audited: the same must come out."""
    analysis, vessel, gas = chosen.analysis, chosen.vessel, chosen.gas
    loop = analysis.loop
    if 0 < chosen.cooling < 0.1e-3:
        return
    question = {name: value for name, value in data.items() if name not in SIZING_ONLY}
    there = {"nominalVolume": q(vessel.nominal_volume, "m3")}
    if vessel.rated_pressure is not None:
        there["ratedPressure"] = q(vessel.rated_pressure / BAR, "barg")
    if vessel.acceptance_volume is not None:
        there["acceptanceVolume"] = q(vessel.acceptance_volume, "m3")
    if vessel.membrane_limit is not None:
        there["membraneLimit"] = q(vessel.membrane_limit - ZERO, "degC")
    question["vessel"], question["vesselsInParallel"] = there, chosen.pieces
    question["include"] = []
    if chosen.cooling:
        question["coolingVessel"] = {"kind": "given", "content": q(chosen.cooling, "m3")}
    if not 0 <= gas.precharge - loop.atmosphere <= 30 * BAR:
        return
    precharge, warm = q((gas.precharge) / BAR, "bara"), q(gas.temperature - ZERO, "degC")
    fill = chosen.window.recommended
    check = question | {
        "precharge": {"kind": "stated", "pressure": precharge, "temperature": warm},
        "fillPressure": q(fill / BAR, "bara"),
    }
    if not 0 <= fill - loop.atmosphere <= 30 * BAR or not -30 <= gas.temperature - ZERO <= 60:
        return
    found = answering.checked(decoded(check, StagnationCheckQuestion)).found
    yield from _compared("asked again", judged, found.judgement)
    density = analysis.fluid.density(loop.temperatures.fill)
    shows = fill - density * GRAVITY * loop.gauge_height
    if not 0 <= shows - loop.atmosphere <= 30 * BAR:
        return
    audit = question | {
        "gaugeReading": {
            "pressure": q(shows / BAR, "bara"),
            "temperature": q(loop.temperatures.fill - ZERO, "degC"),
        },
        "measuredPrecharge": {"pressure": precharge, "temperature": warm},
    }
    audited = msgspec.to_builtins(answering_audit.audit_vessel(decoded(audit, VesselAuditQuestion)))
    if audited["result"]["verdict"] != judged.verdict:
        yield f"audited: {audited['result']['verdict']} instead of {judged.verdict}"


def _compared(name: str, one: Judgement, two: Judgement) -> Any:
    if one.verdict != two.verdict:
        other = [
            (c.code, c.state, c.verdict, c.reason) for c in two.checks if c.core and c.verdict != "holds"
        ]
        yield f"{name}: {two.verdict} instead of {one.verdict}: {other}"
    for scenario, before in one.stagnation.items():
        after = two.stagnation.get(scenario)
        if after is None:
            yield f"{name}: {scenario} was not assessed"
        elif abs(after.pressure - before.pressure) > 1e-6 * before.pressure:
            yield f"{name}: {scenario} at {after.pressure} instead of {before.pressure} Pa"
