"""Sun and ambient temperature of the day: a clear sky, or what the caller states.

Times are seconds after midnight of the first day and may run past 86400. No solar geometry: the irradiance is
that on the collector plane.
"""

from bisect import bisect_right
from itertools import pairwise
from math import cos, isfinite, pi, sin

from msgspec import Struct

from loopslack.kernel.errors import Contradiction, OutOfRange

HOUR = 3600.0
DAY = 86400.0
LONGEST = 4 * DAY
MOST_IRRADIANCE = 1500.0  # W/m2; own assumption, above any reading on a tilted plane

_COARSEST = HOUR
_AMBIENT_CREDIBLE = (213.15, 333.15)


class ClearSky(Struct, frozen=True, kw_only=True):
    """A half sine of sun and a daily wave of ambient temperature, the same every day.

    Own assumptions: 1000 W/m2 at noon, 6:00 to 18:00, 23 degC with a swing of 7 K warmest at 15:00, which
    reaches the design ambient of 30 degC. Times in seconds after midnight. ``swing`` 0 is a constant ambient;
    ``days`` limits the sun to the first so many days.
    """

    highest_irradiance: float = 1000.0
    sunrise: float = 6 * HOUR
    sunset: float = 18 * HOUR
    mean_ambient: float = 296.15
    swing: float = 7.0
    warmest: float = 15 * HOUR
    days: int = 99

    def __post_init__(self) -> None:
        if not 0 <= self.sunrise < self.sunset <= DAY:
            raise Contradiction(
                f"The sun rises at {self.sunrise / HOUR:g} h and sets at {self.sunset / HOUR:g} h.",
                remedy="State sunrise before sunset within one day.",
            )
        low, high = _AMBIENT_CREDIBLE
        for ambient in (self.mean_ambient - abs(self.swing), self.mean_ambient + abs(self.swing)):
            if not low <= ambient <= high:
                raise _not_credible("ambient temperature, K", ambient, low, high)
        if not 0 <= self.highest_irradiance <= MOST_IRRADIANCE:
            raise _not_credible("irradiance, W/m2", self.highest_irradiance, 0.0, MOST_IRRADIANCE)

    @property
    def dawn(self) -> float:
        """When a day without flow begins: an hour before sunrise, all parts as cold as they get."""
        return max(0.0, self.sunrise - HOUR)

    @property
    def end(self) -> float:
        """The next dawn."""
        return self.dawn + DAY

    @property
    def spacing(self) -> float:
        """Time within which the weather is smooth, s."""
        return DAY

    def irradiance(self, time: float) -> float:
        """Irradiance on the collector plane, W/m2."""
        day, clock = divmod(time, DAY)
        if not self.sunrise < clock < self.sunset or day >= self.days:
            return 0.0
        return self.highest_irradiance * sin(pi * (clock - self.sunrise) / (self.sunset - self.sunrise))

    def ambient(self, time: float) -> float:
        """Ambient temperature, K."""
        return self.mean_ambient + self.swing * cos(2 * pi * (time - self.warmest) / DAY)


class StatedWeather(Struct, frozen=True, kw_only=True):
    """Irradiance (W/m2) and ambient (K) at stated times (s), straight between them, held at the ends.

    Raises ``Contradiction`` for columns of different length, times that do not rise or leave more than an
    hour between them, ``OutOfRange`` for numbers that are not credible.
    """

    times: tuple[float, ...]
    irradiances: tuple[float, ...]
    ambients: tuple[float, ...]

    def __post_init__(self) -> None:
        times = self.times
        if not 2 <= len(times) == len(self.irradiances) == len(self.ambients):
            raise Contradiction(
                f"The weather has {len(times)} times, {len(self.irradiances)} irradiances and "
                f"{len(self.ambients)} ambient temperatures.",
                remedy="State all three at the same two or more times.",
            )
        for k, (before, after) in enumerate(pairwise(times), start=1):
            if not 0 < after - before <= _COARSEST:
                raise Contradiction(
                    f"The weather steps from {before:g} to {after:g} s; times must rise by an hour at most.",
                    remedy="State the weather hourly or finer, in order.",
                    pointer=f"/weather/points/{k}/time",
                )
        if not (times[0] >= 0 and times[-1] - times[0] <= LONGEST):
            raise _not_credible("duration of the weather, s", times[-1] - times[0], 0.0, LONGEST)
        for irradiance in self.irradiances:
            if not (isfinite(irradiance) and 0 <= irradiance <= MOST_IRRADIANCE):
                raise _not_credible("irradiance, W/m2", irradiance, 0.0, MOST_IRRADIANCE)
        low, high = _AMBIENT_CREDIBLE
        for ambient in self.ambients:
            if not low <= ambient <= high:
                raise _not_credible("ambient temperature, K", ambient, low, high)

    @property
    def dawn(self) -> float:
        """The first stated time."""
        return self.times[0]

    @property
    def end(self) -> float:
        """The last stated time."""
        return self.times[-1]

    @property
    def spacing(self) -> float:
        """Shortest time between two stated ones, s."""
        return min(after - before for before, after in pairwise(self.times))

    def irradiance(self, time: float) -> float:
        """Irradiance on the collector plane, W/m2."""
        return self._between(self.irradiances, time)

    def ambient(self, time: float) -> float:
        """Ambient temperature, K."""
        return self._between(self.ambients, time)

    def _between(self, column: tuple[float, ...], time: float) -> float:
        times = self.times
        if time <= times[0]:
            return column[0]
        if time >= times[-1]:
            return column[-1]
        i = bisect_right(times, time) - 1
        return column[i] + (column[i + 1] - column[i]) * (time - times[i]) / (times[i + 1] - times[i])


Weather = ClearSky | StatedWeather


def _not_credible(name: str, number: float, low: float, high: float) -> OutOfRange:
    return OutOfRange(
        f"The {name} is {number:g}; {low:g} to {high:g} is credible.",
        remedy="Check the unit and the number.",
        facts={"number": number, "low": low, "high": high},
    )
