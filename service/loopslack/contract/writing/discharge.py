"""Writes what leaves through the relief valve, and what is left of the loop, in the caller's units."""

from collections.abc import Iterable

from loopslack.calc.analysis import Analysis
from loopslack.calc.discharge import Discharge, Left, discharge
from loopslack.calc.window import Gas
from loopslack.contract.answers import remedies as out
from loopslack.contract.writing.loop import Pressures
from loopslack.contract.writing.quantities import Writer
from loopslack.kernel.errors import CalculationError


def discharges(
    analysis: Analysis, gas: Gas, mass: float, write: Writer, *, recommended: float | None = None
) -> list[out.Discharge]:
    """The discharge in every case in which the valve opens; none where it could not be computed."""
    return [
        _discharge(found, write, Pressures(write, analysis.loop.atmosphere))
        for found in _found(analysis, gas, mass, recommended)
    ]


def _found(analysis: Analysis, gas: Gas, mass: float, recommended: float | None) -> Iterable[Discharge]:
    for scenario in analysis.every:
        try:
            found = discharge(analysis, gas, mass, scenario, recommended=recommended)
        except CalculationError:
            continue
        if found is not None:
            yield found


def _discharge(found: Discharge, write: Writer, pressure: Pressures) -> out.Discharge:
    volume, refill = write.volume(found.volume), write.volume(found.refill)
    air = "The loop then sucks air once it cools." if found.sucks_air else "The loop stays under pressure."
    steam = " Steam can leave as well." if found.steam else ""
    more = "at least " if found.at_least or found.stays_open else ""
    return out.Discharge(
        scenario=found.scenario,  # type: ignore[arg-type]  # the register of scenarios is closed
        volume=volume,
        mass=write.mass(found.mass),
        at_least=True if found.at_least else None,
        vents_steam=True if found.steam else None,
        closing_pressure=pressure(found.closing_pressure),
        stays_open=True if found.stays_open else None,
        vessel_liquid=write.volume(found.vessel_liquid),
        afterwards=[_left(found.fill, write, pressure), _left(found.cold, write, pressure)],
        draws_air=found.sucks_air,
        refill=refill,
        sentence=(
            f"The relief valve lets out {more}{volume.value:.4g} {volume.unit} of hot liquid.{steam} {air} "
            f"{refill.value:.4g} {refill.unit} must be filled in again."
        ),
    )


def _left(found: Left, write: Writer, pressure: Pressures) -> out.LeftState:
    return out.LeftState(
        id=found.id,
        vessel_liquid=write.volume(found.liquid),
        vessel_pressure=pressure.optional(found.pressure),
        top_pressure=pressure.optional(found.top_pressure),
        draws_air=found.sucks_air,
    )
