"""The vessel of EN 12828 for heating systems: expansion and a reserve, times a pressure factor.

For water the expansion is the standard's own polynomial, within its table. Other liquids are run with their own
expansion, since the rest of the rule knows nothing of the liquid.
"""

from loopslack.calc.sizing.rules.basis import Basis
from loopslack.calc.sizing.rules.choices import Choices
from loopslack.calc.sizing.rules.rule import Answer, Applied, Rule, applied, refused
from loopslack.kernel.citations import Cite
from loopslack.kernel.equation import Range, equation
from loopslack.kernel.kinds import AbsolutePressure, ExpansionCoefficient, NominalVolume, Volume
from loopslack.physics.relief import allowance_en_12828
from loopslack.physics.vessel import nominal_volume_small_vessel, pressure_factor, water_expansion_en_12828

STANDARD = Cite("en-12828", "from-memory")
POLYNOMIAL = Cite("inail-raccolta-r", "read", "R.3.B 4.2 and note 14")

LOWEST, HIGHEST = 303.15, 403.15  # the ends of the standard's table of water, 30 and 130 degC
SMALL_VESSEL, SMALL_VESSEL_RESERVE = 0.015, 0.2
_ROUNDING = 1e-9
_FROM_ZERO = Range(0.0)


@equation(
    "en-12828-vessel",
    law="V_N = (e * V_s + V_wr) * p_e / (p_e - p_0)",
    symbols={
        "e": "expansion",
        "V_s": "content",
        "V_wr": "reserve",
        "p_e": "final pressure",
        "p_0": "precharge",
    },
    source=STANDARD,
    note="Absolute pressures; the publication prints gauge pressures plus 1 bar.",
    valid={
        "content": _FROM_ZERO,
        "reserve": _FROM_ZERO,
        "final_pressure": _FROM_ZERO,
        "precharge": _FROM_ZERO,
    },
    yields=_FROM_ZERO,
)
def vessel(
    content: Volume,
    expansion: ExpansionCoefficient,
    reserve: Volume,
    final_pressure: AbsolutePressure,
    precharge: AbsolutePressure,
) -> NominalVolume:
    """Nominal volume, m3, for a system that never boils.

    The reserve is counted from an empty vessel at its precharge, so the fill pressure follows from it and must not
    be chosen beside it. Raises ``OutOfRange`` unless the final pressure exceeds the precharge.
    """
    return NominalVolume((expansion * content + reserve) * pressure_factor(final_pressure, precharge))


def _run(basis: Basis) -> tuple[Answer, ...]:
    expansion = _expansion(basis)
    if isinstance(expansion, Answer):
        return (expansion,)
    final = basis.opening(allowance_en_12828)
    grown = expansion[-1].result if expansion else basis.expansion
    law = applied(
        vessel,
        content=basis.content,
        expansion=grown,
        reserve=basis.reserve,
        final_pressure=final,
        precharge=basis.precharge,
    )
    choices = Choices(0.0, 0.0, final, basis.precharge, grown * basis.content, reserve=basis.reserve)
    answer = Answer("", (*expansion, law), choices, basis.precharge)
    if law.result > SMALL_VESSEL or basis.loop.criteria.reserve is not None:
        return (answer,)
    small = choices._replace(reserve=0.0, reserve_share=SMALL_VESSEL_RESERVE)
    return answer, _small(answer, expansion, small)


def _small(answer: Answer, expansion: tuple[Applied, ...], choices: Choices) -> Answer:
    """The same with the reserve that the standard gives a vessel of up to 15 L: a fifth of the vessel.

    With a reserve of 3 L the volume stays within 15 L exactly where this one does, and the factor then below 5.
    """
    factor = applied(pressure_factor, final_pressure=choices.final_pressure, precharge=choices.precharge)
    law = applied(nominal_volume_small_vessel, expansion=choices.expansion, factor=factor.result)
    return answer._replace(variant="small-vessel-reserve", laws=(*expansion, factor, law), choices=choices)


def _expansion(basis: Basis) -> tuple[Applied, ...] | Answer:
    """The standard's expansion of water, nothing for another liquid, or why the standard has none."""
    if basis.loop.fluid.kind != "water":
        return ()
    hot = basis.loop.temperatures.hot_liquid
    if not LOWEST - _ROUNDING <= hot <= HIGHEST + _ROUNDING:
        return refused(
            f"The rule's expansion of water holds from 30 to 130 degC; the hot liquid has {hot - 273.15:.4g} degC.",
            "Compare with a rule that takes the expansion from the density.",
            temperature=hot,
            low=LOWEST,
            high=HIGHEST,
        )
    return (applied(water_expansion_en_12828, temperature=hot),)


RULE = Rule(
    id="en-12828",
    title="Vessel of EN 12828 for heating systems",
    counts="Expansion of the liquid and a reserve. No steam.",
    law="V_N = (V_e + V_wr) F; up to 15 L with a reserve of a fifth V_N = V_e F / (1 - 0.2 F)",
    sources=(STANDARD, POLYNOMIAL),
    range="Systems that never boil. Water from 30 to 130 degC; other liquids with their own expansion.",
    run=_run,
)
