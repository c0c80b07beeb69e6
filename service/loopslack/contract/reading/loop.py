"""Reads a question about a loop into SI, complete: every default filled in, every default noted.

Contradictions and numbers out of range are collected over the whole question and raised together. Reading knows
what may be stated together; whether the loop is any good is for ``calc`` to say.
"""

from typing import NamedTuple

from msgspec import Struct

from loopslack.calc.fluids.base import Fluid
from loopslack.calc.judgement import DoubtPolicy
from loopslack.calc.model import Loop, Part, Precharge, Sun, Temperatures
from loopslack.calc.remedies.case import Strength
from loopslack.contract.questions import operations as asked
from loopslack.contract.questions.criteria import Extra
from loopslack.contract.questions.fields import field_of
from loopslack.contract.questions.plant import Site
from loopslack.contract.questions.vessels import CoolingVessel, CoolingVesselGiven
from loopslack.contract.questions.vessels import Precharge as AskedPrecharge
from loopslack.contract.reading.again import refusing
from loopslack.contract.reading.fluid import read_fluid, stated_strength
from loopslack.contract.reading.heat import read_sun
from loopslack.contract.reading.layout import Ends, read_branches, read_groups, read_top
from loopslack.contract.reading.plant import (
    read_construction,
    read_gauge,
    read_line,
    read_parts,
    read_pump,
    read_relief,
    read_station,
    station_height,
)
from loopslack.contract.reading.reader import Assumed, Provisional, Reader
from loopslack.contract.reading.settings import read_criteria, read_precharge, read_temperatures
from loopslack.contract.reading.vessels import Cooling, read_cooling
from loopslack.contract.writing.quantities import System, Writer, writer
from loopslack.kernel.kinds import Length
from loopslack.physics.atmosphere import atmospheric_pressure

_COLDEST = field_of(Site, "coldest_outdoor_temperature")
_ALTITUDE = field_of(Site, "altitude")
_STATIC = field_of(asked.LoopQuestion, "static_height")
_COOLING_RATING = field_of(CoolingVesselGiven, "rated_pressure")


class Climate(NamedTuple):
    """Where the loop stands and what it is filled with."""

    altitude: float
    fluid: Fluid
    temperatures: Temperatures
    sun: Sun
    vessel_outdoor: bool


class Reading(Struct, frozen=True, kw_only=True):
    """A question in SI and what reading it brought to light.

    ``cooling`` says whether the cooling vessel in ``loop`` is given, ruled out or still to be sized; ``include`` is
    None when the caller left it open which costly parts to compute. ``strength`` is how the fluid states its glycol.
    """

    loop: Loop
    cooling: Cooling
    policy: DoubtPolicy
    accept_without_boiling: bool
    include: frozenset[Extra] | None
    system: System
    strength: Strength
    books: Reader

    @property
    def assumed(self) -> tuple[Assumed, ...]:
        """Everything that was assumed so far, also by what was read after the loop."""
        return tuple(self.books.assumed)

    @property
    def provisional(self) -> tuple[Provisional, ...]:
        """Everything the answer rests on that was not stated and matters."""
        return tuple(self.books.provisional)

    @property
    def write(self) -> Writer:
        """Writes SI numbers in the units the caller asked for."""
        return writer(self.system)


@refusing
def read_loop(question: asked.LoopQuestion, reader: Reader) -> Reading:
    """Read a question about a loop."""
    loop, cooling = _loop(reader, question)
    policy = question.doubt_policy or _policy(reader)
    accept = bool(question.accept_without_boiling)
    if accept and not all(group.measured_stagnation for group in question.collectors):
        reader.contradiction(
            "/acceptWithoutBoiling",
            "A loop is accepted without boiling only where every group states a measured stagnation temperature.",
            "State measuredStagnation for every group, or leave this member out.",
        )
    return Reading(
        loop=loop,
        cooling=cooling,
        policy=policy,
        accept_without_boiling=accept,
        include=None if question.include is None else frozenset(question.include),
        system=question.units or "metric",
        strength=stated_strength(question.fluid),
        books=reader,
    )


def _policy(reader: Reader) -> DoubtPolicy:
    reader.word("doubt-policy", "/doubtPolicy")
    return "single"


