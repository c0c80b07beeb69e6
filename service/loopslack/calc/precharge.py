"""Which precharge a vessel gets: by rule, as stated, optimised, or as delivered."""

from loopslack.calc.analysis import Analysis
from loopslack.calc.model import Vessel
from loopslack.calc.window import Gas
from loopslack.kernel.kinds import Length, NominalVolume, Volume
from loopslack.physics.atmosphere import atmospheric_pressure
from loopslack.physics.vessel import reserve_en_12828

SEA_LEVEL = atmospheric_pressure(Length(0.0))
DELIVERY_TEMPERATURE = 293.15  # K, common practice: vessels are charged indoors at about 20 degC


def top_requirement(analysis: Analysis) -> float:
    """Vessel pressure (Pa absolute) that holds the least pressure at the top of the cold loop."""
    loop, cold = analysis.loop, analysis.states.cold
    return loop.atmosphere + cold.column + loop.criteria.top_pressure


def precharge_temperature(analysis: Analysis) -> float:
    """Temperature (K) at which the precharge is set: as stated, else the fill temperature, on site."""
    stated = analysis.loop.precharge.temperature
    return analysis.loop.temperatures.fill if stated is None else stated


def precharge(analysis: Analysis, nominal: float) -> float:
    """Precharge (Pa absolute, at ``precharge_temperature``) for a vessel of ``nominal`` m3.

    By rule it carries the static head and the least pressure at the top with the vessel empty; optimised it does so
    with just the reserve in it, which is the lowest that works and gives the smallest vessel; but no gauge shows less
    than nought, so never below the atmosphere.
    """
    choice = analysis.loop.precharge
    if choice.kind == "stated":
        return choice.pressure
    needed = top_requirement(analysis) * precharge_temperature(analysis) / analysis.states.cold.vessel
    if choice.kind == "rule" or nominal <= 0:
        return needed
    criteria = analysis.loop.criteria
    reserve = criteria.reserve
    if reserve is None:
        reserve = reserve_en_12828(NominalVolume(nominal), Volume(analysis.content))
    return max(needed * (1 - reserve / nominal), analysis.loop.atmosphere)


def gas_of(analysis: Analysis, vessel: Vessel, count: int) -> Gas:
    """The gas side of ``count`` equal vessels: set on site where that can be done, else as delivered.

    A delivered precharge is a gauge reading at sea level at 20 degC.
    """
    nominal = vessel.nominal_volume * count
    acceptance = float("inf") if vessel.acceptance_volume is None else vessel.acceptance_volume * count
    if not vessel.precharge_adjustable and vessel.delivered_precharge is not None:
        return Gas(nominal, vessel.delivered_precharge + SEA_LEVEL, DELIVERY_TEMPERATURE, acceptance)
    return Gas(nominal, precharge(analysis, nominal), precharge_temperature(analysis), acceptance)
