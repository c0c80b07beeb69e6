"""Reads how collectors and pipe runs hang together: heights, steam spaces, the highest point."""

from collections.abc import Sequence
from typing import NamedTuple

from loopslack.calc.model import Branch, CollectorGroup, Sun
from loopslack.contract.part_names import group_names, run_names
from loopslack.contract.questions import collectors as asked_collectors
from loopslack.contract.questions import operations as asked
from loopslack.contract.questions.fields import field_of
from loopslack.contract.questions.pipes import PipeRun
from loopslack.contract.reading.collectors import read_group
from loopslack.contract.reading.pipes import Run, read_run
from loopslack.contract.reading.reader import Reader
from loopslack.contract.strict.hints import listing, shown
from loopslack.kernel import kinds

_HIGHEST = field_of(asked.LoopQuestion, "highest_point")

_SAME_HEIGHT = 0.05  # a hand's breadth: what people call the same height


class Ends(NamedTuple):
    """Heights between which pipe runs lie, the air around outdoor ones, and the hottest they may get, K."""

    static: float
    station: float
    outdoor_air: float
    hottest: float


def read_groups(
    reader: Reader, question: asked.LoopQuestion, sun: Sun, static: float
) -> tuple[CollectorGroup, ...]:
    """Read the collector groups with their heights and steam spaces."""
    spaces = read_spaces(reader, question.collectors, question.pipe_runs)
    groups = tuple(
        read_group(
            reader,
            group,
            f"/collectors/{k}",
            name=name,
            sun=sun,
            static_height=static,
            space=spaces.get(group.steam_space, 0),
        )
        for k, (group, name) in enumerate(
            zip(question.collectors, group_names(question.collectors), strict=True)
        )
    )
    heights = [group.height for group in groups]
    all_stated = all(group.height is not None for group in question.collectors)
    if all_stated and not min(heights) - _SAME_HEIGHT <= static <= max(heights) + _SAME_HEIGHT:
        reader.contradiction(
            "/staticHeight",
            f"The static height of {static:.4g} m is that of none of the collectors, which stand from "
            f"{min(heights):.4g} to {max(heights):.4g} m above the vessel connection.",
            "State the height of the collectors in both places alike, or leave it out of the groups.",
        )
    return groups


def read_branches(
    reader: Reader, question: asked.LoopQuestion, groups: Sequence[CollectorGroup], ends: Ends
) -> tuple[Branch, ...]:
    """Read the pipe runs, each from the highest collectors of its steam space to the station."""
    labels = {
        stated.steam_space: group.space for stated, group in zip(question.collectors, groups, strict=True)
    }
    branches = []
    for k, (run, name) in enumerate(zip(question.pipe_runs, run_names(question.pipe_runs), strict=True)):
        space = labels.get(run.steam_space, 0)
        start = max((group.height for group in groups if group.space == space), default=ends.static)
        around = Run(start, ends.station, ends.outdoor_air, ends.hottest, space, name)
        branches.append(read_run(reader, run, f"/pipeRuns/{k}", around))
        end = branches[-1].segments[-1].end_height
        if question.station and question.station.height and abs(end - ends.station) > _SAME_HEIGHT:
            reader.contradiction(
                f"/pipeRuns/{k}/segments/{len(run.segments) - 1}/endHeight",
                f"The run ends at {end:.4g} m, the station stands at {ends.station:.4g} m.",
                "Let the last stretch of every run end at the station; leave endHeight out there.",
            )
    return tuple(branches)


def read_spaces(
    reader: Reader, groups: Sequence[asked_collectors.CollectorGroup], runs: Sequence[PipeRun]
) -> dict[str | None, int]:
    """Number the steam spaces by their labels, which are stated everywhere or nowhere."""
    labels = list(dict.fromkeys(group.steam_space for group in groups))
    spaces = {label: k for k, label in enumerate(labels)}
    if None in spaces and len(labels) == 1:
        for k, run in enumerate(runs):
            if run.steam_space is not None:
                _no_such_space(reader, f"/pipeRuns/{k}/steamSpace", run.steam_space, ())
        return spaces
    for k, group in enumerate(groups):
        if group.steam_space is None:
            _label_missing(reader, f"/collectors/{k}/steamSpace")
    for k, run in enumerate(runs):
        if run.steam_space is None:
            _label_missing(reader, f"/pipeRuns/{k}/steamSpace")
        elif run.steam_space not in spaces:
            named = [label for label in labels if label is not None]
            _no_such_space(reader, f"/pipeRuns/{k}/steamSpace", run.steam_space, named)
    return spaces


def _label_missing(reader: Reader, pointer: str) -> None:
    reader.missing(
        pointer,
        "Some steam spaces are named and this one is not.",
        "Name the steam space of every collector group and every pipe run, or of none.",
    )


def _no_such_space(reader: Reader, pointer: str, label: str, named: Sequence[str]) -> None:
    others = f"; there are {listing(named)}" if named else ""
    reader.contradiction(
        pointer,
        f"No collector group belongs to the steam space {shown(label)}{others}.",
        "Use the name that the collectors of this run state as their steamSpace.",
    )


def read_top(reader: Reader, question: asked.LoopQuestion, highest_part: float) -> float:
    """Find the height of the highest point, m: that of the parts unless a higher one is stated."""
    if question.highest_point is None:
        why = "No part is stated to stand higher."
        return reader.derived(
            "/highestPoint", highest_part, kinds.LENGTH, why, low=highest_part, high=highest_part
        )
    stated = reader.si(question.highest_point, _HIGHEST, "")
    if stated < highest_part - _SAME_HEIGHT:
        reader.contradiction(
            "/highestPoint",
            f"The highest point is stated as {stated:.4g} m, but a part of the loop stands at {highest_part:.4g} m.",
            "State the height of the highest pipe crest, collector or part above the vessel connection.",
        )
    return max(stated, highest_part)
