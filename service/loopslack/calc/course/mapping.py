"""From the full loop to the lumped one, by stated rules, or a refusal. Nothing is dropped silently.

Refused with ``course-not-applicable``: steam spaces at different heights, pipes that rise away from the
collectors, loops without a branch open to steam, a valve in the steam zone, fluids whose heat capacity nobody
stated.
"""

from typing import NamedTuple

from loopslack.calc.charge import Charge
from loopslack.calc.course.assumptions import (
    COLLECTOR_CAPACITY,
    RESIDUAL_SHARE,
    RESIDUE_AS_FILLED,
    RESIDUE_STRENGTH,
    STANDING,
    STATION_HEAT,
    STATION_LOSS,
    SURFACE_FACTOR,
    SURFACE_HEAT,
    SURFACE_LOSS,
    Assumption,
    derived,
    own,
)
from loopslack.calc.course.lumped import (
    Emptying,
    LumpedLoop,
    MembraneVessel,
    Reservoir,
    Start,
)
from loopslack.calc.course.mapping_pipe import dead_content, lumped_pipe
from loopslack.calc.course.mapping_valve import lumped_valve
from loopslack.calc.course.properties import residue_of
from loopslack.calc.course.refusal import not_applicable
from loopslack.calc.model import CollectorGroup, Loop
from loopslack.kernel.errors import CalculationError

SAME_HEIGHT = 0.5  # m between collectors of different steam spaces: 0.05 bar, or 1 K of boiling point


class Mapped(NamedTuple):
    """The lumped loop and everything that was taken for granted on the way."""

    loop: LumpedLoop
    assumptions: tuple[Assumption, ...]


def mapped(
    loop: Loop,
    charge: Charge,
    *,
    vessels: int = 1,
    acceptance_volume: float | None = None,
    emptying_stated: bool = True,
    gas_follows: bool = False,
    start: Start | None = None,
) -> Mapped:
    """Lump a loop with its charged vessel.

    ``charge`` is that of all ``vessels`` together, equal ones in parallel, and so is ``acceptance_volume``
    (m3). Without a stated emptying class every group counts as fair. Raises ``NotApplicable`` with the code
    ``course-not-applicable``.
    """
    notes: list[Assumption] = []
    _check_fluid(loop, notes)
    groups = _one_height(loop, notes)
    area = loop.aperture
    gain = sum(group.aperture * group.peak_efficiency for group in groups) / area
    scales = [_loss_scale(loop, group) for group in groups]
    weights = [group.aperture * scale / area for group, scale in zip(groups, scales, strict=True)]
    if any(abs(scale - 1.0) > 1e-3 for scale in scales):
        notes.append(
            derived(
                "stagnation-temperature",
                "Losses are scaled so that they balance the design sun at the stated stagnation "
                "temperature: by " + ", ".join(f"{scale:.3f}" for scale in scales) + ".",
            )
        )
    share = _residual_share(groups, notes, stated=emptying_stated)
    lumped = LumpedLoop(
        fluid=loop.fluid,
        aperture=area,
        peak_efficiency=gain,
        linear_loss=sum(g.linear_loss * weight for g, weight in zip(groups, weights, strict=True)),
        quadratic_loss=sum(g.quadratic_loss * weight for g, weight in zip(groups, weights, strict=True)),
        collector_content=loop.collector_content,
        collector_capacity=COLLECTOR_CAPACITY,
        pipe=lumped_pipe(loop, notes),
        reservoirs=_reservoirs(loop, notes),
        vessel=_vessel(loop, charge, vessels, acceptance_volume, notes, gas_follows=gas_follows),
        relief=lumped_valve(loop, notes),
        atmosphere=loop.atmosphere,
        emptying=Emptying(residual_share=share),
        start=start or Start(),
        station_loss=loop.station.steam_loss,
    )
    notes.append(_start_note(lumped.start))
    return Mapped(lumped, (*STANDING, *notes))


def _start_note(start: Start) -> Assumption:
    """What the loop is like when the flow stops."""
    named = {
        "collectors": start.collectors,
        "pipes": start.pipes,
        "station": start.station,
        "vessel": start.vessel,
    }
    stated = ", ".join(f"{name} at {at - 273.15:.4g} degC" for name, at in named.items() if at is not None)
    if not stated:
        return own("start", "When the flow stops, every part has the temperature of its surroundings.")
    return own("start", f"When the flow stops: {stated}; any other part as its surroundings.")


def _check_fluid(loop: Loop, notes: list[Assumption]) -> None:
    if residue_of(loop.fluid) is not None:
        notes.append(RESIDUE_STRENGTH)
    elif loop.fluid.kind != "water":
        notes.append(RESIDUE_AS_FILLED)
    try:
        loop.fluid.heat_capacity(363.15)
    except CalculationError as error:
        raise not_applicable(
            f"The course needs a heat capacity of the fluid at 90 degC. {error.message}",
            remedy="State its heat capacity by table, or use a fluid that ships with the service.",
            pointer="/fluid",
        ) from error


