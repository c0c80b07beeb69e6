"""A caller's own fluid by table: density, a freezing point, and its boiling by table or like a known glycol.

What the caller did not state is refused, not guessed. Tables are interpolated without overshoot, never
extrapolated.
"""

from collections.abc import Sequence
from itertools import pairwise
from math import exp, isfinite, log

from msgspec import Struct

from loopslack.calc.fluids.base import (
    BOILING_HIGHEST,
    BOILING_LOWEST,
    FLUID,
    ROUNDING,
    Fluid,
    Vapour,
    celsius,
    refuse_temperature,
)
from loopslack.kernel.errors import Contradiction, Missing, NotApplicable
from loopslack.kernel.kinds import Temperature
from loopslack.library.fluids import GlycolKind
from loopslack.physics import water
from loopslack.physics.own_fluid import MonotoneCurve

Points = Sequence[tuple[float, float]]

# Own assumptions, to keep typing errors out.
_DENSITY_CREDIBLE = (500.0, 2000.0)
_MAY_RISE_BELOW = 283.15  # dilute mixtures are densest near 4 degC
_LEAST_POINTS = 3
# The vapour of such a fluid is treated as steam. Bubble pressures far from those of water belie that.
_LEAST_OF_WATER, _MOST_OF_WATER = 0.5, 1.02


_DENSITIES = f"{FLUID}/points"
_BOILING = f"{FLUID}/boiling"
_BOILING_POINTS = f"{_BOILING}/points"
_HEAT_CAPACITIES = f"{FLUID}/heatCapacity"


class BoilsLike(Struct, frozen=True, kw_only=True):
    """The own fluid boils like a glycol mixture of this strength by mass."""

    kind: GlycolKind
    mass_fraction: float


class OwnFluid(Fluid):
    """A fluid known by its tables; see ``Fluid``. ``like`` is the mixture as which it boils, if any."""

    __slots__ = ("_bubble", "_density", "_heat_capacity", "_viscosity", "like")

    like: Fluid | None
    _bubble: MonotoneCurve  # unless it boils like another

    def __init__(
        self,
        points: Points,
        freezing_point: float,
        boiling: Points | Fluid,
        *,
        heat_capacity: Points = (),
        viscosity: Points = (),
        name: str = "the own fluid",
    ) -> None:
        self.kind, self.name = "own", name
        self._density = _density_curve(points)
        self.freezing_point, self.freezing_is_bound = freezing_point, False
        lowest = max(self._density.first, freezing_point)
        if not lowest < self._density.last:
            raise Contradiction(
                f"The freezing point, {celsius(freezing_point)} degC, lies above every density of {name}.",
                remedy="State densities of the liquid.",
                pointer=f"{FLUID}/freezingPoint",
            )
        self.like = None
        self._bound(
            (lowest, self._density.last),
            self._boil_like(boiling) if isinstance(boiling, Fluid) else self._boil_by_table(boiling),
        )
        self._heat_capacity = _curve(heat_capacity, "heat capacity", name) if heat_capacity else None
        self._viscosity = _curve(viscosity, "viscosity", name) if viscosity else None

    def place_of(self, subject: str) -> str:
        """See ``Fluid``."""
        boiling = _BOILING if self.like is not None else _BOILING_POINTS
        return {"density": _DENSITIES, "boiling": boiling, "heat capacity": _HEAT_CAPACITIES}.get(
            subject, FLUID
        )

    def density(self, temperature: float) -> float:
        """See ``Fluid``."""
        if not self._liquid_low <= temperature <= self._liquid_high:
            self.refuse_liquid(temperature)
        return self._density.at(temperature)

    def saturated(self, temperature: float) -> tuple[float, float]:
        """See ``Fluid``."""
        if not self._boiling_low <= temperature <= self._boiling_high:
            self.refuse_boiling(temperature)
        if self.like is not None:
            return self.like.saturated(temperature)
        pressure = exp(self._bubble.at(-1.0 / temperature))
        at = Temperature(temperature)
        k = water.virial_per_pressure(at, water.saturation_pressure(at), water.vapour_density(at))
        molar = pressure * water.MOLAR_MASS
        return pressure, molar / ((1.0 + k * pressure) * water.GAS_CONSTANT * temperature)

    def boiling_temperature(self, pressure: float) -> float:
        """See ``Fluid``."""
        if not self.lowest_pressure <= pressure <= self.highest_pressure:
            self.refuse_pressure(pressure)
        if self.like is not None:
            return self.like.boiling_temperature(pressure)
        return min(max(-1.0 / self._bubble.inverse(log(pressure)), self.boiling_lowest), self.boiling_highest)

    def vapour(self, temperature: float) -> Vapour:
        """The vapour; by table it is taken as pure steam at the pressure of the table, for want of better."""
        if self.like is not None:
            return self.like.vapour(temperature)
        pressure, density = self.saturated(temperature)
        return Vapour(
            pressure=pressure,
            density=density,
            latent_heat=water.latent_heat(Temperature(temperature)),
            glycol_mole_fraction=0.0,
            glycol_mass_fraction=0.0,
        )

    def heat_capacity(self, temperature: float) -> float:
        """See ``Fluid``."""
        return self._stated(self._heat_capacity, "heat capacity", temperature)

    def viscosity(self, temperature: float) -> float:
        """See ``Fluid``."""
        return self._stated(self._viscosity, "viscosity", temperature)

    def ice_fraction(self, temperature: float) -> float:
        """See ``Fluid``."""
        if temperature >= self.freezing_point - ROUNDING:
            return 0.0
        raise Missing(
            f"How much of {self.name} freezes is not known: a freezing point alone does not tell.",
            remedy="Keep the fluid above its freezing point.",
            pointer=f"{FLUID}/freezingPoint",
            facts={"number": temperature, "low": self.freezing_point},
        )

    def _stated(self, curve: MonotoneCurve | None, subject: str, temperature: float) -> float:
        if curve is None:
            raise Missing(
                f"The {subject} of {self.name} was not stated.",
                remedy=f"State the {subject} by table.",
                pointer=self.place_of(subject),
            )
        low, high = max(curve.first, self.freezing_point), curve.last
        if not low - ROUNDING <= temperature <= high + ROUNDING:
            rule = f"{subject} of {self.name}"
            place = self.place_of(subject)
            refuse_temperature(rule, temperature, low, high, "State a table that covers it.", place)
        return curve.at(temperature)

    def _boil_like(self, reference: Fluid) -> tuple[float, float]:
        self.like = reference
        self.mass_fraction, self.volume_fraction = reference.mass_fraction, reference.volume_fraction
        self.water_activity, self.glycol_activity = reference.water_activity, reference.glycol_activity
        self.lowest_pressure, self.highest_pressure = reference.lowest_pressure, reference.highest_pressure
        return reference.boiling_lowest, reference.boiling_highest

    def _boil_by_table(self, points: Points) -> tuple[float, float]:
        self.mass_fraction = self.volume_fraction = self.glycol_activity = 0.0
        self.water_activity = 1.0
        table = _checked(points, f"bubble pressure of {self.name}", _BOILING_POINTS)
        for k, (temperature, pressure) in enumerate(table):
            _must_be_steam(self.name, temperature, pressure, f"{_BOILING_POINTS}/{k}")
        # In ln p over -1/T every bubble line is nearly straight, and both rise.
        self._bubble = MonotoneCurve([(-1.0 / temperature, log(pressure)) for temperature, pressure in table])
        if any(after <= before for before, after in pairwise(self._bubble.ys)):
            raise Contradiction(
                f"The bubble pressure of {self.name} must rise with temperature.",
                remedy="Check the table.",
                pointer=_BOILING_POINTS,
            )
        self.lowest_pressure, self.highest_pressure = table[0][1], table[-1][1]
        return table[0][0], table[-1][0]


