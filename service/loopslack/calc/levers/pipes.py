"""Levers of the pipes, all pipes of a loop moved together."""

from collections.abc import Callable

from msgspec.structs import replace

from loopslack.calc.levers.lever import Lever, lever
from loopslack.calc.model import Loop, Segment
from loopslack.kernel import kinds
from loopslack.kernel.kinds import Conductivity, HeatLossCoefficient, Length
from loopslack.library.defaults import default
from loopslack.physics.heat_loss import pipe_conductance

LENGTH_RANGE = 0.2  # own assumption: lengths taken from a plan are commonly off by a fifth
HEIGHT_RANGE = 1.0  # own assumption, m: heights are commonly guessed to a metre


def pipe_levers(loop: Loop) -> list[Lever]:
    """Length, height, insulation and surroundings."""
    segments = [segment for branch in loop.branches for segment in branch.segments]
    length = sum(segment.length for segment in segments)
    if length <= 0:
        return []
    found = [
        Lever(
            id="pipe-length",
            kind=kinds.LENGTH,
            value=length,
            low=length * (1 - LENGTH_RANGE),
            high=length * (1 + LENGTH_RANGE),
            basis="own-assumption",
            moved=with_pipe_length,
        ),
        lever(
            "insulation-conductivity",
            kinds.CONDUCTIVITY,
            _mean(segments, lambda segment: segment.conductivity),
            lambda loop, number: _each(loop, lambda s: _insulated(s, s.insulation, number)),
        ),
        lever(
            "insulation-thickness-per-diameter",
            kinds.RATIO,
            _mean(segments, lambda segment: segment.insulation / segment.outer_diameter),
            lambda loop, number: _each(
                loop, lambda s: _insulated(s, number * s.outer_diameter, s.conductivity)
            ),
        ),
    ]
    indoor = [segment for segment in segments if not segment.outdoor]
    if indoor:
        found.append(
            lever(
                "pipe-ambient",
                kinds.TEMPERATURE,
                _mean(indoor, lambda segment: segment.ambient),
                lambda loop, number: _each(loop, lambda s: s if s.outdoor else replace(s, ambient=number)),
            )
        )
    height = max(group.height for group in loop.groups)
    if height > HEIGHT_RANGE:
        found.append(
            Lever(
                id="static-height",
                kind=kinds.LENGTH,
                value=height,
                low=height - HEIGHT_RANGE,
                high=height + HEIGHT_RANGE,
                basis="own-assumption",
                moved=lambda loop, number: _stretched(loop, number / height),
            )
        )
    return found


def with_pipe_length(loop: Loop, length: float) -> Loop:
    """The loop with all its pipes together ``length`` m long, each in proportion; heights stay."""
    share = length / sum(branch.length for branch in loop.branches)
    return _each(loop, lambda segment: replace(segment, length=segment.length * share))


def _mean(segments: list[Segment], number: Callable[[Segment], float]) -> float:
    return sum(number(s) * s.length for s in segments) / sum(s.length for s in segments)


def _each(loop: Loop, change: Callable[[Segment], Segment]) -> Loop:
    return replace(
        loop,
        branches=tuple(
            replace(branch, segments=tuple(change(segment) for segment in branch.segments))
            for branch in loop.branches
        ),
    )


def _insulated(segment: Segment, thickness: float, conductivity: float) -> Segment:
    """Other insulation. What else the conductance holds, such as weathering, is carried over as a factor."""
    film = HeatLossCoefficient(default("film-coefficient").si)
    outer = Length(segment.outer_diameter)
    before = pipe_conductance(outer, Length(segment.insulation), Conductivity(segment.conductivity), film)
    after = pipe_conductance(outer, Length(thickness), Conductivity(conductivity), film)
    return replace(
        segment,
        conductivity=conductivity,
        insulation=thickness,
        conductance=segment.conductance * (after / before),
    )


def _stretched(loop: Loop, ratio: float) -> Loop:
    """The loop with every height above the vessel in proportion; pipes keep their length."""

    def height(number: float) -> float:
        return number * ratio if number > 0 else number

    taller = _each(
        loop,
        lambda segment: replace(
            segment, start_height=height(segment.start_height), end_height=height(segment.end_height)
        ),
    )
    return replace(
        taller,
        groups=tuple(replace(group, height=height(group.height)) for group in loop.groups),
        parts=tuple(replace(part, height=height(part.height)) for part in loop.parts),
        top=height(loop.top),
    )
