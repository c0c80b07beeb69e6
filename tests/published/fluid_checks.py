"""Reads the published fluid values and answers each with what the service computes. Holds no number of its own."""

import tomllib
from pathlib import Path

from msgspec import Struct, convert

from loopslack.calc.fluid import Fluid, GlycolKind, glycol, water
from loopslack.library.fluids import glycol_data
from loopslack.physics import mixture
from loopslack.physics import water as water_law

ZERO = 273.15


class Check(Struct, frozen=True, kw_only=True, forbid_unknown_fields=True):
    """One published value; degC, Pa, SI."""

    property: str
    fluid: str
    temperature: float | None = None
    pressure: float | None = None
    strength: float = 0.0
    expected: float
    within: float
    source: str
    seen: str

    def __str__(self) -> str:
        at = f"{self.temperature} degC, {self.pressure} Pa"
        return f"{self.property} of {self.strength:g} {self.fluid} at {at}"


def checks() -> list[Check]:
    """Every published value of the file."""
    text = (Path(__file__).parent / "fluids.toml").read_text(encoding="utf-8")
    return convert(tomllib.loads(text)["check"], list[Check])


def fluid_of(check: Check) -> Fluid:
    """The fluid a check is about."""
    return water() if check.fluid == "water" else glycol(_kind(check), check.strength)


def computed(check: Check) -> float:
    """What the service says, in the unit of the check."""
    at = ZERO + (check.temperature or 0.0)
    match check.property:
        case "bubble-pressure-law":
            return water_law.saturation_pressure(at)
        case "vapour-density-law":
            return water_law.vapour_density(at)
        case "latent-heat-law":
            return water_law.latent_heat(at)
        case "saturation-slope":
            return water_law.saturation_slope(at)
        case "density":
            return fluid_of(check).density(at)
        case "density-ratio":
            return fluid_of(check).density(at) / fluid_of(check).density(ZERO + 20.0)
        case "bubble-pressure":
            return fluid_of(check).bubble_pressure(at)
        case "boiling-temperature":
            return fluid_of(check).boiling_temperature(check.pressure) - ZERO
        case "vapour-density":
            return fluid_of(check).saturated(at)[1]
        case "latent-heat":
            return fluid_of(check).latent_heat(at)
        case "heat-capacity":
            return fluid_of(check).heat_capacity(at)
        case "freezing-pure":
            return mixture.freezing_point(check.strength, glycol_data(_kind(check)).freezing_pure) - ZERO
        case "freezing-inhibited":
            return mixture.freezing_point(check.strength, glycol_data(_kind(check)).freezing_inhibited) - ZERO
    raise ValueError(f"no such property: {check.property}")


def _kind(check: Check) -> GlycolKind:
    return "propylene-glycol" if check.fluid == "propylene-glycol" else "ethylene-glycol"
