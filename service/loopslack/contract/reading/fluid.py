"""Reads the fluid of a question into a fluid that can be asked for its properties."""

from itertools import pairwise

from loopslack.calc.fluids.base import Fluid
from loopslack.calc.fluids.making import (
    BoilsLike,
    glycol,
    glycol_by_volume,
    glycol_protecting_to,
    own_fluid,
    water,
)
from loopslack.calc.remedies.case import Strength
from loopslack.contract.questions import fluid as asked
from loopslack.contract.questions.fields import field_of
from loopslack.contract.reading.reader import Reader
from loopslack.kernel.errors import CalculationError
from loopslack.library.fluids import GlycolKind

_MASS_SHARE = field_of(asked.ByMass, "share")
_VOLUME_SHARE = field_of(asked.ByVolume, "share")
_PROTECT = field_of(asked.ProtectTo, "temperature")
_POINT_TEMPERATURE = field_of(asked.DensityPoint, "temperature")
_POINT_DENSITY = field_of(asked.DensityPoint, "density")
_BOILING_TEMPERATURE = field_of(asked.BoilingPoint, "temperature")
_BOILING_PRESSURE = field_of(asked.BoilingPoint, "pressure")
_HEAT_TEMPERATURE = field_of(asked.HeatCapacityPoint, "temperature")
_HEAT_CAPACITY = field_of(asked.HeatCapacityPoint, "heat_capacity")
_FREEZING = field_of(asked.OwnFluid, "freezing_point")
_LIKE_SHARE = field_of(asked.BoilingLike, "share")


def read_fluid(reader: Reader, fluid: asked.Fluid, place: str) -> Fluid:
    """Make the fluid; another one stands in for one that is refused."""
    try:
        if isinstance(fluid, asked.PropyleneGlycol):
            return _glycol(reader, "propylene-glycol", fluid.concentration, f"{place}/concentration")
        if isinstance(fluid, asked.EthyleneGlycol):
            return _glycol(reader, "ethylene-glycol", fluid.concentration, f"{place}/concentration")
        if isinstance(fluid, asked.OwnFluid):
            return _own(reader, fluid, place)
    except CalculationError as error:
        reader.refuse(error, error.pointer or f"{place}/concentration")  # the own fluid points at its tables
        return _any_fluid(reader)
    return water()


def stated_strength(fluid: asked.Fluid) -> Strength:
    """How the strength is stated; by mass for a fluid that states none."""
    if not isinstance(fluid, asked.PropyleneGlycol | asked.EthyleneGlycol):
        return "by-mass"
    if isinstance(fluid.concentration, asked.ByVolume):
        return "by-volume"
    return "protect-to" if isinstance(fluid.concentration, asked.ProtectTo) else "by-mass"


def _any_fluid(reader: Reader) -> Fluid:
    return reader.stand_in(water(), glycol("propylene-glycol", 0.4))


def _glycol(reader: Reader, kind: GlycolKind, strength: asked.Concentration, place: str) -> Fluid:
    if isinstance(strength, asked.ByMass):
        return glycol(kind, reader.si(strength.share, _MASS_SHARE, place))
    if isinstance(strength, asked.ByVolume):
        return glycol_by_volume(kind, reader.si(strength.share, _VOLUME_SHARE, place))
    return glycol_protecting_to(kind, reader.si(strength.temperature, _PROTECT, place))


def _own(reader: Reader, fluid: asked.OwnFluid, place: str) -> Fluid:
    before = len(reader.refused)
    points = [
        (
            reader.si(point.temperature, _POINT_TEMPERATURE, f"{place}/points/{k}"),
            reader.si(point.density, _POINT_DENSITY, f"{place}/points/{k}"),
        )
        for k, point in enumerate(fluid.points)
    ]
    _rising(reader, [temperature for temperature, _ in points], f"{place}/points")
    freezing = reader.si(fluid.freezing_point, _FREEZING, place)
    boils = f"{place}/boiling"
    boiling: list[tuple[float, float]] | BoilsLike
    if isinstance(fluid.boiling, asked.BoilingLike):
        share = reader.si(fluid.boiling.share, _LIKE_SHARE, boils)
        boiling = BoilsLike(kind=fluid.boiling.glycol, mass_fraction=share)
    else:
        boiling = [
            (
                reader.si(point.temperature, _BOILING_TEMPERATURE, f"{boils}/points/{k}"),
                reader.absolute(point.pressure, _BOILING_PRESSURE, f"{boils}/points/{k}"),
            )
            for k, point in enumerate(fluid.boiling.points)
        ]
        _rising(reader, [temperature for temperature, _ in boiling], f"{boils}/points")
    heat = _heat_capacity(reader, fluid, f"{place}/heatCapacity")
    if len(reader.refused) > before:
        return _any_fluid(reader)
    return own_fluid(points, freezing, boiling, heat_capacity=heat, name=fluid.name)


def _heat_capacity(reader: Reader, fluid: asked.OwnFluid, place: str) -> list[tuple[float, float]]:
    points = [
        (
            reader.si(point.temperature, _HEAT_TEMPERATURE, f"{place}/{k}"),
            reader.si(point.heat_capacity, _HEAT_CAPACITY, f"{place}/{k}"),
        )
        for k, point in enumerate(fluid.heat_capacity or ())
    ]
    _rising(reader, [temperature for temperature, _ in points], place)
    return points


def _rising(reader: Reader, temperatures: list[float], pointer: str) -> None:
    for k, (below, above) in enumerate(pairwise(temperatures), start=1):
        if above <= below:
            reader.contradiction(
                f"{pointer}/{k}/temperature",
                f"Point {k + 1} is not warmer than the one before it.",
                "List the points in rising order of temperature, each temperature once.",
            )
            return
