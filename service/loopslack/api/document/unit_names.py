"""Names of the units callers may use, as constants for generated code and as sentences.

One table of units and one line per list of units. Which units a kind has is said in `loopslack.kernel.kinds`;
a unit that is there and not here is refused when the document is assembled. Must not live here: factors.
"""

from __future__ import annotations

from typing import get_args

from loopslack.api.document.vocabulary import DocumentError, NamedValues, Word
from loopslack.kernel import kinds

_UNITS: dict[str, tuple[str, str]] = {
    "m": ("METRE", "Metre"),
    "mm": ("MILLIMETRE", "Millimetre"),
    "cm": ("CENTIMETRE", "Centimetre"),
    "in": ("INCH", "Inch of 25.4 mm"),
    "ft": ("FOOT", "International foot of 0.3048 m"),
    "m2": ("SQUARE_METRE", "Square metre"),
    "ft2": ("SQUARE_FOOT", "Square foot"),
    "L": ("LITRE", "Litre"),
    "mL": ("MILLILITRE", "Millilitre"),
    "m3": ("CUBIC_METRE", "Cubic metre"),
    "gal_us": ("US_GALLON", "US liquid gallon of 3.785 L"),
    "gal_uk": ("IMPERIAL_GALLON", "Imperial gallon of 4.546 L"),
    "ft3": ("CUBIC_FOOT", "Cubic foot"),
    "L/m": ("LITRE_PER_METRE", "Litre per metre"),
    "gal_us/ft": ("US_GALLON_PER_FOOT", "US liquid gallon per foot"),
    "barg": ("BAR_GAUGE", "Bar above the atmosphere at the site"),
    "bara": ("BAR_ABSOLUTE", "Bar above vacuum"),
    "kPag": ("KILOPASCAL_GAUGE", "Kilopascal above the atmosphere at the site"),
    "kPaa": ("KILOPASCAL_ABSOLUTE", "Kilopascal above vacuum"),
    "psig": ("PSI_GAUGE", "Pound-force per square inch above the atmosphere at the site"),
    "psia": ("PSI_ABSOLUTE", "Pound-force per square inch above vacuum"),
    "bar": ("BAR", "Bar"),
    "kPa": ("KILOPASCAL", "Kilopascal"),
    "psi": ("PSI", "Pound-force per square inch"),
    "mH2O": ("METRE_OF_WATER", "Metre of water of 1000 kg/m3"),
    "ftH2O": ("FOOT_OF_WATER", "Foot of water of 1000 kg/m3"),
    "degC": ("DEGREE_CELSIUS", "Degree Celsius"),
    "degF": ("DEGREE_FAHRENHEIT", "Degree Fahrenheit"),
    "K": ("KELVIN", "Kelvin"),
    "delta_degF": ("FAHRENHEIT_DIFFERENCE", "Degree Fahrenheit of difference, 5/9 of a kelvin"),
    "W/m2": ("WATT_PER_SQUARE_METRE", "Watt per square metre"),
    "BTU/h/ft2": ("BTU_PER_HOUR_SQUARE_FOOT", "British thermal unit per hour and square foot"),
    "W/m2K": ("WATT_PER_SQUARE_METRE_KELVIN", "Watt per square metre and kelvin"),
    "BTU/h/ft2/degF": (
        "BTU_PER_HOUR_SQUARE_FOOT_FAHRENHEIT",
        "British thermal unit per hour, square foot and degree Fahrenheit",
    ),
    "W/m2K2": ("WATT_PER_SQUARE_METRE_KELVIN_SQUARED", "Watt per square metre and kelvin squared"),
    "BTU/h/ft2/degF2": (
        "BTU_PER_HOUR_SQUARE_FOOT_FAHRENHEIT_SQUARED",
        "British thermal unit per hour, square foot and degree Fahrenheit squared",
    ),
    "W/mK": ("WATT_PER_METRE_KELVIN", "Watt per metre and kelvin"),
    "BTU.in/h/ft2/degF": (
        "BTU_INCH_PER_HOUR_SQUARE_FOOT_FAHRENHEIT",
        "British thermal unit inch per hour, square foot and degree Fahrenheit",
    ),
    "W/m": ("WATT_PER_METRE", "Watt per metre"),
    "BTU/h/ft": ("BTU_PER_HOUR_FOOT", "British thermal unit per hour and foot"),
    "BTU/h/ft/degF": (
        "BTU_PER_HOUR_FOOT_FAHRENHEIT",
        "British thermal unit per hour, foot and degree Fahrenheit",
    ),
    "W": ("WATT", "Watt"),
    "kW": ("KILOWATT", "Kilowatt"),
    "BTU/h": ("BTU_PER_HOUR", "British thermal unit per hour"),
    "kg": ("KILOGRAM", "Kilogram"),
    "lb": ("POUND", "Avoirdupois pound of 0.4536 kg"),
    "kg/m3": ("KILOGRAM_PER_CUBIC_METRE", "Kilogram per cubic metre"),
    "lb/ft3": ("POUND_PER_CUBIC_FOOT", "Pound per cubic foot"),
    "kJ/kg": ("KILOJOULE_PER_KILOGRAM", "Kilojoule per kilogram"),
    "BTU/lb": ("BTU_PER_POUND", "British thermal unit per pound"),
    "kJ/kgK": ("KILOJOULE_PER_KILOGRAM_KELVIN", "Kilojoule per kilogram and kelvin"),
    "BTU/lb/degF": ("BTU_PER_POUND_FAHRENHEIT", "British thermal unit per pound and degree Fahrenheit"),
    "mPa.s": ("MILLIPASCAL_SECOND", "Millipascal second"),
    "mass-percent": ("MASS_PERCENT", "Percent of the mass of the mixture"),
    "volume-percent": ("VOLUME_PERCENT", "Percent of the volumes of the unmixed liquids at 20 degC"),
    "s": ("SECOND", "Second"),
    "min": ("MINUTE", "Minute"),
    "h": ("HOUR", "Hour"),
    "1": ("ONE", "A plain number"),
    "percent": ("PERCENT", "Percent"),
}


