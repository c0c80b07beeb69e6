"""What a loop pushes out at a vessel pressure, looked up on a grid and shared by all vessels that are compared in it.

Where all pipes fall away from the collectors a loop pushes out no less at a lower pressure, so that the grid pressure
below bounds it from above: enough for the many vessels that are far from a limit.
"""

from loopslack.calc.analysis import Analysis
from loopslack.calc.scenarios import Scenario

GRID = 50.0  # Pa, so that vessels with like shares of acceptance share a look


class Extents:
    """Upper bounds on the mass (kg) that one loop pushes out."""

    def __init__(self, analysis: Analysis, other: "Extents | None" = None) -> None:
        """``other`` are those of the same loop with another cooling vessel: its liquid is all they differ by."""
        self.analysis = analysis
        self._known: dict[tuple[tuple[float, bool, bool], int], float] = {} if other is None else other._known  # noqa: SLF001 - of this class
        fluid, loop = analysis.fluid, analysis.loop
        gain = analysis.states.fill.vessel_density - fluid.density(loop.temperatures.hot_liquid)
        self._cooler = loop.cooling_content * gain

    def at_most(self, scenario: Scenario, pressure: float, coarse: int = 1) -> float:
        """No less than is pushed out (kg) at a vessel pressure (Pa); infinite where pipes rise.

        The grid is ``coarse`` times wider. At no filling asked for does the valve open, so no pressure counts above
        its own.
        """
        analysis = self.analysis
        step = int(min(pressure, analysis.final_pressure) / GRID) // coarse * coarse
        key = scenario.steam_key, step
        found = self._known.get(key)
        if found is None:
            balance = analysis.case(scenario).balance
            falling = all(space.path.falling for space in balance.spaces)
            found = float("inf")
            if falling and step > 0:
                found = balance.at_pressure(step * GRID).expelled - self._cooler
            self._known[key] = found
        return found + self._cooler
