"""Tanks by the mechanical codes of the United States: a straight line for the expansion of water.

Water from 170 to 230 degF only. For anything else the rule is refused rather than bent.
"""

from loopslack.calc.sizing.rules.basis import Basis
from loopslack.calc.sizing.rules.choices import Choices
from loopslack.calc.sizing.rules.rule import Answer, Rule, applied, refused
from loopslack.kernel.citations import Cite
from loopslack.kernel.equation import Range, equation
from loopslack.kernel.kinds import AbsolutePressure, NominalVolume, Temperature, Volume

LAW = Cite("mich-admin-code-408-4272", "from-memory")
TABLE = Cite("mich-admin-code-408-4272", "read", "Table 272B")

LOWEST, HIGHEST = 349.8166666, 383.15  # 170 and 230 degF
_ROUNDING = 1e-6
_FROM_ZERO = Range(0.0)
_SYMBOLS = {"T": "temperature", "V_s": "content", "P_f": "fill pressure", "P_o": "operating pressure"}
_VALID = {
    "temperature": Range(LOWEST, HIGHEST + _ROUNDING),
    "content": _FROM_ZERO,
    "fill_pressure": _FROM_ZERO,
    "operating_pressure": _FROM_ZERO,
}


@equation(
    "us-mechanical-code",
    law="V_N = (0.00041 * (1.8 * T - 459.67) - 0.0466) * V_s / (1 - P_f / P_o)",
    symbols=_SYMBOLS,
    source=LAW,
    note="The temperature in degF inside the bracket; water. The table of the code was read, the law was not.",
    valid=_VALID,
    yields=_FROM_ZERO,
)
def diaphragm_tank(
    content: Volume,
    temperature: Temperature,
    fill_pressure: AbsolutePressure,
    operating_pressure: AbsolutePressure,
) -> NominalVolume:
    """Volume, m3, of a tank with a membrane for heating water. Neglects steam and any reserve."""
    growth = 0.00041 * (1.8 * temperature - 459.67) - 0.0466
    return NominalVolume(growth * content / (1 - fill_pressure / operating_pressure))


@equation(
    "us-mechanical-code-closed",
    law="V_N = (0.00041 * (1.8 * T - 459.67) - 0.0466) * V_s / (P_a / P_f - P_a / P_o)",
    symbols=_SYMBOLS | {"P_a": "air pressure"},
    source=LAW,
    note="The same expansion in a plain tank; this is what the table of the code lists.",
    valid=_VALID,
    yields=_FROM_ZERO,
)
def closed_tank(
    content: Volume,
    temperature: Temperature,
    fill_pressure: AbsolutePressure,
    operating_pressure: AbsolutePressure,
    air_pressure: AbsolutePressure,
) -> NominalVolume:
    """Volume, m3, of a plain tank for heating water. Neglects steam and dissolved air."""
    growth = 0.00041 * (1.8 * temperature - 459.67) - 0.0466
    return NominalVolume(
        growth * content / (air_pressure / fill_pressure - air_pressure / operating_pressure)
    )


def _run(basis: Basis) -> tuple[Answer, ...]:
    hot = basis.loop.temperatures.hot_liquid
    if basis.loop.fluid.kind != "water":
        return (
            refused(
                f"The rule holds for water; this loop holds {basis.loop.fluid.name}.",
                "Compare with a rule that counts with the liquid's own expansion.",
                fluid=basis.loop.fluid.name,
            ),
        )
    if not LOWEST - _ROUNDING <= hot <= HIGHEST + _ROUNDING:
        return (
            refused(
                f"The rule holds from 76.7 to 110 degC (170 to 230 degF); the hot liquid has {hot - 273.15:.4g} "
                "degC.",
                "Compare with a rule that counts with the liquid's own expansion.",
                temperature=hot,
                low=LOWEST,
                high=HIGHEST,
            ),
        )
    law = applied(
        diaphragm_tank,
        content=basis.content,
        temperature=hot,
        fill_pressure=basis.fill,
        operating_pressure=basis.final,
    )
    growth = law.result * (1 - basis.fill / basis.final)
    choices = Choices(0.0, 0.0, basis.final, basis.fill, growth)
    return (Answer("", (law,), choices, basis.fill, basis.fill, basis.fill),)


RULE = Rule(
    id="us-mechanical-code",
    title="Tank of the mechanical codes of the United States",
    counts="Expansion of water by a straight line. No steam, no reserve.",
    law="V_N = (0.00041 T - 0.0466) V_s / (1 - Pf/Po), T in degF",
    sources=(LAW, TABLE),
    range="Water from 170 to 230 degF.",
    run=_run,
)
