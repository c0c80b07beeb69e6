"""The band that stated tolerances give: one input off at a time, and all of them the way that raises the pressure.

In the base case, with the vessel charged and filled as it is. A tolerance is not a doubt: doubts are always counted,
a tolerance only where the caller states one, and it never turns the verdict of the design itself.
"""

from collections.abc import Callable, Mapping
from typing import Literal, NamedTuple

from msgspec.structs import replace

from loopslack.calc.analysis import Analysis
from loopslack.calc.fit import Fit
from loopslack.calc.judge import judge
from loopslack.calc.judgement import DoubtPolicy, Verdict
from loopslack.calc.levers.pipes import pipe_levers
from loopslack.calc.levers.plant import plant_levers
from loopslack.calc.model import CollectorGroup, Loop
from loopslack.calc.scenarios import BASE
from loopslack.calc.window import FillLaw, Gas
from loopslack.kernel.errors import CalculationError

ToleranceId = Literal[
    "pipe-length",
    "collector-content",
    "insulation-conductivity",
    "steam-power",
    "stagnation-temperature",
    "static-height",
    "fill-pressure",
    "precharge",
]


class Filling(NamedTuple):
    """A loop with its gas side and fill pressure (Pa absolute at the fill temperature)."""

    loop: Loop
    gas: Gas
    fill: float


class Outcome(NamedTuple):
    """Stagnation in the base case: Pa, m3, m, K; pressure and steam None where they cannot be computed."""

    verdict: Verdict
    pressure: float | None
    steam_volume: float | None
    reach: float | None
    mixed_temperature: float | None
    unspent: float | None


class Row(NamedTuple):
    """One input off by its tolerance, either way."""

    id: ToleranceId
    low: Outcome
    high: Outcome


class Band(NamedTuple):
    """The rows, all inputs off at once the way that raises the pressure, and the other way."""

    rows: tuple[Row, ...]
    unfavourable: Outcome
    favourable: Outcome


Move = Callable[[Filling, float], Filling]


def band(
    fitted: Fit,
    fill: float,
    tolerances: Mapping[ToleranceId, float],
    policy: DoubtPolicy,
    *,
    accept_without_boiling: bool = False,
) -> Band | None:
    """The band of a filled vessel; None where no tolerance is stated.

    ``tolerances`` are shares of one, K, m or Pa by id, as the input has it.
    """
    stated = {id: tolerance for id, tolerance in tolerances.items() if tolerance > 0}
    if not stated:
        return None

    def outcome(filling: Filling) -> Outcome:
        return _outcome(filling, fitted, policy, accept_without_boiling=accept_without_boiling)

    present = Filling(fitted.analysis.loop, fitted.gas, fill)
    rows, worse, better = [], present, present
    for id, tolerance in stated.items():
        move = _MOVES[id]
        low = outcome(move(present, -tolerance))
        high = outcome(move(present, tolerance))
        rows.append(Row(id, low, high))
        up = _pressure(high) >= _pressure(low)
        worse = move(worse, tolerance if up else -tolerance)
        better = move(better, -tolerance if up else tolerance)
    return Band(tuple(rows), outcome(worse), outcome(better))


def _pressure(outcome: Outcome) -> float:
    return float("inf") if outcome.pressure is None else outcome.pressure


def _outcome(filling: Filling, fitted: Fit, policy: DoubtPolicy, *, accept_without_boiling: bool) -> Outcome:
    """Judge a moved loop with the same vessel."""
    try:
        analysis = Analysis(filling.loop)
        mass = FillLaw(analysis, filling.gas).filled(filling.gas.nominal, filling.fill)
        limit = fitted.vessel.membrane_limit or filling.loop.criteria.membrane_limit
        found = judge(
            analysis,
            fitted.vessel,
            filling.gas,
            mass,
            policy=policy,
            membrane_limit=limit,
            accept_without_boiling=accept_without_boiling,
        )
    except CalculationError:
        return Outcome("not-assessed", None, None, None, None, None)
    base = found.stagnation.get(BASE.id)
    if base is None:
        return Outcome("not-assessed", None, None, None, None, None)
    relief = next(c for c in found.checks if c.code == "relief-valve" and c.state == BASE.id)
    spaces = analysis.case(BASE).balance.spaces
    reaches = [
        reach
        for space, steam in zip(spaces, base.extent.spaces, strict=True)
        for reach in space.path.reach(steam.place)
    ]
    return Outcome(
        found.verdict,
        relief.value,
        base.extent.steam_volume,
        max(reaches, default=0.0),
        base.mixed_temperature,
        base.extent.unspent,
    )


def _groups(change: Callable[[CollectorGroup, float], CollectorGroup]) -> Move:
    def move(filling: Filling, by: float) -> Filling:
        groups = tuple(change(group, by) for group in filling.loop.groups)
        return filling._replace(loop=replace(filling.loop, groups=groups))

    return move


def _lever(id: str, *, share: bool) -> Move:
    """Move a lever of the loop by a share of its number or by an amount."""

    def move(filling: Filling, by: float) -> Filling:
        for lever in (*pipe_levers(filling.loop), *plant_levers(filling.loop)):
            if lever.id == id:
                number = lever.value * (1 + by) if share else lever.value + by
                return filling._replace(loop=lever.moved(filling.loop, number))
        return filling

    return move


def _power(group: CollectorGroup, by: float) -> CollectorGroup:
    worse = group.worse_steam_power
    return replace(
        group,
        steam_power=group.steam_power * (1 + by),
        worse_steam_power=None if worse is None else worse * (1 + by),
    )


_MOVES: dict[ToleranceId, Move] = {
    "pipe-length": _lever("pipe-length", share=True),
    "collector-content": _groups(lambda group, by: replace(group, content=group.content * (1 + by))),
    "insulation-conductivity": _lever("insulation-conductivity", share=True),
    "steam-power": _groups(_power),
    "stagnation-temperature": _groups(
        lambda group, by: replace(group, stagnation_temperature=group.stagnation_temperature + by)
    ),
    "static-height": _lever("static-height", share=False),
    "fill-pressure": lambda filling, by: filling._replace(fill=filling.fill + by),
    "precharge": lambda filling, by: filling._replace(
        gas=replace(filling.gas, precharge=filling.gas.precharge + by)
    ),
}
