"""Reads the published fluid values and answers each with what the service computes."""

import tomllib
from collections.abc import Callable
from pathlib import Path

from msgspec import Struct, convert

from loopslack.calc.fluids.making import Fluid, GlycolKind, glycol, water
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
    """What the service says, in the unit of the check. KeyError for a property nobody knows."""
    return _COMPUTED[check.property](check, ZERO + (check.temperature or 0.0))


def _kind(check: Check) -> GlycolKind:
    return "propylene-glycol" if check.fluid == "propylene-glycol" else "ethylene-glycol"


_COMPUTED: dict[str, Callable[[Check, float], float]] = {
    "bubble-pressure-law": lambda _, at: water_law.saturation_pressure(at),
    "vapour-density-law": lambda _, at: water_law.vapour_density(at),
    "latent-heat-law": lambda _, at: water_law.latent_heat(at),
    "saturation-slope": lambda _, at: water_law.saturation_slope(at),
    "density": lambda check, at: fluid_of(check).density(at),
    "density-ratio": lambda check, at: fluid_of(check).density(at) / fluid_of(check).density(ZERO + 20.0),
    "bubble-pressure": lambda check, at: fluid_of(check).bubble_pressure(at),
    "boiling-temperature": lambda check, _: fluid_of(check).boiling_temperature(check.pressure) - ZERO,
    "vapour-density": lambda check, at: fluid_of(check).saturated(at)[1],
    "latent-heat": lambda check, at: fluid_of(check).latent_heat(at),
    "heat-capacity": lambda check, at: fluid_of(check).heat_capacity(at),
    "freezing-pure": lambda check, _: _freezing(check, glycol_data(_kind(check)).freezing_pure),
    "freezing-inhibited": lambda check, _: _freezing(check, glycol_data(_kind(check)).freezing_inhibited),
}


def _freezing(check: Check, curve: tuple[float, ...]) -> float:
    return mixture.freezing_point(check.strength, curve) - ZERO
