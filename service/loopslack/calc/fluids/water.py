"""Water as a fluid of the calculation."""

from typing import NoReturn

from loopslack.calc.fluids.base import (
    BOILING_HIGHEST,
    BOILING_LOWEST,
    ROUNDING,
    ZERO_CELSIUS,
    Fluid,
    Vapour,
    refuse_temperature,
)
from loopslack.calc.fluids.boiling import inside, start_at, start_of
from loopslack.kernel.kinds import MassFraction, Temperature
from loopslack.library.fluids import glycol_data, water_data
from loopslack.physics import mixture
from loopslack.physics import water as law

LIQUID_HIGHEST = 488.15
HEAT_CAPACITY_HIGHEST = 473.15
VISCOSITY_HIGHEST = 398.15


class Water(Fluid):
    """Water without additives, liquid from 0 to 215 degC. See ``Fluid``."""

    __slots__ = ("_start",)

    def __init__(self) -> None:
        self.kind, self.name = "water", "water"
        self.mass_fraction = self.volume_fraction = self.glycol_activity = 0.0
        self.water_activity = 1.0
        self.freezing_point = ZERO_CELSIUS
        self.freezing_is_bound = False
        self._bound((ZERO_CELSIUS, LIQUID_HIGHEST), (BOILING_LOWEST, BOILING_HIGHEST))
        self._start = start_of(lambda temperature: law.saturation_pressure(Temperature(temperature)))
        self.lowest_pressure = law.saturation_pressure(Temperature(BOILING_LOWEST))
        self.highest_pressure = law.saturation_pressure(Temperature(BOILING_HIGHEST))

    def density(self, temperature: float) -> float:
        """See ``Fluid``."""
        if not self._liquid_low <= temperature <= self._liquid_high:
            self.refuse_liquid(temperature)
        return law.liquid_density(Temperature(temperature))

    def saturated(self, temperature: float) -> tuple[float, float]:
        """See ``Fluid``."""
        if not self._boiling_low <= temperature <= self._boiling_high:
            self.refuse_boiling(temperature)
        at = Temperature(temperature)
        return law.saturation_pressure(at), law.vapour_density(at)

    def bubble_pressure(self, temperature: float) -> float:
        """See ``Fluid``."""
        if not self._boiling_low <= temperature <= self._boiling_high:
            self.refuse_boiling(temperature)
        return law.saturation_pressure(Temperature(temperature))

    def boiling_about(self, pressure: float) -> float:
        """See ``Fluid``."""
        return inside(start_at(self._start, pressure))

    def boiling_temperature(self, pressure: float) -> float:
        """See ``Fluid``."""
        if not self.lowest_pressure <= pressure <= self.highest_pressure:
            self.refuse_pressure(pressure)
        start = Temperature(start_at(self._start, pressure))
        steam = law.saturation_pressure(start)
        return inside(start + (pressure - steam) / law.saturation_rise(start, steam))

    def vapour(self, temperature: float) -> Vapour:
        """See ``Fluid``."""
        pressure, density = self.saturated(temperature)
        return Vapour(
            pressure=pressure,
            density=density,
            latent_heat=law.latent_heat(Temperature(temperature)),
            glycol_mole_fraction=0.0,
            glycol_mass_fraction=0.0,
        )

    def heat_capacity(self, temperature: float) -> float:
        """See ``Fluid``."""
        if not self._liquid_low <= temperature <= HEAT_CAPACITY_HIGHEST + ROUNDING:
            self._refuse("heat capacity", temperature, HEAT_CAPACITY_HIGHEST)
        # At a strength of nought the glycol's coefficients drop out of the law, whichever glycol lends them.
        mixing = glycol_data("propylene-glycol").heat_capacity
        return mixture.heat_capacity(
            Temperature(temperature), MassFraction(0.0), water_data().heat_capacity, mixing
        )

    def viscosity(self, temperature: float) -> float:
        """See ``Fluid``."""
        if not self._liquid_low <= temperature <= VISCOSITY_HIGHEST + ROUNDING:
            self._refuse("viscosity", temperature, VISCOSITY_HIGHEST)
        mixing = glycol_data("propylene-glycol").viscosity
        return mixture.viscosity(Temperature(temperature), MassFraction(0.0), water_data().viscosity, mixing)

    def ice_fraction(self, temperature: float) -> float:
        """See ``Fluid``."""
        return 0.0 if temperature >= self.freezing_point - ROUNDING else 1.0

    def _refuse(self, subject: str, temperature: float, highest: float) -> NoReturn:
        refuse_temperature(
            f"{subject} of water", temperature, self.lowest, highest, "Keep the liquid within that range."
        )
