"""Quantities as callers write them: a number and its unit, one struct per kind.

The unit is a closed list, so no text of a caller is ever parsed as a unit expression. Gauge or absolute is
part of a pressure's unit. Turning them into SI and back lives in ``units_in`` and ``units_out``.
"""

from typing import Annotated

from msgspec import Meta, Struct

from loopslack.kernel import kinds


def _number(example: float) -> Meta:
    return Meta(description="The number, in `unit`. Finite.", examples=[example])


def _unit(example: str) -> Meta:
    return Meta(description="The unit of `value`.", examples=[example])


class Quantity(Struct, frozen=True, kw_only=True, forbid_unknown_fields=True, gc=False):
    """A number and its unit."""


class Length(Quantity, frozen=True, kw_only=True):
    """A length, a height or a diameter."""

    value: Annotated[float, _number(23)]
    unit: Annotated[kinds.LengthUnit, _unit("m")]


class Area(Quantity, frozen=True, kw_only=True):
    """An area."""

    value: Annotated[float, _number(2.3)]
    unit: Annotated[kinds.AreaUnit, _unit("m2")]


class Volume(Quantity, frozen=True, kw_only=True):
    """A volume of liquid or gas, a nominal volume or a content.

    US and imperial gallons are different units.
    """

    value: Annotated[float, _number(80)]
    unit: Annotated[kinds.VolumeUnit, _unit("L")]


class ContentPerLength(Quantity, frozen=True, kw_only=True):
    """The liquid that one length of pipe holds."""

    value: Annotated[float, _number(0.4909)]
    unit: Annotated[kinds.ContentPerLengthUnit, _unit("L/m")]


class Pressure(Quantity, frozen=True, kw_only=True):
    """A pressure, gauge or absolute as its unit says.

    `barg`, `kPag` and `psig` count from the atmosphere at the altitude of the site, `bara`, `kPaa` and
    `psia` from vacuum.
    """

    value: Annotated[float, _number(6)]
    unit: Annotated[kinds.PressureUnit, _unit("barg")]


class PressureDifference(Quantity, frozen=True, kw_only=True):
    """A difference of two pressures, a head or a margin. A metre of water is taken at 1000 kg/m3."""

    value: Annotated[float, _number(0.3)]
    unit: Annotated[kinds.PressureDifferenceUnit, _unit("bar")]


class Temperature(Quantity, frozen=True, kw_only=True):
    """A temperature. Differences are another kind."""

    value: Annotated[float, _number(-16)]
    unit: Annotated[kinds.TemperatureUnit, _unit("degC")]


class TemperatureDifference(Quantity, frozen=True, kw_only=True):
    """A difference of two temperatures: one kelvin is 1.8 degrees Fahrenheit of difference."""

    value: Annotated[float, _number(5)]
    unit: Annotated[kinds.TemperatureDifferenceUnit, _unit("K")]


class Irradiance(Quantity, frozen=True, kw_only=True):
    """Power per area: sun on a plane, or heat per area of collector."""

    value: Annotated[float, _number(1000)]
    unit: Annotated[kinds.IrradianceUnit, _unit("W/m2")]


class HeatLossCoefficient(Quantity, frozen=True, kw_only=True):
    """Heat lost per area and kelvin."""

    value: Annotated[float, _number(3.7)]
    unit: Annotated[kinds.HeatLossCoefficientUnit, _unit("W/m2K")]


class QuadraticHeatLossCoefficient(Quantity, frozen=True, kw_only=True):
    """Heat lost per area and kelvin squared."""

    value: Annotated[float, _number(0.014)]
    unit: Annotated[kinds.QuadraticHeatLossCoefficientUnit, _unit("W/m2K2")]


class Conductivity(Quantity, frozen=True, kw_only=True):
    """Thermal conductivity of a material."""

    value: Annotated[float, _number(0.04)]
    unit: Annotated[kinds.ConductivityUnit, _unit("W/mK")]


class LinearHeatLoss(Quantity, frozen=True, kw_only=True):
    """Heat lost per length of pipe."""

    value: Annotated[float, _number(25.9)]
    unit: Annotated[kinds.LinearHeatLossUnit, _unit("W/m")]


class LinearConductance(Quantity, frozen=True, kw_only=True):
    """Heat lost per length of pipe and kelvin."""

    value: Annotated[float, _number(0.2159)]
    unit: Annotated[kinds.LinearConductanceUnit, _unit("W/mK")]


class Power(Quantity, frozen=True, kw_only=True):
    """Heat per time."""

    value: Annotated[float, _number(322)]
    unit: Annotated[kinds.PowerUnit, _unit("W")]


