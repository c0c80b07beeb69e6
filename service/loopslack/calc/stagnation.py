"""A filled vessel in stagnation under one scenario: with the relief valve in place, and as if it stayed shut."""

from loopslack.calc.analysis import Analysis
from loopslack.calc.charge import Charge
from loopslack.calc.equilibrium import Equilibrium, equilibrium
from loopslack.calc.scenarios import Scenario
from loopslack.calc.window import Gas
from loopslack.kernel.errors import CalculationError


def charge_of(analysis: Analysis, gas: Gas, mass: float) -> Charge:
    """A vessel filled with ``mass`` kg, as the equilibrium wants it."""
    loop = analysis.loop
    return Charge(
        gas.nominal,
        gas.precharge,
        gas.temperature,
        mass / analysis.states.fill.vessel_density,
        mass,
        loop.temperatures.vessel_room,
        analysis.allowance,
    )


def stagnation(analysis: Analysis, scenario: Scenario, gas: Gas, mass: float) -> Equilibrium:
    """The stagnation equilibrium of a filled vessel under one scenario, with the relief valve in place."""
    case = analysis.case(scenario)
    return equilibrium(
        case.balance,
        charge_of(analysis, gas, mass),
        analysis.mix,
        gas_follows=scenario.gas_follows,
        opening=analysis.final_pressure,
        limit=case.final,
    )


def unrelieved_pressure(analysis: Analysis, scenario: Scenario, gas: Gas, mass: float) -> float | None:
    """Vessel pressure (Pa) if the valve stayed shut; None where it lies beyond the bubble line."""
    balance = analysis.case(scenario).balance
    ceiling = min(
        space.fluid.highest_pressure * 0.9999 + space.column * max(space.path.heights)
        for space in balance.spaces
    )
    try:
        found = equilibrium(
            balance,
            charge_of(analysis, gas, mass),
            analysis.mix,
            gas_follows=scenario.gas_follows,
            opening=ceiling,
        )
    except CalculationError:
        return None
    return None if found.regime == "valve-opens" else found.pressure
