"""The changes remedies are made of, and what each does to a case. Why a change is wanted: the measures.

A change is data, so that it can be told to a caller as members of the question; applying it here must lead to the
same loop as asking that question.
"""

from collections.abc import Callable, Sequence
from typing import Literal, NamedTuple

from msgspec.structs import replace

from loopslack.calc.fluids.making import Fluid, glycol, glycol_by_volume, glycol_protecting_to
from loopslack.calc.model import Branch, Precharge, Relief, Segment, Vessel
from loopslack.calc.remedies.case import Case, Strength
from loopslack.kernel.kinds import Conductivity, GaugePressure, HeatLossCoefficient, Length
from loopslack.library.defaults import default
from loopslack.library.fluids import GlycolKind
from loopslack.physics.heat_loss import pipe_conductance
from loopslack.physics.relief import ALLOWANCES, blowdown_liquid, set_tolerance_iso_4126_1

ChangeId = Literal[
    "fill-pressure",
    "precharge",
    "cut-off",
    "glycol",
    "vessel",
    "cooling-vessel",
    "relief-set-pressure",
    "rated-pressure",
    "steam-cooler",
    "steam-access",
    "bare-pipe",
    "extra-pipe",
]

VESSEL = -1
"""Index that stands for the vessel, or for all vessels to choose from, among the rated parts."""

SHORTEST = 0.02
"""Metres of pipe that are not worth a stretch of their own: what is shorter goes with its neighbour."""

_FILM = HeatLossCoefficient(default("film-coefficient").si)
_CONDUCTIVITY = Conductivity(default("insulation-conductivity").si)  # counts for nothing on bare pipe


class Change(NamedTuple):
    """One change of a case: ``value`` in SI, pressures of gas and filling absolute, set and rated ones gauge.

    ``place`` is the index of the branch or the part concerned; ``vessels`` are the new ones to choose from, up to
    ``pieces`` of one; ``glycol`` is its kind and ``strength`` what ``value`` says of it. ``value`` of a pipe is
    the metres bared or added before the station.
    """

    id: ChangeId
    value: float = 0.0
    place: int = 0
    vessels: tuple[Vessel, ...] = ()
    pieces: int = 1
    glycol: GlycolKind | None = None
    strength: Strength = "by-mass"


def changed(case: Case, changes: Sequence[Change]) -> Case:
    """The case after changes, one after the other."""
    for change in changes:
        case = _APPLY[change.id](case, change)
    return case


def _with_loop(case: Case, **members: object) -> Case:
    return replace(case, loop=replace(case.loop, **members))


def _fill(case: Case, change: Change) -> Case:
    """Without a pressure the filling is the recommended one, whatever that is."""
    return replace(case, fill_pressure=change.value or None, mass=None)


def _precharge(case: Case, change: Change) -> Case:
    temperature = case.loop.precharge.temperature
    return _with_loop(
        case, precharge=Precharge(kind="stated", pressure=change.value, temperature=temperature)
    )


def _cut_off(case: Case, change: Change) -> Case:
    return _with_loop(case, temperatures=replace(case.loop.temperatures, cut_off=change.value))


def _glycol(case: Case, change: Change) -> Case:
    return _with_loop(case, fluid=mixture(change.glycol or "propylene-glycol", change.strength, change.value))


def _vessel(case: Case, change: Change) -> Case:
    """A filling stated for another vessel of a design falls away with it; that of a vessel that is there stays."""
    fill = case.fill_pressure if case.existing else None
    return replace(case, candidates=change.vessels, pieces=change.pieces, fill_pressure=fill, thinned=False)


def _cooling_vessel(case: Case, change: Change) -> Case:
    return replace(_with_loop(case, cooling_content=change.value), cooling="given")


def _relief(case: Case, change: Change) -> Case:
    return _with_loop(case, relief=valve_set_to(case.loop.relief, change.value))


