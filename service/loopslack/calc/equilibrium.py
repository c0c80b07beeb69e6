"""The stagnation equilibrium of a loop with a given vessel: the largest extent of steam.

Vessel pressure decides the steam, steam decides what the vessel must hold, and that decides its pressure. One root
closes the circle. On a falling path it is unique; the valve is looked at first, since no state is reported for a
pressure it would not allow.
"""

from collections.abc import Callable
from math import inf
from typing import Literal

from msgspec import Struct
from msgspec.structs import replace

from loopslack.calc.balance import Balance, Extent, Mixing, part_emptied
from loopslack.calc.charge import Charge, VesselLaw
from loopslack.calc.meeting import Meeting
from loopslack.kernel.errors import NotApplicable
from loopslack.kernel.roots import bracketed, first_crossing, near

Regime = Literal["no-boiling", "pinned", "steam", "valve-opens"]

_RELATIVE = 2e-11  # of a steam temperature, 1e-8 K: a hundredth of what rounding may do to a verdict
_CLOSED = 1e-11  # share of the nominal volume to which the balance of volumes closes

_NEAR = 1.0  # K around the last steam temperature in which the next one is looked for first

ROUNDING = 1e-9  # share within which a state at a limit counts as at the limit: the solvers' own rounding


class Equilibrium(Struct, frozen=True, gc=False):
    """Where loop and vessel come to rest: pressures Pa absolute at the vessel, volumes m3, temperatures K.

    ``bound`` is True where pressure and steam are lower bounds only: the valve opens, the membrane is full, or
    power is left at the station.
    """

    regime: Regime
    pressure: float
    extent: Extent
    liquid: float
    gas_temperature: float
    mixed_temperature: float
    last_temperature: float
    bound: bool


def equilibrium(
    balance: Balance,
    charge: Charge,
    mix: Mixing,
    *,
    gas_follows: bool,
    opening: float,
    limit: Extent | None = None,
) -> Equilibrium:
    """Solve a loop with a charged vessel, up to the vessel pressure ``opening`` (Pa) at which the valve opens.

    ``limit`` is the extent at that pressure, if it is known already. Raises ``OutOfRange`` where a fluid property
    would be needed outside its range.
    """
    law = VesselLaw(balance, charge, mix, gas_follows=gas_follows)
    if limit is None:
        limit = balance.at_pressure(opening)
    missing = law.excess(opening, limit.expelled)
    if missing < -ROUNDING * charge.nominal:
        return _state("valve-opens", opening, limit, law)
    if missing <= 0:
        return _state("steam" if limit.boiling else "no-boiling", opening, limit, law)
    single = len(balance.spaces) == 1
    return _solve(balance, law, _OneSpace(balance, limit) if single else Meeting(balance, limit), limit)


class _OneSpace:
    """One steam space: the steam temperature is the unknown, since everything else follows from it."""

    def __init__(self, balance: Balance, limit: Extent) -> None:
        self.balance, self.space = balance, balance.spaces[0]
        steam = limit.spaces[0]
        self.high = steam.temperature if steam.boiling else self.space.highest_boiling()
        self.low = self.space.coldest
        self.jumps = [t for t in self.space.stagnations if self.low < t <= self.high]
        self.falling = self.space.path.falling
        self._seen: dict[tuple[float, bool], tuple[float, Extent]] = {}

    @property
    def near(self) -> float | None:
        """Where the last root was."""
        return self.balance.near

    @near.setter
    def near(self, at: float) -> None:
        self.balance.near = at

    def start(self, lowest: float) -> None:
        """Raise the lower end to the steam temperature at the vessel's lowest pressure (Pa)."""
        self.low = min(self.high, self.space.boiling_below(lowest))
        self.jumps = [t for t in self.jumps if t >= self.low]

    def at(self, coordinate: float, *, below: bool = True) -> tuple[float, Extent]:
        """Vessel pressure and extent at a steam temperature."""
        found = self._seen.get((coordinate, below))
        if found is None:
            pressure, steam = self.space.at(coordinate, below=below)
            found = self._seen[coordinate, below] = pressure, self.balance.extent(pressure, (steam,))
        return found

    def find(
        self, law: VesselLaw, low: float, high: float, at_low: float, at_high: float, tolerance: float
    ) -> tuple[float, Extent]:
        """The root in a stretch without jumps, with its vessel pressure and extent."""

        def excess(coordinate: float) -> float:
            pressure, extent = self.at(coordinate, below=False)
            return law.excess(pressure, extent.expelled)

        at = None
        if not self.falling:
            stops = self.space.stops(low, high)
            crossing = first_crossing(lambda x: at_low if x == low else excess(x), stops, tolerance)
            at = None if crossing is None else crossing.at
        if at is None and at_low < 0 < at_high:
            slope = (at_high - at_low) / (high - low)
            # Towards vacuum the room falls without end, so that the mean slope alone would ask for too little.
            accuracy = min(slope * tolerance, _CLOSED * law.charge.nominal)
            at = near(excess, low, high, low - at_low / slope, slope, accuracy).at
        elif at is None:
            at = bracketed(excess, low, high, at_low, at_high, tolerance).at
        self.near = at
        return self.at(at, below=False)


