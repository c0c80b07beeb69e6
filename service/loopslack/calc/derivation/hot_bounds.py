"""Steps of the bounds that stagnation sets on the filling: by the relief valve, the membrane's acceptance, the station.

Each is the mass with which the vessel just stands at a hot pressure under the base case or a doubt. The window they
bound is in ``window``.
"""

from loopslack.calc.derivation.book import System
from loopslack.calc.derivation.charge import Charged
from loopslack.calc.derivation.equilibrium import expelled_at, mixed_temperature
from loopslack.calc.derivation.frame import Frame
from loopslack.calc.derivation.steam import SpaceValues
from loopslack.calc.window import Bound, Gas
from loopslack.kernel import kinds
from loopslack.kernel.roots import bracketed
from loopslack.kernel.value import Value
from loopslack.physics import balance, balance_pressure, balance_steam, vessel

_WARM = "Gas and liquid in the vessel are as warm as the liquid that has arrived, mixed, at the bounding pressure."


class HotBounds:
    """Writes the bounds of one vessel in one frame."""

    def __init__(self, frame: Frame, charged: Charged, gas: Gas, tag: str) -> None:
        self.frame, self.book, self.charged, self.gas, self.tag = frame, frame.book, charged, gas, tag
        self.scenarios = {scenario.id: scenario for scenario in frame.analysis.every}

    def held(self, pressure: Value, gas: Value, code: str) -> Value:
        """Liquid in the vessel at a pressure that a check allows."""
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

    def station_pressure(self, bound: Bound) -> Value:
        """Lowest vessel pressure that keeps steam out of the station, where steam arrives there."""
        case = self.frame.analysis.case(self.scenarios[bound.scenario])
        station = case.station or case.final
        system = System(
            id="steam-at-station",
            meaning="At this vessel pressure the pipes full of steam, and the station, just take all steam.",
        )
        title = f"vessel pressure that keeps steam out of the station, {bound.scenario}"
        return self.book.unknown(station.pressure, kinds.ABSOLUTE_PRESSURE, title, system)

    def bound(self, bound: Bound, pressure: Value) -> Value:
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
        liquid = self.held(pressure, room, f"{bound.code}, {scenario.id},")
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
        """Hold the steam that the full pipes leave against what the station takes, if it takes any."""
        book = self.book
        lefts = [space.left for space in spaces if space.left is not None]
        if not lefts:
            return
        left = min(lefts, key=lambda value: abs(value.si))
        residual = left
        if self.frame.loop.station.steam_loss > 0:
            arriving = [space.left for space in spaces if space.arrives and space.left is not None]
            left = arriving[0] if len(arriving) == 1 else left
            if len(arriving) > 1:
                left = book.sum(
                    balance_steam.power_sum, f"steam power that reaches the station {tag}", arriving
                )
            residual = book.step(
                balance_steam.power_left,
                f"steam power less what pipes and station take {tag}",
                steam_power=left,
                lost=self.frame.leaves.taken,
            )
        book.close(pressure, [left, residual], residual)

    def _warm(self, bound: Bound, pressure: Value, expelled: Value, tag: str) -> Value:
        """As above with gas and liquid at the mixed temperature, which is a root."""
        frame, book = self.frame, self.book
        temperature = self._warm_temperature(bound, pressure.si, expelled.si)
        book.chapter = "window"
        system = System(id="gas-follows-liquid", meaning=_WARM)
        title = f"temperature in the vessel {tag}{self.tag}"
        root = book.unknown(temperature, kinds.TEMPERATURE, title, system)
        liquid = self.held(pressure, root, f"{bound.code}, {bound.scenario},")
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

    def _warm_temperature(self, bound: Bound, pressure: float, expelled: float) -> float:
        """The temperature (K) behind a bound that is known: warmer gas and lighter liquid both lower the mass."""
        analysis, gas, nominal = self.frame.analysis, self.gas, self.charged.nominal.si
        squeeze = gas.precharge / gas.temperature / pressure

        def excess(temperature: float) -> float:
            held = nominal * (1 - squeeze * temperature)
            return analysis.fluid.density(temperature) * (held - analysis.allowance) - expelled - bound.mass

        mix = analysis.mix
        low, high = sorted((mix.room, max(mix.hot, mix.back)))
        at_low, at_high = excess(low), excess(high)
        if at_low <= 0 or at_high >= 0:  # nothing warm has arrived, or nothing else
            return low if at_low <= 0 else high
        return bracketed(excess, low, high, at_low, at_high, 1e-12 * high).at

    def accepting(self, bound: Bound) -> Value:
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
