"""Property tables of one fluid, cached, fast enough for the thousands of look-ups of a day.

Density on a grid of 2 K, everything of boiling on a grid in ln p. Beyond the range a fluid is known for, the
tables carry on smoothly where the fluid itself would refuse, since a dry absorber passes those states for a
moment; whoever marches must say so (``coldest`` and ``hottest``). No equation of a property lives here, only
its tabulation.
"""

from bisect import bisect_right
from collections.abc import Sequence
from functools import cache
from math import exp, log
from typing import NamedTuple

from loopslack.calc.fluids.glycol import Glycol
from loopslack.calc.fluids.making import Fluid
from loopslack.calc.fluids.own import OwnFluid
from loopslack.kernel.kinds import Coefficients, MolarMass, Temperature
from loopslack.library.fluids import glycol_data
from loopslack.physics import mixture_vapour, water

_COLDEST, _STEP, _POINTS = 233.15, 2.0, 171  # density: -40 to 300 degC
_LOW, _HIGH, _PRESSURES = log(700.0), log(80e5), 220
_WIDTH = (_HIGH - _LOW) / (_PRESSURES - 1)
_BOILING_STEP = 3.0
_STRONGEST = 0.98  # mass fraction; the Margules form is not asked for a liquid without water


class Residue(NamedTuple):
    """What the boiling of a stronger liquid needs: molar mass (kg/mol), Margules and Antoine constants."""

    molar_mass: MolarMass
    margules: Coefficients
    antoine: Coefficients


class FluidTables:
    """Tables of one fluid at one strength.

    ``heat_capacity`` (J/kgK) is one figure, at 90 degC. ``coldest`` and ``hottest`` (K) bound what is known
    of the liquid and its boiling together. ``residue`` is None where the fluid says nothing about other
    strengths; the liquid left in the collectors then boils like the filling.
    """

    __slots__ = (
        "_activity",
        "_boiling",
        "_density",
        "_latent",
        "_loop_water",
        "_vapour",
        "_water",
        "coldest",
        "heat_capacity",
        "hottest",
        "residue",
        "strength",
    )

    def __init__(self, fluid: Fluid) -> None:
        self.strength = fluid.mass_fraction
        self.residue = residue_of(fluid)
        self.heat_capacity = fluid.heat_capacity(363.15)
        self.coldest, self.hottest = fluid.lowest, min(fluid.highest, fluid.boiling_highest)
        self._density = _density_grid(fluid)
        self._boiling, self._vapour, self._latent = _boiling_grid(fluid)
        self._water = _water_grid()
        self._activity = self.activity(self.strength)
        # Boiling point of water at the pressure that the water of the filling exerts: the reference of every
        # shift.
        part, glycol = self._activity
        self._loop_water = [
            self._water_boiling((exp(_LOW + i * _WIDTH) - glycol * self.glycol_pressure(at)) / part)
            for i, at in enumerate(self._boiling)
        ]

    def density(self, temperature: float) -> float:
        """Density of the liquid, kg/m3; linear between points 2 K apart, held beyond the ends of the grid."""
        x = (temperature - _COLDEST) / _STEP
        i = int(x)
        if x < 0.0:
            return self._density[0]
        if i > _POINTS - 2:
            return self._density[-1]
        row = self._density
        return row[i] + (x - i) * (row[i + 1] - row[i])

    def saturation(self, pressure: float) -> tuple[float, float, float, float]:
        """Boiling point (K), vapour density and latent heat at Pa; reference of ``boiling_shift``."""
        x = (log(pressure) - _LOW) / _WIDTH if pressure > 700.0 else 0.0
        i = int(x)
        if i > _PRESSURES - 2:
            i, x = _PRESSURES - 2, _PRESSURES - 1.0
        f, j = x - i, i + 1
        boiling, vapour, latent, reference = self._boiling, self._vapour, self._latent, self._loop_water
        return (
            boiling[i] + f * (boiling[j] - boiling[i]),
            vapour[i] + f * (vapour[j] - vapour[i]),
            latent[i] + f * (latent[j] - latent[i]),
            reference[i] + f * (reference[j] - reference[i]),
        )

    def activity(self, strength: float) -> tuple[float, float]:
        """Activity of water and of glycol at a strength; they do not depend on temperature in this model."""
        if self.residue is None or strength <= 0:
            return 1.0, 0.0
        molar_mass, margules, _ = self.residue
        return mixture_vapour.activities(min(strength, _STRONGEST), molar_mass, margules)

    def glycol_pressure(self, temperature: float) -> float:
        """Vapour pressure of the pure glycol, Pa; 0 where there is none."""
        if self.residue is None:
            return 0.0
        return mixture_vapour.glycol_pressure(Temperature(temperature), self.residue.antoine)

    def boiling_shift(
        self, pressure: float, reference: float, activity: tuple[float, float], glycol_pressure: float
    ) -> float:
        """Kelvin by which a liquid of another strength boils above the filling, at the same pressure.

        Exact at loop strength. For mass fractions of 0.2 to 0.63 within 0.3 K of the full equation up to 3
        bar and 0.7 K at 8 bar, since the steam counts as ideal here; extrapolated beyond. ``reference`` comes
        from ``saturation``, ``glycol_pressure`` from the boiling point of a moment ago. Derived.
        """
        part, glycol = activity
        return (
            self._water_boiling(max(pressure - glycol * glycol_pressure, 0.02 * pressure) / part) - reference
        )

    @property
    def loop_activity(self) -> tuple[float, float]:
        """Activity of water and glycol at loop strength."""
        return self._activity

    def _water_boiling(self, pressure: float) -> float:
        x = (log(pressure) - _LOW) / _WIDTH if pressure > 700.0 else 0.0
        i = int(x)
        if i > _PRESSURES - 2:
            i, x = _PRESSURES - 2, _PRESSURES - 1.0
        return self._water[i] + (x - i) * (self._water[i + 1] - self._water[i])


