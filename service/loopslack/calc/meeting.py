"""Several steam spaces of one loop, which meet in nothing but the vessel's pressure and the mass they push into it.

What each space does at a pressure does not depend on the vessel, so the pressures at which a group stops boiling are
worked out once for a loop. Between two of them all spaces are solved at once. Which state is the equilibrium is
decided in ``equilibrium``.
"""

from itertools import pairwise

from msgspec.structs import replace

from loopslack.calc.balance import Balance, Extent, Jumps, Spaces, part_emptied
from loopslack.calc.charge import VesselLaw
from loopslack.calc.steam_state import Steam
from loopslack.kernel.errors import NotApplicable
from loopslack.kernel.roots import bracketed, first_crossing

_AGREED = 1e-11  # share of a pressure, or of the gas in the vessel, to which a joint solution has to be right
_LEAP = 1e-8  # share of the vessel's volume by which a balance that a leap of steam keeps open is known
_ROUNDS = 14  # of the joint solution; five or six are usual
_FIRST, _LONGEST = 0.3, 25.0  # K: its first step, which shows the slopes, and the longest one
_SECANTS = 8
_STEPS = 24  # along a fold
_HALVINGS = 60


class Meeting:
    """The vessel pressure as the unknown of a loop with several steam spaces, up to the valve's at ``limit``."""

    # Each space takes its largest extent at a pressure, which shrinks as pressure rises: one root at most.
    falling = True
    near: float | None = None

    def __init__(self, balance: Balance, limit: Extent) -> None:
        self.balance, self.limit = balance, limit
        self.high, self.low = limit.pressure, 0.0
        if balance.jumps is None:
            balance.jumps = Jumps(balance.spaces)
        self._jumps = balance.jumps
        self.jumps = [pressure for pressure in self._jumps.pressures if pressure <= self.high]
        self._known: dict[float, Spaces] = {} if self.high in self.jumps else {self.high: limit.spaces}

    def start(self, lowest: float) -> None:
        """Raise the lower end to the vessel's lowest pressure (Pa)."""
        self.low = min(lowest, self.high)
        self.jumps = [pressure for pressure in self.jumps if pressure >= self.low]

    def at(self, coordinate: float, *, below: bool = True) -> tuple[float, Extent]:
        """Vessel pressure and extent at a vessel pressure."""
        return coordinate, self.balance.extent(coordinate, self._spaces(coordinate, below=below))

    def at_once(self, law: VesselLaw) -> tuple[float, Extent] | None:
        """The root with its extent, from where the last one was or from the limit; None if it is not found so.

        What settles is the root and no other, if no space has a larger extent at that pressure: room then grows and
        liquid falls with pressure, across the jumps too, so that there is one, and a residue bounds its error.
        """
        spaces = self.balance.spaces
        start = self.balance.last or self.limit.spaces
        for _ in spaces:
            found = self._together(law, list(start))
            if found is None:
                return None
            pressure, extent = found
            # What was taken as liquid and would boil there: steam of its own raises the pressure of all.
            late = [
                k
                for k, steam in enumerate(extent.spaces)
                if not steam.boiling and not self._jumps.liquid_at(k, pressure)
            ]
            if not late:
                return self._accepted(pressure, extent)
            start = tuple(
                space.at_pressure(pressure) if k in late else steam
                for k, (space, steam) in enumerate(zip(spaces, extent.spaces, strict=True))
            )
        return None

    def _together(self, law: VesselLaw, found: list[Steam]) -> tuple[float, Extent] | None:
        """A state of rest near a start, with the same spaces boiling as there; None if it does not settle.

        All spaces and the vessel are solved together: each space is followed along its own secant, the vessel's law is
        taken as it is.
        """
        spaces = self.balance.spaces
        moving = [k for k, steam in enumerate(found) if steam.boiling]
        if not moving:
            extent = self.balance.extent(0.0, tuple(found))
            return law.charge.pressure_holding(*law.held(extent.expelled)), extent
        before = {k: (found[k].temperature, *self._place(k, found[k])) for k in moving}
        there = {
            k: max(0.5 * (found[k].temperature + spaces[k].coldest), found[k].temperature - _FIRST)
            for k in moving
        }
        slopes: dict[int, tuple[float, float]] = {}  # of pressure by temperature, of mass by pressure
        for _ in range(_ROUNDS):
            gain = mass = 0.0
            for k in moving:
                old, at_old, held = before[k]
                here, found[k] = spaces[k].at(there[k])
                before[k] = there[k], here, found[k].mass
                if k not in slopes or abs(here - at_old) > _AGREED * here:
                    if here <= 0 or (here - at_old) * (there[k] - old) <= 0:
                        return None
                    rise = here - at_old
                    slopes[k] = rise / (there[k] - old), (found[k].mass - held) / rise
                gain += slopes[k][1]
                mass += slopes[k][1] * here
            extent = self.balance.extent(0.0, tuple(found))
            # Masses as straight lines in the pressure: what is expelled falls by ``gain`` per Pa.
            pressure = _settled(law, extent.expelled + mass, gain, before[moving[0]][1])
            if pressure is None:
                return None
            gas = law.charge.nominal - law.held(extent.expelled)[0]
            if abs(law.excess(pressure, extent.expelled)) <= _AGREED * gas and all(
                abs(before[k][1] - pressure) <= _AGREED * pressure for k in moving
            ):
                return pressure, extent
            for k in moving:
                step = (pressure - before[k][1]) / slopes[k][0]
                moved = there[k] + min(max(step, -_LONGEST), _LONGEST)
                lowest, highest = spaces[k].coldest, spaces[k].highest_boiling()
                if there[k] == lowest > moved or there[k] == highest < moved:
                    return None  # it would have to boil where it cannot
                there[k] = min(max(moved, lowest), highest)
        return None

    def find(
        self, law: VesselLaw, low: float, high: float, at_low: float, at_high: float, tolerance: float
    ) -> tuple[float, Extent]:
        """The root in a stretch without jumps, with its extent. Raises ``NotApplicable`` where it cannot be found."""
        end, below = (low, False) if -at_low < at_high else (high, True)
        together = self._together(law, list(self._spaces(end, below=below)))
        if together is not None and low < together[0] < high:
            found = self._accepted(*together)
            if found is not None:
                return found

        def excess(pressure: float) -> float:
            return law.excess(pressure, self.at(pressure, below=False)[1].expelled)

        pressure = bracketed(excess, low, high, at_low, at_high, tolerance).at
        _, extent = self.at(pressure, below=False)
        if abs(law.excess(pressure, extent.expelled)) <= _LEAP * law.charge.nominal:
            self.balance.last = extent.spaces
            return pressure, extent
        # The leap keeps the balance open: its two sides are wanted, as close as may be.
        for _ in range(_HALVINGS):
            middle = 0.5 * (low + high)
            low, high = (middle, high) if excess(middle) < 0 else (low, middle)
        return self._along_fold(law, low, high)

    def _spaces(self, pressure: float, *, below: bool) -> Spaces:
        if pressure in self._jumps.pressures:
            return self._jumps.at(pressure, below=below)
        known = self._known.get(pressure)
        if known is None:
            known = self._known[pressure] = tuple(s.at_pressure(pressure) for s in self.balance.spaces)
        return known

    def _place(self, k: int, steam: Steam) -> tuple[float, float]:
        """Vessel pressure (Pa) and mass (kg) that belong to a space's steam."""
        space = self.balance.spaces[k]
        return space.fluid.bubble_pressure(steam.temperature) + space.column * steam.height, steam.mass

    def _accepted(self, pressure: float, extent: Extent) -> tuple[float, Extent] | None:
        """A solution, if it lies where the vessel may stand and no space has a larger extent there."""
        if not self.low < pressure < self.high:
            return None
        for k, (space, steam) in enumerate(zip(self.balance.spaces, extent.spaces, strict=True)):
            if steam.boiling and not space.is_largest(steam.temperature, pressure):
                return None
            if not steam.boiling and not self._jumps.liquid_at(k, pressure):
                return None
        self.balance.last = extent.spaces
        return pressure, replace(extent, pressure=pressure)

    def _along_fold(self, law: VesselLaw, below: float, above: float) -> tuple[float, Extent]:
        """The root where a space with rising runs leaps at a pressure: on the states between, which no pressure picks.

        They are walked by the steam temperature of the space, at whose pressure the others stand.
        """
        spaces = self.balance.spaces
        before, after = self._spaces(below, below=False), self._spaces(above, below=False)
        leaps = [b.temperature - a.temperature for a, b in zip(before, after, strict=True)]
        k = max(range(len(leaps)), key=leaps.__getitem__)
        low, high = before[k].temperature, after[k].temperature

        def at(temperature: float) -> tuple[float, Extent]:
            here, steam = spaces[k].at(temperature)
            others = [space.at_pressure(here) for space in spaces]
            return here, self.balance.extent(here, (*others[:k], steam, *others[k + 1 :]))

        def excess(temperature: float) -> float:
            here, extent = at(temperature)
            return law.excess(here, extent.expelled)

        stops = sorted(
            {a + (b - a) * n / _STEPS for a, b in pairwise(spaces[k].stops(low, high)) for n in range(_STEPS)}
            | {high}
        )
        crossing = first_crossing(excess, stops, 1e-14 * high)
        found = None if crossing is None else at(crossing.at)
        if found is None and not after[k].boiling:
            found = self._beside_liquid(law, k, above, after[k])
        if found is None or abs(law.excess(found[0], found[1].expelled)) > _LEAP * law.charge.nominal:
            raise NotApplicable(
                "no state of rest was found: steam in runs that rise would leap past every one",
                remedy="Check the heights of the runs, or state no crest.",
                pointer="/pipeRuns",
            )
        return found

    def _beside_liquid(
        self, law: VesselLaw, k: int, highest: float, liquid: Steam
    ) -> tuple[float, Extent] | None:
        """The root below a pressure (Pa) with space ``k`` liquid, as it stays where steam never got past its rise.

        Or, where even that leaves room, part evaporated at its stagnation temperature.
        """
        spaces = self.balance.spaces

        def at(pressure: float, own: Steam = liquid) -> tuple[float, Extent]:
            states = [own if n == k else space.at_pressure(pressure) for n, space in enumerate(spaces)]
            return pressure, self.balance.extent(pressure, tuple(states))

        def excess(pressure: float) -> float:
            return law.excess(pressure, at(pressure)[1].expelled)

        top = spaces[k].highest_boiling()
        leaving, full = spaces[k].at(top)
        lowest = max(self.low, leaving)
        at_low, at_high = excess(lowest), excess(highest)
        if lowest >= highest or at_high < 0:
            return None
        if at_low < 0:
            return at(bracketed(excess, lowest, highest, at_low, at_high, 1e-12 * highest).at)
        if leaving < self.low:
            return None
        _, none = at(leaving)
        _, whole = at(leaving, full)
        share = bracketed(
            lambda part: law.excess(leaving, none.expelled + part * (whole.expelled - none.expelled)),
            0.0,
            1.0,
            at_low,
            law.excess(leaving, whole.expelled),
            1e-13,
        ).at
        return at(leaving, part_emptied(liquid, full, share))


def _settled(law: VesselLaw, expelled: float, gain: float, start: float) -> float | None:
    """Pressure (Pa) at which the vessel has room for ``expelled - gain p`` kg, by secants from a start.

    They go by the inverse of the pressure, in which the gas takes its volume along a straight line.
    """
    here, beside = 1 / start, (1 - 1e-4) / start
    value = law.excess(start, expelled - gain * start)
    for _ in range(_SECANTS):
        pressure = 1 / beside
        following = law.excess(pressure, expelled - gain * pressure)
        if following == value or abs(beside - here) <= 0.1 * _AGREED * here:
            return pressure if abs(beside - here) <= _AGREED * here else None
        here, value, beside = beside, following, beside - following * (beside - here) / (following - value)
        if beside <= 0:
            return None
    return 1 / beside
