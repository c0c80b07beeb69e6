"""The loop and what is asked of it, in SI and complete: every default has been filled in before it gets here.

Plain frozen structs, changed only by ``msgspec.structs.replace``, so that a remedy is a new case and never a
mutation. Heights count from the vessel connection upwards. No physics lives here.
"""

from typing import Literal

from msgspec import Struct

from loopslack.calc.fluids.making import Fluid

SteamAccess = Literal["open", "closed", "unknown"]
Role = Literal["flow", "return"]
PumpSide = Literal["suction", "discharge"]
Emptying = Literal["good", "fair", "poor", "measured"]
Build = Literal["flat-plate", "evacuated-tube-direct", "evacuated-tube-heat-pipe"]
ConstructionFault = Literal["automatic-make-up", "galvanised-parts"]


class CollectorGroup(Struct, frozen=True, kw_only=True):
    """Equal collectors that boil together.

    ``aperture`` (m2) and ``content`` (m3) are of the whole group; coefficients are on the aperture basis.
    ``stagnation_temperature`` (K) is the higher of the measured and the computed one at the design sun.
    ``steam_power`` (W/m2) caps what the group can send out as steam; ``worse_steam_power`` is the next worse class,
    or None where there is none.
    """

    name: str
    build: Build
    count: int
    aperture: float
    content: float
    peak_efficiency: float
    linear_loss: float
    quadratic_loss: float
    stagnation_temperature: float
    measured_stagnation: bool
    emptying: Emptying
    steam_power: float
    worse_steam_power: float | None
    height: float
    space: int = 0


class Segment(Struct, frozen=True, kw_only=True):
    """A stretch of pipe between two heights.

    ``area`` is the inner cross-section (m2, so content per length), ``conductance`` the heat lost per metre and
    kelvin to ``ambient`` (K).
    """

    name: str
    length: float
    area: float
    outer_diameter: float
    insulation: float
    conductivity: float
    conductance: float
    ambient: float
    start_height: float
    end_height: float
    outdoor: bool
    soft_solder: bool = False


class Branch(Struct, frozen=True, kw_only=True):
    """A line from the collectors to the station. ``access`` says whether steam can enter it."""

    name: str
    role: Role
    access: SteamAccess
    segments: tuple[Segment, ...]
    space: int = 0

    @property
    def length(self) -> float:
        """Length, m."""
        return sum(segment.length for segment in self.segments)

    @property
    def content(self) -> float:
        """Content, m3."""
        return sum(segment.length * segment.area for segment in self.segments)


class Part(Struct, frozen=True, kw_only=True):
    """A part whose rating matters: ``rated_pressure`` is gauge (Pa) or None when nobody stated it."""

    name: str
    height: float
    rated_pressure: float | None
    highest_temperature: float | None = None
    pointer: str = ""


class Station(Struct, frozen=True, kw_only=True):
    """Pump group and heat exchanger. ``steam_loss`` (W) is what a cooler or the station itself takes from steam."""

    content: float
    height: float
    outdoor: bool = False
    steam_loss: float = 0.0


class Relief(Struct, frozen=True, kw_only=True):
    """The relief valve, pressures gauge (Pa): stamped, lowest opening, and where it shuts again."""

    set_pressure: float
    opening_pressure: float
    closing_pressure: float
    height: float
    allowance_rule: str
    nominal_size: int | None = None


class Temperatures(Struct, frozen=True, kw_only=True):
    """Temperatures of the states, K."""

    fill: float
    site_minimum: float
    indoor_cold: float
    vessel_room: float
    vessel_cold: float
    flow: float
    back: float
    cut_off: float
    hot_liquid: float


class Sun(Struct, frozen=True, kw_only=True):
    """Design sun: irradiance W/m2 and ambient K."""

    irradiance: float
    ambient: float


class Criteria(Struct, frozen=True, kw_only=True):
    """What must hold, Pa, m3, K or shares of one; stated by the caller or from the trade.

    ``reserve`` is a stated reserve (m3) or None for the rule of EN 12828.
    """

    reserve: float | None
    top_pressure: float
    window_width: float
    fill_above_precharge: float
    window_step: float
    boiling_margin: float
    membrane_limit: float
    freeze_margin: float
    fluid_allowance: float
    degradation_limit: float
    stagnation_doubt: float
    net_positive_suction: float | None


class Precharge(Struct, frozen=True, kw_only=True):
    """How the gas side is charged.

    ``rule``: the lowest that carries the static head and the minimum at the top; ``stated``: ``pressure`` absolute
    at ``temperature``; ``optimised``: the lowest precharge that still holds the top pressure when cold.
    """

    kind: Literal["rule", "stated", "optimised"]
    pressure: float = 0.0
    temperature: float | None = None


class Vessel(Struct, frozen=True, kw_only=True, gc=False):
    """An expansion vessel as an article: volumes m3, pressures gauge Pa, price in ``currency``.

    ``delivered_precharge`` is a gauge reading at sea level; None means unknown.
    """

    id: str
    nominal_volume: float
    rated_pressure: float | None = None
    acceptance_volume: float | None = None
    delivered_precharge: float | None = None
    precharge_adjustable: bool = True
    membrane_limit: float | None = None
    price: float | None = None
    currency: str = ""


class Loop(Struct, frozen=True, kw_only=True):
    """One loop with everything that decides its pressures.

    ``top`` is the height of the highest point of any part including the vessel (never below 0);
    ``atmosphere`` the site's absolute pressure, Pa; ``cooling_content`` the cooling vessel's content, m3; ``faults``
    what is built so that no vessel makes it sound.
    """

    fluid: Fluid
    groups: tuple[CollectorGroup, ...]
    branches: tuple[Branch, ...]
    station: Station
    line_content: float
    cooling_content: float
    top: float
    vessel_outdoor: bool
    pump_height: float
    pump_head: float
    pump_side: PumpSide
    gauge_height: float
    atmosphere: float
    altitude: float
    relief: Relief
    parts: tuple[Part, ...]
    temperatures: Temperatures
    sun: Sun
    criteria: Criteria
    precharge: Precharge
    faults: tuple[ConstructionFault, ...] = ()

    @property
    def collector_content(self) -> float:
        """Content of all collectors, m3."""
        return sum(group.content for group in self.groups)

    @property
    def pipe_content(self) -> float:
        """Content of all branches, m3."""
        return sum(branch.content for branch in self.branches)

    @property
    def content(self) -> float:
        """Content of the whole loop without the vessel, m3."""
        return (
            self.collector_content
            + self.pipe_content
            + self.station.content
            + self.line_content
            + self.cooling_content
        )

    @property
    def aperture(self) -> float:
        """Aperture area of all collectors, m2."""
        return sum(group.aperture for group in self.groups)
