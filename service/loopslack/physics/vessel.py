"""The membrane vessel: gas on one side, liquid on the other, by Boyle's law.

The gas is ideal. Pressures are absolute. Which states a loop passes through and which vessel is chosen is
the calculation's business; published rules with several terms stand there too. Shares of the trade that go
with a vessel (reserve, precharge) stand here.
"""

from loopslack.kernel.citations import Cite
from loopslack.kernel.equation import Range, equation
from loopslack.kernel.errors import OutOfRange
from loopslack.kernel.kinds import (
    AbsolutePressure,
    ExpansionCoefficient,
    GaugePressure,
    NominalVolume,
    Ratio,
    Temperature,
    Volume,
)

BOYLE = Cite("boyle-mariotte", "from-memory")
EN_12828 = Cite("en-12828", "from-memory")

_FROM_ZERO = Range(0.0)


@equation(
    "vessel-liquid",
    law="V_l = V_N * (1 - p_0 / p * T / T_0)",
    symbols={
        "V_N": "nominal volume",
        "p_0": "precharge",
        "p": "pressure",
        "T": "gas temperature",
        "T_0": "precharge temperature",
    },
    source=BOYLE,
    note="Isothermal at the stated gas temperature.",
    valid={"precharge": _FROM_ZERO, "pressure": _FROM_ZERO},
    yields=_FROM_ZERO,
)
def liquid_held(
    nominal_volume: NominalVolume,
    precharge: AbsolutePressure,
    pressure: AbsolutePressure,
    gas_temperature: Temperature,
    precharge_temperature: Temperature,
) -> Volume:
    """Liquid that a membrane vessel holds at a pressure, m3.

    Neglected: the stiffness of the membrane, which over-states the liquid held by less than 1 % above 1
    bar, and the departure of the gas from ideal, below 1 % to 10 bar. Negative below the precharge: the
    membrane then rests on the wall, the vessel is empty and the pressure no longer follows from the gas;
    the number is returned as it is and a derivation refuses it. ZeroDivisionError at zero pressure.
    """
    return Volume(nominal_volume * (1 - precharge / pressure * gas_temperature / precharge_temperature))


@equation(
    "vessel-pressure",
    law="p = p_0 * V_N / (V_N - V_l) * T / T_0",
    symbols={
        "V_N": "nominal volume",
        "p_0": "precharge",
        "V_l": "liquid",
        "T": "gas temperature",
        "T_0": "precharge temperature",
    },
    source=BOYLE,
    note="The vessel liquid solved for the pressure.",
    valid={"precharge": _FROM_ZERO, "liquid": _FROM_ZERO},
)
def gas_pressure(
    nominal_volume: NominalVolume,
    precharge: AbsolutePressure,
    liquid: Volume,
    gas_temperature: Temperature,
    precharge_temperature: Temperature,
) -> AbsolutePressure:
    """Absolute pressure of a membrane vessel that holds so much liquid, Pa.

    Raises ``OutOfRange`` when the liquid fills the vessel: the pressure is then not bounded by the gas.
    Below zero liquid the law runs on smoothly, below the precharge, so that a solver can pass; the vessel
    is then empty and the number is no pressure of the loop. A derivation refuses it.
    """
    squeezed = precharge * nominal_volume / _gas_volume(nominal_volume, liquid)
    return AbsolutePressure(squeezed * gas_temperature / precharge_temperature)


def _gas_volume(nominal_volume: NominalVolume, liquid: Volume) -> float:
    """Room left to the gas, m3, which must be some."""
    if not liquid < nominal_volume:
        raise OutOfRange(
            f"A vessel of {nominal_volume * 1000:g} L cannot hold {liquid * 1000:g} L: "
            "no gas is left to bound the pressure.",
            remedy="Take a larger vessel or a lower fill pressure.",
            facts={"liquid": liquid, "nominal_volume": nominal_volume},
        )
    return nominal_volume - liquid


@equation(
    "pressure-factor",
    law="F = p_e / (p_e - p_0)",
    symbols={"p_e": "final pressure", "p_0": "precharge"},
    source=EN_12828,
    note="Boyle's law from the precharge to the final pressure, both absolute. Gauge pressures here "
    "are a published error, a vessel of 17 L where 22.6 L are right.",
    valid={"final_pressure": _FROM_ZERO, "precharge": _FROM_ZERO},
)
def pressure_factor(final_pressure: AbsolutePressure, precharge: AbsolutePressure) -> Ratio:
    """Nominal volume per volume of liquid taken up, above 1.

    One temperature of the gas throughout. Raises ``OutOfRange`` unless the final pressure exceeds the
    precharge: no vessel takes anything up then.
    """
    if not final_pressure > precharge:
        raise OutOfRange(
            f"The final pressure {final_pressure / 1e5:.5g} bar is not above the precharge "
            f"{precharge / 1e5:.5g} bar (absolute): no vessel takes up liquid.",
            remedy="Lower the precharge or the vessel, or take a relief valve with a higher set pressure.",
            facts={"final_pressure": final_pressure, "precharge": precharge},
        )
    return Ratio(final_pressure / (final_pressure - precharge))


@equation(
    "nominal-volume",
    law="V_N = V * F",
    symbols={"V": "displaced", "F": "factor"},
    source=EN_12828,
    note="Every published rule is this product; they differ in what they count as displaced.",
    valid={"displaced": _FROM_ZERO, "factor": Range(1.0)},
)
def nominal_volume_for(displaced: Volume, factor: Ratio) -> NominalVolume:
    """Smallest vessel, m3, that takes up a displaced volume within the pressures behind the factor."""
    return NominalVolume(displaced * factor)


