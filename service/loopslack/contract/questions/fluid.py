"""How a caller names the fluid."""

from math import ceil
from typing import Annotated, Literal, get_args

from msgspec import Meta

from loopslack.calc.fluids.base import ZERO_CELSIUS
from loopslack.calc.fluids.making import coldest_protection
from loopslack.contract.quantity import (
    Density,
    MassPercent,
    Pressure,
    SpecificHeat,
    Temperature,
    VolumePercent,
)
from loopslack.contract.questions.collectors import Label, QuestionPart
from loopslack.contract.questions.fields import quantity, text

Glycol = Literal["propylene-glycol", "ethylene-glycol"]


class ByMass(QuestionPart, frozen=True, kw_only=True, tag_field="kind", tag="by-mass"):
    """Glycol by its share of the mass."""

    share: Annotated[MassPercent, quantity("Mass of glycol in the mixture.", 42.9, "mass-percent", 1, 60)]


class ByVolume(QuestionPart, frozen=True, kw_only=True, tag_field="kind", tag="by-volume"):
    """Glycol by its share of the volume, the liquids measured unmixed at 20 degC."""

    share: Annotated[VolumePercent, quantity("Volume of glycol mixed in.", 42, "volume-percent", 1, 60)]


_COLDEST = " and ".join(
    f"{ceil(10 * (coldest_protection(kind) - ZERO_CELSIUS)) / 10:g} degC with {kind.replace('-', ' ')}"
    for kind in get_args(Glycol)
)


class ProtectTo(QuestionPart, frozen=True, kw_only=True, tag_field="kind", tag="protect-to"):
    """As much glycol as keeps the mixture free of ice down to a temperature."""

    temperature: Annotated[
        Temperature,
        quantity(f"Temperature at which the first ice may form. Down to {_COLDEST}.", -25, "degC", -60, -1),
    ]


Concentration = ByMass | ByVolume | ProtectTo


class Water(QuestionPart, frozen=True, kw_only=True, tag_field="kind", tag="water"):
    """Pure water."""


class PropyleneGlycol(QuestionPart, frozen=True, kw_only=True, tag_field="kind", tag="propylene-glycol"):
    """Propylene glycol and water."""

    concentration: Annotated[Concentration, text("How much glycol.")]


class EthyleneGlycol(QuestionPart, frozen=True, kw_only=True, tag_field="kind", tag="ethylene-glycol"):
    """Ethylene glycol and water. Poisonous."""

    concentration: Annotated[Concentration, text("How much glycol.")]


class DensityPoint(QuestionPart, frozen=True, kw_only=True):
    """Density of the liquid at a temperature."""

    temperature: Annotated[Temperature, quantity("Temperature.", 20, "degC", -60, 250)]
    density: Annotated[Density, quantity("Density of the liquid.", 1036, "kg/m3", 500, 2000)]


class HeatCapacityPoint(QuestionPart, frozen=True, kw_only=True):
    """Heat capacity of the liquid at a temperature."""

    temperature: Annotated[Temperature, quantity("Temperature.", 90, "degC", -60, 250)]
    heat_capacity: Annotated[SpecificHeat, quantity("Specific heat of the liquid.", 3.8, "kJ/kgK", 1, 6)]


class BoilingPoint(QuestionPart, frozen=True, kw_only=True):
    """Pressure at which the liquid begins to boil at a temperature."""

    temperature: Annotated[Temperature, quantity("Temperature.", 140, "degC", 0, 250)]
    pressure: Annotated[Pressure, quantity("Pressure of the first bubble.", 3.2, "bara", 0.001, 60)]


class BoilingTable(QuestionPart, frozen=True, kw_only=True, tag_field="kind", tag="table"):
    """Boiling by a table of the fluid's own."""

    points: Annotated[
        list[BoilingPoint],
        Meta(
            min_length=3,
            max_length=100,
            description="In rising order of temperature; nothing is carried beyond them.",
        ),
    ]


class BoilingLike(QuestionPart, frozen=True, kw_only=True, tag_field="kind", tag="like"):
    """Boiling like a mixture of a known glycol."""

    glycol: Annotated[Glycol, text("The glycol.", "propylene-glycol")]
    share: Annotated[
        MassPercent, quantity("Mass of that glycol in the mixture it boils like.", 40, "mass-percent", 0, 60)
    ]


Boiling = BoilingTable | BoilingLike


class OwnFluid(QuestionPart, frozen=True, kw_only=True, tag_field="kind", tag="own"):
    """A fluid of the caller's own, by tables.

    They must cover every temperature the loop can reach as liquid.
    """

    name: Annotated[Label, text("What to call the fluid in answers.", "ready mix of our store")]
    points: Annotated[
        list[DensityPoint],
        Meta(min_length=3, max_length=100, description="Density, in rising order of temperature."),
    ]
    freezing_point: Annotated[Temperature, quantity("Temperature of the first ice.", -25, "degC", -60, 5)]
    boiling: Annotated[Boiling, text("How the fluid boils.")]
    heat_capacity: Annotated[
        Annotated[list[HeatCapacityPoint], Meta(min_length=3, max_length=100)] | None,
        text("Heat capacity, in rising order of temperature; only the course of a day needs it."),
    ] = None


Fluid = Water | PropyleneGlycol | EthyleneGlycol | OwnFluid
