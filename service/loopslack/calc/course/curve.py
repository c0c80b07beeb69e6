"""The course as it is reported: one row a minute, straight between the steps of the march."""

from msgspec import Struct

from loopslack.calc.course.chronicle import Extreme, Flag, Phases
from loopslack.calc.course.plant import Plant
from loopslack.calc.course.state import State
from loopslack.calc.course.weather import Weather

COLUMNS = (
    "collector_temperature",
    "saturation_temperature",
    "steam_volume",
    "reach",
    "vessel_pressure",
    "collector_pressure",
    "vessel_liquid",
    "discharged",
    "collector_liquid",
    "residue_strength",
    "steam_power",
)


class Curve(Struct, frozen=True, kw_only=True):
    """One course; columns of equal length.

    ``time`` s after midnight, ``irradiance`` W/m2, temperatures K, ``steam_volume`` and ``vessel_liquid`` m3,
    ``reach`` m in the branch filled furthest, pressures Pa absolute, ``discharged`` and ``collector_liquid``
    kg, ``residue_strength`` mass fraction, ``steam_power`` W/m2. ``largest`` by column name, from the steps
    themselves. ``energy_residual`` is the share of the absorbed sun that the books do not account for,
    ``mass_residual`` the same of the filled mass, largest of all steps. ``complete`` is False when the march
    gave up at its limit of steps: the course then ends early.
    """

    time: tuple[float, ...]
    irradiance: tuple[float, ...]
    ambient: tuple[float, ...]
    collector_temperature: tuple[float, ...]
    saturation_temperature: tuple[float, ...]
    steam_volume: tuple[float, ...]
    reach: tuple[float, ...]
    vessel_pressure: tuple[float, ...]
    collector_pressure: tuple[float, ...]
    vessel_liquid: tuple[float, ...]
    discharged: tuple[float, ...]
    collector_liquid: tuple[float, ...]
    residue_strength: tuple[float, ...]
    steam_power: tuple[float, ...]
    phases: Phases
    largest: dict[str, Extreme]
    reach_at_largest: float
    saturation_at_largest: float
    flags: frozenset[Flag]
    complete: bool
    steps: int
    energy: dict[str, float]
    energy_residual: float
    mass_residual: float

    @property
    def returned(self) -> bool:
        """Whether the loop is full of liquid again at the end, with nothing lost."""
        return self.complete and self.steam_volume[-1] == 0.0 and self.discharged[-1] == 0.0


class Recorder:
    """Collects rows at even intervals (s)."""

    __slots__ = ("_before", "_next", "columns", "interval", "times", "weather")

    def __init__(self, plant: Plant, state: State, weather: Weather, interval: float) -> None:
        self.weather, self.interval = weather, interval
        self.times: list[float] = [state.time]
        self._before = (state.time, _row(plant, state))
        self._next = state.time + interval
        self.columns: list[list[float]] = [[value] for value in self._before[1]]

    def note(self, plant: Plant, state: State) -> None:
        """Write the rows that fall between the last instant and this one."""
        row, (before, old) = _row(plant, state), self._before
        while self._next <= state.time + 1e-6:
            share = min(1.0, (self._next - before) / (state.time - before))
            self.times.append(self._next)
            for column, last, value in zip(self.columns, old, row, strict=True):
                column.append(last + share * (value - last))
            self._next = self.times[0] + self.interval * len(self.times)
        self._before = state.time, row

    def written(self) -> dict[str, tuple[float, ...]]:
        """All columns by name."""
        weather, times = self.weather, self.times
        return {
            "time": tuple(times),
            "irradiance": tuple(weather.irradiance(time) for time in times),
            "ambient": tuple(weather.ambient(time) for time in times),
            **{name: tuple(column) for name, column in zip(COLUMNS, self.columns, strict=True)},
        }


def _row(plant: Plant, state: State) -> tuple[float, ...]:
    return (
        state.absorber,
        state.steam,
        state.volume,
        plant.grid.at(plant.grid.reach_at, state.place),
        state.vessel_pressure,
        state.collector_pressure,
        max(0.0, state.vessel_liquid(plant)),
        state.discharged,
        state.left,
        state.strength,
        state.steam_power,
    )
