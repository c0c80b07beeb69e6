"""The mass balance of the closed loop: what the vessel must hold in each state.

The loop is filled once and mass is conserved until the relief valve opens. ``Balance`` holds the part of the
balance that a loop and a scenario fix; a vessel enters through its liquid when filled and its pressure.
"""

from collections.abc import Sequence
from math import inf

from msgspec import Struct
from msgspec.structs import replace

from loopslack.calc.model import Branch, CollectorGroup, Loop
from loopslack.calc.scenarios import Scenario
from loopslack.calc.steam import SteamSpace
from loopslack.calc.steam_state import Steam
from loopslack.kernel.roots import bracketed

Spaces = tuple[Steam, ...]

_PASCAL = 1e-14  # share of a pressure to which that of the station is found, of the size of its rounding


class Extent(Struct, frozen=True, gc=False):
    """Steam in every space at one vessel pressure, and the mass pushed out of the loop since filling.

    ``expelled`` (kg) is what the vessel takes up on top of its filling; ``unspent`` (W) reaches the station beyond
    what is said to be taken there.
    """

    pressure: float
    spaces: tuple[Steam, ...]
    expelled: float
    unspent: float

    @property
    def steam_volume(self) -> float:
        """Collectors and pipes filled with steam, m3."""
        return sum(space.emptied + space.pipe for space in self.spaces)

    @property
    def boiling(self) -> bool:
        """Whether any space boils."""
        return any(space.boiling for space in self.spaces)


def part_emptied(none: Steam, full: Steam, share: float) -> Steam:
    """A space in which a group has evaporated by a share, between none of it and all."""
    if full.emptied <= none.emptied:
        return none
    return replace(
        none,
        temperature=full.temperature,
        boiling=True,
        emptied=none.emptied + share * (full.emptied - none.emptied),
        mass=none.mass + share * (full.mass - none.mass),
        vapour_density=full.vapour_density,
    )


class Mixing(Struct, frozen=True, gc=False):
    """Liquid that arrives in the vessel in order: volume (m3) and temperature (K) of the room, return and hot part."""

    room: float
    cool: float
    back: float
    back_volume: float
    hot: float

    def temperature(self, filled: float, held: float) -> float:
        """Volume-weighted temperature (K) of ``held`` m3, of which ``filled`` m3 were there at room temperature.

        No losses: the liquid of the vessel line and the cooling vessel arrives first at room temperature, then the
        return pipe at the return temperature, then the rest hot. Errs on the hot side. A loop that was short of
        liquid when filled (``filled`` below 0) had none in the vessel.
        """
        filled = max(filled, 0.0)
        if held <= filled:
            return self.room
        arrived = held - filled
        cool = arrived if arrived < self.cool else self.cool
        arrived -= cool
        back = arrived if arrived < self.back_volume else self.back_volume
        hot = arrived - back
        return ((filled + cool) * self.room + back * self.back + hot * self.hot) / held

    def last(self, filled: float, held: float) -> float:
        """Temperature (K) of the liquid that arrived last."""
        arrived = held - max(filled, 0.0)
        if arrived <= self.cool:
            return self.room
        return self.back if arrived <= self.cool + self.back_volume else self.hot


def mixing(loop: Loop) -> Mixing:
    """How the liquid of a loop arrives in its vessel."""
    temperatures = loop.temperatures
    return Mixing(
        temperatures.vessel_room,
        loop.line_content + loop.cooling_content,
        temperatures.back,
        sum(branch.content for branch in loop.branches if branch.role == "return"),
        temperatures.hot_liquid,
    )


class Jumps:
    """The vessel pressures at which a group stops boiling, of a loop with several steam spaces.

    They and the spaces on either side do not depend on the vessel, and are worked out once.
    """

    def __init__(self, spaces: Sequence[SteamSpace]) -> None:
        self.spaces = spaces
        self._own = [
            {
                pressure: t
                for t in space.stagnations
                if space.coldest < t <= space.highest_boiling()
                and space.is_largest(t, pressure := space.pressure(t))
            }
            for space in spaces
        ]
        self.pressures = sorted({pressure for jumps in self._own for pressure in jumps})
        self._known: dict[tuple[float, bool], Spaces] = {}

    def liquid_at(self, space: int, pressure: float) -> bool:
        """Whether no group of a space boils at a vessel pressure (Pa)."""
        asked = self.spaces[space]
        known = asked.hottest <= asked.fluid.boiling_highest
        highest = max(self._own[space], default=0.0) if asked.path.falling else asked.peak()
        return known and pressure > highest

    def at(self, pressure: float, *, below: bool) -> Spaces:
        """The spaces just below or just above a jump.

        The side is decided by pressure, not by a temperature that rounding has moved.
        """
        known = self._known.get((pressure, below))
        if known is None:
            known = self._known[pressure, below] = tuple(
                space.at(jumps[pressure], below=below)[1]
                if pressure in jumps
                else space.at_pressure(pressure, below=below)
                for space, jumps in zip(self.spaces, self._own, strict=True)
            )
        return known