def _rating(case: Case, change: Change) -> Case:
    if change.place == VESSEL:
        rated = tuple(replace(vessel, rated_pressure=change.value) for vessel in case.candidates)
        return replace(case, candidates=rated)
    parts = list(case.loop.parts)
    parts[change.place] = replace(parts[change.place], rated_pressure=change.value)
    return _with_loop(case, parts=tuple(parts))


def _cooler(case: Case, change: Change) -> Case:
    return _with_loop(case, station=replace(case.loop.station, steam_loss=change.value))


def _access(case: Case, change: Change) -> Case:
    return _with_branch(case, change.place, lambda branch: replace(branch, access="open"))


def _bare(case: Case, change: Change) -> Case:
    return _with_branch(case, change.place, lambda branch: bared(branch, change.value))


def _extra(case: Case, change: Change) -> Case:
    return _with_branch(case, change.place, lambda branch: lengthened(branch, change.value))


def _with_branch(case: Case, index: int, change: Callable[[Branch], Branch]) -> Case:
    branches = list(case.loop.branches)
    branches[index] = change(branches[index])
    return _with_loop(case, branches=tuple(branches))


_APPLY: dict[ChangeId, Callable[[Case, Change], Case]] = {
    "fill-pressure": _fill,
    "precharge": _precharge,
    "cut-off": _cut_off,
    "glycol": _glycol,
    "vessel": _vessel,
    "cooling-vessel": _cooling_vessel,
    "relief-set-pressure": _relief,
    "rated-pressure": _rating,
    "steam-cooler": _cooler,
    "steam-access": _access,
    "bare-pipe": _bare,
    "extra-pipe": _extra,
}


def mixture(kind: GlycolKind, strength: Strength, value: float) -> Fluid:
    """A glycol by a share of its mass or volume, or by the temperature (K) it protects to."""
    if strength == "by-volume":
        return glycol_by_volume(kind, value)
    return glycol_protecting_to(kind, value) if strength == "protect-to" else glycol(kind, value)


def valve_set_to(relief: Relief, set_pressure: float) -> Relief:
    """The valve with another set pressure: allowance by its rule or as stated, blowdown likewise."""
    new = GaugePressure(set_pressure)
    rule = ALLOWANCES.get(relief.allowance_rule)
    allowance: float = relief.set_pressure - relief.opening_pressure
    if rule is not None:
        allowance = max(rule(new), set_tolerance_iso_4126_1(new))
    blowdown: float = relief.set_pressure - relief.closing_pressure
    if abs(blowdown - blowdown_liquid(GaugePressure(relief.set_pressure))) < 1.0:
        blowdown = blowdown_liquid(new)
    return replace(
        relief,
        set_pressure=set_pressure,
        opening_pressure=set_pressure - allowance,
        closing_pressure=set_pressure - blowdown,
    )


def bared(branch: Branch, metres: float) -> Branch:
    """A branch without insulation over its last metres."""
    segments: list[Segment] = []
    left = metres
    for segment in reversed(branch.segments):
        if left <= SHORTEST:
            segments.insert(0, segment)
        elif left >= segment.length - SHORTEST:
            segments.insert(0, _stripped(segment))
        else:
            share = 1 - left / segment.length
            middle = segment.start_height + share * (segment.end_height - segment.start_height)
            far = replace(segment, length=left, start_height=middle)
            near = replace(segment, length=segment.length - left, end_height=middle)
            segments[0:0] = [near, _stripped(far)]
        left -= segment.length
    return replace(branch, segments=tuple(segments))


def lengthened(branch: Branch, metres: float) -> Branch:
    """A branch whose last segment is longer, between the same heights."""
    *rest, last = branch.segments
    return replace(branch, segments=(*rest, replace(last, length=last.length + metres)))


def _stripped(segment: Segment) -> Segment:
    outer = Length(segment.outer_diameter)
    conductance = pipe_conductance(outer, Length(0.0), _CONDUCTIVITY, _FILM)
    return replace(segment, insulation=0.0, conductivity=_CONDUCTIVITY, conductance=conductance)
