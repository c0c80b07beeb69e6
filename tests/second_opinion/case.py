"""What a loop is, for the second opinion: plain data in SI and the few facts that follow from it alone.

Lives here: dataclasses, content, pipe loss coefficient, collector power. Must not live here: fluids, solving.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, field, replace
from math import log, pi, sqrt
from typing import Literal

GRAVITY = 9.80665
ZERO_CELSIUS = 273.15


def celsius(temperature: float) -> float:
    """Kelvin from degrees Celsius."""
    return temperature + ZERO_CELSIUS


def atmosphere(altitude: float) -> float:
    """Air pressure, Pa, at an altitude in m. Source: ISO 2533 in its usual closed form, from memory."""
    return float(101325.0 * (1.0 - 2.25577e-5 * altitude) ** 5.25588)


@dataclass(frozen=True, kw_only=True)
class Group:
    """Collectors that behave alike. Area is aperture; every power figure is per that area."""

    area: float
    eta0: float
    a1: float
    a2: float
    class_power: float
    content: float
    height: float
    space: int = 0
    measured_stagnation: float | None = None

    def loss(self, temperature: float, ambient: float) -> float:
        """a1 dT + a2 dT^2, W/m2. Source: ISO 9806 steady state, from memory."""
        rise = temperature - ambient
        return self.a1 * rise + self.a2 * rise * rise

    def stagnation(self, sun: float, ambient: float, shift: float) -> float:
        """Where nothing is left for steam: computed or measured, the higher, plus the shift."""
        gain = self.eta0 * sun
        if self.a2 > 0.0:
            rise = (sqrt(self.a1 * self.a1 + 4.0 * self.a2 * gain) - self.a1) / (2.0 * self.a2)
        else:
            rise = gain / self.a1
        computed = ambient + rise
        measured = computed if self.measured_stagnation is None else self.measured_stagnation
        return max(computed, measured) + shift

    def power(self, temperature: float, sun: float, ambient: float, stagnation: float) -> float:
        """Steam power per area, W/m2: the class figure, but never more than the collector can give.

        Losses are scaled so that the bound vanishes at the stagnation temperature handed in.
        """
        share = self.loss(temperature, ambient) / self.loss(stagnation, ambient)
        return max(0.0, min(self.class_power, self.eta0 * sun * (1.0 - share)))


@dataclass(frozen=True, kw_only=True)
class Segment:
    """A piece of pipe, counted from the collectors. Unknown heights are linear between known ones."""

    length: float
    bore: float
    outer: float
    insulation: float = 0.02
    conductivity: float = 0.040
    film: float = 10.0
    ambient: float = ZERO_CELSIUS + 20.0
    end_height: float | None = None
    outdoor: bool = False

    @property
    def content(self) -> float:
        return pi / 4.0 * self.bore**2 * self.length

    @property
    def loss_coefficient(self) -> float:
        """W/(m K) of an insulated cylinder. Source: ISO 12241, from memory."""
        around = self.outer + 2.0 * self.insulation
        layer = log(around / self.outer) / (2.0 * self.conductivity)
        return pi / (layer + 1.0 / (self.film * around))


@dataclass(frozen=True, kw_only=True)
class Branch:
    """Segments from the collectors of one steam space to the station."""

    segments: Sequence[Segment]
    role: Literal["flow", "return"]
    space: int = 0
    open: bool = True

    @property
    def length(self) -> float:
        return sum(segment.length for segment in self.segments)

    @property
    def content(self) -> float:
        return sum(segment.content for segment in self.segments)


@dataclass(frozen=True, kw_only=True)
class Case:
    """A loop and the conditions it is judged under. Heights count from the vessel connection.

    All groups of one steam space stand at one height here: at different heights the front has no one start.
    `opening_pressure` is the absolute pressure at the vessel at which the relief valve starts to open; none
    ignores it.
    """

    groups: Sequence[Group]
    branches: Sequence[Branch]
    vessel: float
    precharge: float
    fill_pressure: float
    station_content: float = 0.0
    vessel_line_content: float = 0.0
    cooling_vessel_content: float = 0.0
    acceptance: float | None = None
    opening_pressure: float | None = None
    station_height: float = 0.0
    altitude: float = 0.0
    fluid: Literal["water", "PG", "EG"] = "PG"
    glycol_mass_fraction: float = 0.43
    precharge_temperature: float = celsius(15.0)
    fill_temperature: float = celsius(15.0)
    room_temperature: float = celsius(20.0)
    hot_liquid: float = celsius(120.0)
    sun: float = 1000.0
    ambient: float = celsius(30.0)
    gas: Literal["isothermal", "mixed"] = "isothermal"
    stagnation_shift: float = 0.0
    allowance: float = 0.0
    site_minimum: float = celsius(-10.0)
    indoor_minimum: float = celsius(5.0)
    cold_vessel_room: float = celsius(5.0)
    operating_flow: float = celsius(70.0)
    operating_return: float = celsius(40.0)
    operating_station: float | None = None
    note: str = field(default="", compare=False)

    def __post_init__(self) -> None:
        for space in self.spaces:
            if len({group.height for group in self.groups if group.space == space}) > 1:
                raise ValueError(f"groups of steam space {space} stand at different heights")
        if not {branch.space for branch in self.branches} <= set(self.spaces):
            raise ValueError("a branch serves a steam space without collectors")

    @property
    def spaces(self) -> list[int]:
        return sorted({group.space for group in self.groups})

    @property
    def collector_content(self) -> float:
        return sum(group.content for group in self.groups)

    @property
    def pipe_content(self) -> float:
        return sum(branch.content for branch in self.branches)

    @property
    def content(self) -> float:
        """All liquid outside the vessel when the loop is full, m3."""
        near_vessel = self.vessel_line_content + self.cooling_vessel_content
        return self.collector_content + self.pipe_content + self.station_content + near_vessel

    @property
    def room_for_liquid(self) -> float:
        """Most liquid the vessel may take: nominal volume or the membrane's own limit."""
        return self.vessel if self.acceptance is None else min(self.vessel, self.acceptance)

    @property
    def liquid_at_filling(self) -> float:
        """Vessel liquid after filling, by Boyle; negative means filled below the precharge."""
        warm = self.fill_temperature / self.precharge_temperature
        return self.vessel * (1.0 - self.precharge * warm / self.fill_pressure)

    def space_height(self, space: int) -> float:
        return next(group.height for group in self.groups if group.space == space)

    def but(self, **changes: object) -> Case:
        """The same loop with some fields changed."""
        return replace(self, **changes)
