"""What a gauge says of a loop at one temperature: the liquid behind a reading, the reading behind a liquid, the gas.

The loop, its vessel and its gas are taken at one temperature, as after a night without sun. Pressures are absolute in
Pa at the vessel unless a name says gauge. What a reading should have been is not known here.
"""

from typing import NamedTuple

from msgspec.structs import replace

from loopslack.calc.analysis import Analysis
from loopslack.calc.window import FillLaw, Gas
from loopslack.physics.statics import GRAVITY


class Held(NamedTuple):
    """Liquid (m3) in a vessel and the mass (kg) it would have been filled with at the fill temperature.

    ``empty`` when the pressure does not reach the precharge: the liquid is then nought, the most there can be.
    """

    liquid: float
    mass: float
    empty: bool


def column(analysis: Analysis, temperature: float) -> float:
    """Pressure (Pa) at the vessel above that at the gauge."""
    return analysis.fluid.density(temperature) * GRAVITY * analysis.loop.gauge_height


def held_at(analysis: Analysis, gas: Gas, pressure: float, temperature: float) -> Held:
    """The liquid behind a vessel pressure."""
    liquid = gas.nominal * (1 - gas.precharge / pressure * temperature / gas.temperature)
    empty = liquid <= 0
    return _filled(analysis, 0.0 if empty else liquid, temperature, empty=empty)


def liquid_of(analysis: Analysis, mass: float, temperature: float) -> float:
    """Liquid (m3) in a vessel filled with a mass (kg), once the loop has another temperature; negative is missing."""
    fill = analysis.states.fill.vessel_density
    total = mass + fill * analysis.content
    return total / analysis.fluid.density(temperature) - analysis.content


def pressure_of(analysis: Analysis, gas: Gas, mass: float, temperature: float) -> float | None:
    """Vessel pressure with a mass (kg) in the vessel; None where it is empty or full and the pressure undefined."""
    found = FillLaw(analysis, gas).pressure(gas.nominal, mass, temperature)
    return found if 0 < found < float("inf") else None


def gas_holding(
    analysis: Analysis, set_up: Gas, mass: float, pressure: float, temperature: float
) -> Gas | None:
    """The gas with which a vessel filled with a mass (kg) shows a pressure; None where no gas would.

    The precharge comes out at the temperature of the one it was set to.
    """
    room = set_up.nominal - max(liquid_of(analysis, mass, temperature), 0.0)
    if room <= 0 or liquid_of(analysis, mass, temperature) < 0:
        return None
    precharge = pressure * room / set_up.nominal * set_up.temperature / temperature
    return replace(set_up, precharge=precharge)


def to_reach(analysis: Analysis, gas: Gas, now: Held, pressure: float, temperature: float) -> float | None:
    """Liquid (m3) to add until a vessel shows a pressure; negative to drain, None where it cannot show it."""
    wanted = held_at(analysis, gas, pressure, temperature)
    return None if wanted.empty else wanted.liquid - now.liquid


def _filled(analysis: Analysis, liquid: float, temperature: float, *, empty: bool) -> Held:
    total = analysis.fluid.density(temperature) * (analysis.content + liquid)
    return Held(liquid, total - analysis.states.fill.vessel_density * analysis.content, empty)
