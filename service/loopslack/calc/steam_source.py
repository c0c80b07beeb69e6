"""What the collectors of one steam space send out as steam, by the temperature of the steam.

Collectors and sun only: no pressure, no pipes.
"""

from collections.abc import Sequence

from loopslack.calc.model import CollectorGroup, Sun
from loopslack.calc.scenarios import Scenario


class SteamSource:
    """The collector groups of a steam space under one scenario.

    ``rows`` are stagnation temperature (K), aperture (m2), gain, linear and quadratic loss (W/m2, W/m2K, W/m2K2) and
    highest power (W/m2) of each group, the coolest first; ``contents`` its stagnation temperature (K) and content
    (m3); ``stagnations`` the different temperatures among them.
    """

    __slots__ = ("ambient", "contents", "rows", "stagnations")

    def __init__(self, groups: Sequence[CollectorGroup], scenario: Scenario, sun: Sun) -> None:
        self.ambient = sun.ambient
        rows = []
        for group in groups:
            stagnation = group.stagnation_temperature + scenario.stagnation_shift
            power = group.steam_power
            if scenario.worse_emptying and group.worse_steam_power is not None:
                power = group.worse_steam_power
            gain = group.peak_efficiency * sun.irradiance
            rise = stagnation - sun.ambient
            nominal = rise * (group.linear_loss + group.quadratic_loss * rise)
            # Losses scaled so that the group sends nothing out at this stagnation temperature.
            scale = gain / nominal if nominal > 0 else 0.0
            loss = group.linear_loss * scale, group.quadratic_loss * scale
            rows.append((stagnation, group.aperture, gain, *loss, power, group.content))
        rows.sort(key=lambda row: row[0])
        self.contents = [(row[0], row[6]) for row in rows]
        self.stagnations = sorted({row[0] for row in rows})
        self.rows = [row[:6] for row in rows]

    def power(self, temperature: float) -> float:
        """Power the groups send out as steam at a temperature (K), W."""
        total = 0.0
        rise = temperature - self.ambient
        for stagnation, aperture, gain, linear, quadratic, highest in self.rows:
            if temperature < stagnation:
                bound = gain - rise * (linear + quadratic * rise)
                total += aperture * (bound if bound < highest else highest)
        return total
