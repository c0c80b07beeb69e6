"""The fluids that ship with the service: coefficients, ranges, uncertainties and where the numbers come from.

Reads ``data/fluids.toml`` once. No law is evaluated here: the laws are in the physics, the choice of a fluid
and the refusals in the calculation.
"""

import tomllib
from functools import cache
from importlib.resources import files
from typing import Literal

from msgspec import Struct, convert

from loopslack.kernel.citations import Cite
from loopslack.kernel.kinds import Coefficients, Density, MolarMass

GlycolKind = Literal["propylene-glycol", "ethylene-glycol"]


class WaterData(Struct, frozen=True, kw_only=True, forbid_unknown_fields=True):
    """The fitted numbers of the water end of a mixture."""

    title: str
    specific_volume: Coefficients
    heat_capacity: Coefficients
    viscosity: Coefficients
    density_at_20: Density


class GlycolData(Struct, frozen=True, kw_only=True, forbid_unknown_fields=True):
    """The fitted numbers of one glycol and of its mixtures with water."""

    title: str
    molar_mass: MolarMass
    specific_volume: Coefficients
    excess_volume: Coefficients
    antoine: Coefficients
    margules: Coefficients
    freezing_pure: Coefficients
    freezing_inhibited: Coefficients
    heat_capacity: Coefficients
    viscosity: Coefficients


class Uncertainty(Struct, frozen=True, kw_only=True, forbid_unknown_fields=True):
    """Uncertainty (k = 2) up to a temperature in K: ``relative``, or ``kelvin`` for a temperature."""

    up_to: float
    relative: float | None = None
    kelvin: float | None = None


class PropertyData(Struct, frozen=True, kw_only=True, forbid_unknown_fields=True):
    """What is known of one property of one or more fluids; temperatures in K, strengths by mass."""

    name: str
    fluids: tuple[str, ...]
    form: str
    lowest: float | None = None
    highest: float | None = None
    strength_highest: float
    uncertainty: tuple[Uncertainty, ...]
    source: Cite
    note: str = ""


class Publication(Struct, frozen=True, kw_only=True, forbid_unknown_fields=True):
    """A publication whose measurements or equations stand behind the coefficients."""

    key: str
    title: str
    doi: str = ""
    used_for: str
    seen: str


class FluidEntry(Struct, frozen=True, kw_only=True):
    """One fluid as the reference data lists it."""

    id: str
    title: str
    strength_highest: float
    properties: tuple[PropertyData, ...]


class _File(Struct, frozen=True, forbid_unknown_fields=True, rename="kebab"):
    water: WaterData
    propylene_glycol: GlycolData
    ethylene_glycol: GlycolData
    property: tuple[PropertyData, ...]
    publication: tuple[Publication, ...]


@cache
def _file() -> _File:
    text = (files(__package__) / "data" / "fluids.toml").read_text(encoding="utf-8")
    return convert(tomllib.loads(text), _File)


def water_data() -> WaterData:
    """Coefficients of water as one end of a mixture."""
    return _file().water


def glycol_data(kind: GlycolKind) -> GlycolData:
    """Coefficients of a glycol."""
    return _file().propylene_glycol if kind == "propylene-glycol" else _file().ethylene_glycol


def publications() -> tuple[Publication, ...]:
    """The publications behind the coefficients and the check values."""
    return _file().publication


def fluids() -> tuple[FluidEntry, ...]:
    """Every fluid that ships with the service, for the reference data."""
    titles = {
        "water": _file().water.title,
        "propylene-glycol": _file().propylene_glycol.title,
        "ethylene-glycol": _file().ethylene_glycol.title,
    }
    return tuple(
        FluidEntry(
            id=key,
            title=title,
            strength_highest=max(entry.strength_highest for entry in _file().property if key in entry.fluids),
            properties=tuple(entry for entry in _file().property if key in entry.fluids),
        )
        for key, title in titles.items()
    )