_CACHE: dict[tuple[str, float], FluidTables] = {}
_CACHED = 128


def tables_of(fluid: Fluid) -> FluidTables:
    """Tables of a fluid; those of the fluids that ship with the service are kept, a caller's own are not."""
    if fluid.kind == "own":
        return FluidTables(fluid)
    key = (fluid.kind, fluid.mass_fraction)
    found = _CACHE.get(key)
    if found is None:
        if len(_CACHE) >= _CACHED:
            _CACHE.clear()
        found = _CACHE[key] = FluidTables(fluid)
    return found


def residue_of(fluid: Fluid) -> Residue | None:
    """Return what is known of the fluid's boiling at other strengths; None for water and for a mere table."""
    known = fluid.like if isinstance(fluid, OwnFluid) else fluid
    if not isinstance(known, Glycol):
        return None
    data = glycol_data(known.glycol_kind)
    return Residue(data.molar_mass, data.margules, data.antoine)


def _density_grid(fluid: Fluid) -> list[float]:
    """Density every 2 K; beyond the range of the fluid straight on with the slope at its end."""
    low, high = fluid.lowest, fluid.highest
    at_low, at_high = fluid.density(low), fluid.density(high)
    low_slope = (fluid.density(low + 1.0) - at_low) / 1.0
    high_slope = (at_high - fluid.density(high - 1.0)) / 1.0
    grid = []
    for i in range(_POINTS):
        at = _COLDEST + i * _STEP
        if at < low:
            grid.append(at_low + low_slope * (at - low))
        elif at > high:
            grid.append(at_high + high_slope * (at - high))
        else:
            grid.append(fluid.density(at))
    return grid


def _boiling_grid(fluid: Fluid) -> tuple[list[float], list[float], list[float]]:
    """Boiling point, vapour density and latent heat on the pressure grid, from points 3 K apart.

    Between points 1/T and the logarithm of the vapour density run straight in ln p (Clausius-Clapeyron): 2e-3
    K and 2e-4. Beyond the range they run straight on.
    """
    low, high = fluid.boiling_lowest, fluid.boiling_highest
    count = max(2, int((high - low) / _BOILING_STEP) + 1)
    temperatures = [low + (high - low) * i / (count - 1) for i in range(count)]
    states = [fluid.vapour(at) for at in temperatures]
    logs = [log(state.pressure) for state in states]
    inverse = _resampled(logs, [1.0 / at for at in temperatures])
    density = _resampled(logs, [log(state.density) for state in states])
    latent = _resampled(logs, [state.latent_heat for state in states])
    return (
        [1.0 / each for each in inverse],
        [exp(each) for each in density],
        [max(each, 1e5) for each in latent],
    )


@cache
def _water_grid() -> list[float]:
    """Boiling point of water on the pressure grid, within its saturation line throughout."""
    temperatures = [Temperature(273.15 + _BOILING_STEP * i) for i in range(101)]
    logs = [log(water.saturation_pressure(at)) for at in temperatures]
    return [1.0 / each for each in _resampled(logs, [1.0 / at for at in temperatures])]


def _resampled(places: Sequence[float], values: Sequence[float]) -> list[float]:
    """Values on the pressure grid, straight between their places and straight on beyond them."""
    found = []
    for i in range(_PRESSURES):
        at = _LOW + i * _WIDTH
        k = min(max(bisect_right(places, at) - 1, 0), len(places) - 2)
        share = (at - places[k]) / (places[k + 1] - places[k])
        found.append(values[k] + share * (values[k + 1] - values[k]))
    return found
