"""The states of the loop that are all liquid: filled, cold, operating, at the pump's cut-off.

Each state is a mass the loop gives to or takes from the vessel, so that a vessel can be judged in any of them from
what it held when filled. Stagnation has its own modules.
"""

from typing import Literal, NamedTuple

from msgspec import Struct
from msgspec.structs import replace

from loopslack.calc.model import Loop
from loopslack.physics.statics import GRAVITY

StateId = Literal["fill", "cold", "operating", "cut-off"]


class LiquidState(Struct, frozen=True, gc=False):
    """One all-liquid state of a loop.

    ``expelled`` (kg) since filling, negative when the vessel feeds the loop; ``vessel`` temperature (K) of its
    liquid and gas; ``column`` the pressure (Pa) between the vessel connection and the highest point;
    ``still_density`` that of the liquid in the vessel line and the cooling vessel; ``frozen`` when the site minimum
    lies below the freezing point and the state was computed at that point instead.
    """

    id: StateId
    expelled: float
    vessel: float
    vessel_density: float
    column: float
    allowance: float
    still_density: float
    frozen: bool = False

    def held(self, mass: float) -> float:
        """Liquid (m3) in a vessel that was filled with ``mass`` kg."""
        return (mass + self.expelled) / self.vessel_density + self.allowance

    def mass_holding(self, liquid: float) -> float:
        """Mass (kg) a vessel must be filled with to hold ``liquid`` m3 in this state."""
        return (liquid - self.allowance) * self.vessel_density - self.expelled


class LiquidStates(NamedTuple):
    """All states of a loop that hold no steam."""

    fill: LiquidState
    cold: LiquidState
    operating: LiquidState
    cut_off: LiquidState

    @property
    def by_id(self) -> dict[str, LiquidState]:
        """The states by their id, in order."""
        return {state.id: state for state in self}

    def with_more_still(self, content: float, allowance: float) -> "LiquidStates":
        """The states of the loop with ``content`` m3 more in its cooling vessel.

        ``allowance`` (m3) is what the fluid's data may be off in that much.
        """
        fill, cold, *running = self
        filled = content * fill.still_density
        return LiquidStates(
            fill,
            replace(
                cold,
                expelled=cold.expelled + filled - content * cold.still_density,
                allowance=cold.allowance - allowance,
            ),
            *(replace(s, expelled=s.expelled + filled - content * s.still_density) for s in running),
        )


def liquid_states(loop: Loop) -> LiquidStates:
    """Compute every all-liquid state of a loop.

    Raises ``OutOfRange`` where the fluid has no liquid density at a stated temperature.
    """
    return LiquidStates(_fill(loop), _cold(loop), _operating(loop), _cut_off(loop))


def _fill(loop: Loop) -> LiquidState:
    temperature = loop.temperatures.fill
    density = loop.fluid.density(temperature)
    return LiquidState("fill", 0.0, temperature, density, density * GRAVITY * loop.top, 0.0, density)


def _cold(loop: Loop) -> LiquidState:
    """Outdoor zones at the site minimum, indoor ones cold; the fluid-data allowance counts against the reserve."""
    temperatures, fluid = loop.temperatures, loop.fluid
    freezing = fluid.freezing_point
    frozen = temperatures.site_minimum < freezing
    outdoor = max(temperatures.site_minimum, freezing)
    indoor = max(temperatures.indoor_cold, freezing)
    vessel = max(temperatures.vessel_cold, freezing)
    outside, inside = fluid.density(outdoor), fluid.density(indoor)
    mass = outside * loop.collector_content
    for branch in loop.branches:
        for segment in branch.segments:
            mass += (outside if segment.outdoor else inside) * segment.length * segment.area
    mass += (outside if loop.station.outdoor else inside) * loop.station.content
    still = outside if loop.vessel_outdoor else inside
    mass += still * (loop.line_content + loop.cooling_content)
    return LiquidState(
        "cold",
        _filled(loop) - mass,
        vessel,
        fluid.density(vessel),
        max(outside, inside) * GRAVITY * loop.top,
        -loop.criteria.fluid_allowance * loop.content,
        still,
        frozen,
    )


def _operating(loop: Loop) -> LiquidState:
    temperatures = loop.temperatures
    return _running(loop, "operating", (temperatures.flow + temperatures.back) / 2, temperatures.flow)


def _cut_off(loop: Loop) -> LiquidState:
    """Collectors and flow at the cut-off temperature, the rest as in operation.

    The least pressure at which the collectors can be that hot, so the safe side for boiling.
    """
    return _running(loop, "cut-off", loop.temperatures.cut_off, loop.temperatures.cut_off)


def _running(loop: Loop, id: StateId, collectors: float, flow: float) -> LiquidState:
    temperatures, fluid = loop.temperatures, loop.fluid
    hot, cool = fluid.density(flow), fluid.density(temperatures.back)
    mean = fluid.density((temperatures.flow + temperatures.back) / 2)
    room = fluid.density(temperatures.vessel_room)
    mass = fluid.density(collectors) * loop.collector_content
    mass += sum(branch.content * (hot if branch.role == "flow" else cool) for branch in loop.branches)
    mass += mean * loop.station.content
    mass += room * (loop.line_content + loop.cooling_content)
    # The return column stands between vessel and collectors: the heavier one, so the lower pressure at the top.
    return LiquidState(
        id, _filled(loop) - mass, temperatures.vessel_room, room, cool * GRAVITY * loop.top, 0.0, room
    )


def _filled(loop: Loop) -> float:
    return loop.fluid.density(loop.temperatures.fill) * loop.content
