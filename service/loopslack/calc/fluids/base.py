"""What every fluid can answer, and how it refuses. Front door and constructors: ``making``.

A fluid is made once for one strength and then asked thousands of times by a solver, so its methods take and
give plain SI floats. No law is written here.
"""

from abc import ABC, abstractmethod
from typing import Literal, NoReturn

from msgspec import Struct

from loopslack.kernel.errors import OutOfRange

FluidKind = Literal["water", "propylene-glycol", "ethylene-glycol", "own"]

BOILING_LOWEST = 278.15
BOILING_HIGHEST = 485.15
ZERO_CELSIUS = 273.15

FLUID = "/fluid"
"""Where every question states its fluid."""

ROUNDING = 1e-9
"""Kelvin by which a temperature may miss a limit: -40 degC, converted, is 233.14999999999998 K."""


class Vapour(Struct, frozen=True, kw_only=True):
    """Vapour in equilibrium with the liquid at its bubble point; Pa, kg/m3, J per kg of vapour formed."""

    pressure: float
    density: float
    latent_heat: float
    glycol_mole_fraction: float
    glycol_mass_fraction: float


class Fluid(ABC):
    """A liquid of one strength, its boiling and its freezing.

    ``mass_fraction`` and ``volume_fraction`` (unmixed, at 20 degC) are those of the glycol, nought for water
    and for a caller's own fluid by table. ``lowest`` to ``highest`` bound the liquid, ``boiling_lowest`` to
    ``boiling_highest`` everything that concerns boiling, all in K; ``lowest_pressure`` and
    ``highest_pressure`` (Pa absolute) are the bubble pressures there. ``freezing_point`` is that of the first
    crystals; ``freezing_is_bound`` says that it is known only to lie at or below. ``water_activity`` and
    ``glycol_activity`` are those of the liquid. Outside a range every method raises ``OutOfRange``; none
    clamps.
    """

    __slots__ = (
        "_boiling_high",
        "_boiling_low",
        "_liquid_high",
        "_liquid_low",
        "boiling_highest",
        "boiling_lowest",
        "freezing_is_bound",
        "freezing_point",
        "glycol_activity",
        "highest",
        "highest_pressure",
        "kind",
        "lowest",
        "lowest_pressure",
        "mass_fraction",
        "name",
        "volume_fraction",
        "water_activity",
    )

    kind: FluidKind
    name: str
    mass_fraction: float
    volume_fraction: float
    freezing_point: float
    freezing_is_bound: bool
    lowest: float
    highest: float
    boiling_lowest: float
    boiling_highest: float
    lowest_pressure: float
    highest_pressure: float
    water_activity: float
    glycol_activity: float
    _liquid_low: float
    _liquid_high: float
    _boiling_low: float
    _boiling_high: float

    def _bound(self, liquid: tuple[float, float], boiling: tuple[float, float]) -> None:
        """Set the ranges, as stated and with room for rounding, so that a check is one comparison."""
        (self.lowest, self.highest), (self.boiling_lowest, self.boiling_highest) = liquid, boiling
        self._liquid_low, self._liquid_high = self.lowest - ROUNDING, self.highest + ROUNDING
        self._boiling_low, self._boiling_high = boiling[0] - ROUNDING, boiling[1] + ROUNDING

    @abstractmethod
    def density(self, temperature: float) -> float:
        """Density of the liquid, kg/m3."""

    @abstractmethod
    def saturated(self, temperature: float) -> tuple[float, float]:
        """Bubble pressure (Pa absolute) and density of the vapour (kg/m3), in one call for solvers."""

    @abstractmethod
    def boiling_temperature(self, pressure: float) -> float:
        """Temperature in K at which the liquid starts to boil under an absolute pressure in Pa."""

    @abstractmethod
    def vapour(self, temperature: float) -> Vapour:
        """The vapour over the boiling liquid."""

    @abstractmethod
    def heat_capacity(self, temperature: float) -> float:
        """Heat capacity of the liquid, J/(kg K)."""

    @abstractmethod
    def viscosity(self, temperature: float) -> float:
        """Dynamic viscosity of the liquid, Pa s; for information."""

    @abstractmethod
    def ice_fraction(self, temperature: float) -> float:
        """Mass fraction of ice, nought at and above the freezing point; no promise about bursting."""

    def bubble_pressure(self, temperature: float) -> float:
        """Absolute pressure in Pa below which the liquid boils."""
        return self.saturated(temperature)[0]

    def boiling_about(self, pressure: float) -> float:
        """See ``boiling_temperature``, to some hundredths of a kelvin: where a search starts."""
        return self.boiling_temperature(pressure)

    def latent_heat(self, temperature: float) -> float:
        """Heat in J that forms a kilogram of vapour from the boiling liquid."""
        return self.vapour(temperature).latent_heat

    def expansion(self, cold: float, hot: float) -> float:
        """Growth of the volume from a cold to a hot temperature (K), as a share of the cold volume."""
        return self.density(cold) / self.density(hot) - 1.0

    def place_of(self, subject: str) -> str:  # noqa: ARG002 - a fluid by tables has one for each subject
        """Where a question states the data of a subject: a pointer, as that of an error."""
        return FLUID

    def refuse_liquid(self, temperature: float, subject: str = "density") -> NoReturn:
        """Refuse a temperature outside the liquid range."""
        remedy = "Keep the liquid within that range"
        if temperature < self.lowest == self.freezing_point:
            remedy += (
                "; below it the liquid freezes. Choose a stronger mixture or a higher lowest temperature"
            )
        rule, place = f"{subject} of {self.name}", self.place_of(subject)
        refuse_temperature(rule, temperature, self.lowest, self.highest, remedy + ".", place)

    def refuse_boiling(self, temperature: float) -> NoReturn:
        """Refuse a temperature outside the range of the boiling data."""
        refuse_temperature(
            f"boiling of {self.name}",
            temperature,
            self.boiling_lowest,
            self.boiling_highest,
            "Lower the pressure, or the temperature, at which the liquid would boil.",
            self.place_of("boiling"),
        )

    def refuse_pressure(self, pressure: float) -> NoReturn:
        """Refuse a pressure under which the boiling temperature is not known."""
        low, high = self.lowest_pressure, self.highest_pressure
        raise OutOfRange(
            f"The absolute pressure is {pressure / 1e5:.6g} bar; boiling of {self.name} is known from "
            f"{low / 1e5:.6g} to {high / 1e5:.6g} bar.",
            remedy="Bring the pressure into that range.",
            pointer=self.place_of("boiling"),
            facts={"number": pressure, "low": low, "high": high, "rule": f"boiling of {self.name}"},
        )


def refuse_temperature(
    rule: str, temperature: float, low: float, high: float, remedy: str, pointer: str = FLUID
) -> NoReturn:
    """Refuse a temperature in K, told in degC."""
    raise OutOfRange(
        f"The temperature is {celsius(temperature)} degC; {rule} is known from {celsius(low)} to "
        f"{celsius(high)} degC.",
        remedy=remedy,
        pointer=pointer,
        facts={"number": temperature, "low": low, "high": high, "rule": rule},
    )


def celsius(temperature: float) -> str:
    """A temperature for a message, in degC with five digits."""
    return f"{temperature - ZERO_CELSIUS:.5g}"
