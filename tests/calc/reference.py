"""The reference loop of the project: a rowing club's wash house at sea level. Invented; every number is stated.

Eight flat-plate collectors of 2.3 m2 and 1.7 L each, 23 m of 28x1.5 copper each way with 20 mm of insulation, both
branches open, station 6.4 L, 0.43 propylene glycol by mass, collectors 11 m above the vessel, relief valve 6 bar.
"""

from math import inf, log, pi

from loopslack.calc.fluids.making import glycol
from loopslack.calc.model import (
    Branch,
    CollectorGroup,
    Criteria,
    Loop,
    Part,
    Precharge,
    Relief,
    Segment,
    Station,
    Sun,
    Temperatures,
)

ZERO = 273.15
BAR = 1e5
ATMOSPHERE = 101325.0


def stagnation_rise(gain: float, linear: float, quadratic: float) -> float:
    return 2 * gain / (linear + (linear**2 + 4 * quadratic * gain) ** 0.5)


def group(**changes) -> CollectorGroup:
    values = {
        "name": "roof",
        "build": "flat-plate",
        "count": 8,
        "aperture": 18.4,
        "content": 13.6e-3,
        "peak_efficiency": 0.79,
        "linear_loss": 3.7,
        "quadratic_loss": 0.014,
        "stagnation_temperature": ZERO + 30 + stagnation_rise(790, 3.7, 0.014),
        "measured_stagnation": False,
        "emptying": "fair",
        "steam_power": 80.0,
        "worse_steam_power": 120.0,
        "height": 11.0,
    }
    return CollectorGroup(**(values | changes))


def conductance(outer: float, insulation: float, conductivity: float = 0.04, film: float = 10.0) -> float:
    outside = outer + 2 * insulation
    return pi / (log(outside / outer) / (2 * conductivity) + 1 / (film * outside))


def run(name: str, role: str, length: float = 23.0, access: str = "open", **changes) -> Branch:
    values = {
        "name": name,
        "length": length,
        "area": pi / 4 * 0.025**2,
        "outer_diameter": 0.028,
        "insulation": 0.02,
        "conductivity": 0.04,
        "conductance": conductance(0.028, 0.02),
        "ambient": ZERO + 20,
        "start_height": 11.0,
        "end_height": 0.0,
        "outdoor": False,
    }
    segment = Segment(**(values | changes))
    return Branch(name=name, role=role, access=access, segments=(segment,))


CRITERIA = Criteria(
    reserve=None,
    top_pressure=0.5 * BAR,
    window_width=0.3 * BAR,
    fill_above_precharge=0.3 * BAR,
    window_step=0.1 * BAR,
    boiling_margin=0.3 * BAR,
    membrane_limit=ZERO + 70,
    freeze_margin=5.0,
    fluid_allowance=0.005,
    degradation_limit=ZERO + 165,
    stagnation_doubt=15.0,
    net_positive_suction=None,
)

TEMPERATURES = Temperatures(
    fill=ZERO + 15,
    site_minimum=ZERO - 16,
    indoor_cold=ZERO + 5,
    vessel_room=ZERO + 20,
    vessel_cold=ZERO + 5,
    flow=ZERO + 80,
    back=ZERO + 40,
    cut_off=ZERO + 120,
    hot_liquid=ZERO + 120,
)


def loop(**changes) -> Loop:
    values = {
        "fluid": glycol("propylene-glycol", 0.43),
        "groups": (group(),),
        "branches": (run("flow", "flow"), run("return", "return")),
        "station": Station(content=6.4e-3, height=0.0),
        "line_content": 0.0,
        "cooling_content": 0.0,
        "top": 11.0,
        "vessel_outdoor": False,
        "pump_height": 0.0,
        "pump_head": 0.0,
        "pump_side": "suction",
        "gauge_height": 0.0,
        "atmosphere": ATMOSPHERE,
        "altitude": 0.0,
        "relief": Relief(
            set_pressure=6 * BAR,
            opening_pressure=5.4 * BAR,
            closing_pressure=4.8 * BAR,
            height=0.0,
            allowance_rule="en-12828",
        ),
        "parts": (Part(name="collectors", height=11.0, rated_pressure=10 * BAR),),
        "temperatures": TEMPERATURES,
        "sun": Sun(irradiance=1000.0, ambient=ZERO + 30),
        "criteria": CRITERIA,
        "precharge": Precharge(kind="rule"),
    }
    return Loop(**(values | changes))


NO_LIMIT = inf