class Balance:
    """The stagnation balance of a loop under one reading of its steam."""

    def __init__(self, loop: Loop, scenario: Scenario) -> None:
        fluid = loop.fluid
        self.loop = loop
        hot = fluid.density(loop.temperatures.hot_liquid)
        spaces: dict[int, tuple[list[CollectorGroup], list[Branch]]] = {}
        for group in loop.groups:
            spaces.setdefault(group.space, ([], []))[0].append(group)
        still = loop.station.content + loop.line_content + loop.cooling_content
        for branch in loop.branches:
            if is_open(branch, scenario):
                spaces[branch.space][1].append(branch)
            else:
                still += branch.content
        self.spaces = [SteamSpace(loop, scenario, groups, branches) for groups, branches in spaces.values()]
        self.filled_mass = fluid.density(loop.temperatures.fill) * loop.content
        self.still_mass = hot * still
        self.station_loss = loop.station.steam_loss
        # Steam temperature (K) of the last equilibrium: a search asks for similar ones, and starts there.
        self.near: float | None = None
        # Where groups stop boiling, if there are several steam spaces; found when first asked for.
        self.jumps: Jumps | None = None
        self.last: Spaces | None = None  # of the last equilibrium, if there are several steam spaces

    def extent(self, pressure: float, spaces: tuple[Steam, ...]) -> Extent:
        """Put the spaces together at a vessel pressure (Pa)."""
        mass, unspent = self.still_mass, -self.station_loss
        for space in spaces:
            mass += space.mass
            unspent += space.unspent
        return Extent(pressure, spaces, self.filled_mass - mass, unspent if unspent > 0 else 0.0)

    def at_pressure(self, pressure: float, *, below: bool = True) -> Extent:
        """The extent of steam at a vessel pressure (Pa)."""
        return self.extent(pressure, tuple(space.at_pressure(pressure, below=below) for space in self.spaces))

    def liquid(self) -> Extent:
        """Nothing boils; the pressure is whatever the vessel makes of it."""
        return self.extent(0.0, tuple(space.liquid() for space in self.spaces))

    def station_pressure(self) -> float | None:
        """Lowest vessel pressure (Pa) that leaves no steam unspent, infinite if none does, None if any does.

        What the station takes is shared by all steam spaces that reach it.
        """
        if len(self.spaces) == 1:
            return self.spaces[0].station_pressure(self.station_loss)
        alone = [space.station_pressure(0.0) for space in self.spaces]
        found = [pressure for pressure in alone if pressure is not None]
        if not found or self.station_loss <= 0:
            return max(found) if found else None
        # Beyond the bubble line of a space it is not known whether its steam would still arrive.
        known = [
            space.pressure(space.fluid.boiling_highest)
            for space, pressure in zip(self.spaces, alone, strict=True)
            if pressure == inf
        ]
        return self._shared_pressure(min(known) if known else max(found))

    def _shared_pressure(self, high: float) -> float | None:
        """As above, up to ``high`` (Pa): what arrives in all falls as pressure rises."""

        def spare(pressure: float) -> float:
            return self.station_loss - sum(space.unspent(pressure) for space in self.spaces)

        low = min(space.pressure(space.coldest) for space in self.spaces)
        at_low, at_high = spare(low), spare(high)
        if at_low >= 0:
            return None
        if at_high < 0:
            return inf
        step = _PASCAL * abs(high)
        found = bracketed(spare, low, high, at_low, at_high, step).at
        while found < high and spare(found) < 0:  # on the side where all is taken, should steam leap there
            found, step = min(found + step, high), 2 * step
        return found


def is_open(branch: Branch, scenario: Scenario) -> bool:
    """Whether steam can enter a branch; an unstated access is open unless the scenario doubts it."""
    if branch.access == "unknown":
        return not scenario.closed_unknown
    return branch.access == "open"
