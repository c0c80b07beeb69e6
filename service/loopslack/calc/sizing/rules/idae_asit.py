"""The rule of the Spanish guide to solar installations: collectors, pipes above them, 8.5 % of the content, 3 L."""

from loopslack.calc.sizing.rules.basis import Basis, pipes_above_collectors
from loopslack.calc.sizing.rules.choices import Choices
from loopslack.calc.sizing.rules.rule import Answer, Rule, applied
from loopslack.kernel.citations import Cite
from loopslack.kernel.equation import Range, equation
from loopslack.kernel.kinds import AbsolutePressure, NominalVolume, Volume
from loopslack.physics.relief import allowance_ten_percent
from loopslack.physics.vessel import pressure_factor

GUIDE = Cite("idae-asit-022", "read", "p. 88")

EXPANSION, RESERVE, LEAST_FACTOR = 0.085, 0.003, 2.0
_FROM_ZERO = Range(0.0)


@equation(
    "idae-asit",
    law="V_N = (0.085 * V_s + V_c + V_up + 0.003) * max(p_e / (p_e - p_0), 2)",
    symbols={
        "V_s": "content",
        "V_c": "collectors",
        "V_up": "pipes above",
        "p_e": "final pressure",
        "p_0": "precharge",
    },
    source=GUIDE,
    note="Volumes in m3: the reserve is 3 L. The guide prints gauge pressures plus 1 bar.",
    valid={
        "content": _FROM_ZERO,
        "collectors": _FROM_ZERO,
        "pipes_above": _FROM_ZERO,
        "final_pressure": _FROM_ZERO,
        "precharge": _FROM_ZERO,
    },
    yields=_FROM_ZERO,
)
def vessel(
    content: Volume,
    collectors: Volume,
    pipes_above: Volume,
    final_pressure: AbsolutePressure,
    precharge: AbsolutePressure,
) -> NominalVolume:
    """Nominal volume, m3, for a loop whose collectors and the pipes above them fill with steam.

    Neglects steam in pipes below the collectors. Raises ``OutOfRange`` unless the final pressure exceeds the
    precharge.
    """
    pushed = EXPANSION * content + collectors + pipes_above + RESERVE
    return NominalVolume(pushed * max(pressure_factor(final_pressure, precharge), LEAST_FACTOR))


def _run(basis: Basis) -> tuple[Answer, ...]:
    final = basis.opening(allowance_ten_percent)
    above = pipes_above_collectors(basis.loop, level=False)
    law = applied(
        vessel,
        content=basis.content,
        collectors=basis.collectors,
        pipes_above=above,
        final_pressure=final,
        precharge=basis.precharge,
    )
    choices = Choices(
        basis.collectors,
        above,
        final,
        basis.precharge,
        EXPANSION * basis.content,
        reserve=RESERVE,
        least_factor=LEAST_FACTOR,
    )
    return (Answer("", (law,), choices, basis.precharge),)


RULE = Rule(
    id="idae-asit",
    title="Guide 022 of IDAE and ASIT, vessel at low level",
    counts="Collectors and pipes above them, 8.5 % of the content, 3 L. The pressure factor is at least 2.",
    law="V_N = (0.085 V_s + V_c + V_up + 3 L) max(F, 2)",
    sources=(GUIDE,),
    range="Solar loops with glycol and the vessel below the collectors; no range is published.",
    run=_run,
)
