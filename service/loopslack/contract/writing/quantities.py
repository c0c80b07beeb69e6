"""Writing SI numbers as quantities, rounded once, in the units the caller asked for.

Rounding keeps six significant digits, so a small negative margin stays negative and never becomes zero.
Verdicts are taken before anything is rounded here.
"""

from collections.abc import Callable
from math import isfinite
from typing import Literal, TypeVar, cast

from loopslack.contract import quantity as q
from loopslack.kernel import kinds
from loopslack.kernel.kinds import Kind
from loopslack.kernel.units import scale_of

System = Literal["metric", "us"]
Q = TypeVar("Q", bound=q.Quantity)
Write = Callable[[float], Q]

# A freezing point of 273.15 K is 0 degC; what subtracting the offset leaves behind is no temperature.
_NOISE_OF_OFFSET = 1e-9


def six_digits(number: float) -> float:
    """Round a number to six significant digits; ValueError for one that is not finite."""
    if not isfinite(number):
        raise ValueError("a number that is not finite cannot be answered")
    return float(f"{number:.6g}") + 0.0  # the sum turns -0.0 into 0.0


def _writer(struct: type[Q], kind: Kind, unit: str) -> Write[Q]:
    scale, offset = scale_of(kind, unit)
    build = cast("Callable[..., Q]", struct)
    if offset == 0 and scale == 1:
        return lambda si: build(value=six_digits(si), unit=unit)
    if offset == 0:
        return lambda si: build(value=six_digits(si / scale), unit=unit)

    def with_offset(si: float) -> Q:
        number = (si - offset) / scale
        return build(value=0.0 if abs(number) < _NOISE_OF_OFFSET else six_digits(number), unit=unit)

    return with_offset


class Writer:
    """One function per kind from SI to a quantity in the units of one system; built twice, at import."""

    def __init__(self, system: System) -> None:
        def into(struct: type[Q], kind: Kind) -> Write[Q]:
            return _writer(struct, kind, kind.metric if system == "metric" else kind.us)

        self.system: System = system
        self.length = into(q.Length, kinds.LENGTH)
        self.area = into(q.Area, kinds.AREA)
        self.volume = into(q.Volume, kinds.VOLUME)
        self.content_per_length = into(q.ContentPerLength, kinds.CONTENT_PER_LENGTH)
        self.absolute = into(q.Pressure, kinds.ABSOLUTE_PRESSURE)
        self.gauge = into(q.Pressure, kinds.GAUGE_PRESSURE)
        self.pressure_difference = into(q.PressureDifference, kinds.PRESSURE_DIFFERENCE)
        self.temperature = into(q.Temperature, kinds.TEMPERATURE)
        self.temperature_difference = into(q.TemperatureDifference, kinds.TEMPERATURE_DIFFERENCE)
        self.irradiance = into(q.Irradiance, kinds.IRRADIANCE)
        self.heat_loss_coefficient = into(q.HeatLossCoefficient, kinds.HEAT_LOSS_COEFFICIENT)
        self.quadratic_heat_loss_coefficient = into(
            q.QuadraticHeatLossCoefficient, kinds.QUADRATIC_HEAT_LOSS_COEFFICIENT
        )
        self.conductivity = into(q.Conductivity, kinds.CONDUCTIVITY)
        self.linear_heat_loss = into(q.LinearHeatLoss, kinds.LINEAR_HEAT_LOSS)
        self.linear_conductance = into(q.LinearConductance, kinds.LINEAR_CONDUCTANCE)
        self.power = into(q.Power, kinds.POWER)
        self.mass = into(q.Mass, kinds.MASS)
        self.density = into(q.Density, kinds.DENSITY)
        self.specific_enthalpy = into(q.SpecificEnthalpy, kinds.SPECIFIC_ENTHALPY)
        self.specific_heat = into(q.SpecificHeat, kinds.SPECIFIC_HEAT)
        self.viscosity = into(q.Viscosity, kinds.VISCOSITY)
        self.mass_percent = into(q.MassPercent, kinds.MASS_FRACTION)
        self.volume_percent = into(q.VolumePercent, kinds.VOLUME_FRACTION)
        self.ratio = into(q.Ratio, kinds.RATIO)
        self.time_span = into(q.TimeSpan, kinds.DURATION)
        self._by_kind: dict[str, Write[q.Quantity]] = {
            kind.name: into(q.STRUCT_OF[kind.name], kind) for kind in kinds.KINDS if kind.units
        }

    def any(self, si: float, kind: Kind) -> q.Quantity:
        """Write a number of a kind that is only known at run time; KeyError for a kind without units."""
        return self._by_kind[kind.name](si)


METRIC = Writer("metric")
US = Writer("us")


def writer(system: System) -> Writer:
    """Choose the functions that write in a system of units."""
    return US if system == "us" else METRIC


def write(si: float, kind: Kind, system: System) -> q.Quantity:
    """Write an SI number of a kind as a quantity of a system of units, rounded once."""
    return writer(system).any(si, kind)
