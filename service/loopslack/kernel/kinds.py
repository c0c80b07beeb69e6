"""The kinds of quantity the service speaks, the SI unit each is held in and the units a caller may use.

Inside the service every number is a float in the SI unit of its kind. The pairs that people mix up (gauge and
absolute pressure, temperature and difference, mass and volume fraction, nominal and acceptance volume) are
different types here, so that a type checker refuses the mix-up, and different kinds at run time, so that a
derivation does. No conversion lives here: see ``units``.
"""

from typing import Literal, NewType, get_args

from msgspec import Struct

Length = NewType("Length", float)
Area = NewType("Area", float)
Volume = NewType("Volume", float)
NominalVolume = NewType("NominalVolume", float)
AcceptanceVolume = NewType("AcceptanceVolume", float)
ContentPerLength = NewType("ContentPerLength", float)
AbsolutePressure = NewType("AbsolutePressure", float)
GaugePressure = NewType("GaugePressure", float)
PressureDifference = NewType("PressureDifference", float)
Temperature = NewType("Temperature", float)
TemperatureDifference = NewType("TemperatureDifference", float)
Irradiance = NewType("Irradiance", float)
HeatLossCoefficient = NewType("HeatLossCoefficient", float)
QuadraticHeatLossCoefficient = NewType("QuadraticHeatLossCoefficient", float)
Conductivity = NewType("Conductivity", float)
LinearHeatLoss = NewType("LinearHeatLoss", float)
LinearConductance = NewType("LinearConductance", float)
Power = NewType("Power", float)
Mass = NewType("Mass", float)
Density = NewType("Density", float)
SpecificEnthalpy = NewType("SpecificEnthalpy", float)
SpecificHeat = NewType("SpecificHeat", float)
Viscosity = NewType("Viscosity", float)
MassFraction = NewType("MassFraction", float)
VolumeFraction = NewType("VolumeFraction", float)
Ratio = NewType("Ratio", float)
Duration = NewType("Duration", float)
ExpansionCoefficient = NewType("ExpansionCoefficient", float)
MolarMass = NewType("MolarMass", float)

# Not a quantity: the fitted numbers of one law, handed to the function by whoever holds the table.
Coefficients = NewType("Coefficients", tuple[float, ...])

LengthUnit = Literal["m", "mm", "cm", "in", "ft"]
AreaUnit = Literal["m2", "ft2"]
VolumeUnit = Literal["L", "mL", "m3", "gal_us", "gal_uk", "ft3"]
ContentPerLengthUnit = Literal["L/m", "gal_us/ft"]
PressureUnit = Literal["barg", "bara", "kPag", "kPaa", "psig", "psia"]
PressureDifferenceUnit = Literal["bar", "kPa", "psi", "mH2O", "ftH2O"]
TemperatureUnit = Literal["degC", "degF", "K"]
TemperatureDifferenceUnit = Literal["K", "delta_degF"]
IrradianceUnit = Literal["W/m2", "BTU/h/ft2"]
HeatLossCoefficientUnit = Literal["W/m2K", "BTU/h/ft2/degF"]
QuadraticHeatLossCoefficientUnit = Literal["W/m2K2", "BTU/h/ft2/degF2"]
ConductivityUnit = Literal["W/mK", "BTU.in/h/ft2/degF"]
LinearHeatLossUnit = Literal["W/m", "BTU/h/ft"]
LinearConductanceUnit = Literal["W/mK", "BTU/h/ft/degF"]
PowerUnit = Literal["W", "kW", "BTU/h"]
MassUnit = Literal["kg", "lb"]
DensityUnit = Literal["kg/m3", "lb/ft3"]
SpecificEnthalpyUnit = Literal["kJ/kg", "BTU/lb"]
SpecificHeatUnit = Literal["kJ/kgK", "BTU/lb/degF"]
ViscosityUnit = Literal["mPa.s"]
MassPercentUnit = Literal["mass-percent"]
VolumePercentUnit = Literal["volume-percent"]
DurationUnit = Literal["s", "min", "h"]
RatioUnit = Literal["1", "percent"]


class Kind(Struct, frozen=True):
    """What a number measures.

    ``units`` are the callers' units; ``low`` and ``high`` the closed range of SI numbers that are credible at all
    (a field may be narrower); ``metric`` and ``us`` the unit an answer uses in either system.
    """

    name: str
    si: str
    units: tuple[str, ...]
    low: float
    high: float
    metric: str
    us: str


def _kind(name: str, si: str, unit: object, low: float, high: float, metric: str = "", us: str = "") -> Kind:
    units = get_args(unit)
    return Kind(name, si, units, low, high, metric or units[0], us or units[-1])