def _solve(balance: Balance, law: VesselLaw, curve: _OneSpace | Meeting, limit: Extent) -> Equilibrium:
    """Walk from jump to jump upwards; the root lies before the first one, across one, or after the last."""
    charge = law.charge
    curve.start(charge.precharge * charge.room / charge.precharge_temperature)

    def excess(coordinate: float, *, below: bool = True) -> float:
        pressure, extent = curve.at(coordinate, below=below)
        return law.excess(pressure, extent.expelled)

    if isinstance(curve, Meeting):
        found = curve.at_once(law)
        if found is not None:
            return _state("steam" if found[1].boiling else "no-boiling", *found, law)
    around = _around(curve, excess)
    if around is not None:
        return _between(curve, law, *around)
    low = curve.low
    # On a falling path room grows with the coordinate, so that the lower end is of use below the first jump only.
    at_low = -inf if curve.falling and curve.jumps else excess(low)
    if at_low >= 0:
        return _at_lowest(curve, law)
    for jump in curve.jumps:
        below = excess(jump)
        if below >= 0:
            if at_low == -inf:
                at_low = excess(low)
            return _at_lowest(curve, law) if at_low >= 0 else _between(curve, law, low, jump, at_low, below)
        above = excess(jump, below=False)
        if above >= 0:
            return _pinned(balance, curve, law, jump, below, above)
        low, at_low = jump, above
    if limit.boiling:
        # The valve stays shut at the limit, so the root lies at or below it, rounding apart.
        pressure, extent = curve.at(curve.high, below=False)
        at_high = law.excess(pressure, extent.expelled)
        if at_high > 0:
            return _between(curve, law, low, curve.high, at_low, at_high)
        return _state("steam", pressure, extent, law)
    return _state("no-boiling", limit.pressure, limit, law)


def _at_lowest(curve: _OneSpace | Meeting, law: VesselLaw) -> Equilibrium:
    """At the vessel's lowest pressure, at which it has room for all that is pushed out."""
    pressure, extent = curve.at(curve.low)
    return _state("steam" if extent.boiling else "no-boiling", pressure, extent, law)


def _between(
    curve: _OneSpace | Meeting,
    law: VesselLaw,
    low: float,
    high: float,
    at_low: float,
    at_high: float,
) -> Equilibrium:
    """The root inside a stretch without jumps; the lowest one, with most steam, where there are several."""
    pressure, extent = curve.find(law, low, high, at_low, at_high, _RELATIVE * high)
    spaces = zip(curve.balance.spaces, extent.spaces, strict=True)
    pinned = any(steam.boiling and steam.temperature == space.hottest for space, steam in spaces)
    return _state("pinned" if pinned else "steam", pressure, extent, law)


def _around(
    curve: _OneSpace | Meeting, excess: Callable[[float], float]
) -> tuple[float, float, float, float] | None:
    """Ends and values of a narrow bracket around where the last root was; None unless it is there again."""
    last = curve.near
    if last is None or not curve.falling:
        return None
    least, most = last - _NEAR, last + _NEAR
    if least <= curve.low or most >= curve.high or any(least <= jump <= most for jump in curve.jumps):
        return None
    here = excess(last)
    if here < 0:
        beyond = excess(most)
        return (last, most, here, beyond) if beyond >= 0 else None
    beyond = excess(least)
    return (least, last, beyond, here) if beyond < 0 else None


def _pinned(
    balance: Balance,
    curve: _OneSpace | Meeting,
    law: VesselLaw,
    jump: float,
    below: float,
    above: float,
) -> Equilibrium:
    """Part of one group has evaporated: its steam holds the pressure, its share closes the balance."""
    pressure, full = curve.at(jump)
    _, none = curve.at(jump, below=False)

    def at(share: float) -> float:
        expelled = none.expelled + share * (full.expelled - none.expelled)
        return law.excess(pressure, expelled)

    share = bracketed(at, 0.0, 1.0, above, below, _RELATIVE).at
    spaces = tuple(part_emptied(a, b, share) for a, b in zip(none.spaces, full.spaces, strict=True))
    return _state("pinned", pressure, balance.extent(pressure, spaces), law)


def _state(regime: Regime, pressure: float, extent: Extent, law: VesselLaw) -> Equilibrium:
    """Put an equilibrium together; the pressure follows from what the vessel holds, so that mass closes."""
    liquid, gas = law.held(extent.expelled)
    charge = law.charge
    bound = regime == "valve-opens" or extent.unspent > 0
    if regime != "valve-opens":
        pressure = charge.pressure_holding(liquid, gas)
        if pressure == float("inf"):
            raise NotApplicable(
                "no state of rest was found: at the one that was, the liquid would more than fill the vessel",
                remedy="Check heights and contents; where they are right, take a larger vessel.",
            )
    return Equilibrium(
        regime,
        pressure,
        replace(extent, pressure=pressure),
        liquid,
        gas,
        law.mix.temperature(charge.filled, liquid),
        law.mix.last(charge.filled, liquid),
        bound,
    )
