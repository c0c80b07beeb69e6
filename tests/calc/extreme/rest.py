"""Whether a state of rest is one, and the one with most steam: the equations put in again, other places looked at."""

from collections.abc import Iterator

from loopslack.calc.analysis import Analysis
from loopslack.calc.equilibrium import Equilibrium
from loopslack.calc.fit import Fit
from loopslack.calc.judgement import Judgement
from loopslack.calc.stagnation import charge_of
from loopslack.calc.steam import SteamSpace

PLACES = 160


def wrong_with_rest(
    analysis: Analysis, judgement: Judgement, shown: Fit, mass: float | None = None
) -> Iterator[str]:
    """What is wrong with the equilibria of a judgement."""
    mass = shown.mass if mass is None else mass
    for scenario in analysis.every:
        found = judgement.stagnation.get(scenario.id)
        if found is None:
            continue
        balance = analysis.case(scenario).balance
        if found.regime == "valve-opens":
            continue
        if found.liquid < 0:
            if judgement.verdict == "holds":
                yield f"{scenario.id}: holds with {found.liquid} m3 in the vessel"
            continue
        charge = charge_of(analysis, shown.gas, mass)
        outside = balance.still_mass + sum(steam.mass for steam in found.extent.spaces)
        held = (found.liquid - charge.allowance) * analysis.fluid.density(found.gas_temperature)
        total = balance.filled_mass + charge.mass
        if abs(outside + held - total) > 1e-9 * total:
            yield f"{scenario.id}: {outside + held - total} kg of {total} do not close"
        gas = charge.nominal - found.liquid
        boyle = charge.precharge * charge.nominal * found.gas_temperature / charge.precharge_temperature
        if gas <= 0 or abs(found.pressure * gas - boyle) > 1e-9 * boyle:
            yield f"{scenario.id}: the gas does not obey Boyle"
        if found.pressure > analysis.final_pressure * (1 + 1e-8):
            yield f"{scenario.id}: {found.pressure} Pa is above the valve's {analysis.final_pressure}, {found.regime}"
        for space, steam in zip(balance.spaces, found.extent.spaces, strict=True):
            yield from _space_wrong(scenario.id, space, steam, found)


def _space_wrong(id: str, space: SteamSpace, steam: object, found: Equilibrium) -> Iterator[str]:
    temperature, pressure = steam.temperature, found.pressure
    if not steam.boiling:
        if not space.path.falling:
            return  # steam and liquid can both be at rest; which of them is the vessel's to say
        low, high = space.coldest, min(space.hottest, space.fluid.boiling_highest)
        for k in range(PLACES):
            there = low + (high - low) * k / PLACES
            if there < high and space.pressure(there) > pressure * (1 + 1e-6) + 1.0:
                if k == 0:
                    yield f"{id}: called liquid, but steam at {there} K would stand at more than {pressure} Pa"
                return
        if space.hottest <= space.fluid.boiling_highest and low < high:
            top = space.pressure(high)
            if top > pressure * (1 + 1e-6) + 1.0:
                yield f"{id}: called liquid, but would boil: {top} > {pressure}"
        return
    own, again = space.at(temperature)
    if steam.unspent > 0 and steam.place < len(space.path.heights) - 1:
        yield f"{id}: {steam.unspent} W are left over, the front stands at {steam.place}"
    if temperature > space.coldest * (1 + 1e-12) and abs(own - pressure) > 1e-6 * abs(pressure) + 1.0:
        yield f"{id}: steam of {temperature} K stands at {own} Pa, the vessel at {pressure}, {found.regime}"
    if found.regime == "steam" and abs(again.pipe - steam.pipe) > 1e-7 * space.path.total_volume + 1e-12:
        yield f"{id}: {steam.pipe} m3 of steam in the pipes instead of {again.pipe}"