class Mass(Quantity, frozen=True, kw_only=True):
    """A mass."""

    value: Annotated[float, _number(52.6)]
    unit: Annotated[kinds.MassUnit, _unit("kg")]


class Density(Quantity, frozen=True, kw_only=True):
    """Mass per volume."""

    value: Annotated[float, _number(1036)]
    unit: Annotated[kinds.DensityUnit, _unit("kg/m3")]


class SpecificEnthalpy(Quantity, frozen=True, kw_only=True):
    """Heat per mass, such as the latent heat of boiling."""

    value: Annotated[float, _number(2114)]
    unit: Annotated[kinds.SpecificEnthalpyUnit, _unit("kJ/kg")]


class SpecificHeat(Quantity, frozen=True, kw_only=True):
    """Heat per mass and kelvin."""

    value: Annotated[float, _number(3.66)]
    unit: Annotated[kinds.SpecificHeatUnit, _unit("kJ/kgK")]


class Viscosity(Quantity, frozen=True, kw_only=True):
    """Dynamic viscosity."""

    value: Annotated[float, _number(4.1)]
    unit: Annotated[kinds.ViscosityUnit, _unit("mPa.s")]


class MassPercent(Quantity, frozen=True, kw_only=True):
    """Share of a mixture by mass. By volume it is another number: see `VolumePercent`."""

    value: Annotated[float, _number(42.9)]
    unit: Annotated[kinds.MassPercentUnit, _unit("mass-percent")]


class VolumePercent(Quantity, frozen=True, kw_only=True):
    """Share of a mixture by the volumes of the unmixed liquids at 20 degC. By mass it is another number."""

    value: Annotated[float, _number(42)]
    unit: Annotated[kinds.VolumePercentUnit, _unit("volume-percent")]


class TimeSpan(Quantity, frozen=True, kw_only=True):
    """A span of time."""

    value: Annotated[float, _number(30)]
    unit: Annotated[kinds.DurationUnit, _unit("min")]


class Ratio(Quantity, frozen=True, kw_only=True):
    """A number without dimension."""

    value: Annotated[float, _number(0.081)]
    unit: Annotated[kinds.RatioUnit, _unit("1")]


class Price(Struct, frozen=True, kw_only=True, forbid_unknown_fields=True, gc=False):
    """A price, compared only with prices in the same currency."""

    amount: Annotated[float, Meta(ge=0, le=1e9, description="The amount, in `currency`.", examples=[249.0])]
    currency: Annotated[
        str,
        Meta(pattern="^[A-Z]{3}$", description="Three capital letters as in ISO 4217.", examples=["EUR"]),
    ]


STRUCT_OF: dict[str, type[Quantity]] = {
    kinds.LENGTH.name: Length,
    kinds.AREA.name: Area,
    kinds.VOLUME.name: Volume,
    kinds.NOMINAL_VOLUME.name: Volume,
    kinds.ACCEPTANCE_VOLUME.name: Volume,
    kinds.CONTENT_PER_LENGTH.name: ContentPerLength,
    kinds.ABSOLUTE_PRESSURE.name: Pressure,
    kinds.GAUGE_PRESSURE.name: Pressure,
    kinds.PRESSURE_DIFFERENCE.name: PressureDifference,
    kinds.TEMPERATURE.name: Temperature,
    kinds.TEMPERATURE_DIFFERENCE.name: TemperatureDifference,
    kinds.IRRADIANCE.name: Irradiance,
    kinds.HEAT_LOSS_COEFFICIENT.name: HeatLossCoefficient,
    kinds.QUADRATIC_HEAT_LOSS_COEFFICIENT.name: QuadraticHeatLossCoefficient,
    kinds.CONDUCTIVITY.name: Conductivity,
    kinds.LINEAR_HEAT_LOSS.name: LinearHeatLoss,
    kinds.LINEAR_CONDUCTANCE.name: LinearConductance,
    kinds.POWER.name: Power,
    kinds.MASS.name: Mass,
    kinds.DENSITY.name: Density,
    kinds.SPECIFIC_ENTHALPY.name: SpecificEnthalpy,
    kinds.SPECIFIC_HEAT.name: SpecificHeat,
    kinds.VISCOSITY.name: Viscosity,
    kinds.MASS_FRACTION.name: MassPercent,
    kinds.VOLUME_FRACTION.name: VolumePercent,
    kinds.RATIO.name: Ratio,
    kinds.EXPANSION_COEFFICIENT.name: Ratio,
    kinds.DURATION.name: TimeSpan,
}
"""The struct that carries a kind, by the kind's name."""
