"""The textbook rule for glycol loops: all collector liquid, a tenth of the rest, and 15 % on top."""

from loopslack.calc.sizing.rules.basis import Basis
from loopslack.calc.sizing.rules.choices import Choices
from loopslack.calc.sizing.rules.rule import Answer, Rule, applied
from loopslack.kernel.citations import COMMON_PRACTICE
from loopslack.kernel.equation import Range, equation
from loopslack.kernel.kinds import AbsolutePressure, NominalVolume, Volume
from loopslack.physics.vessel import pressure_factor

EXPANDED, ON_TOP = 0.1, 1.15
_FROM_ZERO = Range(0.0)


@equation(
    "collector-boil-off",
    law="V_N = 1.15 * (0.1 * V_s + V_c) * P_rv / (P_rv - P_start)",
    symbols={"V_s": "content", "V_c": "collectors", "P_rv": "relief pressure", "P_start": "start pressure"},
    source=COMMON_PRACTICE,
    note="Absolute pressures; the relief valve's set pressure without any allowance.",
    valid={"content": _FROM_ZERO, "collectors": _FROM_ZERO, "relief_pressure": _FROM_ZERO},
    yields=_FROM_ZERO,
)
def vessel(
    content: Volume, collectors: Volume, relief_pressure: AbsolutePressure, start_pressure: AbsolutePressure
) -> NominalVolume:
    """Nominal volume, m3, for a loop whose collectors boil dry.

    Neglects steam in the pipes, the reserve and the valve's tolerance; the 15 % stand for all of them. Raises
    ``OutOfRange`` unless the relief pressure exceeds the start pressure.
    """
    pushed = ON_TOP * (EXPANDED * content + collectors)
    return NominalVolume(pushed * pressure_factor(relief_pressure, start_pressure))


def _run(basis: Basis) -> tuple[Answer, ...]:
    law = applied(
        vessel,
        content=basis.content,
        collectors=basis.collectors,
        relief_pressure=basis.set_pressure,
        start_pressure=basis.fill,
    )
    choices = Choices(
        ON_TOP * basis.collectors, 0.0, basis.set_pressure, basis.fill, ON_TOP * EXPANDED * basis.content
    )
    return (Answer("", (law,), choices, basis.fill, fill=basis.fill),)


RULE = Rule(
    id="collector-boil-off",
    title="Textbook rule: collectors boil dry",
    counts="All collector liquid, a tenth of the content, 15 % on top. No steam in pipes, no reserve.",
    law="V_N = 1.15 (0.1 V_s + V_c) P_rv / (P_rv - P_start)",
    sources=(COMMON_PRACTICE,),
    range="Glycol loops in general; no range is published.",
    run=_run,
)
