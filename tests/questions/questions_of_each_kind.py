"""A sound question of each kind, and faults that can be planted in it independently of one another."""

from typing import Any, NamedTuple

from msgspec.structs import fields

from loopslack.contract.questions import operations as loop_questions
from loopslack.contract.questions.existing import StagnationCourseQuestion, VesselAuditQuestion
from loopslack.contract.questions.many import FigureQuestion, SheetQuestion
from questions.wash_house import changed, wash_house

Plain = dict[str, Any]
ABSENT = object()


def quantity(value: float, unit: str) -> Plain:
    """A quantity as a caller writes it."""
    return {"value": value, "unit": unit}


def with_vessel(**more: Any) -> Plain:
    """The reference loop with a vessel that is there."""
    data = wash_house()
    for name in ("vessel", "coolingVessel"):
        data.pop(name, None)
    vessel = {"nominalVolume": quantity(80, "L"), "ratedPressure": quantity(10, "barg")}
    return {**data, "vessel": vessel, **more}


def _part(*names: str) -> Plain:
    return {name: wash_house()[name] for name in names}


SOUND: dict[type, Plain] = {
    loop_questions.LoopDesignQuestion: wash_house(),
    loop_questions.VesselSizingQuestion: wash_house(),
    loop_questions.StagnationCheckQuestion: with_vessel(),
    StagnationCourseQuestion: with_vessel(),
    VesselAuditQuestion: {
        **{name: value for name, value in with_vessel().items() if name != "precharge"},
        "gaugeReading": {"pressure": quantity(1.4, "barg"), "temperature": quantity(18, "degC")},
    },
    loop_questions.LoopVolumeQuestion: _part("collectors", "pipeRuns", "station"),
    loop_questions.ExpansionQuestion: {
        **_part("fluid"),
        "startTemperature": quantity(15, "degC"),
        "endTemperature": quantity(80, "degC"),
    },
    SheetQuestion: {"design": wash_house()},
    FigureQuestion: {"design": wash_house(), "figure": "walk"},
}


class Fault(NamedTuple):
    """A member to be changed, and the pointer and code under which that must be told."""

    at: str
    value: object
    code: str
    told_at: str = ""

    @property
    def pointer(self) -> str:
        """Where it is told."""
        return self.told_at or self.at

    def planted(self, question: Plain) -> Plain:
        """The question with this fault."""
        if self.value is not ABSENT:
            return changed(question, self.at, self.value)
        parent, _, name = self.at.rpartition("/")
        holder: Any = question
        for step in parent.split("/")[1:]:
            holder = holder[int(step)] if isinstance(holder, list) else holder[step]
        return changed(question, parent, {key: value for key, value in holder.items() if key != name})


_STRAIGHT = {"kind": "bore", "bore": quantity(25, "mm"), "outerDiameter": quantity(24, "mm")}

FAULTS = (
    # what the types show
    Fault("/frob", 1, "unknown-field"),
    Fault("/units", "imperial", "not-a-member"),
    Fault("/collectors/0/count", 0, "out-of-range"),
    Fault("/collectors/0/type", ABSENT, "missing"),
    Fault("/collectors/0/content/unit", "litres", "not-a-member"),
    Fault("/collectors/0/height", "11 m", "wrong-type"),
    Fault("/pipeRuns/0/role", "supply", "not-a-member"),
    Fault("/pipeRuns/1/segments/0/zone", 7, "wrong-type"),
    Fault("/fluid/concentration/share/value", "42", "wrong-type"),
    Fault("/reliefValve/setPressure/unit", "bar", "not-a-member"),
    Fault("/pump", [], "wrong-type"),
    Fault("/vesselZone", "inside", "not-a-member"),
    Fault("/vesselsInParallel", 2.5, "wrong-type"),
    Fault("/parts", [{"name": "", "height": quantity(0, "m")}], "too-short", "/parts/0/name"),
    Fault("/vessel/nominalVolume", 80, "wrong-type"),
    # what the ranges show
    Fault("/staticHeight", quantity(1e6, "m"), "out-of-range"),
    Fault("/site/altitude", quantity(9e4, "ft"), "out-of-range"),
    Fault("/collectors/0/area", quantity(-2, "m2"), "out-of-range"),
    Fault("/pipeRuns/0/segments/0/length", quantity(0, "ft"), "out-of-range"),
    Fault("/station/content", quantity(-1, "L"), "out-of-range"),
    Fault("/reliefValve/height", quantity(1e4, "m"), "out-of-range"),
    Fault("/vesselLine/content", quantity(9e9, "mL"), "out-of-range"),
    Fault("/gauge/height", quantity(-999, "m"), "out-of-range"),
    Fault("/designSun/irradiance", quantity(3, "W/m2"), "out-of-range"),
    Fault("/criteria/reserve", quantity(-1, "L"), "out-of-range"),
    Fault("/tolerances/staticHeight", quantity(51, "m"), "out-of-range"),
    Fault("/gaugeReading/temperature", quantity(300, "degC"), "out-of-range"),
    Fault("/endTemperature", quantity(900, "degC"), "out-of-range"),
    # what members show together
    Fault("/temperatures/returnPipe", quantity(95, "degC"), "contradiction"),
    Fault(
        "/collectors/0/measuredSteamPower",
        quantity(60, "W/m2"),
        "contradiction",
        "/collectors/0/emptyingClass",
    ),
    Fault("/pipeRuns/1/segments/0/tube/size", "28x2", "unknown-tube-size"),
    Fault(
        "/pipeRuns/0/segments/0/tube", _STRAIGHT, "contradiction", "/pipeRuns/0/segments/0/tube/outerDiameter"
    ),
    Fault("/construction", {"openOrDrainBack": True}, "other-physics", "/construction/openOrDrainBack"),
    Fault("/acceptWithoutBoiling", True, "contradiction"),
    Fault("/tolerances/pipeLength", quantity(100, "percent"), "not-applicable"),
)
"""No two of them touch what the other is told of."""

_HEAT = ("measuredSteamPower", "height", "coefficients")


def faults_for(question: type) -> list[Fault]:
    """The faults that can be planted in a question of this type, as they are told there."""
    if question in (SheetQuestion, FigureQuestion):
        return [
            fault._replace(at=f"/design{fault.at}", told_at=f"/design{fault.pointer}")
            for fault in faults_for(loop_questions.LoopDesignQuestion)
        ]
    members = {field.encode_name for field in fields(question)}
    return [
        fault
        for fault in FAULTS
        if (fault.at.split("/")[1] in members or fault.code == "unknown-field")
        and not _is_not_asked(fault, question, members)
    ]


def _is_not_asked(fault: Fault, question: type, members: set[str]) -> bool:
    """Whether a question takes the member only as part of a larger object, or does not read it."""
    if fault.at.startswith("/vessel/"):
        return question in (loop_questions.LoopDesignQuestion, loop_questions.VesselSizingQuestion)
    only_content = question is loop_questions.LoopVolumeQuestion
    return only_content and any(word in fault.at for word in _HEAT) and fault.code == "contradiction"
