"""How much worse than stated a filled vessel still takes: more pipe, hotter collectors, gas lost from its cushion.

The vessel stays as it was filled; what ends is the first check of the fill window or of the membrane, in the base
case or under a required doubt. An installer's margin around the fill pressure is not asked for here.
"""

from collections.abc import Callable, Sequence
from typing import Literal, NamedTuple

from msgspec.structs import replace

from loopslack.calc.analysis import Analysis
from loopslack.calc.cooling import Charged, hottest
from loopslack.calc.levers.pipes import with_pipe_length
from loopslack.calc.model import Loop
from loopslack.calc.scenarios import BASE, COMBINED_ID, Scenario
from loopslack.calc.sizing.floor import without_boiling_floor
from loopslack.calc.window import Bounds, FillLaw, Gas
from loopslack.kernel import kinds
from loopslack.kernel.errors import CalculationError
from loopslack.kernel.kinds import Kind

HeadRoomId = Literal["pipe-length", "stagnation-temperature", "precharge-loss", "precharge-loss-topped-up"]
Outcome = Literal["value", "none", "beyond-search"]

_MOST_PIPE = 4.0  # times the pipe there is
_MOST_KELVIN = 100.0
_STOPS = 20
_HALVINGS = 34  # of one stop: 1e-11 of the search
_ROUNDING = 1e-9


class HeadRoom(NamedTuple):
    """How far an input may go: ``value`` on top of what is stated, SI of ``kind``.

    ``outcome``: ``value`` where ``code`` under ``scenario`` ends it there; ``none`` where the vessel fails as it is,
    by that check; ``beyond-search`` where it still holds at ``value``, the end of what was looked at.
    """

    id: HeadRoomId
    kind: Kind
    outcome: Outcome
    value: float | None
    code: str = ""
    scenario: str = ""


class Filled(NamedTuple):
    """A vessel in its loop, with a mass (kg) of liquid, and what it must survive.

    ``accept_without_boiling`` is as in a request for a design.
    """

    analysis: Analysis
    gas: Gas
    mass: float
    scenarios: Sequence[Scenario]
    membrane_limit: float
    accept_without_boiling: bool = False


def head_room(filled: Filled) -> tuple[HeadRoom, ...]:
    """Extra pipe, kelvin of stagnation temperature and precharge loss that a filled vessel still tolerates.

    Pipe is added to every line in proportion and filled at the same pressure. Gas may be lost with the liquid left
    alone, so that the pressure falls, or be made up with liquid to the old fill pressure, as is often done.
    """
    loop = filled.analysis.loop
    pipe = sum(branch.length for branch in loop.branches)
    lost = filled.gas.precharge - loop.atmosphere
    fill = _fill_pressure(filled)
    found = []
    if pipe > 0:
        most = _MOST_PIPE * pipe
        found.append(
            _search(
                "pipe-length", kinds.LENGTH, most, lambda x: _in(filled, with_pipe_length(loop, pipe + x))
            )
        )
    found += [
        _search(
            "stagnation-temperature",
            kinds.TEMPERATURE_DIFFERENCE,
            _MOST_KELVIN,
            lambda x: _in(filled, _hotter(loop, x)),
        ),
        _search("precharge-loss", kinds.PRESSURE_DIFFERENCE, lost, lambda x: _leaked(filled, x)),
        _search(
            "precharge-loss-topped-up",
            kinds.PRESSURE_DIFFERENCE,
            lost,
            lambda x: _topped_up(_leaked(filled, x), fill),
        ),
    ]
    return tuple(found)


def failing(filled: Filled) -> tuple[str, str] | None:
    """The check, with its scenario, that a filled vessel fails first; None where it holds.

    A state whose properties are not known is not assessed, which is no pass.
    """
    analysis, gas, mass = filled.analysis, filled.gas, filled.mass
    try:
        lower, upper = Bounds(analysis, filled.scenarios, gas).masses(gas.nominal, gas.acceptance)
        if mass < lower.mass * (1 - _ROUNDING) or mass < 0:
            return lower.code, lower.scenario
        if mass > upper.mass * (1 + _ROUNDING):
            return upper.code, upper.scenario
        least = without_boiling_floor(analysis, accept_without_boiling=filled.accept_without_boiling)
        if gas.nominal < least * (1 - _ROUNDING):
            return "volume-without-boiling", BASE.id
        temperature, worst = hottest(Charged(analysis, gas, mass), filled.scenarios)
    except CalculationError:
        return "not-assessed", BASE.id
    if temperature > filled.membrane_limit * (1 + _ROUNDING):
        return "membrane-temperature", worst.id
    return None


def _search(id: HeadRoomId, kind: Kind, most: float, at: Callable[[float], Filled]) -> HeadRoom:
    """Walk outwards to the first stop that fails, then halve: the nearest end, even where it would hold again."""
    ended = failing(at(0.0))
    if ended is not None:
        return HeadRoom(id, kind, "none", None, *ended)
    low = 0.0
    for stop in range(1, _STOPS + 1):
        high = most * stop / _STOPS
        ended = failing(at(high))
        if ended is not None:
            break
        low = high
    if ended is None:
        return HeadRoom(id, kind, "beyond-search", most)
    for _ in range(_HALVINGS):
        middle = 0.5 * (low + high)
        found = failing(at(middle))
        if found is None:
            low = middle
        else:
            high, ended = middle, found
    return HeadRoom(id, kind, "value", low, *ended)


def _in(filled: Filled, loop: Loop) -> Filled:
    """The same vessel with the same liquid in another loop, under the doubts as they are there."""
    analysis = Analysis(loop)
    known = {BASE.id: BASE, COMBINED_ID: analysis.combined} | {doubt.id: doubt for doubt in analysis.doubts}
    scenarios = tuple(known[scenario.id] for scenario in filled.scenarios if scenario.id in known)
    return filled._replace(analysis=analysis, scenarios=scenarios)


def _hotter(loop: Loop, kelvin: float) -> Loop:
    return replace(
        loop,
        groups=tuple(
            replace(group, stagnation_temperature=group.stagnation_temperature + kelvin)
            for group in loop.groups
        ),
    )


def _leaked(filled: Filled, loss: float) -> Filled:
    """Gas is lost, the liquid stays."""
    return filled._replace(gas=replace(filled.gas, precharge=filled.gas.precharge - loss))


def _topped_up(filled: Filled, pressure: float) -> Filled:
    """Liquid is added until the gauge shows the old fill pressure at the fill temperature."""
    bounds = FillLaw(filled.analysis, filled.gas)
    return filled._replace(mass=bounds.mass(filled.gas.nominal, pressure))


def _fill_pressure(filled: Filled) -> float:
    bounds = FillLaw(filled.analysis, filled.gas)
    return bounds.pressure(filled.gas.nominal, filled.mass, filled.analysis.loop.temperatures.fill)
