"""Absorber and collector liquid during one implicit step: boiling with steam above, or one warm body without.

Closed forms only, the absorber's being a quadratic; no iteration and no pipe here.
"""

from math import sqrt

from loopslack.calc.course.plant import Plant
from loopslack.calc.course.state import State

_FILM = 1e4  # W/m2K absorber to liquid: merely large, the collector's own coefficients already hold its film
_WATER_SHARE = 0.6  # of the water left may boil off within one step


class Collector:
    """The collectors over one step of ``dt`` seconds, at the irradiance (W/m2) and ambient (K) of its end.

    ``hold`` (kg) is the liquid steam cannot push out, ``gap`` (m3) what steam can fill. After ``boil``:
    temperatures ``absorber`` and ``boiling`` (K), ``drawn`` back from the pipe and ``evaporated`` (kg,
    negative when vapour condenses here), ``evaporation_heat`` (J/kg).
    """

    __slots__ = (
        "absorber",
        "activity",
        "ambient",
        "boiling",
        "density",
        "drawn",
        "dt",
        "evaporated",
        "evaporation_heat",
        "follows_strength",
        "gain",
        "gap",
        "glycol_pressure",
        "hold",
        "inertia",
        "irradiance",
        "outside_strength",
        "plant",
        "stagnation_rise",
        "state",
        "strength",
        "sun",
    )

    def __init__(self, plant: Plant, state: State, dt: float, irradiance: float, ambient: float) -> None:
        loop, tables = plant.loop, plant.tables
        self.plant, self.state, self.dt = plant, state, dt
        self.irradiance, self.ambient = irradiance, ambient
        self.density = tables.density(state.liquid)
        self.hold = min(state.left, plant.residue, loop.collector_content * self.density)
        self.gap = max(0.0, loop.collector_content - self.hold / self.density)
        self.sun = loop.peak_efficiency * irradiance
        self.inertia = plant.bare_capacity / dt
        self.gain = self.sun + self.inertia * (state.absorber - ambient)
        # Rise at which the absorber loses all it gets, in the form that holds without a quadratic term.
        a1, a2 = loop.linear_loss, loop.quadratic_loss
        losing = a1 + sqrt(a1 * a1 + 4.0 * a2 * self.sun)
        # Without a linear term nothing is lost by night: nought over nought, and no rise.
        self.stagnation_rise = 2.0 * self.sun / losing if losing > 0.0 else 0.0
        self.follows_strength = loop.emptying.concentrates and tables.residue is not None
        self.strength = self.outside_strength = tables.strength
        self.activity = tables.loop_activity
        self.glycol_pressure = 0.0
        if self.follows_strength:
            self.strength = state.strength if state.left > 0.0 else tables.strength
            self.activity = tables.activity(self.strength)
            self.glycol_pressure = tables.glycol_pressure(state.boiling)
            filled = plant.mass - state.discharged
            outside = filled - state.left - state.vapour
            self.outside_strength = max(0.0, min(0.9, (filled * tables.strength - state.glycol) / outside))

    def boil(self, geometric: float, steam: float, pressure: float, latent: float, reference: float) -> None:
        """Take the step with steam (K, Pa, J/kg) above ``geometric`` kg of liquid."""
        state, plant = self.state, self.plant
        strength, activity = self.strength, self.activity
        drawn = geometric - state.left
        if drawn <= 0.0:
            drawn = 0.0
        elif self.follows_strength:
            strength = (state.glycol + drawn * self.outside_strength) / (state.left + drawn)
            activity = plant.tables.activity(strength)
        boiling = steam
        if self.follows_strength:
            boiling += plant.tables.boiling_shift(pressure, reference, activity, self.glycol_pressure)
        self.drawn, self.boiling = drawn, boiling
        heat = self._over_boiling(geometric, steam)
        area, cp = plant.loop.aperture * self.dt, plant.tables.heat_capacity
        sensible = cp * (state.left * (boiling - state.liquid) + drawn * (boiling - state.temperatures[0]))
        # Vapour is booked saturated at the steam temperature although it leaves a hotter residue.
        per_mass = self.evaporation_heat = latent - cp * (boiling - steam)
        limit = plant.loop.emptying.steam_power
        limited = limit is not None and heat > limit
        if limit is not None and limited:
            heat = limit
        evaporated = (heat * area - sensible) / per_mass
        water = _WATER_SHARE * geometric * (max(0.0, 1.0 - strength) if self.follows_strength else 1.0)
        if evaporated > water:
            evaporated, limited = water, True
            heat = (evaporated * per_mass + sensible) / area
        self.evaporated = evaporated
        if limited:
            self.absorber = self.ambient + self._rise(self.gain - heat, self.inertia)

    def _over_boiling(self, geometric: float, steam: float) -> float:
        """Set the absorber temperature over the boiling liquid; heat it passes on, W/m2.

        The wetted share boils at its own temperature, the dry share sits at stagnation and passes nothing:
        that is what the conductance is made for.
        """
        plant, loop = self.plant, self.plant.loop
        wetted = 1.0
        if not loop.emptying.wets_all and geometric < plant.full:
            wetted = geometric / plant.full
        rise = self.boiling - self.ambient
        loss = self._loss_from(rise)
        conductance = wetted * _FILM
        if wetted < 1.0:
            # A dry share that loses nothing lets nothing pass.
            conductance = wetted / (1.0 / _FILM + (1.0 - wetted) / loss) if loss > 0.0 else 0.0
        pull = self.gain + conductance * rise
        self.absorber = self.ambient + self._rise(pull, self.inertia + conductance)
        if self.absorber >= steam:
            return conductance * (self.absorber - self.boiling)
        # A dry absorber colder than the steam condenses on all of its area.
        pull += _FILM * (steam - self.ambient)
        self.absorber = self.ambient + self._rise(pull, self.inertia + conductance + _FILM)
        return conductance * (self.absorber - self.boiling) + _FILM * (self.absorber - steam)

    def _loss_from(self, rise: float) -> float:
        """Slope of the loss from a rise above ambient to that of stagnation, W/m2K; the loss is odd in the rise.

        Below ambient, where a loop under vacuum may boil, the quadratic term counts as much as above it; past
        stagnation the slope is the tangent's.
        """
        top = self.stagnation_rise
        if rise > 0.0:
            squared = 2.0 * rise + max(0.0, top - rise)
        else:
            squared = (top * top + rise * rise) / (top - rise) if top > rise else 0.0
        return self.plant.loop.linear_loss + self.plant.loop.quadratic_loss * squared

    def warm(self, geometric: float) -> float:
        """Take the step without steam: absorber and liquid one body, all vapour condensed into it.

        Returns the absorber temperature, K.
        """
        state, plant = self.state, self.plant
        cp, area = plant.tables.heat_capacity, plant.loop.aperture
        drawn = max(0.0, geometric - state.left)
        bare = area * plant.bare_capacity
        capacity = bare + (state.left + drawn) * cp
        held = bare * state.absorber + cp * (state.left * state.liquid + drawn * state.temperatures[0])
        if state.vapour > 0.0:
            capacity += state.vapour * cp
            held += state.vapour * (state.latent + cp * state.steam)
        inertia = capacity / (area * self.dt)
        self.drawn, self.evaporated = drawn, -state.vapour
        pull = self.sun + inertia * (held / capacity - self.ambient)
        self.absorber = self.ambient + self._rise(pull, inertia)
        return self.absorber

    def _rise(self, pull: float, linear: float) -> float:
        """Rise d above ambient that solves ``(linear + a1) d + a2 d|d| = pull``; K, W/m2K, W/m2."""
        loop = self.plant.loop
        b = linear + loop.linear_loss
        size = 2.0 * abs(pull) / (b + sqrt(b * b + 4.0 * loop.quadratic_loss * abs(pull)))
        return size if pull >= 0.0 else -size
