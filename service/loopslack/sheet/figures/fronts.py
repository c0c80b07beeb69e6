"""Where the steam front stands, read off the pipes of the question and the reach of the answer."""

from loopslack.calc.model import Branch
from loopslack.contract.answers.loop import StagnationState
from loopslack.sheet.case import Case


def height_at(branch: Branch, distance: float) -> float:
    """The height (m) of a pipe run at a distance from the collectors."""
    done = 0.0
    for segment in branch.segments:
        if distance <= done + segment.length:
            share = 0.0 if segment.length == 0 else (distance - done) / segment.length
            return segment.start_height + share * (segment.end_height - segment.start_height)
        done += segment.length
    return branch.segments[-1].end_height


def front_height(case: Case, state: StagnationState) -> float | None:
    """The height (m) of the lowest steam front; None where nothing boils."""
    if state.steam_volume.value <= 0:
        return None
    heights = []
    for run, reach in case.reaches(state):
        branch = case.loop.branches[run]
        share = reach.reach.value / reach.length.value if reach.length.value else 0.0
        heights.append(height_at(branch, share * branch.length))
    lowest = min(group.height for group in case.loop.groups)
    return min([lowest, *heights])
