"""An existing vessel with what its gauge shows: does it hold as found, what explains the reading, what to set instead.

A reading that differs from what was filled has two explanations: liquid was lost or added with the gas as it was set,
or gas was lost with the liquid as it was filled. Both are worked out and judged. Where the evidence does not decide
between them the verdict is the worse of the two.
"""

from typing import Literal, NamedTuple

from msgspec.structs import replace

from loopslack.calc.audit.gauge import column, held_at, pressure_of
from loopslack.calc.audit.states import WORSE, Bench, Explanation, Filling, State, by_liquid, by_precharge
from loopslack.calc.audit.target import Target, set_instead
from loopslack.calc.judgement import DoubtPolicy, Verdict
from loopslack.calc.model import Loop, Vessel
from loopslack.calc.precharge import DELIVERY_TEMPERATURE, SEA_LEVEL, gas_of
from loopslack.calc.window import Gas

Explains = Literal["neither", "liquid", "precharge", "both", "open"]
Certainty = Literal["shown", "likely", "open"]
Reference = Literal["record", "recommended"]
SetBy = Literal["record", "as-delivered", "by-rule"]
Position = Literal["below", "inside", "above", "no-window"]

READING = 1e4  # Pa: what a gauge in good order and a hand that reads it may be off; own assumption


class Point(NamedTuple):
    """A pressure, Pa absolute, and the temperature, K, that goes with it."""

    pressure: float
    temperature: float


class Record(NamedTuple):
    """What was set at commissioning: precharge, and fill pressure at the gauge, Pa absolute, at one temperature, K."""

    precharge: float
    fill_pressure: float
    temperature: float


class Found(NamedTuple):
    """What was found: the gauge's reading, a measured precharge and a record of the commissioning, if there are any."""

    gauge: Point
    precharge: Point | None = None
    record: Record | None = None


class Audit(NamedTuple):
    """An audited vessel.

    ``set_up`` and ``mass`` are the reference it is held against, ``expected`` what the gauge should show today with
    them (Pa absolute), ``difference`` the reading less that; None where they leave the vessel empty or full today.
    ``shown`` is the state that states and checks are of: the measured one, else the worst that the evidence allows.
    ``today`` are the bounds of its window at the gauge, at the temperature of the reading.
    """

    verdict: Verdict
    pressure: float
    reference: Reference
    set_by: SetBy
    set_up: Gas
    mass: float
    expected: float | None
    difference: float | None
    explains: Explains
    certainty: Certainty
    explanations: tuple[Explanation, Explanation]
    shown: State
    today: tuple[float | None, float | None]
    position: Position
    target: Target


def audit(
    loop: Loop,
    vessel: Vessel,
    pieces: int,
    policy: DoubtPolicy,
    found: Found,
    *,
    accept_without_boiling: bool = False,
) -> Audit:
    """Audit ``pieces`` equal vessels by what was found.

    Raises ``CalculationError`` where a liquid state lies outside the fluid's range.
    """
    bench = Bench(loop, vessel, pieces, policy, accept_without_boiling=accept_without_boiling)
    analysis, temperature = bench.analysis, found.gauge.temperature
    below = column(analysis, temperature)
    pressure = found.gauge.pressure + below
    set_by, set_up = _set_up(bench, found)
    mass = _reference_mass(bench, found, set_up)
    expected = pressure_of(analysis, set_up, mass, temperature)
    difference = None if expected is None else pressure - expected
    filled = Filling(set_up, mass)
    ways = (
        by_liquid(bench, filled, pressure, temperature, expected),
        by_precharge(bench, filled, pressure, temperature, expected),
    )
    measured = _measured(bench, found, filled, pressure)
    if measured is None:
        explains, certainty = _unmeasured(difference, ways, recorded=found.record is not None)
        likely = ways[:1] if explains == "neither" else ways
        states = [way.state for way in likely if way.state is not None]
    else:
        explains, certainty = _by_measurement(measured, pressure, temperature), "shown"
        states = [measured]
    shown = max(states, key=lambda state: WORSE[state.judgement.verdict])
    lower, upper, position = _today(bench, shown, temperature)
    gauge = tuple(None if bound is None else bound - below for bound in (lower, upper))
    known = certainty == "shown" or explains == "neither"
    return Audit(
        shown.judgement.verdict,
        pressure,
        "recommended" if found.record is None else "record",
        set_by,
        set_up,
        mass,
        None if expected is None else expected - below,
        difference,
        explains,
        certainty,
        ways,
        shown,
        (gauge[0], gauge[1]),
        position,
        set_instead(
            bench,
            shown,
            set_up,
            temperature,
            known=known,
            gas_changed=explains in {"precharge", "both"},
        ),
    )


