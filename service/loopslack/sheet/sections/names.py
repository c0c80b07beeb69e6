"""Names of states, parts and members of the question, and the words of verdicts, as every section uses them."""

import re

from loopslack.contract.answers.shared import Assumption, Check, SourceNote
from loopslack.sheet.case import JOINT, Case
from loopslack.sheet.customary import nominal_size
from loopslack.sheet.lines import Mark
from loopslack.sheet.words import plain

_NOMINAL = re.compile(r"DN\d+")
_PART_SUBJECTS = {
    "expansion vessel": "part.vessel",
    "station": "part.station",
    "cooling vessel": "part.cooling-vessel",
    "automatic-make-up": "part.automatic-make-up",
    "galvanised-parts": "part.galvanised-parts",
}


_BODIES = frozenset(
    [
        "asit",
        "ashrae",
        "asme",
        "astm",
        "cte",
        "db",
        "din",
        "en",
        "he",
        "hvac",
        "iapws",
        "idae",
        "iea",
        "inail",
        "isfh",
        "iso",
        "mo",
        "navfac",
        "nist",
        "pm",
        "sbz",
        "shc",
        "si",
        "trc",
        "ufc",
        "vdi",
        "ped",
        "sr1",
        "a554",
        "b36",
        "b88",
    ]
)


def state_name(case: Case, scenario: str) -> str:
    """A state of the loop or a doubt, in full."""
    if scenario == JOINT:
        return case.words("state.required-doubts")
    return case.words.or_else(f"state.{scenario}", plain(scenario))


def subject_name(case: Case, subject: str) -> str:
    """A part that a check or an advisory is about."""
    if subject in _PART_SUBJECTS:
        return case.words(_PART_SUBJECTS[subject])
    for index, group in enumerate(case.loop.groups):
        if group.name == subject:
            return case.group_name(index)
    for index, branch in enumerate(case.loop.branches):
        if branch.name == subject:
            return case.run_name(index)
    if subject.startswith("/"):
        return member_name(case, subject)
    return plain(subject)


def check_name(case: Case, check: Check) -> str:
    """What is checked, with the part where there are several."""
    name = case.words.or_else(f"check.{check.code}", plain(check.code))
    return name if check.subject is None else f"{name}: {subject_name(case, check.subject)}"


def mark_of(case: Case, check: Check) -> Mark:
    """How much weight a check's row carries."""
    if check.verdict == "holds":
        return "holds"
    if check.verdict == "not-assessed":
        return "open"
    if check.scenario not in case.counted:
        return "aside"
    return "fails" if check.group == "core" else "warns"


def mark_of_state(case: Case, scenario: str) -> Mark:
    """How much weight a state carries: that of the gravest of its checks."""
    marks = {mark_of(case, check) for check in case.result.checks if check.scenario == scenario}
    gravest: tuple[Mark, ...] = ("fails", "open", "aside", "warns")
    return next((mark for mark in gravest if mark in marks), "holds")


def verdict_word(case: Case, mark: Mark) -> str:
    """The verdict of a row in a word."""
    return case.words(f"mark.{mark}")


def member_name(case: Case, pointer: str) -> str:
    """A member of the question by what people call it, with the part it belongs to."""
    steps = pointer.strip("/").split("/")
    place = ""
    if len(steps) > 1 and steps[1].isdigit():
        index = int(steps[1])
        if steps[0] == "collectors" and index < len(case.design.collectors):
            place = case.group_name(index)
        elif steps[0] == "pipeRuns" and index < len(case.design.pipe_runs):
            place = case.run_name(index)
    if len(steps) > 3 and steps[2] == "segments" and len(case.design.pipe_runs[int(steps[1])].segments) > 1:
        place = case.words("inputs.stretch", run=place, number=int(steps[3]) + 1)
    field = field_name(case, steps)
    return f"{place}: {field}" if place else field


def field_name(case: Case, steps: list[str]) -> str:
    """A member by the most particular name the catalogue has for it."""
    named = [step for step in steps if not step.isdigit()]
    for length in (2, 1):
        key = f"field.{'-'.join(named[-length:])}"
        if len(named) >= length and key in case.words:
            return case.words(key)
    return plain("/".join(named))


def word_name(case: Case, word: str) -> str:
    """A word of the contract (a rule, a policy, a build) as people say it."""
    if _NOMINAL.fullmatch(word):
        return valve_size(case, int(word.removeprefix("DN")))
    return case.words.or_else(f"word.{word}", plain(word))


def valve_size(case: Case, millimetres: int) -> str:
    """A nominal size of a valve."""
    return nominal_size(millimetres) if case.write.system == "us" else f"DN {millimetres}"


def source_name(case: Case, source: SourceNote) -> str:
    """Where something comes from and how far it was seen, briefly."""
    seen = case.words(f"seen.{source.seen}")
    if source.key == source.seen:
        return seen
    place = f", {plain(source.place)}" if source.place else ""
    return f"{source_title(case, source.key)}{place} ({seen})"


def source_title(case: Case, key: str) -> str:
    """The key of a source as a designation: norms and bodies in capitals, people with theirs, numbers behind."""
    known = f"source.{key}"
    if known in case.words:
        return case.words(known)
    steps = key.split("-")
    count = next((k for k, step in enumerate(steps) if step[0].isdigit()), len(steps))
    named = [step.upper() if step in _BODIES else step.capitalize() for step in steps[:count]]
    return " ".join([*named, "-".join(steps[count:]).upper()]).strip()


def assumption_value(case: Case, assumption: Assumption) -> str:
    """What stood in."""
    if assumption.value is not None:
        return case.say.thin(assumption.value) if _is_thin(assumption) else case.say(assumption.value)
    return word_name(case, assumption.word or "")


def assumption_range(case: Case, assumption: Assumption) -> str:
    """Between what it lies elsewhere in the trade; nothing where no range is given."""
    low, high = assumption.low, assumption.high
    if low is None or high is None:
        return ""
    return case.say.thin_between(low, high) if _is_thin(assumption) else case.say.between(low, high)


def _is_thin(assumption: Assumption) -> bool:
    return assumption.field.endswith(("/thickness", "/outerDiameter", "/bore"))
