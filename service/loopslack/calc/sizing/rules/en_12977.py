"""The vessel of EN 12977-1: expansion, the collectors' content and a tenth, a reserve.

It is also the least volume the service recommends to a loop that relies on its collectors not boiling.
"""

from loopslack.calc.analysis import Analysis
from loopslack.calc.sizing.rules.basis import Basis, basis
from loopslack.calc.sizing.rules.choices import Choices
from loopslack.calc.sizing.rules.rule import Answer, Rule, applied
from loopslack.kernel.citations import Cite
from loopslack.kernel.equation import Range, equation
from loopslack.kernel.kinds import AbsolutePressure, ExpansionCoefficient, NominalVolume, Volume
from loopslack.physics.vessel import pressure_factor

STANDARD = Cite("en-12977-1", "from-memory")
SPANISH_CODE = Cite("cte-db-he-4", "read-in-part")

COLLECTOR_SHARE = 1.1
_FROM_ZERO = Range(0.0)


@equation(
    "en-12977-vessel",
    law="V_N = (n * V_s + 1.1 * V_c + V_wr) * p_e / (p_e - p_0)",
    symbols={
        "n": "expansion",
        "V_s": "content",
        "V_c": "collectors",
        "V_wr": "reserve",
        "p_e": "final pressure",
        "p_0": "precharge",
    },
    source=STANDARD,
    note="The requirement was read in part in the Spanish building code.",
    valid={
        "content": _FROM_ZERO,
        "collectors": _FROM_ZERO,
        "reserve": _FROM_ZERO,
        "final_pressure": _FROM_ZERO,
        "precharge": _FROM_ZERO,
    },
    yields=_FROM_ZERO,
)
def vessel(
    content: Volume,
    expansion: ExpansionCoefficient,
    collectors: Volume,
    reserve: Volume,
    final_pressure: AbsolutePressure,
    precharge: AbsolutePressure,
) -> NominalVolume:
    """Nominal volume, m3, for a loop whose collectors boil dry.

    Neglects steam in the pipes. Raises ``OutOfRange`` unless the final pressure exceeds the precharge.
    """
    pushed = expansion * content + COLLECTOR_SHARE * collectors + reserve
    return NominalVolume(pushed * pressure_factor(final_pressure, precharge))


def en_12977_volume(analysis: Analysis) -> float:
    """Nominal volume (m3) by EN 12977 of an analysed loop."""
    return _answer(basis(analysis)).laws[-1].result


def _answer(basis: Basis) -> Answer:
    law = applied(
        vessel,
        content=basis.content,
        expansion=basis.expansion,
        collectors=basis.collectors,
        reserve=basis.reserve,
        final_pressure=basis.final,
        precharge=basis.precharge,
    )
    choices = Choices(
        COLLECTOR_SHARE * basis.collectors,
        0.0,
        basis.final,
        basis.precharge,
        basis.expansion * basis.content,
        reserve=basis.reserve,
    )
    return Answer("", (law,), choices, basis.precharge)


def _run(basis: Basis) -> tuple[Answer, ...]:
    return (_answer(basis),)


RULE = Rule(
    id="en-12977",
    title="Vessel of EN 12977-1 for solar loops",
    counts="Expansion of the liquid, the collectors' content and a tenth, a reserve. No steam in pipes.",
    law="V_N = (n V_s + 1.1 V_c + V_wr) F",
    sources=(STANDARD, SPANISH_CODE),
    range="Solar loops whose collectors boil; any liquid of known density.",
    run=_run,
)