def _loop(reader: Reader, question: asked.LoopQuestion) -> tuple[Loop, Cooling]:
    climate = _climate(reader, question)
    static = reader.si(question.static_height, _STATIC, "")
    station_at = station_height(reader, question.station)
    groups = read_groups(reader, question, climate.sun, static)
    hottest = max(climate.temperatures.hot_liquid, *(group.stagnation_temperature for group in groups))
    branches = read_branches(reader, question, groups, Ends(static, station_at, climate.sun.ambient, hottest))
    heights = [group.height for group in groups]
    head, side, pump_height, suction = read_pump(reader, question.pump)
    cooling, cooling_content, cooling_parts = _cooling(reader, question)
    parts = read_parts(reader, question, heights, station_at)
    crests = [segment.end_height for branch in branches for segment in branch.segments]
    top = read_top(reader, question, max([0.0, *heights, *crests, *(part.height for part in parts)]))
    loop = Loop(
        fluid=climate.fluid,
        groups=groups,
        branches=branches,
        station=read_station(reader, question.station, station_at, sum(group.aperture for group in groups)),
        line_content=read_line(reader, question.vessel_line),
        cooling_content=cooling_content,
        top=top,
        vessel_outdoor=climate.vessel_outdoor,
        pump_height=pump_height,
        pump_head=head,
        pump_side=side,
        gauge_height=read_gauge(reader, question.gauge),
        atmosphere=reader.atmosphere,
        altitude=climate.altitude,
        relief=read_relief(reader, question.relief_valve),
        parts=parts + cooling_parts,
        temperatures=climate.temperatures,
        sun=climate.sun,
        criteria=read_criteria(reader, question.criteria, suction),
        precharge=_precharge(reader, question),
        faults=read_construction(reader, question.construction, climate.fluid),
    )
    return loop, cooling


def _climate(reader: Reader, question: asked.LoopQuestion) -> Climate:
    """Read where the loop stands, which air and sun it sees, and what flows in it."""
    site = question.site
    altitude = reader.or_default(site.altitude, _ALTITUDE, "/site", "altitude")
    reader.atmosphere = atmospheric_pressure(Length(altitude))
    site_minimum = reader.si(site.coldest_outdoor_temperature, _COLDEST, "/site")
    fluid = read_fluid(reader, question.fluid, "/fluid")
    outdoor = (question.vessel_zone or reader.word("vessel-zone", "/vesselZone")) == "outdoor"
    temperatures = read_temperatures(
        reader, question.temperatures, site_minimum=site_minimum, vessel_outdoor=outdoor, fluid=fluid
    )
    return Climate(altitude, fluid, temperatures, read_sun(reader, question.design_sun), outdoor)


def _cooling(reader: Reader, question: asked.LoopQuestion) -> tuple[Cooling, float, tuple[Part, ...]]:
    """Read how the cooling vessel is decided, its content and, as a part, its rating."""
    stated: CoolingVessel | None = None
    unstated: Cooling = "none"
    if isinstance(question, asked.VesselQuestion):
        stated = question.cooling_vessel
    elif isinstance(question, asked.SizingQuestion):
        stated, unstated = question.cooling_vessel, "size"
        if stated is None:
            reader.word("cooling-vessel", "/coolingVessel")
    cooling, content = read_cooling(reader, stated, unstated)
    if not isinstance(stated, CoolingVesselGiven):
        return cooling, content, ()
    pointer = "/coolingVessel/ratedPressure"
    rating = reader.optional_gauge(stated.rated_pressure, _COOLING_RATING, "/coolingVessel")
    if rating is None:
        reader.doubtful("rating-unstated", pointer)
    return (
        cooling,
        content,
        (Part(name="cooling vessel", height=0.0, rated_pressure=rating, pointer=pointer),),
    )


def _precharge(reader: Reader, question: asked.LoopQuestion) -> Precharge:
    stated: AskedPrecharge | None = None
    if isinstance(question, asked.SizingQuestion | asked.StagnationCheckQuestion):
        stated = question.precharge
        if stated is None:
            reader.word("precharge", "/precharge")
    return read_precharge(reader, stated)
