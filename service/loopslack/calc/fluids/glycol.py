"""Water with propylene or ethylene glycol as a fluid of the calculation, specialised for one strength.

The law of the mixture is collapsed once: the specific volume to one polynomial, the activities to two
constants.
"""

from loopslack.calc.fluids.base import (
    BOILING_HIGHEST,
    BOILING_LOWEST,
    ROUNDING,
    Fluid,
    Vapour,
    refuse_temperature,
)
from loopslack.calc.fluids.boiling import inside, start_at, start_of
from loopslack.kernel.errors import OutOfRange
from loopslack.kernel.kinds import Coefficients, Density, MassFraction, MolarMass, Temperature
from loopslack.library.fluids import GlycolKind, glycol_data, water_data
from loopslack.physics import mixture, mixture_vapour, water
from loopslack.physics.mixture import HALF_SPAN, MIDDLE

STRENGTH_HIGHEST = 0.63
"""Mass fraction to which density and boiling were fitted: 60 % by volume of either glycol lies below it."""

FREEZING_STRENGTH_HIGHEST = 0.60
"""Mass fraction at which the published freezing curves end."""

_LIQUID_LOWEST = 233.15
_LIQUID_HIGHEST = 473.15
_VISCOSITY_HIGHEST = 398.15
_TWENTY_DEGREES = 293.15


def pure_density_at_20(kind: GlycolKind) -> float:
    """Density in kg/m3 of the pure glycol at 20 degC: the glycol of a strength by volume."""
    x = (_TWENTY_DEGREES - MIDDLE) / HALF_SPAN
    return 1000.0 / mixture.polynomial(glycol_data(kind).specific_volume, x)


def warmer_freezing_point(kind: GlycolKind, mass_fraction: float) -> float:
    """Freezing point in K, the warmer of the pure and the inhibited curve; the strength at most 0.60."""
    data, strength = glycol_data(kind), MassFraction(mass_fraction)
    pure = mixture.freezing_point(strength, data.freezing_pure)
    return max(pure, mixture.freezing_point(strength, data.freezing_inhibited))


