"""Levers of the plant and of what is asked of it: temperatures, criteria, station, valve, site."""

from msgspec.structs import replace

from loopslack.calc.levers.lever import Lever, lever, ranged
from loopslack.calc.model import Loop
from loopslack.kernel import kinds
from loopslack.kernel.kinds import Kind, Length
from loopslack.library.defaults import default
from loopslack.physics.atmosphere import atmospheric_pressure

_TEMPERATURES = (
    ("fill-temperature", "fill"),
    ("indoor-cold", "indoor_cold"),
    ("vessel-room", "vessel_room"),
    ("design-flow-temperature", "flow"),
    ("design-return-temperature", "back"),
    ("pump-cut-off", "cut_off"),
    ("stagnation-liquid", "hot_liquid"),
)
_CRITERIA = (
    ("minimum-top-pressure", "top_pressure", kinds.GAUGE_PRESSURE),
    ("fill-window-width", "window_width", kinds.PRESSURE_DIFFERENCE),
    ("fill-above-precharge", "fill_above_precharge", kinds.PRESSURE_DIFFERENCE),
    ("fill-above-lower-bound", "window_step", kinds.PRESSURE_DIFFERENCE),
    ("boiling-margin", "boiling_margin", kinds.PRESSURE_DIFFERENCE),
    ("fluid-data-allowance", "fluid_allowance", kinds.RATIO),
    ("doubt-stagnation-shift", "stagnation_doubt", kinds.TEMPERATURE_DIFFERENCE),
)


def plant_levers(loop: Loop) -> list[Lever]:
    """The levers of everything that is neither collector nor pipe."""
    return [
        *(_temperature(loop, *names) for names in _TEMPERATURES),
        *(_criterion(loop, *names) for names in _CRITERIA),
        _station(loop),
        lever(
            "vessel-line-content",
            kinds.VOLUME,
            loop.line_content,
            lambda loop, number: replace(loop, line_content=number),
        ),
        lever(
            "relief-height",
            kinds.LENGTH,
            loop.relief.height,
            lambda loop, number: replace(loop, relief=replace(loop.relief, height=number)),
        ),
        lever(
            "pump-head",
            kinds.PRESSURE_DIFFERENCE,
            loop.pump_head,
            lambda loop, number: replace(loop, pump_head=number),
        ),
        lever("altitude", kinds.LENGTH, loop.altitude, _at_altitude),
    ]


def _temperature(loop: Loop, id: str, name: str) -> Lever:
    def moved(loop: Loop, number: float) -> Loop:
        return replace(loop, temperatures=replace(loop.temperatures, **{name: number}))

    found = lever(id, kinds.TEMPERATURE, getattr(loop.temperatures, name), moved)
    # Nobody fills with ice: a range that begins below the freezing point begins there.
    return replace(found, low=min(found.value, max(found.low, loop.fluid.lowest)))


def _criterion(loop: Loop, id: str, name: str, kind: Kind) -> Lever:
    def moved(loop: Loop, number: float) -> Loop:
        return replace(loop, criteria=replace(loop.criteria, **{name: number}))

    return lever(id, kind, getattr(loop.criteria, name), moved)


def _station(loop: Loop) -> Lever:
    """The station's content: a group and a heat exchanger that grows with the aperture."""
    base, grown = default("station-content"), default("station-content-per-area")
    within = (base.low + grown.low * loop.aperture, base.high + grown.high * loop.aperture)
    return ranged(
        "station-content",
        kinds.VOLUME,
        loop.station.content,
        within,
        lambda loop, number: replace(loop, station=replace(loop.station, content=number)),
    )


def _at_altitude(loop: Loop, altitude: float) -> Loop:
    """The same plant elsewhere; a stated precharge is a gauge reading and moves with the air."""
    air = atmospheric_pressure(Length(altitude))
    precharge = loop.precharge
    if precharge.kind == "stated":
        precharge = replace(precharge, pressure=precharge.pressure + air - loop.atmosphere)
    return replace(loop, altitude=altitude, atmosphere=air, precharge=precharge)