LENGTH = _kind("length", "m", LengthUnit, -1e5, 1e5, "m", "ft")
AREA = _kind("area", "m2", AreaUnit, 0, 1e6)
VOLUME = _kind("volume", "m3", VolumeUnit, -1e5, 1e5, "L", "gal_us")
NOMINAL_VOLUME = _kind("nominal volume", "m3", VolumeUnit, 0, 1e5, "L", "gal_us")
ACCEPTANCE_VOLUME = _kind("acceptance volume", "m3", VolumeUnit, 0, 1e5, "L", "gal_us")
CONTENT_PER_LENGTH = _kind("content per length", "m2", ContentPerLengthUnit, 0, 10)
ABSOLUTE_PRESSURE = _kind("absolute pressure", "Pa", PressureUnit, 0, 1e8, "bara", "psia")
GAUGE_PRESSURE = _kind("gauge pressure", "Pa", PressureUnit, -2e5, 1e8, "barg", "psig")
PRESSURE_DIFFERENCE = _kind("pressure difference", "Pa", PressureDifferenceUnit, -1e8, 1e8, "bar", "psi")
TEMPERATURE = _kind("temperature", "K", TemperatureUnit, 0, 1000, "degC", "degF")
TEMPERATURE_DIFFERENCE = _kind("temperature difference", "K", TemperatureDifferenceUnit, -1000, 1000)
IRRADIANCE = _kind("irradiance", "W/m2", IrradianceUnit, 0, 1e4)
HEAT_LOSS_COEFFICIENT = _kind("heat loss coefficient", "W/m2K", HeatLossCoefficientUnit, 0, 1e4)
QUADRATIC_HEAT_LOSS_COEFFICIENT = _kind(
    "quadratic heat loss coefficient", "W/m2K2", QuadraticHeatLossCoefficientUnit, 0, 1e3
)
CONDUCTIVITY = _kind("conductivity", "W/mK", ConductivityUnit, 0, 1e3)
LINEAR_HEAT_LOSS = _kind("heat loss per length", "W/m", LinearHeatLossUnit, -1e6, 1e6)
LINEAR_CONDUCTANCE = _kind("heat loss per length and kelvin", "W/mK", LinearConductanceUnit, 0, 1e4)
POWER = _kind("power", "W", PowerUnit, -1e9, 1e9, "W", "BTU/h")
MASS = _kind("mass", "kg", MassUnit, -1e8, 1e8)
DENSITY = _kind("density", "kg/m3", DensityUnit, 0, 1e4)
SPECIFIC_ENTHALPY = _kind("specific enthalpy", "J/kg", SpecificEnthalpyUnit, -1e8, 1e8)
SPECIFIC_HEAT = _kind("specific heat", "J/kgK", SpecificHeatUnit, 0, 1e5)
VISCOSITY = _kind("viscosity", "Pas", ViscosityUnit, 0, 1e3)
MASS_FRACTION = _kind("mass fraction", "1", MassPercentUnit, 0, 1)
VOLUME_FRACTION = _kind("volume fraction", "1", VolumePercentUnit, 0, 1)
RATIO = _kind("ratio", "1", RatioUnit, -1e6, 1e6, "1", "1")
DURATION = _kind("duration", "s", DurationUnit, 0, 1e9, "min", "min")
EXPANSION_COEFFICIENT = _kind("relative expansion", "1", RatioUnit, -1, 10, "1", "1")
MOLAR_MASS = Kind("molar mass", "kg/mol", (), 0, 10, "", "")

KIND_OF: dict[object, Kind] = {
    Length: LENGTH,
    Area: AREA,
    Volume: VOLUME,
    NominalVolume: NOMINAL_VOLUME,
    AcceptanceVolume: ACCEPTANCE_VOLUME,
    ContentPerLength: CONTENT_PER_LENGTH,
    AbsolutePressure: ABSOLUTE_PRESSURE,
    GaugePressure: GAUGE_PRESSURE,
    PressureDifference: PRESSURE_DIFFERENCE,
    Temperature: TEMPERATURE,
    TemperatureDifference: TEMPERATURE_DIFFERENCE,
    Irradiance: IRRADIANCE,
    HeatLossCoefficient: HEAT_LOSS_COEFFICIENT,
    QuadraticHeatLossCoefficient: QUADRATIC_HEAT_LOSS_COEFFICIENT,
    Conductivity: CONDUCTIVITY,
    LinearHeatLoss: LINEAR_HEAT_LOSS,
    LinearConductance: LINEAR_CONDUCTANCE,
    Power: POWER,
    Mass: MASS,
    Density: DENSITY,
    SpecificEnthalpy: SPECIFIC_ENTHALPY,
    SpecificHeat: SPECIFIC_HEAT,
    Viscosity: VISCOSITY,
    MassFraction: MASS_FRACTION,
    VolumeFraction: VOLUME_FRACTION,
    Ratio: RATIO,
    Duration: DURATION,
    ExpansionCoefficient: EXPANSION_COEFFICIENT,
    MolarMass: MOLAR_MASS,
}

KINDS: tuple[Kind, ...] = tuple(dict.fromkeys(KIND_OF.values()))