def _must_be_steam(name: str, temperature: float, pressure: float, place: str) -> None:
    if not BOILING_LOWEST - ROUNDING <= temperature <= BOILING_HIGHEST + ROUNDING:
        rule, remedy = "the steam of an own fluid", "Leave this point out of the table."
        refuse_temperature(rule, temperature, BOILING_LOWEST, BOILING_HIGHEST, remedy, place)
    of_water = water.saturation_pressure(Temperature(temperature))
    if not _LEAST_OF_WATER <= pressure / of_water <= _MOST_OF_WATER:
        raise NotApplicable(
            f"At {celsius(temperature)} degC {name} is stated to boil at {pressure / 1e5:.4g} bar absolute, "
            f"water at {of_water / 1e5:.4g} bar. The method takes the vapour as steam, which asks for "
            f"{_LEAST_OF_WATER:g} to {_MOST_OF_WATER:g} times the pressure of water.",
            remedy="Check that the table is in absolute pressure, or use a fluid on a water base.",
            pointer=place,
            facts={"temperature": temperature, "number": pressure, "water": of_water},
        )


def _density_curve(points: Points) -> MonotoneCurve:
    table = _checked(points, "density", _DENSITIES)
    low, high = _DENSITY_CREDIBLE
    for k, ((before, dense), (after, thin)) in enumerate(pairwise(table), start=1):
        if thin >= dense and after > _MAY_RISE_BELOW:
            raise Contradiction(
                f"The density rises from {celsius(before)} to {celsius(after)} degC; "
                "a liquid expands when heated.",
                remedy="Check the table of densities.",
                pointer=f"{_DENSITIES}/{k}/density",
            )
    for temperature, density in table:
        if not low <= density <= high:
            raise Contradiction(
                f"The density {density:.5g} kg/m3 at {celsius(temperature)} degC is not credible.",
                remedy=f"State densities between {low:g} and {high:g} kg/m3.",
                pointer=_DENSITIES,
            )
    return MonotoneCurve(table)


def _curve(points: Points, subject: str, name: str) -> MonotoneCurve:
    place = _HEAT_CAPACITIES if subject == "heat capacity" else FLUID
    return MonotoneCurve(_checked(points, f"{subject} of {name}", place))


def _checked(points: Points, subject: str, place: str) -> list[tuple[float, float]]:
    table = sorted(points)
    if len(table) < _LEAST_POINTS:
        raise Missing(
            f"The {subject} is stated at {len(table)} temperatures; at least {_LEAST_POINTS} are needed.",
            remedy="State more points, covering every temperature the loop reaches.",
            pointer=place,
        )
    if any(not isfinite(number) or number <= 0.0 for point in table for number in point):
        raise Contradiction(
            f"The {subject} must be a positive number everywhere.", remedy="Check the table.", pointer=place
        )
    for k, ((before, _), (after, _)) in enumerate(pairwise(table), start=1):
        if after - before < 0.01:
            raise Contradiction(
                f"The {subject} is stated twice at {celsius(after)} degC.",
                remedy="State each temperature once.",
                pointer=f"{place}/{k}",
            )
    return table
