"""All branches open to steam as one pipe, along the front that sinks through them."""

from itertools import pairwise
from math import pi

from loopslack.calc.course.assumptions import (
    INSULATION_HEAT,
    INSULATION_SHARE,
    WALL_HEAT,
    Assumption,
    derived,
)
from loopslack.calc.course.lumped import LumpedPipe
from loopslack.calc.course.refusal import not_applicable
from loopslack.calc.front import SteamPath
from loopslack.calc.model import Branch, Loop, Segment


def lumped_pipe(loop: Loop, notes: list[Assumption]) -> LumpedPipe:
    """Lump the branches into one pipe. Raises ``NotApplicable`` where no front sinks through them."""
    branches = [branch for branch in loop.branches if branch.access != "closed"]
    if not branches:
        raise not_applicable(
            "No branch is open to steam, so the steam of the collectors has no pipe to condense in.",
            remedy="State a branch that steam can enter, or use the stagnation check.",
            pointer="/pipeRuns",
        )
    path = SteamPath(branches, max(group.height for group in loop.groups))
    if not path.falling:
        raise not_applicable(
            "A pipe rises on its way from the collectors; liquid then stands in the crest and the course, "
            "which lets one front sink, does not describe it.",
            remedy="Use the stagnation check, or build and state the run without the crest.",
            pointer="/pipeRuns",
        )
    unknown = [branch.name for branch in branches if branch.access == "unknown"]
    if unknown:
        notes.append(
            derived("open-branch", f"Steam is taken to enter {', '.join(unknown)}: nobody stated it.")
        )
    stops = _stops(path)
    if len(branches) > 1 and _differ(branches):
        notes.append(
            derived(
                "uneven-branches",
                "The branches differ in length or height; reach is that in the branch filled furthest, "
                f"{max(path.reaches[-1]):.3g} m at most.",
            )
        )
    distance = [0.0]
    for before, after in pairwise(stops):
        pairs = zip(path.reaches[before], path.reaches[after], strict=True)
        distance.append(distance[-1] + max(b - a for a, b in pairs))
    return LumpedPipe(
        distance=tuple(distance),
        reach=tuple(max(path.reaches[k]) for k in stops),
        content=tuple(path.volume[k] for k in stops),
        conductance=tuple(path.conductance[k] for k in stops),
        warmth=tuple(path.offset[k] for k in stops),
        capacity=tuple(
            sum(_capacity(b, reach) for b, reach in zip(branches, path.reaches[k], strict=True))
            for k in stops
        ),
        height=tuple(path.heights[k] for k in stops),
    )


def dead_content(loop: Loop) -> float:
    """Content (m3) of the branches closed to steam."""
    return sum(branch.content for branch in loop.branches if branch.access == "closed")


def _stops(path: SteamPath) -> list[int]:
    """Find the stops of the path at which the front has moved on."""
    kept = [0]
    for k in range(1, len(path.reaches)):
        pairs = zip(path.reaches[kept[-1]], path.reaches[k], strict=True)
        if max(b - a for a, b in pairs) > 1e-9:
            kept.append(k)
    return kept


def _differ(branches: list[Branch]) -> bool:
    """Whether the branches reach different lengths or heights."""
    first = branches[0]
    return any(
        abs(b.length - first.length) > 1e-6
        or abs(b.segments[-1].end_height - first.segments[-1].end_height) > 1e-6
        for b in branches[1:]
    )


def _capacity(branch: Branch, reach: float) -> float:
    """Heat capacity (J/K) of wall and insulation over the first metres of a branch."""
    total = 0.0
    for segment in branch.segments:
        total += min(reach, segment.length) * _capacity_per_metre(segment)
        reach -= segment.length
        if reach <= 0:
            break
    return total


def _capacity_per_metre(segment: Segment) -> float:
    outer = pi / 4 * segment.outer_diameter**2
    jacket = pi / 4 * (segment.outer_diameter + 2 * segment.insulation) ** 2 - outer
    return max(0.0, outer - segment.area) * WALL_HEAT + INSULATION_SHARE * jacket * INSULATION_HEAT
