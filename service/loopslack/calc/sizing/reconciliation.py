"""Why two answers differ: a walk from one to the other that changes one choice at a time, in a fixed order.

Every rule is a set of choices in one formula, and so is the mass balance in its base case; the walk changes the
choices in the order of ``CHOICE_STEPS``. From the base case on it adds what no rule has: the doubts, an allowance for
fluid data, a window an installer can hit, a cool membrane, and the floor under loops that must not boil
(``LAST_STEPS``). Each step ends where the next begins, so the changes add up by construction.

The size of a single step depends on the order, since the choices multiply; the order is fixed for that reason.
"""

from collections.abc import Iterable, Sequence
from copy import copy

from loopslack.calc.analysis import Analysis
from loopslack.calc.precharge import precharge_temperature
from loopslack.calc.scenarios import BASE, Scenario
from loopslack.calc.sizing.mass_balance import Interval, feasible
from loopslack.calc.sizing.rules.choices import Choices
from loopslack.calc.sizing.rules.register import PUBLISHED, RECOMMENDED, RuleResult
from loopslack.calc.sizing.rules.rule import Fact
from loopslack.calc.sizing.volumes import Sized
from loopslack.calc.sizing.walk import CHOICE_STEPS, LAST_STEPS, SUBJECTS, Step, StepCode, Walk
from loopslack.calc.window import Bounds, Gas
from loopslack.kernel import kinds
from loopslack.kernel.errors import NotApplicable
from loopslack.kernel.roots import bracketed

_FIELDS: dict[StepCode, tuple[str, ...]] = {
    "vaporisation": ("vaporised",),
    "pipe-steam": ("pipe_steam",),
    "final-pressure": ("final_pressure",),
    "starting-pressure": ("precharge",),
    "least-factor": ("least_factor",),
    "expansion": ("expansion",),
    "reserve": ("reserve", "reserve_share", "fill"),
    "gas-temperature": ("gas_ratio", "fill_ratio", "density_ratio"),
}


def smallest(results: Iterable[RuleResult]) -> RuleResult | None:
    """The published answer with the least volume, the earlier of the register where two are equal."""
    answers = [result for result in results if result.id in PUBLISHED and result.nominal_volume is not None]
    return min(answers, key=lambda result: result.nominal_volume or 0.0) if answers else None


def walk_between(analysis: Analysis, start: RuleResult, end: RuleResult) -> Walk:
    """Walk from one published rule's answer to another's. Raises ``NotApplicable`` where one of them has none."""
    first, last = _choices(start), _choices(end)
    steps = _through_choices(analysis, start.nominal_volume or 0.0, first, last)
    steps[-1] = _ending(steps[-1], end.nominal_volume or 0.0)
    return _walk(start.key, end.key, steps)


def walk_to_recommended(
    analysis: Analysis, start: RuleResult, sized: Sized, scenarios: Sequence[Scenario]
) -> Walk:
    """Walk from a published rule's answer to the recommended volume.

    ``analysis`` is the loop as it was asked about, ``sized`` what is recommended for it under ``scenarios``.
    Raises ``NotApplicable`` where the rule has no answer.
    """
    first = _choices(start)
    plain = feasible(analysis, scenarios, upper_end=False)
    if plain is None:
        raise NotApplicable(
            "No vessel holds this loop, with or without a cooling vessel.",
            remedy="See the remedies of the answer.",
        )
    steps = _through_choices(
        analysis, start.nominal_volume or 0.0, first, base_choices(analysis, plain.precharge)
    )
    steps += _last_steps(analysis, sized, scenarios, plain, steps[-1].after)
    return _walk(start.key, RECOMMENDED, steps)


def base_choices(analysis: Analysis, precharge: float) -> Choices:
    """The mass balance in its base case as choices, filled to the least the trade fills to above its precharge.

    What the loop pushes out is split into steam in the collectors, steam in the pipes and the growth of what stays
    liquid; the split is a matter of words, the sum is the mass balance.
    """
    loop, states = analysis.loop, analysis.states
    temperatures = loop.temperatures
    extent = analysis.case(BASE).final
    room = analysis.fluid.density(temperatures.vessel_room)
    emptied = sum(space.emptied for space in extent.spaces)
    pipes = sum(space.pipe for space in extent.spaces)
    charged = precharge_temperature(analysis)
    filling = temperatures.fill / charged
    return Choices(
        vaporised=emptied,
        pipe_steam=pipes,
        final_pressure=analysis.final_pressure,
        precharge=precharge,
        expansion=extent.expelled / room - emptied - pipes,
        fill=precharge * filling + loop.criteria.fill_above_precharge,
        gas_ratio=temperatures.vessel_room / charged,
        fill_ratio=filling,
        density_ratio=states.fill.vessel_density / room,
    )


def _choices(result: RuleResult) -> Choices:
    choices = result.answer.choices
    if result.nominal_volume is None or choices is None:
        raise NotApplicable(
            f"The rule {result.key} gives this loop no volume to walk from or to.",
            remedy="Choose a rule that answers.",
            facts={"rule": result.key},
        )
    return choices


