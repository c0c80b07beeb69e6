"""What a fluid costs, beside CoolProp: ``python tests/load/bench_fluids.py``.

Prints microseconds per call and the ratio to CoolProp's nearest call, and fails when a call costs more than allowed.
CoolProp has neither a bubble point of glycol mixtures nor a density of theirs above 100 degC, so that water stands in
for the first and a colder mixture for the second.
"""

from __future__ import annotations

import sys
from collections.abc import Callable
from timeit import repeat

import CoolProp
from CoolProp.CoolProp import PropsSI

from loopslack.calc.fluids.glycol import Glycol
from loopslack.calc.fluids.making import BoilsLike, glycol, own_fluid, water

CALLS, ROUNDS = 20_000, 7
ALLOWED = {"density": 0.6, "saturated": 5.0, "boiling temperature": 10.0}  # microseconds


def microseconds(call: Callable[[], object], calls: int = CALLS) -> float:
    return min(repeat(call, number=calls, repeat=ROUNDS)) / calls * 1e6


def main() -> int:
    mixture, pure = glycol("propylene-glycol", 0.4), water()
    points = [(253.15, 1050.0), (293.15, 1032.0), (353.15, 992.0), (433.15, 918.0)]
    own = own_fluid(points, 255.15, [(353.15, 0.42e5), (393.15, 1.8e5), (433.15, 5.7e5)])
    like = own_fluid(points, 255.15, BoilsLike(kind="ethylene-glycol", mass_fraction=0.4))
    steam = CoolProp.AbstractState("HEOS", "Water")
    brine = CoolProp.AbstractState("INCOMP", "MPG")
    brine.set_mass_fractions([0.4])

    def brine_density() -> float:
        brine.update(CoolProp.PT_INPUTS, 3e5, 350.0)
        return brine.rhomass()

    def water_saturated() -> float:
        steam.update(CoolProp.QT_INPUTS, 1, 400.0)
        return steam.p() + steam.rhomass()

    def water_boils() -> float:
        steam.update(CoolProp.PQ_INPUTS, 3e5, 0)
        return steam.T()

    text = {
        "density": ("D", "T", 350, "P", 3e5, "INCOMP::MPG[0.4]"),
        "saturated": ("P", "T", 400, "Q", 1, "Water"),
        "boiling temperature": ("T", "P", 3e5, "Q", 0, "Water"),
    }
    objects = {"density": brine_density, "saturated": water_saturated, "boiling temperature": water_boils}
    other = {
        label: (microseconds(objects[label], 2000), microseconds(lambda asked=asked: PropsSI(*asked), 500))
        for label, asked in text.items()
    }
    failed = False
    print(
        f"{'call':22}{'fluid':18}{'us':>8}{'allowed':>9}{'CoolProp object / us':>22}{'CoolProp text / us':>20}"
    )
    for name, fluid in (
        ("water", pure),
        ("glycol 40 %", mixture),
        ("own, by table", own),
        ("own, likened", like),
    ):
        calls = {
            "density": lambda fluid=fluid: fluid.density(350.0),
            "saturated": lambda fluid=fluid: fluid.saturated(400.0),
            "boiling temperature": lambda fluid=fluid: fluid.boiling_temperature(3e5),
        }
        for label, call in calls.items():
            cost, (low, high) = microseconds(call), other[label]
            for _ in range(3):  # another program may have had the processor
                if cost > ALLOWED[label]:
                    cost = min(cost, microseconds(call))
            failed |= cost > ALLOWED[label]
            print(
                f"{label:22}{name:18}{cost:8.2f}{ALLOWED[label]:9.1f}{low / cost:20.1f} x{high / cost:18.1f} x"
            )
    for label, call in (
        ("vapour", lambda: mixture.vapour(400.0)),
        ("heat capacity", lambda: mixture.heat_capacity(350.0)),
        ("a fluid made anew", lambda: Glycol("propylene-glycol", 0.4)),
    ):
        print(f"{label:22}{'glycol 40 %':18}{microseconds(call, 2000):8.2f}")
    print("FAILED: a call costs more than allowed" if failed else "all calls cost less than allowed")
    return int(failed)


if __name__ == "__main__":
    sys.exit(main())
