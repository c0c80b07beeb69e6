"""A dozen named loops that differ in what makes loops differ. Own scenarios; nobody is meant.

Must not live here: expectations; those stand in the tests.
"""

from __future__ import annotations

from .case import Branch, Case, Group, Segment, atmosphere, celsius
from .reference_loop import reference_loop

BAR, LITRE, MM = 1e5, 1e-3, 1e-3
FOOT, INCH, GALLON, PSI = 0.3048, 0.0254, 3.785411784e-3, 6894.757293168
AIR = atmosphere(0.0)


def _fahrenheit(degrees: float) -> float:
    return celsius((degrees - 32.0) / 1.8)


def _flat(area: float, class_power: float, litres: float, height: float, space: int = 0) -> Group:
    return Group(
        area=area,
        eta0=0.80,
        a1=3.6,
        a2=0.012,
        class_power=class_power,
        content=litres * LITRE,
        height=height,
        space=space,
    )


def _evacuated(area: float, class_power: float, litres: float, height: float, space: int = 0) -> Group:
    return Group(
        area=area,
        eta0=0.70,
        a1=1.2,
        a2=0.006,
        class_power=class_power,
        content=litres * LITRE,
        height=height,
        space=space,
    )


def _pipe(length: float, outer: float, wall: float, insulation: float = 20.0, **more: object) -> Segment:
    return Segment(
        length=length,
        bore=(outer - 2.0 * wall) * MM,
        outer=outer * MM,
        insulation=insulation * MM,
        **more,
    )


def _settings(
    precharge_gauge: float, fill_gauge: float, valve_gauge: float, air: float = AIR
) -> dict[str, float]:
    """Absolute pressures from gauge bar; the valve starts to open a tenth below its set pressure."""
    return {
        "precharge": precharge_gauge * BAR + air,
        "fill_pressure": fill_gauge * BAR + air,
        "opening_pressure": 0.9 * valve_gauge * BAR + air,
    }


def _ski_hut() -> Case:
    """High site: thin air, little head, ethylene glycol, a crest over the ridge in the flow."""
    air = atmosphere(2350.0)
    over_the_ridge = [
        _pipe(4.0, 22.0, 1.0, outdoor=True, ambient=celsius(10.0), end_height=7.2),
        _pipe(14.0, 22.0, 1.0, end_height=0.0),
    ]
    return Case(
        groups=[_flat(12.0, 80.0, 8.0, 6.0)],
        branches=[
            Branch(segments=over_the_ridge, role="flow"),
            Branch(segments=[_pipe(12.0, 22.0, 1.0, outdoor=True, ambient=celsius(10.0))], role="return"),
        ],
        station_content=3.0 * LITRE,
        vessel=50.0 * LITRE,
        altitude=2350.0,
        fluid="EG",
        glycol_mass_fraction=0.50,
        site_minimum=celsius(-30.0),
        sun=1100.0,
        **_settings(1.2, 1.6, 6.0, air),
    )


def _two_roofs() -> Case:
    """Two steam spaces at different heights, flat here, evacuated there, on one vessel."""
    return Case(
        groups=[_flat(20.0, 80.0, 14.0, 14.0, space=0), _evacuated(10.0, 150.0, 18.0, 8.0, space=1)],
        branches=[
            Branch(segments=[_pipe(30.0, 28.0, 1.5)], role="flow", space=0),
            Branch(segments=[_pipe(26.0, 28.0, 1.5)], role="return", space=0),
            Branch(segments=[_pipe(18.0, 22.0, 1.0)], role="flow", space=1),
            Branch(segments=[_pipe(22.0, 22.0, 1.0)], role="return", space=1),
        ],
        station_content=9.0 * LITRE,
        vessel_line_content=0.6 * LITRE,
        vessel=250.0 * LITRE,
        **_settings(1.9, 2.3, 6.0),
    )


def _mixed_field() -> Case:
    """Three unlike groups on one header, one of them with a measured stagnation temperature."""
    measured = Group(
        area=8.0,
        eta0=0.76,
        a1=4.2,
        a2=0.016,
        class_power=50.0,
        content=6.0 * LITRE,
        height=9.0,
        measured_stagnation=celsius(171.0),
    )
    return Case(
        groups=[_flat(14.0, 120.0, 9.0, 9.0), measured, _evacuated(6.0, 100.0, 2.5, 9.0)],
        branches=[
            Branch(
                segments=[_pipe(10.0, 28.0, 1.5, 30.0, outdoor=True), _pipe(15.0, 28.0, 1.5)], role="flow"
            ),
            Branch(segments=[_pipe(33.0, 22.0, 1.0)], role="return"),
        ],
        station_content=6.0 * LITRE,
        vessel=110.0 * LITRE,
        allowance=0.005,
        **_settings(1.4, 1.8, 6.0),
    )


def _vessel_in_the_attic() -> Case:
    """Collectors on the lawn, station and vessel 4 m above: the pipes rise, the column adds pressure."""
    return Case(
        groups=[_flat(9.2, 50.0, 6.8, -4.0)],
        branches=[Branch(segments=[_pipe(16.0, 22.0, 1.0)], role=role) for role in ("flow", "return")],
        station_content=3.0 * LITRE,
        vessel=35.0 * LITRE,
        **_settings(0.7, 1.1, 6.0),
    )


