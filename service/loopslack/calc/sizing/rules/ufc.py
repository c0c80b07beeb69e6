"""The rule of UFC 3-440-01: the liquid of the collectors and of all pipe at or above their bottom is pushed out."""

from loopslack.calc.sizing.rules.basis import Basis, pipes_above_collectors
from loopslack.calc.sizing.rules.choices import Choices
from loopslack.calc.sizing.rules.rule import Answer, Rule, applied
from loopslack.kernel.citations import Cite
from loopslack.kernel.equation import Range, equation
from loopslack.kernel.kinds import AbsolutePressure, NominalVolume, PressureDifference, Volume
from loopslack.physics.precharge import precharge_below_fill

CRITERIA = Cite("ufc-3-440-01", "read")

BELOW_FILL = PressureDifference(34_473.786)  # 5 psi, the smaller end of 5 to 10 psi: the larger vessel
_FROM_ZERO = Range(0.0)


@equation(
    "ufc",
    law="V_N = V_a / (p_0 / p_f - p_0 / p_rv)",
    symbols={"V_a": "acceptance", "p_0": "precharge", "p_f": "fill pressure", "p_rv": "relief pressure"},
    source=CRITERIA,
    note="Boyle's law from filling to the relief valve's set pressure, without any allowance.",
    valid={
        "acceptance": _FROM_ZERO,
        "precharge": _FROM_ZERO,
        "fill_pressure": _FROM_ZERO,
        "relief_pressure": _FROM_ZERO,
    },
    yields=_FROM_ZERO,
)
def vessel(
    acceptance: Volume,
    precharge: AbsolutePressure,
    fill_pressure: AbsolutePressure,
    relief_pressure: AbsolutePressure,
) -> NominalVolume:
    """Nominal volume, m3, that takes up the acceptance between filling and the relief valve's set pressure.

    Neglects the expansion of the liquid that stays, the reserve and the valve's tolerance. Negative where the
    filling already stands above the relief pressure; a derivation refuses it.
    """
    return NominalVolume(acceptance / (precharge / fill_pressure - precharge / relief_pressure))


def _run(basis: Basis) -> tuple[Answer, ...]:
    above = pipes_above_collectors(basis.loop, level=True)
    below = applied(precharge_below_fill, fill_pressure=basis.fill, difference=BELOW_FILL)
    law = applied(
        vessel,
        acceptance=basis.collectors + above,
        precharge=below.result,
        fill_pressure=basis.fill,
        relief_pressure=basis.set_pressure,
    )
    choices = Choices(basis.collectors, above, basis.set_pressure, below.result, 0.0, fill=basis.fill)
    return (Answer("", (below, law), choices, below.result, below.result, basis.fill),)


RULE = Rule(
    id="ufc",
    title="Unified Facilities Criteria 3-440-01",
    counts="Collectors and all pipe at or above their bottom. No expansion of the rest, no reserve.",
    law="acceptance = V_c + V_up; V_N = acceptance / (p_0/p_f - p_0/p_rv)",
    sources=(CRITERIA,),
    range="Solar loops with glycol; no range is published.",
    run=_run,
)