class Glycol(Fluid):
    """Glycol and water at one strength, liquid from freezing or -40 degC to 200 degC. See ``Fluid``."""

    __slots__ = ("_activity", "_antoine", "_data", "_molar_mass", "_start", "_volume")

    def __init__(self, kind: GlycolKind, mass_fraction: float) -> None:
        if not 0.0 < mass_fraction <= STRENGTH_HIGHEST:
            raise OutOfRange(
                f"The strength is {100 * mass_fraction:.5g} % by mass; {kind} is known up to "
                f"{100 * STRENGTH_HIGHEST:g} %.",
                remedy="State a weaker mixture.",
                facts={
                    "number": mass_fraction,
                    "low": 0.0,
                    "high": STRENGTH_HIGHEST,
                    "rule": f"strength of {kind}",
                },
            )
        data = self._data = glycol_data(kind)
        self.kind = kind
        self.mass_fraction = mass_fraction
        self.volume_fraction = mixture.volume_fraction_of(
            MassFraction(mass_fraction), Density(pure_density_at_20(kind)), water_data().density_at_20
        )
        self.name = f"{100 * mass_fraction:.4g} % {kind.replace('-', ' ')} by mass"
        self._freezing_and_range(kind)
        volume = mixture.volume_polynomial(
            mass_fraction, water_data().specific_volume, data.specific_volume, data.excess_volume
        )
        # In m3/kg and ready for Horner's scheme.
        self._volume = tuple(0.001 * coefficient for coefficient in volume)
        self._molar_mass = data.molar_mass
        self._activity = mixture_vapour.activities(mass_fraction, data.molar_mass, data.margules)
        self.water_activity, self.glycol_activity = self._activity
        a, b, c = data.antoine
        self._antoine = (a, b, c)
        self._start = start_of(self._bubble)
        self.lowest_pressure = self._bubble(BOILING_LOWEST)
        self.highest_pressure = self._bubble(BOILING_HIGHEST)

    def density(self, temperature: float) -> float:
        """See ``Fluid``."""
        if not self._liquid_low <= temperature <= self._liquid_high:
            self.refuse_liquid(temperature)
        x = (temperature - MIDDLE) / HALF_SPAN
        a, b, c, d, e, f, g = self._volume
        return 1.0 / (a + x * (b + x * (c + x * (d + x * (e + x * (f + x * g))))))

    def saturated(self, temperature: float) -> tuple[float, float]:
        """See ``Fluid``."""
        if not self._boiling_low <= temperature <= self._boiling_high:
            self.refuse_boiling(temperature)
        return mixture_vapour.saturated(
            Temperature(temperature), self._activity, self._antoine, self._molar_mass
        )

    def bubble_pressure(self, temperature: float) -> float:
        """See ``Fluid``."""
        if not self._boiling_low <= temperature <= self._boiling_high:
            self.refuse_boiling(temperature)
        return self._bubble(temperature)

    def boiling_about(self, pressure: float) -> float:
        """See ``Fluid``."""
        return inside(start_at(self._start, pressure))

    def boiling_temperature(self, pressure: float) -> float:
        """See ``Fluid``."""
        if not self.lowest_pressure <= pressure <= self.highest_pressure:
            self.refuse_pressure(pressure)
        start = Temperature(start_at(self._start, pressure))
        bubble, slope = mixture_vapour.bubble_slope(start, self._activity, self._antoine)
        return inside(start + (pressure - bubble) / slope)

    def vapour(self, temperature: float) -> Vapour:
        """See ``Fluid``."""
        pressure, density = self.saturated(temperature)
        at, molar_mass = Temperature(temperature), MolarMass(self._molar_mass)
        glycol = mixture_vapour.partial_pressures(at, self._activity, self._antoine)[1]
        share = glycol / pressure
        by_mass = mixture_vapour.mass_fraction_of_vapour(share, molar_mass)
        of_glycol = mixture_vapour.glycol_latent_heat(at, molar_mass, Coefficients(self._antoine))
        return Vapour(
            pressure=pressure,
            density=density,
            latent_heat=(1.0 - by_mass) * water.latent_heat(at) + by_mass * of_glycol,
            glycol_mole_fraction=share,
            glycol_mass_fraction=by_mass,
        )

    def heat_capacity(self, temperature: float) -> float:
        """See ``Fluid``."""
        if not self._liquid_low <= temperature <= self._liquid_high:
            self.refuse_liquid(temperature, "heat capacity")
        return mixture.heat_capacity(
            Temperature(temperature),
            MassFraction(self.mass_fraction),
            water_data().heat_capacity,
            self._data.heat_capacity,
        )

    def viscosity(self, temperature: float) -> float:
        """See ``Fluid``."""
        if not self._liquid_low <= temperature <= _VISCOSITY_HIGHEST + ROUNDING:
            refuse_temperature(
                f"viscosity of {self.name}",
                temperature,
                self.lowest,
                _VISCOSITY_HIGHEST,
                "Ask for the viscosity within that range.",
            )
        return mixture.viscosity(
            Temperature(temperature),
            MassFraction(self.mass_fraction),
            water_data().viscosity,
            self._data.viscosity,
        )

    def ice_fraction(self, temperature: float) -> float:
        """Mass fraction of ice; refused colder than the freezing point of 60 %, where the curves end."""
        if temperature >= self.freezing_point - ROUNDING:
            return 0.0
        kind = self.glycol_kind
        coldest = warmer_freezing_point(kind, FREEZING_STRENGTH_HIGHEST)
        if self.freezing_is_bound or not temperature >= coldest - ROUNDING:
            refuse_temperature(
                f"the ice fraction of {kind.replace('-', ' ')}",
                temperature,
                coldest,
                self.freezing_point,
                "Nothing is known about this much ice.",
            )
        return mixture.ice_share(self.mass_fraction, strength_freezing_at(kind, temperature))

    @property
    def glycol_kind(self) -> GlycolKind:
        """Which glycol."""
        return "propylene-glycol" if self.kind == "propylene-glycol" else "ethylene-glycol"

    def _bubble(self, temperature: float) -> float:
        return mixture_vapour.partial_pressures(Temperature(temperature), self._activity, self._antoine)[0]

    def _freezing_and_range(self, kind: GlycolKind) -> None:
        self.freezing_is_bound = self.mass_fraction > FREEZING_STRENGTH_HIGHEST
        known = min(self.mass_fraction, FREEZING_STRENGTH_HIGHEST)
        self.freezing_point = warmer_freezing_point(kind, known)
        lowest = max(_LIQUID_LOWEST, self.freezing_point)
        self._bound((lowest, _LIQUID_HIGHEST), (BOILING_LOWEST, BOILING_HIGHEST))


def strength_freezing_at(kind: GlycolKind, temperature: float) -> float:
    """Lowest mass fraction whose warmer freezing curve lies at or below a temperature of its range.

    By halving, since the warmer of two falling curves has a kink; the result is on the safe side of the root.
    """
    weak, strong = 0.0, FREEZING_STRENGTH_HIGHEST
    for _ in range(40):
        middle = 0.5 * (weak + strong)
        if warmer_freezing_point(kind, middle) > temperature:
            weak = middle
        else:
            strong = middle
    return strong