def _one_height(loop: Loop, notes: list[Assumption]) -> tuple[CollectorGroup, ...]:
    """Check that all groups may count as one, or refuse."""
    groups = loop.groups
    tops: dict[int, float] = {}
    for group in groups:
        tops[group.space] = max(group.height, tops.get(group.space, group.height))
    low, high = min(tops.values()), max(tops.values())
    if high - low > SAME_HEIGHT:
        raise not_applicable(
            f"The loop has steam spaces at {low:g} m and {high:g} m above the vessel; each has its own "
            "pressure, and the course knows one.",
            remedy="Ask for the course of each space as a loop of its own, or use the stagnation check.",
            pointer="/collectors",
            facts={"lowest": low, "highest": high, "allowed": SAME_HEIGHT},
        )
    if len(tops) > 1:
        notes.append(
            derived("one-space", f"{len(tops)} steam spaces within {SAME_HEIGHT:g} m of height count as one.")
        )
    if len(groups) > 1:
        stagnations = [group.stagnation_temperature for group in groups]
        spread = max(stagnations) - min(stagnations)
        notes.append(
            derived(
                "one-collector",
                f"{len(groups)} collector groups count as one: contents added, coefficients averaged by "
                "aperture, the height that of the highest. Their stagnation temperatures differ by "
                f"{spread:.1f} K.",
            )
        )
    return groups


def _loss_scale(loop: Loop, group: CollectorGroup) -> float:
    """Factor on the losses with which the design sun just holds the stated stagnation temperature."""
    rise = group.stagnation_temperature - loop.sun.ambient
    nominal = rise * (group.linear_loss + group.quadratic_loss * rise)
    return group.peak_efficiency * loop.sun.irradiance / nominal if nominal > 0 else 1.0


def _residual_share(groups: tuple[CollectorGroup, ...], notes: list[Assumption], *, stated: bool) -> float:
    shares = []
    for group in groups:
        known = stated and group.emptying != "measured"
        emptying = group.emptying if known and group.emptying != "measured" else "fair"
        shares.append(RESIDUAL_SHARE[emptying])
        if not known:
            reason = "a measured steam power says nothing about it" if stated else "no class was stated"
            notes.append(
                own("emptying-class", f"{group.name}: the one curve takes fair emptying, since {reason}.")
            )
    content = sum(group.content for group in groups)
    return sum(g.content * share for g, share in zip(groups, shares, strict=True)) / content


def _reservoirs(loop: Loop, notes: list[Assumption]) -> tuple[Reservoir, ...]:
    """Station with the branches closed to steam, then vessel line and cooling vessel as one body."""
    temperatures = loop.temperatures
    room = temperatures.vessel_room
    station = Reservoir(
        content=loop.station.content + dead_content(loop),
        capacity=STATION_HEAT,
        conductance=STATION_LOSS,
        ambient=loop.sun.ambient if loop.station.outdoor else room,
    )
    line = loop.line_content + loop.cooling_content
    if loop.station.steam_loss > 0:
        notes.append(
            derived(
                "station-loss",
                f"Steam that reaches the station is condensed there up to {loop.station.steam_loss:g} W.",
            )
        )
    if line <= 0:
        return (station,)
    surface = _surface(loop.cooling_content)
    notes.append(
        own(
            "cooling-vessel",
            f"Vessel line and cooling vessel, {1000 * line:.3g} L, are one mixed body before the vessel that "
            f"loses {SURFACE_LOSS * surface:.3g} W/K to the room; layers in a cooling vessel keep the "
            "membrane cooler.",
        )
    )
    buffer = Reservoir(
        content=line, capacity=SURFACE_HEAT * surface, conductance=SURFACE_LOSS * surface, ambient=room
    )
    return station, buffer


def _vessel(
    loop: Loop,
    charge: Charge,
    vessels: int,
    acceptance_volume: float | None,
    notes: list[Assumption],
    *,
    gas_follows: bool,
) -> MembraneVessel:
    room = loop.temperatures.vessel_room
    surface = vessels * _surface(charge.nominal / vessels)
    if vessels > 1:
        notes.append(derived("one-vessel", f"{vessels} equal vessels in parallel count as one of their sum."))
    notes.append(
        derived("gas", "The gas of the vessel has the temperature of its liquid.")
        if gas_follows
        else derived("gas", f"The gas of the vessel stays at {charge.room - 273.15:g} degC, the room's.")
    )
    return MembraneVessel(
        nominal_volume=charge.nominal,
        precharge=charge.precharge,
        precharge_temperature=charge.precharge_temperature,
        filled=charge.filled,
        fill_temperature=loop.temperatures.fill,
        gas_temperature=None if gas_follows else charge.room,
        body=Reservoir(
            content=0.0,
            capacity=SURFACE_HEAT * surface,
            conductance=SURFACE_LOSS * surface,
            ambient=room,
        ),
        acceptance_volume=acceptance_volume,
    )


def _surface(volume: float) -> float:
    return float(SURFACE_FACTOR * volume ** (2 / 3))
