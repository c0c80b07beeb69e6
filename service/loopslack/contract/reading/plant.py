"""Reads site, relief valve, station, pump and the parts that must bear the relief valve's pressure."""

from collections.abc import Sequence
from typing import cast

from loopslack.calc.fluids.base import Fluid
from loopslack.calc.model import ConstructionFault, Part, PumpSide, Relief, Station
from loopslack.contract.part_names import group_names
from loopslack.contract.questions import plant as asked
from loopslack.contract.questions.collectors import CollectorGroup
from loopslack.contract.questions.fields import field_of
from loopslack.contract.questions.operations import LoopQuestion
from loopslack.contract.reading.reader import Reader
from loopslack.kernel import kinds
from loopslack.kernel.errors import NotApplicable
from loopslack.kernel.kinds import GaugePressure, PressureDifference
from loopslack.library.defaults import default
from loopslack.physics.relief import (
    ALLOWANCES,
    blowdown_liquid,
    closing_pressure,
    opening_pressure,
    set_tolerance_iso_4126_1,
)

_SET = field_of(asked.ReliefValve, "set_pressure")
_RELIEF_HEIGHT = field_of(asked.ReliefValve, "height")
_ALLOWANCE = field_of(asked.AllowanceStated, "value")
_BLOWDOWN = field_of(asked.ReliefValve, "blowdown")
_STATION_CONTENT = field_of(asked.Station, "content")
_STATION_HEIGHT = field_of(asked.Station, "height")
_STATION_RATING = field_of(asked.Station, "rated_pressure")
_STATION_HIGHEST = field_of(asked.Station, "highest_temperature")
_COOLER = field_of(asked.Station, "steam_cooler")
_LINE = field_of(asked.VesselLine, "content")
_HEAD = field_of(asked.Pump, "head")
_PUMP_HEIGHT = field_of(asked.Pump, "height")
_SUCTION = field_of(asked.Pump, "net_positive_suction")
_GAUGE_HEIGHT = field_of(asked.PressureGauge, "height")
_PART_HEIGHT = field_of(asked.RatedPart, "height")
_PART_RATING = field_of(asked.RatedPart, "rated_pressure")
_PART_HIGHEST = field_of(asked.RatedPart, "highest_temperature")
_GROUP_RATING = field_of(CollectorGroup, "rated_pressure")

_NO_STATION, _NO_LINE = asked.Station(), asked.VesselLine()
_NO_PUMP, _NO_GAUGE = asked.Pump(), asked.PressureGauge()


def read_relief(reader: Reader, valve: asked.ReliefValve) -> Relief:
    """Read the relief valve: stamp, lowest opening, and where it shuts."""
    place = "/reliefValve"
    stamped = GaugePressure(reader.gauge(valve.set_pressure, _SET, place))
    rule, allowance = _allowance(reader, valve.opening_allowance, stamped, place)
    opening = opening_pressure(stamped, allowance)
    if opening <= 0:
        reader.contradiction(
            f"{place}/setPressure",
            f"With an allowance of {allowance / 1e5:.4g} bar ({rule}) a valve set to {stamped / 1e5:.4g} barg must "
            "be expected to open without any pressure.",
            "Take a valve of higher set pressure, or a rule with a smaller allowance.",
        )
    if valve.blowdown is None:
        blowdown = blowdown_liquid(stamped)
        row = default("relief-blowdown-liquid")
        reader.derived(
            f"{place}/blowdown",
            blowdown,
            kinds.PRESSURE_DIFFERENCE,
            row.why,
            low=row.low * stamped,
            high=max(blowdown, row.high * stamped),
        )
    else:
        blowdown = PressureDifference(reader.si(valve.blowdown, _BLOWDOWN, place))
    return Relief(
        set_pressure=stamped,
        opening_pressure=opening,
        closing_pressure=closing_pressure(stamped, blowdown),
        height=reader.or_default(valve.height, _RELIEF_HEIGHT, place, "relief-height"),
        allowance_rule=rule,
        nominal_size=None if valve.nominal_size is None else int(valve.nominal_size.removeprefix("DN")),
    )


def _allowance(
    reader: Reader, stated: asked.OpeningAllowance | None, stamped: GaugePressure, place: str
) -> tuple[str, PressureDifference]:
    """Which allowance is kept below the stamp: its rule and its figure."""
    least = set_tolerance_iso_4126_1(stamped)
    if isinstance(stated, asked.AllowanceStated):
        pointer = f"{place}/openingAllowance"
        allowance = PressureDifference(reader.si(stated.value, _ALLOWANCE, pointer))
        if allowance < least * (1 - 1e-9):
            reader.contradiction(
                f"{pointer}/value",
                f"An allowance of {allowance / 1e5:.4g} bar is less than the {least / 1e5:.4g} bar by "
                "which a sound valve may open below its stamp (ISO 4126-1).",
                "State at least that, or choose a rule.",
            )
        return "stated", allowance
    rule = reader.word("relief-allowance", f"{place}/openingAllowance") if stated is None else stated.rule
    return rule, max(ALLOWANCES[rule](stamped), least)


