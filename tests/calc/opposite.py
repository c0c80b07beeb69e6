"""Turns a case of the second solver into a loop of the service, field by field. No physics of either side."""

from collections.abc import Sequence
from math import log, pi

from calc.reference import CRITERIA
from loopslack.calc.balance import Balance, mixing
from loopslack.calc.charge import Charge
from loopslack.calc.equilibrium import Equilibrium, equilibrium
from loopslack.calc.fluids.making import Fluid, glycol, water
from loopslack.calc.model import (
    Branch,
    CollectorGroup,
    Loop,
    Precharge,
    Relief,
    Segment,
    Station,
    Sun,
    Temperatures,
)
from loopslack.calc.scenarios import Scenario
from second_opinion import Case
from second_opinion.case import Branch as OtherBranch
from second_opinion.case import Group as OtherGroup
from second_opinion.case import Segment as OtherSegment
from second_opinion.case import atmosphere

_KINDS = {"PG": "propylene-glycol", "EG": "ethylene-glycol"}


def fluid_of(case: Case) -> Fluid:
    if case.fluid == "water":
        return water()
    return glycol(_KINDS[case.fluid], case.glycol_mass_fraction)


def loop_of(case: Case) -> Loop:
    air = atmosphere(case.altitude)
    branches = tuple(_branch(k, branch, case) for k, branch in enumerate(case.branches))
    heights = [group.height for group in case.groups]
    crests = [segment.end_height for branch in branches for segment in branch.segments]
    return Loop(
        fluid=fluid_of(case),
        groups=tuple(_group(k, group, case) for k, group in enumerate(case.groups)),
        branches=branches,
        station=Station(content=case.station_content, height=case.station_height),
        line_content=case.vessel_line_content,
        cooling_content=case.cooling_vessel_content,
        top=max(0.0, *heights, *crests),
        vessel_outdoor=False,
        pump_height=0.0,
        pump_head=0.0,
        pump_side="suction",
        gauge_height=0.0,
        atmosphere=air,
        altitude=case.altitude,
        relief=Relief(
            set_pressure=6e5,
            opening_pressure=5.4e5,
            closing_pressure=4.8e5,
            height=0.0,
            allowance_rule="stated",
        ),
        parts=(),
        temperatures=Temperatures(
            fill=case.fill_temperature,
            site_minimum=case.site_minimum,
            indoor_cold=case.indoor_minimum,
            vessel_room=case.room_temperature,
            vessel_cold=case.cold_vessel_room,
            flow=case.operating_flow,
            back=case.operating_return,
            cut_off=case.hot_liquid,
            hot_liquid=case.hot_liquid,
        ),
        sun=Sun(irradiance=case.sun, ambient=case.ambient),
        criteria=CRITERIA,
        precharge=Precharge(kind="stated", pressure=case.precharge, temperature=case.precharge_temperature),
    )


def equilibrium_of(case: Case, opening: float) -> tuple[Equilibrium, Balance]:
    loop = loop_of(case)
    scenario = Scenario(id="base", gas_follows=case.gas == "mixed", stagnation_shift=case.stagnation_shift)
    balance = Balance(loop, scenario)
    filled = case.liquid_at_filling
    charge = Charge(
        case.vessel,
        case.precharge,
        case.precharge_temperature,
        filled,
        filled * loop.fluid.density(case.fill_temperature),
        case.room_temperature,
        case.allowance * loop.content,
    )
    found = equilibrium(balance, charge, mixing(loop), gas_follows=scenario.gas_follows, opening=opening)
    return found, balance


def highest_opening(balance: Balance) -> float:
    """The highest vessel pressure that keeps every space inside its bubble line: no valve at all."""
    return min(
        space.fluid.highest_pressure * 0.9999 + space.column * max(space.path.heights)
        for space in balance.spaces
    )


def reaches(found: Equilibrium, balance: Balance) -> dict[str, float]:
    return {
        branch.name: reach
        for space, steam in zip(balance.spaces, found.extent.spaces, strict=True)
        for branch, reach in zip(space.path.branches, space.path.reach(steam.place), strict=True)
    }


def _group(index: int, group: OtherGroup, case: Case) -> CollectorGroup:
    return CollectorGroup(
        name=f"group {index}",
        build="flat-plate",  # the balance does not ask for it
        count=1,
        aperture=group.area,
        content=group.content,
        peak_efficiency=group.eta0,
        linear_loss=group.a1,
        quadratic_loss=group.a2,
        stagnation_temperature=group.stagnation(case.sun, case.ambient, 0.0),
        measured_stagnation=group.measured_stagnation is not None,
        emptying="measured",
        steam_power=group.class_power,
        worse_steam_power=None,
        height=group.height,
        space=group.space,
    )


def _branch(index: int, branch: OtherBranch, case: Case) -> Branch:
    start = case.space_height(branch.space)
    heights = _heights(branch.segments, start, case.station_height)
    segments = []
    for k, (segment, end) in enumerate(zip(branch.segments, heights, strict=True)):
        around = segment.outer + 2 * segment.insulation
        resistance = log(around / segment.outer) / (2 * segment.conductivity) + 1 / (segment.film * around)
        segments.append(
            Segment(
                name=f"{index}.{k}",
                length=segment.length,
                area=pi / 4 * segment.bore**2,
                outer_diameter=segment.outer,
                insulation=segment.insulation,
                conductivity=segment.conductivity,
                conductance=pi / resistance,
                ambient=segment.ambient,
                start_height=start,
                end_height=end,
                outdoor=segment.outdoor,
            )
        )
        start = end
    return Branch(
        name=str(index),
        role=branch.role,
        access="open" if branch.open else "closed",
        segments=tuple(segments),
        space=branch.space,
    )


def _heights(segments: Sequence[OtherSegment], start: float, end: float) -> list[float]:
    """Unknown heights lie on the straight line between known ones, by length."""
    known = [(0.0, start)]
    done = 0.0
    for k, segment in enumerate(segments):
        done += segment.length
        if segment.end_height is not None:
            known.append((done, segment.end_height))
        elif k == len(segments) - 1:
            known.append((done, end))
    found, done = [], 0.0
    for segment in segments:
        done += segment.length
        low = max(point for point in known if point[0] <= done + 1e-12)
        high = min(point for point in known if point[0] >= done - 1e-12)
        span = high[0] - low[0]
        found.append(low[1] if span <= 0 else low[1] + (high[1] - low[1]) * (done - low[0]) / span)
    return found
