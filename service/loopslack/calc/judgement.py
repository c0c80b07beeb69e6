"""What a judgement of a charged vessel consists of: states, checks, verdicts. Plain data, no computing."""

from typing import Literal, NamedTuple

from msgspec import Struct

from loopslack.calc.equilibrium import Equilibrium
from loopslack.calc.states import StateId
from loopslack.kernel.kinds import Kind

Verdict = Literal["holds", "favourable-only", "does-not-hold", "not-assessed"]
CheckVerdict = Literal["holds", "does-not-hold", "not-assessed"]
DoubtVerdict = Literal["holds", "does-not-hold", "not-assessed", "not-applicable"]
DoubtPolicy = Literal["single", "combined", "none"]
Basis = Literal["firm", "provisional"]
CheckCode = Literal[
    "relief-valve",
    "acceptance",
    "reserve",
    "top-pressure",
    "boiling-at-cut-off",
    "steam-at-station",
    "steam-reach",
    "membrane-temperature",
    "glycol-degradation",
    "freezing",
    "fill-window",
    "part-protected",
    "construction",
    "part-temperature",
    "volume-without-boiling",
    "part-rating",
    "net-positive-suction",
    "relief-size",
]


class Check(Struct, frozen=True, gc=False):
    """One check: SI numbers of one kind, ``margin`` positive when it holds.

    ``core`` checks decide the verdict; the others are to be confirmed by somebody. ``at_least`` marks a value that
    is only a lower bound of the truth.
    """

    code: CheckCode
    core: bool
    state: str
    verdict: CheckVerdict
    kind: Kind
    value: float | None = None
    limit: float | None = None
    margin: float | None = None
    subject: str = ""
    reason: str = ""
    at_least: bool = False


class StateResult(Struct, frozen=True, gc=False):
    """A liquid state with a vessel: pressures Pa absolute, volumes m3, temperatures K.

    Pressures are None when the vessel is empty or full: they are then not defined, and ``reason`` says why. So is a
    pressure that would lie below vacuum at the highest point or at a gauge far above: the liquid parts there.
    """

    id: StateId
    liquid: float
    pressure: float | None
    top_pressure: float | None
    gauge_pressure: float | None
    vessel_temperature: float
    frozen: bool
    reason: str = ""


class Judgement(NamedTuple):
    """A charged vessel in its loop, judged."""

    verdict: Verdict
    base: CheckVerdict
    doubts: dict[str, DoubtVerdict]
    combined: DoubtVerdict
    robust: bool
    checks: tuple[Check, ...]
    states: tuple[StateResult, ...]
    stagnation: dict[str, Equilibrium]
    refused: dict[str, str]

    @property
    def to_confirm(self) -> tuple[Check, ...]:
        """Checks nobody can make without a number that was not stated."""
        return tuple(check for check in self.checks if not check.core and check.verdict == "not-assessed")

    @property
    def failing(self) -> tuple[Check, ...]:
        """Checks that do not hold."""
        return tuple(check for check in self.checks if check.verdict == "does-not-hold")
