"""The balance of one loop: vessel, steam spaces, masses, and the root that reconciles them.

Route: the outer unknown is the liquid in the vessel. It fixes vessel pressure (Boyle), that fixes for each
steam space its front by a nested root along the steam path, and the mass left over tells whether the guess
holds too much. The guess is cut into intervals at the vessel contents at which some collector group would
stand exactly at its stagnation temperature; a root across such a step is a pinned group. If an open pipe
rises away from the collectors the front of that space becomes the outer unknown, scanned from the far end,
because several balances may exist and the one with most steam counts.

Must not live here: fluids, geometry, liquid states, the valve, reporting.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal

from scipy.optimize import brentq

from .case import GRAVITY, Case
from .fluid import HOTTEST
from .path import SteamPath
from .states import boyle_liquid, boyle_pressure, liquid_of, loop_mass

NoBalance = Literal["membrane-full", "vessel-empty"]

TIGHT = 1e-13
SCAN_PER_KNOT = 12


@dataclass(frozen=True)
class Space:
    """A steam space at one vessel pressure."""

    extent: float
    boiling: float
    front_pressure: float
    surplus: float  # W left when the path is used up


class Loop:
    """A case with what does not change during the solution worked out once."""

    def __init__(self, case: Case) -> None:
        self.case = case
        self.liquid = liquid_of(case)
        self.spaces = case.spaces
        self.paths = [SteamPath(case, space) for space in self.spaces]
        shift = case.stagnation_shift
        self.limits = [group.stagnation(case.sun, case.ambient, shift) for group in case.groups]
        self.space_of = [self.spaces.index(group.space) for group in case.groups]
        rho = self.liquid.density
        self.hot_density = rho(case.hot_liquid)
        self.group_density = [rho(min(limit, HOTTEST)) for limit in self.limits]
        self.total = loop_mass(case)
        self.extra = case.allowance * case.content
        self.hot_content = case.content - case.collector_content
        self.low = max(0.0, self.extra)
        self.high = case.vessel * (1.0 - 1e-7)
        self.returning = sum(branch.content for branch in case.branches if branch.role == "return")

    # ---- vessel

    def vessel_temperature(self, vessel_liquid: float) -> float:
        """Of gas and liquid in the vessel: the room's, or mixed from what was there and what has come."""
        case = self.case
        if case.gas == "isothermal":
            return case.room_temperature
        arrived = max(0.0, vessel_liquid - max(0.0, case.liquid_at_filling))
        cool = min(arrived, case.vessel_line_content + case.cooling_vessel_content)
        mild = min(arrived - cool, self.returning)
        hot = arrived - cool - mild
        warmth = mild * (case.operating_return - case.room_temperature) + hot * (
            case.hot_liquid - case.room_temperature
        )
        return case.room_temperature + (warmth / vessel_liquid if vessel_liquid > 0.0 else 0.0)

    def pressure(self, vessel_liquid: float) -> float:
        return boyle_pressure(self.case, vessel_liquid, self.vessel_temperature(vessel_liquid))

    def liquid_at(self, pressure: float) -> float:
        """Vessel liquid at a vessel pressure, kept within the vessel's own limits."""
        if self.case.gas == "isothermal":
            wanted = boyle_liquid(self.case, pressure, self.case.room_temperature)
            return min(max(wanted, self.low), self.high)
        if self.pressure(self.low) >= pressure:
            return self.low
        if self.pressure(self.high) <= pressure:
            return self.high
        return float(
            brentq(lambda v: self.pressure(v) - pressure, self.low, self.high, xtol=1e-15, rtol=TIGHT)
        )

    # ---- steam spaces

    def column(self, elevation: float) -> float:
        return self.hot_density * GRAVITY * elevation

    def power(self, space: int, boiling: float) -> float:
        """Steam power of a space, W."""
        case = self.case
        return sum(
            group.area * group.power(boiling, case.sun, case.ambient, limit)
            for group, limit, own in zip(case.groups, self.limits, self.space_of, strict=True)
            if own == space and boiling < limit
        )

    def front_at(self, space: int, extent: float, vessel_pressure: float) -> Space:
        path = self.paths[space]
        pressure = vessel_pressure - self.column(path.elevation(extent))
        boiling = self.liquid.boiling_temperature(pressure)
        return Space(extent, boiling, pressure, self.power(space, boiling) - path.loss(extent, boiling))

    def settle(self, space: int, vessel_pressure: float) -> Space:
        """Front of a falling path at a vessel pressure: where losses equal steam power."""
        path = self.paths[space]
        last = self.front_at(space, path.end, vessel_pressure)
        if last.surplus >= 0.0:
            return last
        first = self.front_at(space, 0.0, vessel_pressure)
        if first.surplus <= 0.0:
            return first
        below, above = 0, path.end
        while above - below > 1:
            middle = (below + above) // 2
            if self.front_at(space, middle, vessel_pressure).surplus > 0.0:
                below = middle
            else:
                above = middle

        def surplus(extent: float) -> float:
            return self.front_at(space, extent, vessel_pressure).surplus

        return self.front_at(
            space, float(brentq(surplus, below, above, xtol=1e-14, rtol=TIGHT)), vessel_pressure
        )

    def fronts(self, vessel_pressure: float, fixed: dict[int, float]) -> list[Space]:
        return [
            self.front_at(space, fixed[space], vessel_pressure)
            if space in fixed
            else self.settle(space, vessel_pressure)
            for space in range(len(self.spaces))
        ]

    # ---- mass

    def gap(self, vessel_liquid: float, full: list[float], fixed: dict[int, float]) -> float:
        """Mass of the loop, kg, that the guess leaves unplaced. `full` is the liquid share of each group."""
        fronts = self.fronts(self.pressure(vessel_liquid), fixed)
        return self.gap_with(vessel_liquid, full, fronts)

    def gap_with(self, vessel_liquid: float, full: list[float], fronts: list[Space]) -> float:
        steam = [self.liquid.steam_density(front.boiling) for front in fronts]
        filled = [path.volume(front.extent) for path, front in zip(self.paths, fronts, strict=True)]
        held = (self.hot_content - sum(filled)) * self.hot_density
        held += sum(volume * density for volume, density in zip(filled, steam, strict=True))
        for index, group in enumerate(self.case.groups):
            steam_density = steam[self.space_of[index]]
            held += group.content * (
                full[index] * self.group_density[index] + (1.0 - full[index]) * steam_density
            )
        vessel_density = self.liquid.density(self.vessel_temperature(vessel_liquid))
        return self.total - held - vessel_density * (vessel_liquid - self.extra)

    def steps(self, fixed: dict[int, float]) -> list[tuple[float, int]]:
        """Vessel content at which each group's space boils exactly at that group's stagnation temperature."""
        found = []
        for index, limit in enumerate(self.limits):
            space = self.space_of[index]
            path = self.paths[space]
            if limit > HOTTEST:
                found.append((self.high, index))
                continue
            extent = fixed.get(space)
            if extent is None:
                extent = path.extent_of_loss(limit, self.power(space, limit))
            pressure = self.liquid.bubble_pressure(limit) + self.column(path.elevation(extent))
            found.append((self.liquid_at(pressure), index))
        return sorted(found)

    def balance(self, fixed: dict[int, float]) -> tuple[float, list[float]] | NoBalance:
        """Vessel liquid and liquid share of each group, or why there is none."""
        steps = self.steps(fixed)
        full = [0.0] * len(self.limits)
        for at, index in steps:
            full[index] = 1.0 if at <= self.low else 0.0
        start = self.low
        if self.gap(start, full, fixed) < 0.0:
            return "vessel-empty"
        for at, index in steps:
            if at <= self.low or at >= self.high:
                continue
            before = self.gap(at, full, fixed)
            if before < 0.0:
                return self._root(start, at, full, fixed), full
            full[index] = 1.0
            after = self.gap(at, full, fixed)
            if after <= 0.0:
                full[index] = before / (before - after)
                return at, full
            start = at
        if self.gap(self.high, full, fixed) > 0.0:
            return "membrane-full"
        return self._root(start, self.high, full, fixed), full

    def _root(self, low: float, high: float, full: list[float], fixed: dict[int, float]) -> float:
        return float(brentq(lambda v: self.gap(v, full, fixed), low, high, xtol=1e-16, rtol=TIGHT))

    # ---- rising paths

    def surplus_at(self, space: int, extent: float) -> float:
        """Steam power left at a given extent once the masses balance; the vessel content is nested here."""
        found = self.balance({space: extent})
        vessel_liquid = (
            found[0] if isinstance(found, tuple) else self.high if found == "membrane-full" else self.low
        )
        return self.front_at(space, extent, self.pressure(vessel_liquid)).surplus

    def furthest_extent(self, space: int) -> float:
        """Largest extent at which power and loss balance, or the end of the path if power is left there."""
        end = self.paths[space].end
        above = float(end)
        if self.surplus_at(space, above) >= 0.0:
            return above
        for step in range(end * SCAN_PER_KNOT - 1, -1, -1):
            below = step / SCAN_PER_KNOT
            if self.surplus_at(space, below) > 0.0:
                root = brentq(
                    lambda extent: self.surplus_at(space, extent), below, above, xtol=1e-13, rtol=TIGHT
                )
                return float(root)
            above = below
        return 0.0
