"""The recommended answer as one more row beside the published rules.

How it is found stands in ``sizing.mass_balance``; here it is only put into the form of the other rules: liquid the
vessel must hold in its hottest state, times a factor.
"""

from collections.abc import Sequence

from loopslack.calc.precharge import precharge, precharge_temperature
from loopslack.calc.scenarios import BASE, Scenario
from loopslack.calc.sizing.rules.basis import Basis
from loopslack.calc.sizing.rules.rule import Answer, Rule, applied, refused
from loopslack.calc.sizing.volumes import Sized, size
from loopslack.calc.stagnation import stagnation
from loopslack.calc.window import Bounds, Gas
from loopslack.kernel.citations import DERIVED
from loopslack.kernel.equation import Range, equation
from loopslack.kernel.kinds import AbsolutePressure, NominalVolume, Temperature, Volume

_FROM_ZERO = Range(0.0)


@equation(
    "mass-balance-vessel",
    law="V_N = V_l / (1 - p_0 / p * T / T_0)",
    symbols={
        "V_l": "liquid",
        "p_0": "precharge",
        "p": "pressure",
        "T": "gas temperature",
        "T_0": "precharge temperature",
    },
    source=DERIVED,
    note="Boyle's law for the vessel's liquid, solved for the vessel.",
    valid={"liquid": _FROM_ZERO, "precharge": _FROM_ZERO, "pressure": _FROM_ZERO},
    yields=_FROM_ZERO,
)
def vessel(
    liquid: Volume,
    precharge: AbsolutePressure,
    pressure: AbsolutePressure,
    gas_temperature: Temperature,
    precharge_temperature: Temperature,
) -> NominalVolume:
    """Nominal volume, m3, of the vessel that stands at a pressure with so much liquid in it.

    The liquid comes from the mass balance of the whole loop, what was filled included.
    """
    return NominalVolume(liquid / (1 - precharge / pressure * gas_temperature / precharge_temperature))


def recommended_gas(sized: Sized) -> Gas:
    """The gas side of the recommended vessel."""
    volume = sized.smallest
    return Gas(volume, precharge(sized.analysis, volume), precharge_temperature(sized.analysis))


def answer(sized: Sized | None, scenarios: Sequence[Scenario]) -> Answer:
    """The recommended volume in the form of a rule: the hottest state at the upper end of its window."""
    if sized is None:
        return refused(
            "No vessel holds this loop under the doubts that are asked for.",
            "See the remedies of the answer.",
        )
    gas = recommended_gas(sized)
    analysis = sized.analysis
    window = Bounds(analysis, scenarios, gas).window(gas.nominal)
    by_id = {scenario.id: scenario for scenario in scenarios}
    fullest = by_id.get(window.upper_bound.scenario, BASE)
    found = stagnation(analysis, fullest, gas, window.upper_bound.mass)
    law = applied(
        vessel,
        liquid=found.liquid,
        precharge=gas.precharge,
        pressure=found.pressure,
        gas_temperature=found.gas_temperature,
        precharge_temperature=gas.temperature,
    )
    law = law._replace(result=gas.nominal)
    return Answer("", (law,), None, gas.precharge, gas.precharge, window.recommended)


def _run(basis: Basis) -> tuple[Answer, ...]:
    """Size the loop itself, with a cooling vessel if it needs one, to survive each doubt alone."""
    analysis = basis.analysis
    sized = size(analysis, analysis.singles, "size", analysis.loop.criteria.membrane_limit)
    return (answer(sized, analysis.singles),)


RULE = Rule(
    id="mass-balance",
    title="Mass balance of the closed loop",
    counts="Everything, consistently: expansion, steam in collectors and pipes, the filling, doubts, a fill window.",
    law="V_N = V_l / (1 - p_0/p T/T_0), V_l from the mass of the whole loop",
    sources=(DERIVED,),
    range="Closed loops whose liquid, boiling and pipes are known.",
    run=_run,
)
