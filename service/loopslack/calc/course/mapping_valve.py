"""The relief valve as the vessel feels it. See ``mapping`` for the rest."""

from loopslack.calc.course.assumptions import VALVE_AREA, Assumption, derived, own
from loopslack.calc.course.lumped import ReliefValve
from loopslack.calc.course.refusal import not_applicable
from loopslack.calc.model import Loop
from loopslack.calc.relief_size import TABLE, relief_size
from loopslack.kernel.kinds import Density, GaugePressure, Length
from loopslack.physics.relief import pressure_under_valve

_SMALLEST = 15.0  # mm


def lumped_valve(loop: Loop, notes: list[Assumption]) -> ReliefValve:
    """Carry the valve's pressures to the vessel. Raises ``NotApplicable`` for one in the steam zone or far below."""
    relief, temperatures = loop.relief, loop.temperatures
    lowest = min(group.height for group in loop.groups)
    if relief.height >= lowest > 0:
        raise not_applicable(
            f"The relief valve stands {relief.height:g} m above the vessel, at or above collectors at "
            f"{lowest:g} m; it would let out steam, which the course does not follow.",
            remedy="Put the valve at the vessel or the station, or use the stagnation check.",
            pointer="/reliefValve",
            facts={"valve": relief.height, "collectors": lowest},
        )
    # The density that gives the vessel the lower pressure: hot below a valve that stands above, cold the
    # other way.
    at = temperatures.hot_liquid if relief.height > 0 else temperatures.vessel_cold
    density = loop.fluid.density(max(at, loop.fluid.lowest)) if relief.height else 0.0

    def at_vessel(gauge: float) -> float:
        felt = pressure_under_valve(GaugePressure(gauge), Density(density), Length(relief.height))
        return felt + loop.atmosphere

    if at_vessel(relief.closing_pressure) <= 0:
        raise not_applicable(
            f"The relief valve stands {-relief.height:g} m below the vessel; with that much liquid above it, it would "
            "not shut again before the vessel is under vacuum.",
            remedy="Correct the height of the valve, or use the stagnation check.",
            pointer="/reliefValve/height",
            facts={"valve": relief.height},
        )
    size = relief.nominal_size or relief_size(loop.aperture)
    if size is None:
        largest, area = TABLE[-1]
        flow_area = VALVE_AREA * (largest / _SMALLEST) ** 2 * loop.aperture / area
    else:
        flow_area = VALVE_AREA * (size / _SMALLEST) ** 2
    notes.append(
        own(
            "valve-flow",
            f"The valve has an effective area of {1e6 * flow_area:.3g} mm2"
            + (f", as for a nominal size of {size} mm" if size else ", grown with the collector area")
            + "; it lets out liquid only, at the vessel.",
        )
    )
    notes.append(
        derived(
            "valve-pressures",
            f"It opens at its stamp and shuts at {relief.closing_pressure / 1e5:.3g} bar gauge, the largest "
            "blowdown: the loss is an upper figure. Pressures above its lowest opening pressure are "
            "flagged.",
        )
    )
    return ReliefValve(
        set_pressure=at_vessel(relief.set_pressure),
        closing_pressure=at_vessel(relief.closing_pressure),
        flow_area=flow_area,
        lowest_opening=at_vessel(relief.opening_pressure),
    )
