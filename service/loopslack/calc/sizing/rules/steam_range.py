"""The rule of the steam range: collector liquid, and as much pipe as it takes to condense the collectors' steam.

Steam power and pipe loss are constants here, which is what sets this rule apart from the coupled balance: both follow
from a pressure that the rule does not know. It is run with the emptying class of the loop and with the one power that
is printed most.
"""

from collections.abc import Callable

from loopslack.calc.model import Branch, CollectorGroup, Loop
from loopslack.calc.sizing.rules.basis import Basis
from loopslack.calc.sizing.rules.choices import Choices
from loopslack.calc.sizing.rules.rule import Answer, Fact, Rule, applied
from loopslack.kernel import kinds
from loopslack.kernel.citations import Cite
from loopslack.kernel.equation import Range, equation
from loopslack.kernel.kinds import (
    AbsolutePressure,
    Area,
    ExpansionCoefficient,
    Irradiance,
    Length,
    LinearHeatLoss,
    NominalVolume,
    Volume,
)
from loopslack.physics.relief import allowance_task_26
from loopslack.physics.vessel import pressure_factor

TASK_26 = Cite("hausner-fink-2002", "from-memory")
VDI_6002 = Cite("vdi-6002-1", "from-memory")

PRINTED_POWER, PRINTED_LOSS = Irradiance(50.0), LinearHeatLoss(25.0)
_FROM_ZERO = Range(0.0)


@equation(
    "steam-range-length",
    law="L_st = q_st * A / q_p",
    symbols={"q_st": "steam power", "A": "aperture", "q_p": "pipe loss"},
    source=TASK_26,
    note="Length of pipe, all lines together, that condenses the steam of the collectors.",
    valid={"steam_power": _FROM_ZERO, "aperture": _FROM_ZERO, "pipe_loss": _FROM_ZERO},
)
def steam_length(steam_power: Irradiance, aperture: Area, pipe_loss: LinearHeatLoss) -> Length:
    """Length of pipe, m, that steam fills. Longer than the loop has means that steam reaches the station.

    One loss for every pipe whatever its size, insulation and pressure; 25 to 30 W/m are printed.
    """
    return Length(steam_power * aperture / pipe_loss)


@equation(
    "steam-range",
    law="V_N = (n * V_s + V_c + V_st + V_wr) * p_e / (p_e - p_0)",
    symbols={
        "n": "expansion",
        "V_s": "content",
        "V_c": "collectors",
        "V_st": "pipe steam",
        "V_wr": "reserve",
        "p_e": "final pressure",
        "p_0": "precharge",
    },
    source=TASK_26,
    note="The liquid of the steam zone is counted twice, as pushed out and as expanding.",
    valid={
        "content": _FROM_ZERO,
        "collectors": _FROM_ZERO,
        "pipe_steam": _FROM_ZERO,
        "reserve": _FROM_ZERO,
        "final_pressure": _FROM_ZERO,
        "precharge": _FROM_ZERO,
    },
    yields=_FROM_ZERO,
)
def vessel(
    content: Volume,
    expansion: ExpansionCoefficient,
    collectors: Volume,
    pipe_steam: Volume,
    reserve: Volume,
    final_pressure: AbsolutePressure,
    precharge: AbsolutePressure,
) -> NominalVolume:
    """Nominal volume, m3, for a loop with steam in collectors and pipes.

    Raises ``OutOfRange`` unless the final pressure exceeds the precharge.
    """
    pushed = expansion * content + collectors + pipe_steam + reserve
    return NominalVolume(pushed * pressure_factor(final_pressure, precharge))


def _run(basis: Basis) -> tuple[Answer, ...]:
    return (
        _answer(basis, "", lambda group: group.steam_power),
        _answer(basis, "printed-steam-power", lambda _: PRINTED_POWER),
    )


def _answer(basis: Basis, variant: str, power: Callable[[CollectorGroup], float]) -> Answer:
    loop = basis.loop
    final = basis.opening(allowance_task_26)
    steam, lengths, available = 0.0, [], 0.0
    for space in sorted({group.space for group in loop.groups}):
        groups = [group for group in loop.groups if group.space == space]
        aperture = sum(group.aperture for group in groups)
        mean = sum(power(group) * group.aperture for group in groups) / aperture
        length = applied(steam_length, steam_power=mean, aperture=aperture, pipe_loss=PRINTED_LOSS)
        branches = open_branches(loop, space)
        steam += filled_content(branches, length.result)
        available += sum(branch.length for branch in branches)
        lengths.append(length)
    law = applied(
        vessel,
        content=basis.content,
        expansion=basis.expansion,
        collectors=basis.collectors,
        pipe_steam=steam,
        reserve=basis.reserve,
        final_pressure=final,
        precharge=basis.precharge,
    )
    choices = Choices(
        basis.collectors,
        steam,
        final,
        basis.precharge,
        basis.expansion * basis.content,
        reserve=basis.reserve,
    )
    wanted = sum(length.result for length in lengths)
    facts = {
        "steam_length": Fact(kinds.LENGTH, wanted),
        "pipe_length": Fact(kinds.LENGTH, available),
        "unspent_power": Fact(kinds.POWER, _unspent(loop, [length.result for length in lengths])),
    }
    return Answer(variant, (*lengths, law), choices, basis.precharge, facts=facts)


def open_branches(loop: Loop, space: int) -> list[Branch]:
    """The branches of a steam space that are not known to be closed to steam."""
    return [branch for branch in loop.branches if branch.space == space and branch.access != "closed"]


def _unspent(loop: Loop, lengths: list[float]) -> float:
    """Steam power (W) that the pipes of its own space cannot condense."""
    spaces = sorted({group.space for group in loop.groups})
    total = 0.0
    for space, wanted in zip(spaces, lengths, strict=True):
        total += max(0.0, wanted - sum(branch.length for branch in open_branches(loop, space)))
    return PRINTED_LOSS * total


def filled_content(branches: list[Branch], length: float) -> float:
    """Content (m3) of a length of steam shared by branches: equal fronts, a full branch passes on its rest."""
    left, reach, content = length, 0.0, 0.0
    waiting = sorted(branches, key=lambda branch: branch.length)
    while waiting:
        rest, share = waiting[0].length - reach, left / len(waiting)
        if share < rest:
            return content + sum(_content_up_to(branch, reach + share) for branch in waiting)
        left -= rest * len(waiting)
        reach += rest
        content += waiting.pop(0).content
    return content


def _content_up_to(branch: Branch, reach: float) -> float:
    content = 0.0
    for segment in branch.segments:
        filled = min(segment.length, reach)
        content += filled * segment.area
        reach -= filled
    return content


RULE = Rule(
    id="steam-range",
    title="Steam range of IEA SHC Task 26",
    counts="Expansion, collectors, steam in the pipes at a constant power and loss, a reserve.",
    law="V_N = (n V_s + V_c + sum A_i L_st + V_wr) F, L_st = q_st A / q_p",
    sources=(TASK_26, VDI_6002),
    range="Solar loops whose collectors boil; steam power by emptying class, pipe loss 25 W/m.",
    run=_run,
)
