"""The wash-house loop: 8 flat collectors 11 m above the vessel, two straight branches (own scenario)."""

from __future__ import annotations

from .case import Branch, Case, Group, Segment, celsius

BAR = 1e5
AIR = 1.01325e5
LITRE = 1e-3


def reference_loop(vessel_litres: float, **changes: object) -> Case:
    """The loop with a vessel size, everything at 15 degC at filling and in the vessel room."""
    pipe = Segment(length=23.0, bore=0.025, outer=0.028)
    case = Case(
        groups=[
            Group(area=18.4, eta0=0.79, a1=3.7, a2=0.014, class_power=80.0, content=13.6 * LITRE, height=11.0)
        ],
        branches=[Branch(segments=[pipe], role=role) for role in ("flow", "return")],
        station_content=6.4 * LITRE,
        vessel=vessel_litres * LITRE,
        precharge=1.62 * BAR + AIR,
        fill_pressure=1.92 * BAR + AIR,
        fluid="PG",
        glycol_mass_fraction=0.43,
        room_temperature=celsius(15.0),
    )
    return case.but(**changes)
