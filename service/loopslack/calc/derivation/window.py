"""Steps of the fill window: the bounds on the filling that bind below and above, and the pressures they mean.

Which bounds bind is the calculation's finding; their equations are written here, for a vessel of any size. A bound may
stand under a doubt, whose steam is then written with it.
"""

from math import isfinite
from typing import NamedTuple

from loopslack.calc.derivation.book import System
from loopslack.calc.derivation.charge import Charged, Filled, reserve
from loopslack.calc.derivation.equilibrium import at_rest, expelled_at, mixed_temperature
from loopslack.calc.derivation.frame import Frame, StateValues
from loopslack.calc.derivation.steam import SpaceValues
from loopslack.calc.judge import stagnation
from loopslack.calc.scenarios import Scenario
from loopslack.calc.window import Bound, Gas, Window
from loopslack.kernel import kinds
from loopslack.kernel.value import Value
from loopslack.physics import balance, balance_pressure, balance_steam, vessel

_WARM = "Gas and liquid in the vessel are as warm as the liquid that has arrived, mixed, at the bounding pressure."
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
        self.scenarios = {scenario.id: scenario for scenario in frame.analysis.every}

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
            return self._holding(state, self._held(needed, state.temperature, code), code)
        if code == "boiling-at-cut-off":
            state, needed = frame.cut_off, frame.cut_off_requirement
            return self._holding(state, self._held(needed, state.temperature, code), code)
        if code == "membrane-temperature":
            return self._membrane(bound, membrane)
        return self._hot(bound, self._station(bound))

    def _upper(self, bound: Bound) -> Value | None:
        if not isfinite(bound.mass):
            return None
        if bound.code == "acceptance":
            return self._accepting(bound)
        if bound.code == "membrane-full":
            return self._full()
        return self._hot(bound, self.frame.site.final)

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

    def _held(self, pressure: Value, gas: Value, code: str) -> Value:
        charged = self.charged
        self.book.chapter = "window"
        return self.book.step(
            vessel.liquid_held,
            f"liquid in the vessel at the pressure that {code} allows{self.tag}",
            nominal_volume=charged.nominal,
            precharge=charged.precharge,
            pressure=pressure,
            gas_temperature=gas,
            precharge_temperature=charged.temperature,
        )

    def _station(self, bound: Bound) -> Value:
        """Lowest vessel pressure that keeps steam out of the station, where steam arrives there."""
        case = self.frame.analysis.case(self.scenarios[bound.scenario])
        station = case.station or case.final
        system = System(
            id="steam-at-station",
            meaning="At this vessel pressure the pipes full of steam, and the station, just take all steam.",
        )
        title = f"vessel pressure that keeps steam out of the station, {bound.scenario}"
        return self.book.unknown(station.pressure, kinds.ABSOLUTE_PRESSURE, title, system)

    def _hot(self, bound: Bound, pressure: Value) -> Value:
        """Mass with which the vessel stands at a hot pressure under a scenario."""
        frame, book = self.frame, self.book
        scenario = self.scenarios[bound.scenario]
        case = frame.analysis.case(scenario)
        at_station = bound.code == "steam-at-station" and case.station is not None
        extent = case.station if at_station and case.station is not None else case.final
        where = "where steam meets the station" if at_station else "at the final pressure"
        tag = f"{where}, {scenario.id}"
        expelled, spaces = expelled_at(frame, scenario, extent, pressure, tag)
        if at_station:
            self._close_station(pressure, spaces, tag)
        if scenario.gas_follows:
            return self._warm(bound, pressure, expelled, tag)
        room = frame.leaves.temperature("vessel_room")
        liquid = self._held(pressure, room, f"{bound.code}, {scenario.id},")
        book.chapter = "window"
        return book.step(
            balance.mass_to_hold,
            f"mass in the vessel when filled, bound by {bound.code}, {scenario.id}{self.tag}",
            liquid=liquid,
            allowance=frame.allowance,
            density=frame.room_density,
            expelled=expelled,
        )

    def _close_station(self, pressure: Value, spaces: list[SpaceValues], tag: str) -> None:
        """Hold the steam that the full pipes leave against what the station takes: with several spaces, nothing."""
        book = self.book
        lefts = [space.left for space in spaces if space.left is not None]
        if not lefts:
            return
        left = min(lefts, key=lambda value: abs(value.si))
        residual = left
        if len(spaces) == 1 and self.frame.loop.station.steam_loss > 0:
            residual = book.step(
                balance_steam.power_left,
                f"steam power less what pipes and station take {tag}",
                steam_power=left,
                lost=self.frame.leaves.taken,
            )
        book.close(pressure, [left, residual], residual)

    def _warm(self, bound: Bound, pressure: Value, expelled: Value, tag: str) -> Value:
        """As above with gas and liquid at the mixed temperature, which is a root."""
        frame, book, gas = self.frame, self.book, self.gas
        mix, nominal = frame.analysis.mix, self.charged.nominal.si
        filled = bound.mass / frame.fill_density.si
        temperature = mix.room
        for _ in range(60):
            held = nominal * (1 - gas.precharge / gas.temperature / pressure.si * temperature)
            following = mix.temperature(max(filled, 0.0), held)
            if abs(following - temperature) < 1e-11:
                break
            temperature = following
        book.chapter = "window"
        system = System(id="gas-follows-liquid", meaning=_WARM)
        title = f"temperature in the vessel {tag}{self.tag}"
        root = book.unknown(temperature, kinds.TEMPERATURE, title, system)
        liquid = self._held(pressure, root, f"{bound.code}, {bound.scenario},")
        density = frame.fluid.density(root)
        mass = book.step(
            balance.mass_to_hold,
            f"mass in the vessel when filled, bound by {bound.code}, {bound.scenario}{self.tag}",
            liquid=liquid,
            allowance=frame.allowance,
            density=density,
            expelled=expelled,
        )
        start = book.step(
            balance.mass_volume,
            f"liquid in the vessel when filled, bound by {bound.code}, {bound.scenario}{self.tag}",
            mass=mass,
            density=frame.fill_density,
        )
        mixed = mixed_temperature(frame, start, liquid, f"{tag}{self.tag}")
        residual = book.step(
            balance_pressure.temperature_residual,
            f"mixed temperature less that in the vessel {tag}{self.tag}",
            first=mixed,
            second=root,
        )
        book.close(root, [liquid, density, mass, start, mixed, residual], residual)
        return mass

    def _accepting(self, bound: Bound) -> Value:
        """Mass with which the membrane takes just what it may, under a scenario."""
        frame, book, charged = self.frame, self.book, self.charged
        scenario = self.scenarios[bound.scenario]
        acceptance = charged.acceptance
        if acceptance is None:  # the calculation bounds by acceptance only where one is stated
            raise TypeError("a vessel without an acceptance volume is bound by one")
        book.chapter = "window"
        pressure = book.step(
            vessel.gas_pressure,
            f"pressure with the acceptance volume taken up{self.tag}",
            nominal_volume=charged.nominal,
            precharge=charged.precharge,
            liquid=acceptance,
            gas_temperature=frame.leaves.temperature("vessel_room"),
            precharge_temperature=charged.temperature,
        )
        extent = frame.analysis.case(scenario).balance.at_pressure(pressure.si)
        tag = f"with the membrane's acceptance taken up, {scenario.id}"
        expelled, _ = expelled_at(frame, scenario, extent, pressure, tag)
        book.chapter = "window"
        return book.step(
            balance.mass_to_hold,
            f"mass in the vessel when filled, bound by acceptance, {scenario.id}{self.tag}",
            liquid=acceptance,
            allowance=frame.allowance,
            density=frame.room_density,
            expelled=expelled,
        )

    def _full(self) -> Value:
        """Mass of a vessel full of liquid when it is filled."""
        accepted = self.charged.acceptance
        if accepted is None:
            name = "nominal volume, all liquid"
            accepted = self.book.leaf(self.charged.nominal.si, kinds.VOLUME, name, "/vessel/nominalVolume")
        title = f"mass in the vessel when filled, bound by a full membrane{self.tag}"
        return self.book.step(balance.liquid_mass, title, density=self.frame.fill_density, content=accepted)

    def _membrane(self, bound: Bound, limit: Value) -> Value:
        """The least filling that keeps the membrane within its limit: a root of the whole equilibrium."""
        book = self.book
        scenario = self.scenarios[bound.scenario]
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