@equation(
    "nominal-volume-small-vessel",
    law="V_N = V_e * F / (1 - 0.2 * F)",
    symbols={"V_e": "expansion", "F": "factor"},
    source=EN_12828,
    note="The reserve of a vessel up to 15 L is a fifth of the vessel itself, solved for the vessel.",
    valid={"expansion": _FROM_ZERO, "factor": Range(1.0)},
)
def nominal_volume_small_vessel(expansion: Volume, factor: Ratio) -> NominalVolume:
    """Smallest vessel, m3, that takes up an expansion and keeps a fifth of itself as reserve.

    Raises ``OutOfRange`` from a pressure factor of 5 on: the reserve alone then uses up the vessel. Holds
    for an answer up to 15 L; above it the other reserve applies and the caller must use that.
    """
    if not factor < 5:
        raise OutOfRange(
            f"With a pressure factor of {factor:.4g} the reserve of a fifth leaves a small vessel no room.",
            remedy="Raise the final pressure or lower the precharge until the factor is below 5.",
            facts={"factor": factor},
        )
    return NominalVolume(expansion * factor / (1 - 0.2 * factor))


@equation(
    "water-expansion-en-12828",
    law="e = (0.31 + 3.9e-4 * (t - 273.15)^2) / 100",
    symbols={"t": "temperature"},
    source=Cite("inail-raccolta-r", "read", "R.3.B 4.2 and note 14"),
    note="The same polynomial gives the table of EN 12828 Annex D (from memory). Glycol expands more.",
    valid={"temperature": Range(303.15, 403.15)},
)
def water_expansion_en_12828(temperature: Temperature) -> ExpansionCoefficient:
    """Expansion of heating water from the filling state to a temperature, as a share of the content.

    A fit, good to about 0.1 points from 30 to 130 degC; outside a derivation refuses it, since nothing was
    compared there. For a glycol mixture it is 1 to 3 points of the content too small at 120 degC.
    """
    celsius = temperature - 273.15
    return ExpansionCoefficient((0.31 + 3.9e-4 * celsius * celsius) / 100)


@equation(
    "reserve-en-12828",
    law="V_wr = max(0.005 * V_s, 0.003) if V_N > 0.015 else 0.2 * V_N",
    symbols={"V_N": "nominal volume", "V_s": "content"},
    source=EN_12828,
    note="Also DIN 4807-2.",
    valid={"nominal_volume": _FROM_ZERO, "content": _FROM_ZERO},
)
def reserve_en_12828(nominal_volume: NominalVolume, content: Volume) -> Volume:
    """Liquid, m3, that the vessel must still hold when the loop is coldest.

    Half a per cent of the content and at least 3 L; a fifth of the vessel if it is 15 L or smaller. Drops
    from the first to the second at 15 L when the content exceeds 600 L, as the rule has it.
    """
    if nominal_volume > 0.015:
        return Volume(max(0.005 * content, 0.003))
    return Volume(0.2 * nominal_volume)


@equation(
    "lowest-fill-pressure-en-12828",
    law="p_a = p_0 * V_N / (V_N - V_wr)",
    symbols={"V_N": "nominal volume", "p_0": "precharge", "V_wr": "reserve"},
    source=EN_12828,
    note="In absolute pressures; the publication prints it with 1 bar for the atmosphere.",
    valid={"precharge": _FROM_ZERO, "reserve": _FROM_ZERO},
)
def lowest_fill_pressure_en_12828(
    nominal_volume: NominalVolume, precharge: AbsolutePressure, reserve: Volume
) -> AbsolutePressure:
    """Lowest fill pressure, Pa absolute, at which the cold vessel holds the reserve.

    Filling at the coldest temperature and gas at one temperature are assumed. Raises ``OutOfRange`` as
    ``gas_pressure`` does when the reserve fills the vessel.
    """
    return AbsolutePressure(precharge * nominal_volume / _gas_volume(nominal_volume, reserve))


@equation(
    "highest-fill-pressure-en-12828",
    law="p_a = p_e / (1 + V_e * p_e / (V_N * p_0))",
    symbols={"V_N": "nominal volume", "p_0": "precharge", "p_e": "final pressure", "V_e": "expansion"},
    source=EN_12828,
    note="In absolute pressures; the publication prints it with 1 bar for the atmosphere.",
    valid={"precharge": _FROM_ZERO, "final_pressure": _FROM_ZERO, "expansion": _FROM_ZERO},
)
def highest_fill_pressure_en_12828(
    nominal_volume: NominalVolume,
    precharge: AbsolutePressure,
    final_pressure: AbsolutePressure,
    expansion: Volume,
) -> AbsolutePressure:
    """Highest fill pressure, Pa absolute, from which the expansion ends at the final pressure.

    Counts liquid expansion only, so it is no bound for a loop that boils. Below the precharge when the
    vessel is too small: the window is then empty, which is the caller's to see.
    """
    return AbsolutePressure(final_pressure / (1 + expansion * final_pressure / (nominal_volume * precharge)))


@equation(
    "pressure-volume-product",
    law="N = p_s * V_N / 100",
    symbols={"p_s": "rated pressure", "V_N": "nominal volume"},
    source=Cite("ped-2014-68-eu", "from-memory"),
    note="In bar times litres (one of them is 100 Pa m3), the unit of the directive's limits.",
    valid={"rated_pressure": _FROM_ZERO},
)
def pressure_volume_product(rated_pressure: GaugePressure, nominal_volume: NominalVolume) -> Ratio:
    """Rated pressure times volume of a vessel, in multiples of 1 bar litre, which decides its category."""
    return Ratio(rated_pressure * nominal_volume / 100)
