"""Steps of the collectors of one steam space: what they send out as steam, what steam has taken of their content."""

from loopslack.calc.derivation.collectors import GroupValues
from loopslack.calc.derivation.frame import Frame
from loopslack.calc.scenarios import Scenario
from loopslack.calc.steam import SteamSpace
from loopslack.calc.steam_state import Steam
from loopslack.kernel import kinds
from loopslack.kernel.value import Value
from loopslack.library.defaults import default
from loopslack.physics import balance, balance_steam, collector, steam


class GroupSteps:
    """Writes the groups of a steam space under one scenario."""

    def __init__(self, frame: Frame, scenario: Scenario, space: SteamSpace, tag: str) -> None:
        self.frame, self.book, self.scenario, self.tag = frame, frame.book, scenario, tag
        number = space.groups[0].space
        self.groups = [group for group in frame.parts.groups if group.group.space == number]

    def stagnation(self, group: GroupValues) -> Value:
        """Stagnation temperature under the scenario."""
        if not self.scenario.stagnation_shift:
            return group.stagnation
        return self.book.step(
            balance_steam.doubted_stagnation_temperature,
            f"stagnation temperature of {group.name}, doubted",
            stagnation=group.stagnation,
            doubt=self.frame.leaves.criterion("stagnation_doubt"),
        )

    def at_stagnation(self, temperature: float) -> list[GroupValues]:
        """The groups whose stagnation temperature is exactly this one."""
        return [group for group in self.groups if self.stagnation(group).si == temperature]

    def share_evaporated(self, found: Steam) -> float:
        """Which share of the groups at their stagnation temperature has evaporated."""
        pinned = self.at_stagnation(found.temperature)
        hotter = sum(g.content.si for g in self.groups if self.stagnation(g).si > found.temperature)
        whole = sum(group.content.si for group in pinned)
        return min(max((found.emptied - hotter) / whole, 0.0), 1.0)

    def power(self, temperature: Value) -> Value:
        """Steam power of the groups that stagnate hotter than the steam."""
        powers = [
            self._power(group, temperature)
            for group in self.groups
            if temperature.si < self.stagnation(group).si
        ]
        if not powers:
            return self.frame.leaves.none(kinds.POWER, "groups that send out steam")
        return self.book.sum(balance_steam.power_sum, f"steam power {self.tag}", powers)

    def emptied(self, temperature: Value, share: Value | None) -> tuple[list[Value], list[Value]]:
        """Contents that steam has taken, and masses of liquid that still stand in collectors."""
        emptied, liquid = [], []
        for group in self.groups:
            stagnation = self.stagnation(group)
            if share is not None and stagnation.si == temperature.si:
                part = self.book.step(
                    balance_steam.share_of_content,
                    f"evaporated content of {group.name} {self.tag}",
                    share=share,
                    content=group.content,
                )
                rest = self.book.step(
                    balance.content_left,
                    f"liquid content of {group.name} {self.tag}",
                    whole=group.content,
                    part=part,
                )
                emptied.append(part)
                liquid.append(self._mass(group, rest))
            elif temperature.si <= stagnation.si:
                emptied.append(group.content)
            else:
                liquid.append(self._mass(group, group.content))
        return emptied, liquid

    def liquid(self) -> list[Value]:
        """Masses of liquid where nothing boils: every group at its stagnation temperature."""
        return [self._mass(group, group.content) for group in self.groups]

    def hottest(self) -> Value:
        """The highest stagnation temperature of the space."""
        return max((self.stagnation(group) for group in self.groups), key=lambda value: value.si)

    def _mass(self, group: GroupValues, content: Value) -> Value:
        return self.book.step(
            balance.liquid_mass,
            f"mass of the liquid in {group.name} {self.tag}",
            density=self.frame.fluid.density(self.stagnation(group)),
            content=content,
        )

    def _power(self, group: GroupValues, temperature: Value) -> Value:
        book, leaves = self.book, self.frame.leaves
        bound = book.step(
            collector.heat_bound_shifted,
            f"most heat per area of {group.name} {self.tag}",
            optical_efficiency=group.efficiency,
            irradiance=leaves.irradiance,
            linear_loss=group.linear,
            quadratic_loss=group.quadratic,
            temperature=temperature,
            stagnation=self.stagnation(group),
            ambient=leaves.ambient,
        )
        per_area = book.step(
            balance_steam.steam_power_per_area,
            f"steam power per area of {group.name} {self.tag}",
            of_class=self._class(group),
            bound=bound,
        )
        return book.step(
            steam.collector_power,
            f"steam power of {group.name} {self.tag}",
            heat=per_area,
            area=group.aperture,
        )

    def _class(self, group: GroupValues) -> Value:
        """What the emptying class, or the measurement, caps the steam power at."""
        model = group.group
        ground = self.frame.parts.ground.collectors.get(group.number)
        number, key = model.steam_power, "" if ground is None else ground.power
        if self.scenario.worse_emptying and model.worse_steam_power is not None:
            number, key = model.worse_steam_power, "" if ground is None else ground.worse
        if key:
            row = default(key)
            title = f"steam power per area, {key.removeprefix('steam-power-').replace('-', ' ')}"
            return self.book.tabulated(number, kinds.IRRADIANCE, title, "defaults", key, row.source)
        pointer = f"{group.place}/measuredSteamPower"
        title = "steam power per area, as measured"
        measured = self.book.leaf(model.steam_power, kinds.IRRADIANCE, title, pointer)
        if number == model.steam_power:
            return measured
        if model.emptying != "measured":
            return self.book.leaf(number, kinds.IRRADIANCE, "steam power per area, next worse class", pointer)
        return self.book.step(
            balance_steam.doubted_steam_power,
            f"steam power per area of {group.name}, doubted",
            factor=self.frame.leaves.default("doubt-measured-steam-power"),
            measured=measured,
        )
