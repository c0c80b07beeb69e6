"""Steps of the site and the relief valve: the atmosphere, and the pressure the vessel may reach at most."""

from functools import cached_property

from loopslack.calc.derivation.parts import Parts
from loopslack.kernel import kinds
from loopslack.kernel.citations import DERIVED
from loopslack.kernel.kinds import Length
from loopslack.kernel.value import Value
from loopslack.physics import atmosphere, balance_pressure, relief, statics


class Site:
    """Writes what the loop's place and its relief valve fix."""

    def __init__(self, parts: Parts, allowance: float | None) -> None:
        self.parts, self.book, self.loop = parts, parts.book, parts.loop
        self._stated_allowance = allowance

    @cached_property
    def atmosphere(self) -> Value:
        """Atmosphere of the site."""
        self.book.chapter = "site"
        return self.book.step(
            atmosphere.atmospheric_pressure,
            "atmosphere of the site",
            altitude=self.parts.leaves.height(self.loop.altitude, "altitude", "/site/altitude"),
        )

    @cached_property
    def sea_level(self) -> Value:
        """Atmosphere at sea level, which a precharge as delivered counts from."""
        return self.book.step(
            atmosphere.atmospheric_pressure,
            "atmosphere at sea level",
            altitude=self.book.tabulated(
                Length(0.0), kinds.LENGTH, "sea level", "definition", "sea level", DERIVED
            ),
        )

    @cached_property
    def set_pressure(self) -> Value:
        """Set pressure of the relief valve."""
        stamped = self.loop.relief.set_pressure
        return self.book.leaf(stamped, kinds.GAUGE_PRESSURE, "set pressure", "/reliefValve/setPressure")

    @cached_property
    def allowance(self) -> Value:
        """How far below its stamp the valve may open."""
        book, rule = self.book, self.loop.relief.allowance_rule
        if rule not in relief.ALLOWANCES:
            stated = self.loop.relief.set_pressure - self.loop.relief.opening_pressure
            number = stated if self._stated_allowance is None else self._stated_allowance
            pointer = "/reliefValve/openingAllowance/value"
            return book.leaf(number, kinds.PRESSURE_DIFFERENCE, "opening allowance, as stated", pointer)
        by_rule = book.step(
            relief.ALLOWANCES[rule], f"opening allowance by {rule}", set_pressure=self.set_pressure
        )
        tolerance = book.step(
            relief.set_tolerance_iso_4126_1, "set tolerance", set_pressure=self.set_pressure
        )
        if tolerance.si <= by_rule.si:
            return by_rule
        return book.step(
            balance_pressure.larger_allowance,
            "opening allowance that counts",
            of_rule=by_rule,
            set_tolerance=tolerance,
        )

    @cached_property
    def opening(self) -> Value:
        """Lowest opening pressure at the valve."""
        return self.book.step(
            relief.opening_pressure,
            "lowest opening pressure",
            set_pressure=self.set_pressure,
            allowance=self.allowance,
        )

    @cached_property
    def final(self) -> Value:
        """Final pressure at the vessel, absolute."""
        air = self.atmosphere
        self.book.chapter = "relief-valve"
        height = self.parts.leaves.height(
            self.loop.relief.height, "height of the relief valve", "/reliefValve/height"
        )
        temperature = self.parts.leaves.temperature("hot_liquid" if height.si > 0 else "fill")
        at_vessel = self.book.step(
            relief.pressure_under_valve,
            "final pressure at the vessel, gauge",
            pressure_at_valve=self.opening,
            density=self.parts.fluid.density(temperature),
            valve_height=height,
        )
        return self.book.step(
            statics.absolute_from_gauge, "final pressure at the vessel", gauge=at_vessel, atmosphere=air
        )
