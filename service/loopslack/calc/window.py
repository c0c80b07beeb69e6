"""The fill window: between which fill pressures a given vessel keeps every check.

The mass of liquid a vessel is filled with has a lower bound from each check that wants pressure or reserve and an
upper bound from each that wants room. In that mass most bounds are linear in the nominal volume; a window at any
fill temperature follows from it.
"""

from collections.abc import Sequence
from math import inf

from msgspec import Struct

from loopslack.calc.analysis import Analysis
from loopslack.calc.equilibrium import ROUNDING
from loopslack.calc.hot_limits import HotLimits, hot_limits
from loopslack.calc.scenarios import Scenario
from loopslack.kernel.kinds import NominalVolume, Volume
from loopslack.physics.vessel import reserve_en_12828

_TIE = 1e-10  # share of a mass within which two bounds are one: a tenth of what rounding may do to a verdict
_WARM_KELVIN = 1e-11  # what a mixed temperature may be off
_WARM_PASSES = 80  # five are usual; where two answers are about to vanish the passes get slow


Line = tuple[str, str, float, float]
"""A bound that is linear in the vessel: check, scenario, slope (kg/m3), offset (kg); slope * nominal - offset."""


class Bound(Struct, frozen=True, gc=False):
    """A bound on the filling of the vessel: which check sets it, under which scenario, and the mass (kg)."""

    code: str
    scenario: str
    mass: float


class Gas(Struct, frozen=True, gc=False):
    """The gas side of a vessel (all of it, if there are several): volumes m3, precharge Pa absolute at K."""

    nominal: float
    precharge: float
    temperature: float
    acceptance: float = inf


class Window(Struct, frozen=True, gc=False):
    """Fill pressures (Pa absolute at the vessel, loop at ``temperature`` K) that keep every check.

    Empty when ``upper`` is below ``lower``; ``wide_enough`` says whether an installer can hit it.
    """

    temperature: float
    lower: float
    upper: float
    recommended: float
    wide_enough: bool
    lower_bound: Bound
    upper_bound: Bound

    @property
    def width(self) -> float:
        """Width, Pa; negative when empty."""
        return self.upper - self.lower

    @property
    def usable(self) -> bool:
        """Whether it holds the fill pressure recommended, however hard that is to hit."""
        return -inf < self.lower < self.upper < inf and self.recommended <= self.upper


class FillLaw:
    """What a filled vessel of one precharge holds and which pressure it shows; volumes m3, masses kg."""

    def __init__(self, analysis: Analysis, gas: Gas) -> None:
        self.analysis = analysis
        self.precharge, self.temperature = gas.precharge, gas.temperature
        self.fill_density = analysis.states.fill.vessel_density

    def reserve(self, nominal: float) -> float:
        """Liquid (m3) a vessel must still hold when cold."""
        stated = self.analysis.loop.criteria.reserve
        if stated is not None:
            return stated
        return reserve_en_12828(NominalVolume(nominal), Volume(self.analysis.content))

    def pressure(self, nominal: float, mass: float, temperature: float) -> float:
        """Fill pressure (Pa) with a mass (kg) in the vessel, loop and gas at ``temperature`` K.

        ``mass`` counts at the fill temperature; at another one the loop takes or gives its expansion. Minus
        infinity for an empty vessel, whose pressure is not defined.
        """
        analysis = self.analysis
        if temperature == analysis.loop.temperatures.fill:
            held = mass / self.fill_density
        else:
            total = mass + self.fill_density * analysis.content
            held = total / analysis.fluid.density(temperature) - analysis.content
        if held <= 0:
            return -inf
        gas = nominal - held
        if gas <= 0:
            return inf
        return self.precharge * nominal / gas * temperature / self.temperature

    def mass(self, nominal: float, pressure: float) -> float:
        """Mass (kg) in the vessel at a fill pressure (Pa) at the fill temperature, as a bound wants it.

        Negative below the precharge; what a vessel is filled with is told by ``filled``.
        """
        fill = self.analysis.loop.temperatures.fill
        return self.fill_density * nominal * (1 - self.precharge * fill / self.temperature / pressure)

    def filled(self, nominal: float, pressure: float) -> float:
        """Mass (kg) in the vessel filled to a pressure (Pa): none below the precharge, since the gas keeps it out."""
        return max(0.0, self.mass(nominal, pressure))