def _units(name: str, alias: object, of: str) -> NamedValues:
    units = get_args(alias)
    nameless = [unit for unit in units if unit not in _UNITS]
    if nameless:
        raise DocumentError(f"{name}: no constant for {nameless}")
    return NamedValues(
        name=name, meaning=f"Units of {of}.", words=tuple(Word(unit, *_UNITS[unit]) for unit in units)
    )


ALL_UNITS = NamedValues(
    name="AnyUnit",
    meaning="Units of a quantity whose kind is told by its place.",
    words=tuple(Word(unit, *named) for unit, named in _UNITS.items()),
)

UNIT_LISTS: tuple[NamedValues, ...] = (
    _units("LengthUnit", kinds.LengthUnit, "a length"),
    _units("AreaUnit", kinds.AreaUnit, "an area"),
    _units("VolumeUnit", kinds.VolumeUnit, "a volume; US and imperial gallons are told apart"),
    _units("ContentPerLengthUnit", kinds.ContentPerLengthUnit, "a content per length of pipe"),
    _units("PressureUnit", kinds.PressureUnit, "a pressure; gauge or absolute is part of the unit"),
    _units("PressureDifferenceUnit", kinds.PressureDifferenceUnit, "a difference of pressures or a head"),
    _units("TemperatureUnit", kinds.TemperatureUnit, "a temperature"),
    _units("TemperatureDifferenceUnit", kinds.TemperatureDifferenceUnit, "a difference of temperatures"),
    _units("IrradianceUnit", kinds.IrradianceUnit, "a power per area"),
    _units("HeatLossCoefficientUnit", kinds.HeatLossCoefficientUnit, "a heat loss per area and kelvin"),
    _units(
        "QuadraticHeatLossCoefficientUnit",
        kinds.QuadraticHeatLossCoefficientUnit,
        "a heat loss per area and kelvin squared",
    ),
    _units("ConductivityUnit", kinds.ConductivityUnit, "a thermal conductivity"),
    _units("PowerUnit", kinds.PowerUnit, "a power"),
    _units("MassUnit", kinds.MassUnit, "a mass"),
    _units("DensityUnit", kinds.DensityUnit, "a density"),
    _units("SpecificHeatUnit", kinds.SpecificHeatUnit, "a heat capacity per mass"),
    _units("MassPercentUnit", kinds.MassPercentUnit, "a share by mass"),
    _units("VolumePercentUnit", kinds.VolumePercentUnit, "a share by volume"),
    _units("DurationUnit", kinds.DurationUnit, "a span of time"),
    _units("RatioUnit", kinds.RatioUnit, "a number without dimension"),
    ALL_UNITS,
)
