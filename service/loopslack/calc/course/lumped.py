"""The loop as the day sees it: one collector, one equivalent pipe, station, vessel. No marching.

``mapping`` makes one from a full loop and says by which rules; the tests make them by hand. All SI,
temperatures in kelvin, pressures absolute at the vessel connection, heights from there upwards.
"""

from msgspec import Struct

from loopslack.calc.fluids.making import Fluid


class LumpedPipe(Struct, frozen=True, kw_only=True):
    """All branches open to steam as one pipe, filled from the collectors. Straight between its stops.

    At each stop: ``distance`` along the equivalent pipe and ``reach`` in the branch filled furthest (m),
    content up to there (m3), conductance (W/K), conductance times ambient (W), capacity of wall and
    insulation (J/K), and the ``height`` (m) at which the front then stands. Heights never rise.
    """

    distance: tuple[float, ...]
    reach: tuple[float, ...]
    content: tuple[float, ...]
    conductance: tuple[float, ...]
    warmth: tuple[float, ...]
    capacity: tuple[float, ...]
    height: tuple[float, ...]


class Reservoir(Struct, frozen=True, kw_only=True):
    """A well mixed part behind the pipes: m3, capacity of its metal (J/K), loss (W/K), ambient (K)."""

    content: float
    capacity: float
    conductance: float
    ambient: float


class MembraneVessel(Struct, frozen=True, kw_only=True):
    """The vessel and its charge.

    ``precharge`` (Pa) at ``precharge_temperature``; ``filled`` (m3) is the liquid it held when the loop was
    filled at ``fill_temperature``. The gas stays at ``gas_temperature``, or follows the liquid if that is
    None. ``body`` is the shell, of no content of its own. ``acceptance_volume`` (m3) limits the membrane
    where it is known.
    """

    nominal_volume: float
    precharge: float
    precharge_temperature: float
    filled: float
    fill_temperature: float
    gas_temperature: float | None
    body: Reservoir
    acceptance_volume: float | None = None


class ReliefValve(Struct, frozen=True, kw_only=True):
    """A valve that opens and shuts at pressures as felt at the vessel.

    ``flow_area`` (m2) is effective. ``lowest_opening`` is where a real one may open already: only flagged.
    """

    set_pressure: float
    closing_pressure: float
    flow_area: float
    lowest_opening: float | None = None


class Emptying(Struct, frozen=True, kw_only=True):
    """What stays in the collectors when steam has pushed out what it can. Assumptions without a source.

    ``residual_share`` of the content stays; it wets the share of the absorber that it fills, or all of it if
    ``wets_all``; its water boils off and its glycol stays if ``concentrates``; ``reflux`` is the share of
    condensate that runs back into the collectors; ``steam_power`` (W/m2) an optional cap.
    """

    residual_share: float
    reflux: float = 0.0
    wets_all: bool = False
    concentrates: bool = True
    steam_power: float | None = None


class Start(Struct, frozen=True, kw_only=True):
    """When the flow stops (s after midnight) and the temperatures (K) then; None is the ambient."""

    time: float | None = None
    collectors: float | None = None
    pipes: float | None = None
    station: float | None = None
    vessel: float | None = None


HOT_START = Start(time=43200.0, collectors=363.15, pipes=353.15, station=348.15, vessel=303.15)
"""The pump stops at noon in a loop that runs: 90, 80, 75 and 30 degC. Own assumption."""


class LumpedLoop(Struct, frozen=True, kw_only=True):
    """Everything the march needs. Area and coefficients share one area basis.

    ``collector_capacity`` (J/m2K) includes the liquid. ``reservoirs`` lie between pipes and vessel, in order;
    the first is the station. ``station_loss`` (W) is what a cooler there takes from steam that arrives.
    """

    fluid: Fluid
    aperture: float
    peak_efficiency: float
    linear_loss: float
    quadratic_loss: float
    collector_content: float
    pipe: LumpedPipe
    reservoirs: tuple[Reservoir, ...]
    vessel: MembraneVessel
    relief: ReliefValve | None
    atmosphere: float
    emptying: Emptying
    start: Start = Start()
    collector_capacity: float = 8000.0
    station_loss: float = 0.0