def _through_choices(analysis: Analysis, volume: float, first: Choices, last: Choices) -> list[Step]:
    """Change the choices in order; a change that leaves no vessel waits and is made with the next one."""
    steps: list[Step] = []
    current, waiting = first, first
    codes: list[StepCode] = []
    for code in CHOICE_STEPS:
        waiting = waiting._replace(**{name: getattr(last, name) for name in _FIELDS[code]})
        codes.append(code)
        if not waiting.free_share > 0:
            continue
        after = volume if waiting == current else waiting.nominal_volume()
        sides = (current, volume), (waiting, after)
        parameters = {changed: _parameters(analysis, changed, *sides) for changed in codes}
        steps.append(Step(codes=tuple(codes), before=volume, after=after, parameters=parameters))
        current, volume, codes = waiting, after, []
    return steps


def _parameters(
    analysis: Analysis, code: StepCode, before: tuple[Choices, float], after: tuple[Choices, float]
) -> dict[str, Fact]:
    """The two numbers between which a choice was changed."""
    one, other = (_number(analysis, code, *side) for side in (before, after))
    kind = _KINDS[code]
    return {"before": Fact(kind, one), "after": Fact(kind, other)}


_KINDS = {
    "vaporisation": kinds.VOLUME,
    "pipe-steam": kinds.VOLUME,
    "final-pressure": kinds.GAUGE_PRESSURE,
    "starting-pressure": kinds.GAUGE_PRESSURE,
    "least-factor": kinds.RATIO,
    "expansion": kinds.VOLUME,
    "reserve": kinds.VOLUME,
    "gas-temperature": kinds.TEMPERATURE,
}


def _number(analysis: Analysis, code: StepCode, choices: Choices, volume: float) -> float:
    air = analysis.loop.atmosphere
    if code == "vaporisation":
        return choices.vaporised
    if code == "pipe-steam":
        return choices.pipe_steam
    if code == "final-pressure":
        return choices.final_pressure - air
    if code == "starting-pressure":
        return choices.precharge - air
    if code == "reserve":
        return choices.reserve + (choices.reserve_share + choices.filled_share) * volume
    if code == "gas-temperature":
        return choices.gas_ratio * precharge_temperature(analysis)
    return choices.least_factor if code == "least-factor" else choices.expansion


def _last_steps(
    analysis: Analysis, sized: Sized, scenarios: Sequence[Scenario], plain: Interval, base: float
) -> list[Step]:
    exact = copy(analysis)
    exact.allowance = 0.0
    doubted, subject = _filled_to_the_least(exact, scenarios, plain, base)
    allowed, _ = _filled_to_the_least(analysis, scenarios, plain, doubted)
    volumes = (doubted, allowed, plain.smallest, sized.interval.smallest, sized.smallest)
    numbers = _last_parameters(analysis, sized, plain)
    steps = []
    for code, after in zip(LAST_STEPS, volumes, strict=True):
        step = Step(
            codes=(code,), before=base, after=after, parameters={code: numbers[code]}, subject=subject
        )
        steps.append(step)
        base = after
    return steps


def _last_parameters(analysis: Analysis, sized: Sized, plain: Interval) -> dict[StepCode, dict[str, Fact]]:
    air, window = analysis.loop.atmosphere, plain.window
    gauge, volume = kinds.GAUGE_PRESSURE, kinds.VOLUME
    return {
        "doubts": {},
        "fluid-allowance": {"allowance": Fact(volume, analysis.allowance)},
        "fill-window": {"lower": Fact(gauge, window.lower - air), "upper": Fact(gauge, window.upper - air)},
        "cooling-vessel": {
            "limit": Fact(kinds.TEMPERATURE, analysis.loop.criteria.membrane_limit),
            "content": Fact(volume, sized.cooling),
        },
        "without-boiling": {"least": Fact(kinds.NOMINAL_VOLUME, sized.floor)},
    }


def _filled_to_the_least(
    analysis: Analysis, scenarios: Sequence[Scenario], plain: Interval, least: float
) -> tuple[float, str]:
    """The volume (m3) that just holds under every scenario when filled to the least, and which asks for it.

    Filled to the least means to what the trade fills to above the precharge. No smaller than ``least``, which holds
    under fewer of them, and no larger than ``plain``, which does more.
    """
    loop = analysis.loop
    gas = Gas(1.0, plain.precharge, precharge_temperature(analysis))
    bounds = Bounds(analysis, scenarios, gas)
    fill = gas.precharge * loop.temperatures.fill / gas.temperature + loop.criteria.fill_above_precharge

    def spare(nominal: float) -> float:
        return bounds.masses(nominal)[1].mass - bounds.mass(nominal, fill)

    most = plain.smallest
    at_least, at_most = spare(least), spare(most)
    if at_least >= 0 or least >= most:
        found = least
    elif at_most <= 0:
        found = most
    else:
        found = bracketed(spare, least, most, at_least, at_most, 1e-12 * most).at
    scenario = bounds.masses(found)[1].scenario
    return found, scenario if scenario in SUBJECTS else BASE.id


def _ending(step: Step, volume: float) -> Step:
    """The last step ends at the answer itself, not at the same number in another order of operations."""
    return Step(codes=step.codes, before=step.before, after=volume, parameters=step.parameters)


def _walk(start: str, end: str, steps: list[Step]) -> Walk:
    return Walk(
        start=start,
        end=end,
        start_volume=steps[0].before,
        end_volume=steps[-1].after,
        steps=tuple(steps),
    )
