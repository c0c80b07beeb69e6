"""The settings handed to the installer: precharge, fill pressure by the temperature of the day, gauge readings.

Everything here is read off a design; nothing is decided. Pressures are absolute in Pa at the vessel unless a name
says gauge; a gauge reading on site counts from the site's atmosphere.
"""

from typing import NamedTuple

from loopslack.calc.analysis import Analysis
from loopslack.calc.fit import Fit
from loopslack.calc.judgement import Judgement
from loopslack.calc.scenarios import BASE
from loopslack.calc.window import FillLaw, Window
from loopslack.kernel.kinds import AbsolutePressure, NominalVolume, Volume
from loopslack.physics.statics import GRAVITY
from loopslack.physics.vessel import highest_fill_pressure_en_12828, lowest_fill_pressure_en_12828

FILL_TEMPERATURES = tuple(263.15 + 5 * step for step in range(11))  # -10 to 40 degC
GAUGE_RANGES = (2.5e5, 4e5, 6e5, 10e5, 16e5, 25e5)  # upper ends of common gauges, Pa
_GAUGE_SPARE = (
    1.25  # common practice, no source: the set pressure in the upper, not the last, part of the scale
)


class FillRow(NamedTuple):
    """Fill pressures with the loop at one temperature; None with ``omitted`` where none is given.

    ``reading`` is the recommended one as the gauge shows it, which may stand at another height than the vessel.
    """

    temperature: float
    lower: float | None = None
    recommended: float | None = None
    upper: float | None = None
    reading: float | None = None
    omitted: str = ""


class Reading(NamedTuple):
    """What the gauge should show in a state: absolute pressure (Pa) at the gauge, None where undefined."""

    state: str
    pressure: float | None
    at_least: bool = False


class ClosedForms(NamedTuple):
    """Fill pressures by the closed forms of EN 12828, liquid expansion only: a check, not a bound when boiling."""

    lower: float
    upper: float


class SettingsCard(NamedTuple):
    """The numbers of the card, absolute Pa, K and m."""

    precharge: float
    precharge_temperature: float
    window: Window
    rows: tuple[FillRow, ...]
    readings: tuple[Reading, ...]
    gauge_range: float | None
    final_pressure: float
    top_pressure_cold: float | None
    closed_forms: ClosedForms | None


def settings_card(fitted: Fit, judgement: Judgement) -> SettingsCard:
    """The card of a vessel in its loop."""
    analysis, gas = fitted.analysis, fitted.gas
    loop = analysis.loop
    cold = next(state for state in judgement.states if state.id == "cold")
    needed = loop.relief.set_pressure * _GAUGE_SPARE
    return SettingsCard(
        gas.precharge,
        gas.temperature,
        fitted.window,
        tuple(_row(fitted, temperature) for temperature in FILL_TEMPERATURES),
        tuple(_readings(analysis, judgement)),
        next((upper for upper in GAUGE_RANGES if upper >= needed), None),
        analysis.final_pressure,
        cold.top_pressure,
        closed_forms(fitted),
    )


def _row(fitted: Fit, temperature: float) -> FillRow:
    """The window at another fill temperature: the same mass in the loop, the loop expanded or shrunk."""
    analysis, window, gas = fitted.analysis, fitted.window, fitted.gas
    if temperature <= analysis.fluid.freezing_point:
        return FillRow(temperature, omitted="fluid-frozen")
    if not window.width > 0:
        return FillRow(temperature, omitted="no-window")
    bounds = FillLaw(analysis, gas)
    masses = window.lower_bound.mass, fitted.mass, window.upper_bound.mass
    low, recommended, high = (bounds.pressure(gas.nominal, mass, temperature) for mass in masses)
    if not gas.precharge * 0.5 < low <= recommended <= high < float("inf"):
        return FillRow(temperature, omitted="vessel-empty-or-full")
    drop = analysis.fluid.density(temperature) * GRAVITY * analysis.loop.gauge_height
    return FillRow(temperature, low, recommended, high, recommended - drop)


def _readings(analysis: Analysis, judgement: Judgement) -> list[Reading]:
    """Gauge readings of the liquid states, of stagnation in the base case, and of the worst required doubt."""
    found = [Reading(state.id, state.gauge_pressure) for state in judgement.states if state.id != "cut-off"]
    density = analysis.fluid.density(analysis.loop.temperatures.vessel_room)
    drop = density * GRAVITY * analysis.loop.gauge_height
    # Where the vessel is empty or full the gauge shows what nothing here bounds.
    known = {
        check.state for check in judgement.checks if check.code == "relief-valve" and check.value is not None
    }
    base = judgement.stagnation.get(BASE.id)
    if base is not None:
        found.append(Reading("stagnation", base.pressure - drop if BASE.id in known else None, base.bound))
    doubts = [judgement.stagnation[scenario.id] for scenario in analysis.doubts if scenario.id in known]
    if doubts:
        worst = max(doubts, key=lambda result: result.pressure)
        found.append(Reading("stagnation-worst-doubt", worst.pressure - drop, worst.bound))
    return found


def closed_forms(fitted: Fit) -> ClosedForms | None:
    """EN 12828's closed forms with the liquid expansion from fill to the hot liquid; None for too small a vessel."""
    analysis, gas = fitted.analysis, fitted.gas
    loop = analysis.loop
    temperatures = loop.temperatures
    reserve = FillLaw(analysis, gas).reserve(gas.nominal)
    if reserve >= gas.nominal:
        return None
    expansion = loop.content * loop.fluid.expansion(temperatures.fill, temperatures.hot_liquid)
    nominal, precharge = NominalVolume(gas.nominal), AbsolutePressure(gas.precharge)
    return ClosedForms(
        lowest_fill_pressure_en_12828(nominal, precharge, Volume(reserve)),
        highest_fill_pressure_en_12828(
            nominal, precharge, AbsolutePressure(analysis.final_pressure), Volume(expansion)
        ),
    )
