"""Tanks by the ASHRAE Handbook: expansion of the liquid less that of the pipes, between two pressures.

Made for heating with water that never boils. The law counts with liquid of any density, so it is run with the
loop's; that it knows no steam is the point of the comparison, not a reason to refuse.
"""

from loopslack.calc.sizing.rules.basis import Basis
from loopslack.calc.sizing.rules.choices import Choices
from loopslack.calc.sizing.rules.rule import Answer, Rule, applied
from loopslack.kernel.citations import Cite
from loopslack.kernel.equation import Range, equation
from loopslack.kernel.kinds import AbsolutePressure, Density, ExpansionCoefficient, NominalVolume, Volume

ASHRAE = Cite("ashrae-hvac-systems", "from-memory")
COPPER = (
    1.7e-5  # relative elongation per kelvin, from memory; steel stretches less (1.17e-5) and asks for more
)

_FROM_ZERO = Range(0.0)
_SYMBOLS = {
    "V_s": "content",
    "rho_1": "cold density",
    "rho_2": "hot density",
    "x": "elongation",
    "P_1": "initial pressure",
    "P_2": "final pressure",
}
_VALID = {"content": _FROM_ZERO, "initial_pressure": _FROM_ZERO, "final_pressure": _FROM_ZERO}


@equation(
    "ashrae-diaphragm",
    law="V_N = V_s * ((rho_1 / rho_2 - 1) - 3 * x) / (1 - P_1 / P_2)",
    symbols=_SYMBOLS,
    source=ASHRAE,
    note="x is the linear expansion of the pipes times the rise of temperature. Liquid expansion only.",
    valid=_VALID,
    yields=_FROM_ZERO,
)
def diaphragm_tank(
    content: Volume,
    cold_density: Density,
    hot_density: Density,
    elongation: ExpansionCoefficient,
    initial_pressure: AbsolutePressure,
    final_pressure: AbsolutePressure,
) -> NominalVolume:
    """Volume, m3, of a tank with a membrane, charged to the initial pressure and empty of liquid at it.

    Neglects steam, any reserve and the temperature of the gas: for a loop that boils the tank is far too small.
    """
    grown = (cold_density / hot_density - 1) - 3 * elongation
    return NominalVolume(content * grown / (1 - initial_pressure / final_pressure))


@equation(
    "ashrae-closed",
    law="V_N = V_s * ((rho_1 / rho_2 - 1) - 3 * x) / (P_a / P_1 - P_a / P_2)",
    symbols=_SYMBOLS | {"P_a": "air pressure"},
    source=ASHRAE,
    note="The same growth in a tank where air and liquid meet, first full of air at the atmosphere's pressure.",
    valid=_VALID,
    yields=_FROM_ZERO,
)
def closed_tank(
    content: Volume,
    cold_density: Density,
    hot_density: Density,
    elongation: ExpansionCoefficient,
    initial_pressure: AbsolutePressure,
    final_pressure: AbsolutePressure,
    air_pressure: AbsolutePressure,
) -> NominalVolume:
    """Volume, m3, of a plain tank; the air is compressed from the atmosphere's pressure by filling.

    Neglects steam and the air that the liquid dissolves and carries away.
    """
    grown = (cold_density / hot_density - 1) - 3 * elongation
    return NominalVolume(content * grown / (air_pressure / initial_pressure - air_pressure / final_pressure))


def _inputs(basis: Basis) -> dict[str, float]:
    loop = basis.loop
    return {
        "content": basis.content,
        "cold_density": loop.fluid.density(loop.temperatures.fill),
        "hot_density": loop.fluid.density(loop.temperatures.hot_liquid),
        "elongation": COPPER * basis.elongation_range,
        "initial_pressure": basis.fill,
        "final_pressure": basis.final,
    }


def _growth(inputs: dict[str, float]) -> float:
    return inputs["content"] * (inputs["cold_density"] / inputs["hot_density"] - 1 - 3 * inputs["elongation"])


def _run_diaphragm(basis: Basis) -> tuple[Answer, ...]:
    inputs = _inputs(basis)
    choices = Choices(0.0, 0.0, basis.final, basis.fill, _growth(inputs))
    laws = (applied(diaphragm_tank, **inputs),)
    return (Answer("", laws, choices, basis.fill, basis.fill, basis.fill),)


def _run_closed(basis: Basis) -> tuple[Answer, ...]:
    inputs = _inputs(basis)
    air = basis.loop.atmosphere
    choices = Choices(0.0, 0.0, basis.final, air, _growth(inputs), fill=basis.fill)
    laws = (applied(closed_tank, **inputs, air_pressure=air),)
    return (Answer("", laws, choices, basis.fill, air, basis.fill),)


DIAPHRAGM = Rule(
    id="ashrae-diaphragm",
    title="Diaphragm tank of the ASHRAE Handbook",
    counts="Expansion of the liquid less that of copper pipe. No steam, no reserve.",
    law="V_N = V_s [(v2/v1 - 1) - 3 alpha dT] / (1 - P1/P2)",
    sources=(ASHRAE,),
    range="Loops that never boil; any liquid of known density.",
    run=_run_diaphragm,
)
CLOSED = Rule(
    id="ashrae-closed",
    title="Plain closed tank of the ASHRAE Handbook",
    counts="Expansion of the liquid less that of copper pipe, in a tank without a membrane. No steam, no reserve.",
    law="V_N = V_s [(v2/v1 - 1) - 3 alpha dT] / (Pa/P1 - Pa/P2)",
    sources=(ASHRAE,),
    range="Loops that never boil, with a tank in which air and liquid meet.",
    run=_run_closed,
)
