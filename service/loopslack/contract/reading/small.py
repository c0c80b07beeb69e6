"""Reads the two questions that need no whole loop: contents, and the expansion of a fluid."""

from typing import NamedTuple

from loopslack.calc.fluids.base import Fluid
from loopslack.contract.part_names import group_names, run_names
from loopslack.contract.questions import operations as asked
from loopslack.contract.questions.fields import Field, field_of
from loopslack.contract.questions.vessels import CoolingVesselGiven
from loopslack.contract.reading.again import refusing
from loopslack.contract.reading.collectors import read_areas
from loopslack.contract.reading.collectors import read_content as collector_content
from loopslack.contract.reading.fluid import read_fluid
from loopslack.contract.reading.pipes import read_content as segment_content
from loopslack.contract.reading.plant import read_line, station_content
from loopslack.contract.reading.reader import Assumed, Reader
from loopslack.contract.writing.quantities import System
from loopslack.kernel.errors import CalculationError
from loopslack.kernel.kinds import Length
from loopslack.physics.atmosphere import atmospheric_pressure

_START = field_of(asked.ExpansionQuestion, "start_temperature")
_END = field_of(asked.ExpansionQuestion, "end_temperature")
_CONTENT = field_of(asked.ExpansionQuestion, "content")
_PRESSURE = field_of(asked.ExpansionQuestion, "pressure")
_ALTITUDE = field_of(asked.ExpansionQuestion, "altitude")
_COOLING = field_of(CoolingVesselGiven, "content")


class HeldBy(NamedTuple):
    """The content of one part, m3, and the member it was stated or assumed at.

    ``pieces`` says how many such parts there are: an assumed content is that of one of them.
    """

    part: str
    name: str
    pointer: str
    content: float
    pieces: int = 1


class ContentReading(NamedTuple):
    """All parts of a loop with their contents."""

    parts: tuple[HeldBy, ...]
    assumed: tuple[Assumed, ...]
    system: System


class ExpansionReading(NamedTuple):
    """A fluid between two temperatures (K); ``pressure`` absolute, Pa, ``content`` m3 or None."""

    fluid: Fluid
    start: float
    end: float
    content: float | None
    pressure: float
    atmosphere: float
    assumed: tuple[Assumed, ...]
    system: System


@refusing
def read_contents(question: asked.LoopVolumeQuestion, reader: Reader) -> ContentReading:
    """Read the contents of a loop part by part."""
    parts, aperture = [], 0.0
    for k, (group, name) in enumerate(
        zip(question.collectors, group_names(question.collectors), strict=True)
    ):
        place = f"/collectors/{k}"
        area = read_areas(reader, group, place)["aperture"]
        aperture += group.count * area
        one = collector_content(reader, group, place, area)
        parts.append(HeldBy("collectors", name, f"{place}/content", group.count * one, group.count))
    for k, (run, name) in enumerate(zip(question.pipe_runs, run_names(question.pipe_runs), strict=True)):
        place = f"/pipeRuns/{k}"
        held = [
            segment_content(reader, segment, f"{place}/segments/{j}")
            for j, segment in enumerate(run.segments)
        ]
        parts.append(HeldBy(run.role, name, place, sum(held)))
    parts.append(
        HeldBy("station", "station", "/station/content", station_content(reader, question.station, aperture))
    )
    parts.append(
        HeldBy("vessel-line", "vessel line", "/vesselLine/content", read_line(reader, question.vessel_line))
    )
    cooling = question.cooling_vessel
    if isinstance(cooling, CoolingVesselGiven):
        content = reader.si(cooling.content, _COOLING, "/coolingVessel")
        parts.append(HeldBy("cooling-vessel", "cooling vessel", "/coolingVessel/content", content))
    return ContentReading(tuple(parts), tuple(reader.assumed), question.units or "metric")


@refusing
def read_expansion(question: asked.ExpansionQuestion, reader: Reader) -> ExpansionReading:
    """Read a question about a fluid."""
    altitude = reader.or_default(question.altitude, _ALTITUDE, "", "altitude")
    reader.atmosphere = atmospheric_pressure(Length(altitude))
    pressure = reader.optional_gauge(question.pressure, _PRESSURE, "")
    fluid = read_fluid(reader, question.fluid, "/fluid")
    return ExpansionReading(
        fluid,
        _liquid(reader, fluid, reader.si(question.start_temperature, _START, ""), _START),
        _liquid(reader, fluid, reader.si(question.end_temperature, _END, ""), _END),
        reader.optional(question.content, _CONTENT, ""),
        reader.atmosphere + (pressure or 0.0),
        reader.atmosphere,
        tuple(reader.assumed),
        question.units or "metric",
    )


def _liquid(reader: Reader, fluid: Fluid, temperature: float, field: Field) -> float:
    """A temperature at which the fluid must be liquid; what is short otherwise may be a table of the caller's own."""
    try:
        fluid.density(temperature)
    except CalculationError as error:
        reader.refuse(error, "" if fluid.kind == "own" else f"/{field.name}")
    return temperature
