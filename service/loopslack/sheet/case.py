"""What a sheet is made of: the answer, the question behind it, and what the loop looks like in SI.

Every number shown is one of the answer, or of the question as it was stated. The loop in SI is there for its
geometry only: where a drawing puts a part. Names of parts that a caller did not name are given here.
"""

from functools import cached_property

from loopslack.calc.model import CollectorGroup, Loop
from loopslack.contract.answers.loop import LiquidState, StagnationState, SteamReach, VesselResult
from loopslack.contract.answers.operations import LoopDesignAnswer
from loopslack.contract.answers.shared import Check
from loopslack.contract.questions.operations import LoopDesignQuestion
from loopslack.contract.questions.pipes import StandardTube
from loopslack.contract.reading.loop import Reading, read_loop
from loopslack.contract.writing.quantities import Writer
from loopslack.kernel.errors import NotApplicable
from loopslack.sheet.customary import customary
from loopslack.sheet.numerals import Language, Numerals, numerals
from loopslack.sheet.words import Words, plain, words

JOINT = "required-doubts"


class NothingToDraw(NotApplicable):
    """A figure of something the answer has not got."""

    code = "nothing-to-draw"


class Case:
    """One design to be shown in one language."""

    def __init__(
        self, answer: LoopDesignAnswer, design: LoopDesignQuestion, language: Language, project: str = ""
    ) -> None:
        self.answer, self.design = answer, design
        self.project = plain(project).strip()
        self.result = answer.result
        self.words: Words = words(language)
        self.say: Numerals = numerals(language)

    @cached_property
    def reading(self) -> Reading:
        """The question in SI."""
        return read_loop(self.design)

    @property
    def loop(self) -> Loop:
        """The loop in SI."""
        return self.reading.loop

    @property
    def write(self) -> Writer:
        """Writes SI numbers in the units of the answer."""
        return self.reading.write

    def prose(self, text: str) -> str:
        """A sentence whose numbers are SI whatever was asked for, in the units of the answer."""
        return customary(text, self.say.point) if self.write.system == "us" else text

    def phrase(self, english: str) -> str:
        """A sentence of the answer in the language and the units of the sheet."""
        return self.prose(self.words.phrase(english))

    @property
    def vessel(self) -> VesselResult | None:
        """The vessel all numbers are of: chosen, or nearest where none is."""
        return self.result.chosen_vessel or self.result.nearest_vessel

    @property
    def chosen(self) -> bool:
        """Whether the vessel may be built: never on a verdict that says not to."""
        return self.result.chosen_vessel is not None and self.result.verdict == "holds"

    @cached_property
    def counted(self) -> frozenset[str]:
        """The scenarios whose checks count towards the verdict, by the policy asked for."""
        policy = self.reading.policy
        present = {state.scenario for state in self.result.stagnation} | {
            check.scenario for check in self.result.checks
        }
        if policy == "none":
            return frozenset(
                present - {"warm-gas", "hotter-stagnation", "worse-emptying", "closed-branch"}
            ) - {
                "all-doubts",
                JOINT,
            }
        return frozenset(present if policy == "combined" else present - {"all-doubts"})

    def state(self, id: str) -> LiquidState | None:
        """A state without steam."""
        return next((state for state in self.result.states if state.id == id), None)

    def stagnation(self, scenario: str) -> StagnationState | None:
        """Stagnation under a scenario."""
        return next((state for state in self.result.stagnation if state.scenario == scenario), None)

    def pressure_reached(self, scenario: str) -> Check | None:
        """The check of the relief valve: what the vessel would reach under a scenario if the valve stayed shut."""
        check = self.check("relief-valve", scenario)
        return None if check is None or check.value is None else check

    @property
    def worst_stagnation(self) -> StagnationState | None:
        """Of the doubts that count, the one under which the vessel would reach the highest pressure."""
        doubts = [
            state
            for state in self.result.stagnation
            if state.scenario in self.counted
            and state.scenario != "base"
            and state.vessel_pressure is not None
        ]
        return max(doubts, key=self._pressure, default=None)

    def _pressure(self, state: StagnationState) -> float:
        check = self.pressure_reached(state.scenario)
        return float("-inf") if check is None or check.value is None else check.value.value

    def check(self, code: str, scenario: str) -> Check | None:
        """A check by its code and state."""
        return next(
            (check for check in self.result.checks if check.code == code and check.scenario == scenario), None
        )

    def group_name(self, index: int) -> str:
        """A collector group by its own name, or by its number where there are several."""
        return self._named(
            self.design.collectors[index].id, "part.collectors", index, len(self.design.collectors)
        )

    def run_name(self, index: int) -> str:
        """A pipe run by its own name, or by what it is."""
        runs = self.design.pipe_runs
        alike = [k for k, run in enumerate(runs) if run.role == runs[index].role]
        return self._named(runs[index].id, f"part.{runs[index].role}", alike.index(index), len(alike))

    def _named(self, stated: str | None, key: str, place: int, of: int) -> str:
        if stated is not None and (name := plain(stated).strip()):
            return name
        return self.words(key) if of == 1 else f"{self.words(key)} {place + 1}"

    def part_names(self) -> list[str]:
        """The names of the parts in the order in which the answer lists their contents."""
        named = [self.group_name(k) for k in range(len(self.loop.groups))]
        named += [self.run_name(k) for k in range(len(self.loop.branches))]
        rest = self.result.content.parts[len(named) :]
        return named + [self.words(f"part.{part.kind}") for part in rest]

    @cached_property
    def own_names(self) -> dict[str, str]:
        """The names a derivation has for the parts of the loop, and what the sheet calls them."""
        names = {group.name: self.group_name(k) for k, group in enumerate(self.loop.groups)}
        for k, branch in enumerate(self.loop.branches):
            names[branch.name] = run = self.run_name(k)
            for number, segment in enumerate(self.design.pipe_runs[k].segments, 1):
                stretch = self.words("inputs.stretch", run=run, number=number)
                names[f"stretch {number} of {branch.name}"] = stretch
                if isinstance(segment.tube, StandardTube):
                    names[segment.tube.size] = plain(segment.tube.size)
        return names

    def reaches(self, state: StagnationState) -> list[tuple[int, SteamReach]]:
        """How far steam reaches, with the place of the pipe run in the question."""
        free = list(range(len(self.loop.branches)))
        found = []
        for reach in state.reach:
            run = next((k for k in free if self._is(k, reach)), None)
            if run is not None:
                free.remove(run)
                found.append((run, reach))
        return sorted(found, key=lambda pair: pair[0])

    def _is(self, index: int, reach: SteamReach) -> bool:
        branch = self.loop.branches[index]
        return branch.name == reach.pipe_run and self.write.length(branch.length).value == reach.length.value

    def groups_by_height(self) -> list[tuple[int, CollectorGroup]]:
        """The collector groups from the highest down."""
        return sorted(enumerate(self.loop.groups), key=lambda pair: (-pair[1].height, pair[0]))

    def nothing(self, figure: str) -> NothingToDraw:
        """The refusal of a figure that this answer has no numbers for."""
        return NothingToDraw(
            f"The answer has no numbers for the figure {figure}.",
            remedy="Ask for another figure, or mend the loop so that its numbers exist.",
            pointer="/figure",
            facts={"figure": figure},
        )
