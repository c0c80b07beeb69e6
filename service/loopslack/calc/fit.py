"""One vessel of a stated size in a loop: its charge, its cooling vessel, its window. No choosing here."""

from collections.abc import Sequence

from msgspec import Struct
from msgspec.structs import replace

from loopslack.calc.analysis import Analysis
from loopslack.calc.cooling import Charged, cool_window, smallest_content
from loopslack.calc.model import Vessel
from loopslack.calc.precharge import gas_of
from loopslack.calc.scenarios import BASE, Scenario
from loopslack.calc.sizing.volumes import CoolingMode
from loopslack.calc.window import Bounds, FillLaw, Gas, Window
from loopslack.kernel.errors import CalculationError


class Fit(Struct, frozen=True, gc=False):
    """``pieces`` equal vessels in the loop: the gas of all together, the loop with its cooling vessel, the window.

    ``under`` names the scenarios of the window where they are fewer than have to be survived, which no filling does:
    a filling to judge the vessel with, and none to hand out. ``cooling_times`` is how many times the content of the
    smallest volume's cooling vessel its own has, where less would keep the membrane cool but leave the gas too warm for
    a window as wide as demanded; else 0.
    """

    vessel: Vessel
    pieces: int
    gas: Gas
    analysis: Analysis
    window: Window
    under: tuple[Scenario, ...] = ()
    cooling_times: float = 0.0

    @property
    def counted(self) -> bool:
        """Whether the window is that of all scenarios that have to be survived."""
        return not self.under

    @property
    def cooling(self) -> float:
        """Content of the cooling vessel, m3."""
        return self.analysis.loop.cooling_content

    @property
    def mass(self) -> float:
        """Mass (kg) in the vessels when filled as recommended."""
        return self.mass_at(self.window.recommended)

    def mass_at(self, pressure: float) -> float:
        """Mass (kg) in the vessels filled to a pressure (Pa absolute) at the fill temperature."""
        return FillLaw(self.analysis, self.gas).filled(self.gas.nominal, pressure)


def fit(
    analysis: Analysis,
    scenarios: Sequence[Scenario],
    vessel: Vessel,
    count: int,
    cooling: CoolingMode,
    membrane_limit: float,
    content: float | None = None,
) -> Fit | None:
    """Put vessels into a loop, with the cooling vessel they need if the design may add one.

    ``content`` is that cooling vessel's content if it is known already. None where no cooling vessel is large
    enough. The window may still be too narrow: that is the caller's to judge.
    """
    limit = vessel.membrane_limit if vessel.membrane_limit is not None else membrane_limit
    if cooling == "size":
        if content is None:
            content = cooling_for(analysis, scenarios, vessel, count, limit)
        if content is None:
            return None
        analysis = analysis.with_cooling(content) if content else analysis
    gas = gas_of(analysis, vessel, count)
    if cooling == "size":  # which keeps the membrane cool at the least filling already
        window = Bounds(analysis, scenarios, gas).window(gas.nominal, gas.acceptance)
    else:
        window = cool_window(analysis, scenarios, gas, limit)
    return Fit(vessel, count, gas, analysis, window)


def best_fit(
    analysis: Analysis, scenarios: Sequence[Scenario], vessel: Vessel, pieces: int, cooling: CoolingMode
) -> Fit:
    """A vessel with the window of all scenarios that count, else of those that leave one at all, else of the base case.

    The best it can have; for a vessel that is shown or judged although it may not hold.
    """
    limit = analysis.loop.criteria.membrane_limit
    # Steam that reaches the station whatever the vessel leaves no window.
    possible = tuple(scenario for scenario in scenarios if not _spoiled(analysis, scenario))
    for counted in dict.fromkeys((possible, (BASE,))):
        if not counted:
            continue
        try:
            fitted = fit(analysis, counted, vessel, pieces, cooling, limit)
        except CalculationError:
            continue
        if fitted is not None and fitted.window.usable:
            return fitted if counted == tuple(scenarios) else replace(fitted, under=counted)
    return plain_fit(analysis, vessel, pieces)


def _spoiled(analysis: Analysis, scenario: Scenario) -> bool:
    """Whether no filling helps in a scenario, or none is known to."""
    try:
        return analysis.case(scenario).at_station
    except CalculationError:
        return True


def plain_fit(analysis: Analysis, vessel: Vessel, count: int) -> Fit:
    """Vessels in a loop as it is, with the window of the base case, whether empty or not; it does not count."""
    gas = gas_of(analysis, vessel, count)
    window = Bounds(analysis, (BASE,), gas).window(gas.nominal, gas.acceptance)
    return Fit(vessel, count, gas, analysis, window, under=(BASE,))


def cooling_for(
    analysis: Analysis, scenarios: Sequence[Scenario], vessel: Vessel, count: int, limit: float
) -> float | None:
    """Content (m3) of the cooling vessel that stated vessels need; None if none is large enough."""

    def charge(content: float) -> Charged | None:
        cooled = analysis.with_cooling(content) if content else analysis
        gas = gas_of(cooled, vessel, count)
        lower, upper = Bounds(cooled, scenarios, gas).masses(gas.nominal, gas.acceptance)
        return Charged(cooled, gas, lower.mass) if 0 <= lower.mass < upper.mass else None

    return smallest_content(charge, scenarios, limit)
