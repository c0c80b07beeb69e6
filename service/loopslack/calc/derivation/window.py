"""Steps of the fill window: the bounds on the filling that bind below and above, and the pressures they mean.

Which bounds bind is the calculation's finding; their equations are written here, for a vessel of any size. A bound may
stand under a doubt, whose steam is then written with it.
"""

from math import isfinite
from typing import NamedTuple

from loopslack.calc.derivation.book import System
from loopslack.calc.derivation.charge import Charged, Filled, reserve
from loopslack.calc.derivation.equilibrium import at_rest
from loopslack.calc.derivation.frame import Frame, StateValues
from loopslack.calc.derivation.hot_bounds import HotBounds
from loopslack.calc.scenarios import Scenario
from loopslack.calc.stagnation import stagnation
from loopslack.calc.window import Bound, Gas, Window
from loopslack.kernel import kinds
from loopslack.kernel.value import Value
from loopslack.physics import balance, balance_pressure, vessel

_COOL = "With the least filling the mixed temperature in the vessel is just the membrane's limit."


class WindowValues(NamedTuple):
    """A window in the book; a bound is None where it has no pressure."""

    lower: Value | None
    upper: Value | None
    base: Value


class WindowSteps:
    """Writes the window of one vessel in one frame."""

    def __init__(self, frame: Frame, charged: Charged, gas: Gas, tag: str) -> None:
        self.frame, self.book, self.charged, self.gas, self.tag = frame, frame.book, charged, gas, tag
        self.lower_mass: Value | None = None
        self.hot = HotBounds(frame, charged, gas, tag)

    def write(self, window: Window, membrane: Value) -> WindowValues:
        """Write both binding bounds as fill pressures, and the least distance from the precharge."""
        self.lower_mass = self._lower(window.lower_bound, membrane)
        lower = self._pressure(self.lower_mass, "lower")
        upper = self._pressure(self._upper(window.upper_bound), "upper")
        self.book.chapter = "window"
        leaves = self.frame.leaves
        base = self.book.step(
            balance_pressure.fill_above_precharge,
            f"least fill pressure above the precharge{self.tag}",
            precharge=self.charged.precharge,
            fill_temperature=leaves.temperature("fill"),
            precharge_temperature=self.charged.temperature,
            distance=leaves.criterion("fill_above_precharge"),
        )
        return WindowValues(lower, upper, base)

    def _lower(self, bound: Bound, membrane: Value) -> Value | None:
        if not isfinite(bound.mass):
            return None
        frame, code = self.frame, bound.code
        if code == "reserve":
            return self._holding(frame.cold, reserve(frame, self.charged.nominal), code)
        if code == "top-pressure":
            state, needed = frame.cold, frame.top_requirement
            return self._holding(state, self.hot.held(needed, state.temperature, code), code)
        if code == "boiling-at-cut-off":
            state, needed = frame.cut_off, frame.cut_off_requirement
            return self._holding(state, self.hot.held(needed, state.temperature, code), code)
        if code == "membrane-temperature":
            return self._membrane(bound, membrane)
        return self.hot.bound(bound, self.hot.station_pressure(bound))

    def _upper(self, bound: Bound) -> Value | None:
        if not isfinite(bound.mass):
            return None
        if bound.code == "acceptance":
            return self.hot.accepting(bound)
        if bound.code == "membrane-full":
            return self._full()
        return self.hot.bound(bound, self.frame.site.final)

    def _holding(self, state: StateValues, liquid: Value, code: str) -> Value:
        """Mass with which the vessel just holds a liquid in a state without steam."""
        self.book.chapter = "window"
        return self.book.step(
            balance.mass_to_hold,
            f"mass in the vessel when filled, bound by {code}{self.tag}",
            liquid=liquid,
            allowance=state.allowance,
            density=state.density,
            expelled=state.expelled,
        )

    def _full(self) -> Value:
        """Mass of a vessel full of liquid when it is filled."""
        accepted = self.charged.acceptance
        if accepted is None:
            accepted = self.book.step(
                balance.all_liquid, f"vessel full of liquid{self.tag}", nominal_volume=self.charged.nominal
            )
        title = f"mass in the vessel when filled, bound by a full membrane{self.tag}"
        return self.book.step(balance.liquid_mass, title, density=self.frame.fill_density, content=accepted)

    def _membrane(self, bound: Bound, limit: Value) -> Value:
        """The least filling that keeps the membrane within its limit: a root of the whole equilibrium."""
        book = self.book
        scenario = self.hot.scenarios[bound.scenario]
        book.chapter = "window"
        system = System(id="membrane-temperature", meaning=_COOL)
        title = f"mass in the vessel when filled, bound by the membrane, {scenario.id}{self.tag}"
        root = book.unknown(bound.mass, kinds.MASS, title, system)
        residual, closing = self.membrane_residual(scenario, root, limit)
        book.close(root, closing, residual)
        return root

    def membrane_residual(self, scenario: Scenario, mass: Value, limit: Value) -> tuple[Value, list[Value]]:
        """How far the mixed temperature stays from the membrane's limit with a mass in the vessel."""
        frame, book = self.frame, self.book
        found = stagnation(frame.analysis, scenario, self.gas, mass.si)
        liquid = book.step(
            balance.mass_volume,
            f"liquid in the vessel when filled, with the least filling{self.tag}",
            mass=mass,
            density=frame.fill_density,
        )
        tag = f"with the least filling, {scenario.id}{self.tag}"
        rest = at_rest(frame, scenario, self.charged, Filled(mass, liquid), found, tag)
        residual = book.step(
            balance_pressure.temperature_residual,
            f"mixed temperature less the membrane's limit {tag}",
            first=rest.mixed,
            second=limit,
        )
        return residual, [rest.expelled, rest.liquid, rest.mixed, residual]

    def _pressure(self, mass: Value | None, end: str) -> Value | None:
        """A bound on the filling as a fill pressure at the fill temperature; None where it has none."""
        if mass is None or mass.si < 0:
            return None
        book, charged, frame = self.book, self.charged, self.frame
        book.chapter = "window"
        liquid = book.step(
            balance.mass_volume,
            f"liquid in the vessel when filled, {end} bound{self.tag}",
            mass=mass,
            density=frame.fill_density,
        )
        if not liquid.si < charged.nominal.si:
            return None
        return book.step(
            vessel.gas_pressure,
            f"fill pressure, {end} bound{self.tag}",
            nominal_volume=charged.nominal,
            precharge=charged.precharge,
            liquid=liquid,
            gas_temperature=frame.leaves.temperature("fill"),
            precharge_temperature=charged.temperature,
        )
