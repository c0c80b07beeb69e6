"""The whole job: size the loop, choose a vessel, judge it. What else an answer shows is worked out from this."""

from collections.abc import Sequence
from typing import NamedTuple

from msgspec.structs import replace

from loopslack.calc.analysis import Analysis
from loopslack.calc.fit import Fit
from loopslack.calc.judge import required
from loopslack.calc.judgement import DoubtPolicy, Judgement
from loopslack.calc.model import Loop, Vessel
from loopslack.calc.nearest import Asked, judged, nearest
from loopslack.calc.scenarios import BASE, Scenario
from loopslack.calc.selection import Selection, choose, with_power_left
from loopslack.calc.selector import Selector
from loopslack.calc.sizing.volumes import CoolingMode, Sized, Trail, size
from loopslack.kernel.errors import CalculationError
from loopslack.kernel.work import Work, finished


class Request(NamedTuple):
    """What is asked beside the loop itself."""

    candidates: Sequence[Vessel]
    most_in_parallel: int
    cooling: CoolingMode
    policy: DoubtPolicy
    accept_without_boiling: bool = False
    fill_pressure: float | None = None  # Pa absolute, where the filling of a given vessel is stated


class Volumes(NamedTuple):
    """Nominal volumes with what they need: for the base case, the required doubts singly, and all at once."""

    base: Sized | None
    recommended: Sized | None
    robust: Sized | None


class Selected(NamedTuple):
    """A sized loop with what was chosen for it, if anything, not judged yet.

    ``refused`` says why a volume is unknown.
    """

    analysis: Analysis
    request: Request
    volumes: Volumes
    selection: Selection
    refused: dict[str, str]


class Design(NamedTuple):
    """A designed loop.

    ``shown`` is the vessel the states and checks are of: the chosen one, or the candidate that fails least, which is
    then not chosen. ``chosen`` is None unless the verdict is ``holds`` (or the policy asks for no doubt at all and the
    base case holds).
    """

    loop: Loop
    request: Request
    analysis: Analysis
    volumes: Volumes
    selection: Selection
    shown: Fit
    judgement: Judgement
    chosen: Fit | None
    refused: dict[str, str]


def design(loop: Loop, request: Request) -> Design:
    """Size a loop, choose a vessel from the candidates and judge it under the doubts the policy asks for.

    Raises ``CalculationError`` where the question itself cannot be answered, such as a state outside the fluid's
    range. An unsound loop is no error: it is a design with a verdict.
    """
    return finished(judging(finished(selecting(loop, request))))


def selecting(loop: Loop, request: Request) -> Work[Selected]:
    """The first part of a design: size the loop and compare the candidates. Raises as ``design`` does."""
    analysis = Analysis(loop)
    volumes, refused = yield from _volumes(analysis, request)
    scenarios = required(analysis, request.policy)
    selection = _select(analysis, scenarios, volumes.recommended, request)
    return Selected(analysis, request, volumes, selection, refused)


def judging(found: Selected) -> Work[Design]:
    """The second part: judge the chosen vessel, or find the candidate that fails least, which takes longer."""
    analysis, request, volumes, selection, refused = found
    asked = Asked(
        analysis, request.policy, request.cooling, request.fill_pressure, request.accept_without_boiling
    )
    shown = selection.chosen or (yield from nearest(asked, selection.refused))
    yield
    if request.fill_pressure is not None:
        shown = replace(shown, window=replace(shown.window, recommended=request.fill_pressure))
    judgement = judged(asked, shown, None if refused or selection.chosen is None else shown.window)
    counted = {scenario.id for scenario in asked.scenarios}
    left = max(
        (rest.extent.unspent for id, rest in judgement.stagnation.items() if id in counted), default=0.0
    )
    if left > 0:
        selection = with_power_left(selection, left)
    holds = judgement.verdict == "holds" or (request.policy == "none" and judgement.base == "holds")
    chosen = shown if holds and selection.chosen is not None else None
    return Design(analysis.loop, request, analysis, volumes, selection, shown, judgement, chosen, refused)


def _volumes(analysis: Analysis, request: Request) -> Work[tuple[Volumes, dict[str, str]]]:
    """The three volumes; a scenario whose properties are unknown has none, and says why."""
    refused: dict[str, str] = {}
    trail = Trail()

    def sized(name: str, scenarios: Sequence[Scenario]) -> Sized | None:
        try:
            return size(
                analysis,
                scenarios,
                request.cooling,
                analysis.loop.criteria.membrane_limit,
                accept_without_boiling=request.accept_without_boiling,
                trail=trail,
            )
        except CalculationError as error:
            refused[name] = str(error)
            return None

    base = recommended = sized("base", (BASE,))
    yield
    if request.policy != "none":
        recommended = sized("recommended", required(analysis, request.policy))
        yield
    robust = sized("robust", analysis.every)
    yield
    return Volumes(base, recommended, robust), refused


def _select(
    analysis: Analysis, scenarios: Sequence[Scenario], sized: Sized | None, request: Request
) -> Selection:
    selector = Selector(
        analysis,
        scenarios,
        sized,
        request.cooling,
        analysis.loop.criteria.membrane_limit,
        accept_without_boiling=request.accept_without_boiling,
    )
    return choose(selector, request.candidates, request.most_in_parallel)