class Bounds(FillLaw):
    """Bounds on the filling under a set of scenarios, for vessels of one precharge.

    ``hot`` is what the scenarios ask for, if it is known already.
    """

    def __init__(
        self, analysis: Analysis, scenarios: Sequence[Scenario], gas: Gas, hot: HotLimits | None = None
    ) -> None:
        super().__init__(analysis, gas)
        self.scenarios = scenarios
        room, density = analysis.loop.temperatures.vessel_room, analysis.room_density
        self.room_density = density
        self.squeeze = gas.precharge * room / gas.temperature
        if hot is None:
            hot = hot_limits(analysis, scenarios)
        allowed, squeeze = density * analysis.allowance, self.squeeze
        # The mass with which the vessel just stands at a hot pressure.
        self.upper: list[Line] = [
            (code, id, density * (1 - squeeze / pressure), allowed + expelled)
            for code, id, pressure, expelled in hot.upper
        ]
        self.lower: list[Line] = [self._cold(), self._cut_off()]
        self.lower += [("steam-at-station", id, 0.0, -inf) for id in hot.spoiled]
        self.lower += [
            (code, id, density * (1 - squeeze / pressure), allowed + expelled)
            for code, id, pressure, expelled in hot.lower
        ]
        self.warm, self.hot = hot.warm, hot

    def charged(self, gas: Gas) -> "Bounds":
        """The same bounds for vessels of another precharge."""
        return Bounds(self.analysis, self.scenarios, gas, self.hot)

    def _cold(self) -> Line:
        """The pressure at the top when cold."""
        loop, cold = self.analysis.loop, self.analysis.states.cold
        needed = loop.atmosphere + loop.criteria.top_pressure + cold.column
        squeeze = self.precharge * cold.vessel / self.temperature
        slope = cold.vessel_density * (1 - squeeze / needed)
        return "top-pressure", "cold", slope, cold.vessel_density * cold.allowance + cold.expelled

    def _cut_off(self) -> Line:
        """No boiling at the top when the pump cuts off."""
        slope = self.room_density * (1 - self.squeeze / self.analysis.cut_off_pressure)
        return "boiling-at-cut-off", "cut-off", slope, self.analysis.states.cut_off.expelled

    def masses(self, nominal: float, acceptance: float = inf) -> tuple[Bound, Bound]:
        """Lower and upper bound on the mass (kg) a vessel of ``nominal`` m3 is filled with.

        Of bounds that are one but for rounding the first is named.
        """
        analysis = self.analysis
        least = analysis.states.cold.mass_holding(self.reserve(nominal))
        lowest: tuple[str, str] = "reserve", "cold"
        for code, id, slope, offset in self.lower:
            mass = slope * nominal - offset
            if mass - least > _TIE * abs(least):
                least, lowest = mass, (code, id)
        most = self.fill_density * min(nominal, acceptance)
        highest: tuple[str, str] = "membrane-full", "fill"
        for code, id, slope, offset in self.upper:
            mass = slope * nominal - offset
            if most - mass > _TIE * abs(most):
                most, highest = mass, (code, id)
        for id, case, station in self.warm:
            mass = self._warm_mass(nominal, analysis.final_pressure, case.final.expelled)
            if most - mass > _TIE * abs(most):
                most, highest = mass, ("relief-valve", id)
            if station is not None:
                mass = self._warm_mass(nominal, station.pressure, station.expelled)
                if mass - least > _TIE * abs(least):
                    least, lowest = mass, ("steam-at-station", id)
        lower, upper = Bound(*lowest, least), Bound(*highest, most)
        if acceptance < nominal:
            upper = self._accepting(nominal, acceptance, upper)
        return lower, upper

    def _warm_mass(self, nominal: float, pressure: float, expelled: float) -> float:
        """As ``_line`` with gas and liquid of the vessel at the mixed temperature.

        Warmer gas leaves less room for the cool liquid that was there first, so the mixed temperature rises with
        itself, and bends upwards: a nearly empty vessel can have two answers. Substitution that starts at the
        room's temperature comes to the lower of them, and a secant through two of its passes does so sooner; the
        lower one is the larger mass, on the branch where more liquid means more pressure.
        """
        analysis, mix = self.analysis, self.analysis.mix
        density, fill = analysis.fluid.density, self.fill_density
        squeeze = self.precharge / self.temperature / pressure

        def mass_at(temperature: float) -> tuple[float, float]:
            held = nominal * (1 - squeeze * temperature)
            mass = density(temperature) * (held - analysis.allowance) - expelled
            return mass, mix.temperature(mass / fill if mass > 0 else 0.0, held)

        if squeeze * mix.hot >= 1:
            # Hot gas alone fills the vessel at this pressure: a shortage that grows with the vessel.
            return -expelled - self.room_density * nominal * squeeze * mix.hot
        first = mix.room
        mass, second = mass_at(first)
        error = second - first
        for _ in range(_WARM_PASSES):
            if abs(error) < _WARM_KELVIN or first == second:
                break
            mass, mixed = mass_at(second)
            following = mixed - second
            # Only where the error falls on the way up does the secant lead to the lower answer; else substitute.
            fall = (error - following) / (second - first)
            step = following / fall if fall > 0 else following
            first, error = second, following
            second = min(max(second + step, mix.room), mix.hot) if mix.hot > mix.room else mix.room
        return mass

    def _accepting(self, nominal: float, acceptance: float, highest: Bound) -> Bound:
        """Tighten the upper bound where the membrane takes less than the gas would allow."""
        analysis = self.analysis
        for scenario in self.scenarios:
            room = nominal * (1 - self.squeeze / analysis.final_pressure)
            if acceptance >= room:
                continue
            # At this pressure the gas leaves exactly the acceptance volume. Gas warmer than the room
            # would leave less, so the isothermal reading is the one that fills the membrane most.
            pressure = self.squeeze / (1 - acceptance / nominal)
            extent = analysis.case(scenario).balance.at_pressure(pressure)
            mass = self.room_density * (acceptance - analysis.allowance) - extent.expelled
            if mass < highest.mass:
                highest = Bound("acceptance", scenario.id, mass)
        return highest

    def window(self, nominal: float, acceptance: float = inf) -> Window:
        """The window of a vessel of ``nominal`` m3 at the fill temperature."""
        lower, upper = self.masses(nominal, acceptance)
        return self.window_between(nominal, lower, upper, self.analysis.loop.temperatures.fill)

    def window_between(self, nominal: float, lower: Bound, upper: Bound, temperature: float) -> Window:
        """A pair of mass bounds as fill pressures with the loop and the gas at ``temperature`` K."""
        criteria = self.analysis.loop.criteria
        low = self.pressure(nominal, lower.mass, temperature)
        high = self.pressure(nominal, upper.mass, temperature)
        base = self.precharge * temperature / self.temperature + criteria.fill_above_precharge
        recommended = max(low + criteria.window_step, base) if low < inf else base
        enough = (
            upper.mass > lower.mass
            and high < inf
            and high - low >= criteria.window_width - ROUNDING * high
            and high - base >= criteria.window_step - ROUNDING * high
        )
        return Window(temperature, low, high, recommended, enough, lower, upper)
