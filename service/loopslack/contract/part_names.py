"""What to call the collectors and pipe runs of a loop, in every answer alike."""

from collections.abc import Sequence

from loopslack.contract.questions.collectors import CollectorGroup
from loopslack.contract.questions.pipes import PipeRun


def group_names(groups: Sequence[CollectorGroup]) -> list[str]:
    """The stated names of collector groups; those without one by number, where there are several groups."""
    return _named([(group.id, "collectors") for group in groups])


def run_names(runs: Sequence[PipeRun]) -> list[str]:
    """The stated names of pipe runs; those without one by role and number, where there are several of that role."""
    return _named([(run.id, run.role) for run in runs])


def _named(parts: Sequence[tuple[str | None, str]]) -> list[str]:
    sorts = [sort for _, sort in parts]
    return [
        stated or (sort if sorts.count(sort) == 1 else f"{sort} {sorts[: k + 1].count(sort)}")
        for k, (stated, sort) in enumerate(parts)
    ]