def station_height(reader: Reader, station: asked.Station | None) -> float:
    """Read the height at which the pipe runs end."""
    stated = (station or _NO_STATION).height
    return reader.or_default(stated, _STATION_HEIGHT, "/station", "station-height")


def station_content(reader: Reader, station: asked.Station | None, aperture: float) -> float:
    """Content of the station, m3; from the collector area if not stated."""
    stated = (station or _NO_STATION).content
    if stated is not None:
        return reader.si(stated, _STATION_CONTENT, "/station")
    fixed, share = default("station-content"), default("station-content-per-area")
    return reader.derived(
        "/station/content",
        fixed.si + share.si * aperture,
        kinds.VOLUME,
        f"{fixed.why} {share.why}",
        low=fixed.low + share.low * aperture,
        high=fixed.high + share.high * aperture,
    )


def read_station(reader: Reader, station: asked.Station | None, height: float, aperture: float) -> Station:
    """Read pump group and heat exchanger."""
    stated = station or _NO_STATION
    zone = stated.zone or reader.word("station-zone", "/station/zone")
    return Station(
        content=station_content(reader, station, aperture),
        height=height,
        outdoor=zone == "outdoor",
        steam_loss=reader.or_default(stated.steam_cooler, _COOLER, "/station", "steam-cooler"),
    )


def read_line(reader: Reader, line: asked.VesselLine | None) -> float:
    """Content of the line to the vessel, m3."""
    return reader.or_default((line or _NO_LINE).content, _LINE, "/vesselLine", "vessel-line-content")


def read_pump(reader: Reader, pump: asked.Pump | None) -> tuple[float, PumpSide, float, float | None]:
    """Head Pa, side of the vessel, height m, and the net positive suction asked for, Pa, if stated."""
    stated = pump or _NO_PUMP
    return (
        reader.or_default(stated.head, _HEAD, "/pump", "pump-head"),
        stated.side or cast("PumpSide", reader.word("pump-side", "/pump/side")),
        reader.or_default(stated.height, _PUMP_HEIGHT, "/pump", "pump-height"),
        reader.optional(stated.net_positive_suction, _SUCTION, "/pump"),
    )


def read_gauge(reader: Reader, gauge: asked.PressureGauge | None) -> float:
    """Height of the gauge, m."""
    return reader.or_default((gauge or _NO_GAUGE).height, _GAUGE_HEIGHT, "/gauge", "gauge-height")


def read_parts(
    reader: Reader,
    question: LoopQuestion,
    heights: Sequence[float],
    station_at: float,
) -> tuple[Part, ...]:
    """Collect every part whose rating decides: collectors, station, and what the caller lists.

    A rating that is not stated makes the answer provisional; none is assumed.
    """
    groups, found = question.collectors, []
    for k, (group, name, height) in enumerate(zip(groups, group_names(groups), heights, strict=True)):
        found.append(
            Part(
                name=name,
                height=height,
                rated_pressure=reader.optional_gauge(group.rated_pressure, _GROUP_RATING, f"/collectors/{k}"),
                pointer=f"/collectors/{k}/ratedPressure",
            )
        )
    stated = question.station or _NO_STATION
    found.append(
        Part(
            name="station",
            height=station_at,
            rated_pressure=reader.optional_gauge(stated.rated_pressure, _STATION_RATING, "/station"),
            highest_temperature=reader.optional(stated.highest_temperature, _STATION_HIGHEST, "/station"),
            pointer="/station/ratedPressure",
        )
    )
    for k, listed in enumerate(question.parts or ()):
        place = f"/parts/{k}"
        found.append(
            Part(
                name=listed.name,
                height=reader.si(listed.height, _PART_HEIGHT, place),
                rated_pressure=reader.optional_gauge(listed.rated_pressure, _PART_RATING, place),
                highest_temperature=reader.optional(listed.highest_temperature, _PART_HIGHEST, place),
                pointer=f"{place}/ratedPressure",
            )
        )
    for part in found:
        if part.rated_pressure is None:
            reader.doubtful("rating-unstated", part.pointer)
    return tuple(found)


def read_construction(
    reader: Reader, built: asked.Construction | None, fluid: Fluid
) -> tuple[ConstructionFault, ...]:
    """Read how the loop is built; an open or drain-back loop is refused."""
    if built is None:
        return ()
    if built.open_or_drain_back:
        reader.refuse(
            NotApplicable(
                "The loop is stated to be open or to drain back.",
                remedy="This service computes closed, pressurised loops only: their physics is another.",
                pointer="/construction/openOrDrainBack",
                code="other-physics",
            )
        )
    faults: list[ConstructionFault] = []
    if fluid.kind != "water":
        if built.automatic_make_up:
            faults.append("automatic-make-up")
        if built.galvanised_parts:
            faults.append("galvanised-parts")
    return tuple(faults)