def _set_up(bench: Bench, found: Found) -> tuple[SetBy, Gas]:
    """The gas as it was set: by the record, else as delivered, else by rule."""
    gas = gas_of(bench.analysis, bench.vessel, bench.pieces)
    if found.record is not None:
        return "record", replace(gas, precharge=found.record.precharge, temperature=found.record.temperature)
    delivered = bench.vessel.delivered_precharge
    if delivered is None:
        return "by-rule", gas
    return "as-delivered", replace(gas, precharge=delivered + SEA_LEVEL, temperature=DELIVERY_TEMPERATURE)


def _reference_mass(bench: Bench, found: Found, set_up: Gas) -> float:
    """The mass (kg) the vessel was filled with by the record, else the recommended one."""
    record = found.record
    if record is None:
        return bench.fit(set_up).mass
    at_vessel = record.fill_pressure + column(bench.analysis, record.temperature)
    return held_at(bench.analysis, set_up, at_vessel, record.temperature).mass


def _measured(bench: Bench, found: Found, filled: Filling, pressure: float) -> State | None:
    """The state that a measured precharge and the reading fix together; None without a measurement."""
    if found.precharge is None:
        return None
    gas = replace(filled.gas, precharge=found.precharge.pressure, temperature=found.precharge.temperature)
    return bench.state(filled, gas, held_at(bench.analysis, gas, pressure, found.gauge.temperature))


def _by_measurement(state: State, pressure: float, temperature: float) -> Explains:
    """What a measured state differs in from the reference, beyond what a gauge can tell."""
    gas = state.gas
    squeezed = gas.nominal * gas.precharge * temperature / gas.temperature
    readable = squeezed * (1 / pressure - 1 / (pressure + READING))
    liquid = abs(state.missing) > readable
    precharge = abs(state.lost) > READING
    if liquid and precharge:
        return "both"
    if liquid:
        return "liquid"
    return "precharge" if precharge else "neither"


def _unmeasured(
    difference: float | None, ways: tuple[Explanation, Explanation], *, recorded: bool
) -> tuple[Explains, Certainty]:
    """What a reading alone says: gas does not come back by itself, but both gas and liquid get lost."""
    likely: Certainty = "likely" if recorded else "open"
    if difference is None:
        return "open", "open"
    if abs(difference) <= READING:
        return "neither", likely
    if difference > 0 or ways[1].state is None:
        return "liquid", likely
    return "open", "open"


def _today(bench: Bench, shown: State, temperature: float) -> tuple[float | None, float | None, Position]:
    """The window at the temperature of the reading, and where the filling lies in it."""
    window = shown.fitted.window
    low, high = window.lower_bound.mass, window.upper_bound.mass
    lower, upper = (pressure_of(bench.analysis, shown.gas, mass, temperature) for mass in (low, high))
    if not shown.fitted.counted or not low < high or upper is None:
        return None, None, "no-window"
    if shown.held.empty or shown.held.mass < low:
        return lower, upper, "below"
    return lower, upper, "above" if shown.held.mass > high else "inside"