def _tower_block() -> Case:
    """40 m of column: the front boils at far lower pressure than the vessel sees."""
    levels = (38.0, 38.0, 20.0, 0.0)
    down = [
        _pipe(length, 42.0, 1.5, 40.0, end_height=z)
        for length, z in zip((2.0, 9.0, 20.0, 25.0), levels, strict=True)
    ]
    return Case(
        groups=[_flat(90.0, 80.0, 62.0, 40.0)],
        branches=[
            Branch(segments=down, role="flow"),
            Branch(segments=[_pipe(52.0, 42.0, 1.5, 40.0)], role="return"),
        ],
        station_content=35.0 * LITRE,
        vessel_line_content=2.0 * LITRE,
        cooling_vessel_content=60.0 * LITRE,
        vessel=500.0 * LITRE,
        gas="mixed",
        **_settings(4.4, 4.8, 10.0),
    )


def _district_field() -> Case:
    """700 collectors, long buried pipes, one branch shut by its check valve."""
    return Case(
        groups=[_flat(1750.0, 80.0, 1300.0, 5.0)],
        branches=[
            Branch(segments=[_pipe(110.0, 108.0, 2.5, 50.0, ambient=celsius(12.0))], role="flow"),
            Branch(
                segments=[_pipe(95.0, 108.0, 2.5, 50.0, ambient=celsius(12.0))], role="return", open=False
            ),
        ],
        station_content=250.0 * LITRE,
        vessel_line_content=15.0 * LITRE,
        vessel=8.0,
        glycol_mass_fraction=0.38,
        gas="mixed",
        **_settings(1.2, 1.6, 6.0),
    )


def _desert_laundry() -> Case:
    """Plain water, hot climate, bare pipe in the plant room, US units on the drawing."""
    bare = Segment(
        length=40.0 * FOOT, bore=0.785 * INCH, outer=0.875 * INCH, insulation=0.0, ambient=_fahrenheit(95.0)
    )
    wrapped = Segment(
        length=55.0 * FOOT,
        bore=0.785 * INCH,
        outer=0.875 * INCH,
        insulation=0.75 * INCH,
        ambient=_fahrenheit(95.0),
    )
    return Case(
        groups=[
            Group(
                area=128.0 * FOOT**2,
                eta0=0.74,
                a1=4.0,
                a2=0.011,
                class_power=120.0,
                content=2.6 * GALLON,
                height=25.0 * FOOT,
            )
        ],
        branches=[Branch(segments=[wrapped], role="flow"), Branch(segments=[bare], role="return")],
        station_content=1.2 * GALLON,
        vessel=14.0 * GALLON,
        precharge=20.0 * PSI + AIR,
        fill_pressure=27.0 * PSI + AIR,
        opening_pressure=(75.0 - 5.0) * PSI + AIR,
        fill_temperature=_fahrenheit(70.0),
        precharge_temperature=_fahrenheit(70.0),
        room_temperature=_fahrenheit(90.0),
        ambient=_fahrenheit(104.0),
        sun=1100.0,
        fluid="water",
        glycol_mass_fraction=0.0,
        site_minimum=_fahrenheit(41.0),
    )


def _trap_under_the_floor() -> Case:
    """The flow dips under the floor and comes up again before the station: a trap."""
    dip = [
        _pipe(8.0, 18.0, 1.0, end_height=-0.8),
        _pipe(5.0, 18.0, 1.0, end_height=-0.8),
        _pipe(2.0, 18.0, 1.0, end_height=0.6),
    ]
    return Case(
        groups=[_flat(6.9, 80.0, 5.1, 4.0)],
        branches=[
            Branch(segments=dip, role="flow"),
            Branch(segments=[_pipe(11.0, 18.0, 1.0)], role="return"),
        ],
        station_content=2.0 * LITRE,
        station_height=0.6,
        vessel=25.0 * LITRE,
        fluid="PG",
        glycol_mass_fraction=0.30,
        site_minimum=celsius(-8.0),
        **_settings(0.9, 1.3, 6.0),
    )


WORKED_LOOPS: dict[str, Case] = {
    "wash house": reference_loop(72.0, opening_pressure=5.4 * BAR + AIR),
    "wash house, every doubt at once": reference_loop(
        100.0, gas="mixed", stagnation_shift=15.0, allowance=0.005, opening_pressure=5.4 * BAR + AIR
    ),
    "wash house, too small a vessel": reference_loop(25.0, opening_pressure=5.4 * BAR + AIR),
    "wash house, high pressure keeps it liquid": reference_loop(
        18.0, precharge=7.0 * BAR + AIR, fill_pressure=7.6 * BAR + AIR, opening_pressure=16.0 * BAR + AIR
    ),
    "ski hut": _ski_hut(),
    "two roofs": _two_roofs(),
    "mixed field": _mixed_field(),
    "vessel in the attic": _vessel_in_the_attic(),
    "tower block": _tower_block(),
    "district field, one branch shut": _district_field(),
    "desert laundry": _desert_laundry(),
    "trap under the floor": _trap_under_the_floor(),
    "membrane full": reference_loop(150.0, acceptance=0.045, opening_pressure=9.0 * BAR + AIR),
}
