"""Reads pipe runs: tubes, heat loss of every stretch, heights along the run."""

from collections.abc import Sequence
from functools import lru_cache
from typing import NamedTuple

from loopslack.calc.model import Branch, Segment, SteamAccess
from loopslack.contract.questions import pipes as asked
from loopslack.contract.questions.fields import field_of
from loopslack.contract.reading.reader import Reader
from loopslack.kernel.errors import CalculationError, NotApplicable
from loopslack.kernel.kinds import Conductivity, ContentPerLength, HeatLossCoefficient, Length
from loopslack.library.defaults import default
from loopslack.library.tubes import tube as tube_of_standard
from loopslack.physics.geometry import bore_of_content, content_per_length
from loopslack.physics.heat_loss import pipe_conductance

_LENGTH = field_of(asked.PipeSegment, "length")
_AMBIENT = field_of(asked.PipeSegment, "ambient")
_END_HEIGHT = field_of(asked.PipeSegment, "end_height")
_BORE = field_of(asked.BoreTube, "bore")
_BORE_OUTER = field_of(asked.BoreTube, "outer_diameter")
_CONTENT = field_of(asked.ContentTube, "content_per_length")
_CONTENT_OUTER = field_of(asked.ContentTube, "outer_diameter")
_THICKNESS = field_of(asked.Insulated, "thickness")
_CONDUCTIVITY = field_of(asked.Insulated, "conductivity")

_FILM = HeatLossCoefficient(default("film-coefficient").si)
_BARE = Conductivity(default("insulation-conductivity").si)  # counts for nothing without thickness
_INSULATED = asked.Insulated()

_tube_of_standard = lru_cache(maxsize=4096)(tube_of_standard)


class Run(NamedTuple):
    """What a pipe run needs to know of the loop it lies in."""

    start_height: float
    end_height: float
    outdoor_air: float
    hottest: float
    space: int
    name: str


class _Tube(NamedTuple):
    area: float
    outer_diameter: float


def read_run(reader: Reader, run: asked.PipeRun, place: str, around: Run) -> Branch:
    """Read one run from the collectors to the station."""
    access = run.steam_access
    if access is None:
        reader.word("steam-access", f"{place}/steamAccess")
    if access in {None, "unknown"}:
        reader.doubtful("steam-access-unknown", f"{place}/steamAccess")
    places = [f"{place}/segments/{k}" for k in range(len(run.segments))]
    lengths = [
        reader.si(segment.length, _LENGTH, here) for segment, here in zip(run.segments, places, strict=True)
    ]
    heights = _heights(reader, run.segments, places, lengths, around)
    start = around.start_height
    segments = []
    for segment, here, length, end in zip(run.segments, places, lengths, heights, strict=True):
        segments.append(_segment(reader, segment, here, length=length, start=start, end=end, around=around))
        start = end
    return Branch(
        name=around.name,
        role=run.role,
        access=_access(access),
        segments=tuple(segments),
        space=around.space,
    )


def read_content(reader: Reader, segment: asked.PipeSegment, place: str) -> float:
    """Content of a stretch, m3."""
    area = _tube(reader, segment.tube, f"{place}/tube", hottest=0.0).area
    return area * reader.si(segment.length, _LENGTH, place)


def _access(stated: SteamAccess | None) -> SteamAccess:
    return "unknown" if stated is None else stated


def _heights(
    reader: Reader,
    segments: Sequence[asked.PipeSegment],
    places: Sequence[str],
    lengths: Sequence[float],
    around: Run,
) -> list[float]:
    """Find the height of every stretch's end; even fall between those that are stated."""
    stated = [
        reader.optional(segment.end_height, _END_HEIGHT, here)
        for segment, here in zip(segments, places, strict=True)
    ]
    if stated[-1] is None:
        stated[-1] = around.end_height
    heights: list[float] = []
    known, waiting = around.start_height, 0.0
    pending: list[float] = []
    for height, length in zip(stated, lengths, strict=True):
        waiting += length
        pending.append(waiting)
        if height is not None:
            heights += [known + (height - known) * done / waiting for done in pending]
            known, waiting, pending = height, 0.0, []
    return heights


def _segment(
    reader: Reader,
    segment: asked.PipeSegment,
    place: str,
    *,
    length: float,
    start: float,
    end: float,
    around: Run,
) -> Segment:
    tube = _tube(reader, segment.tube, f"{place}/tube", hottest=around.hottest)
    thickness, conductivity, factor = _insulation(
        reader, segment.insulation, f"{place}/insulation", tube.outer_diameter
    )
    outdoor = (segment.zone or reader.word("pipe-zone", f"{place}/zone")) == "outdoor"
    return Segment(
        name=place,
        length=length,
        area=tube.area,
        outer_diameter=tube.outer_diameter,
        insulation=thickness,
        conductivity=conductivity,
        conductance=factor
        * pipe_conductance(Length(tube.outer_diameter), Length(thickness), Conductivity(conductivity), _FILM),
        ambient=_ambient(reader, segment, place, around, outdoor=outdoor),
        start_height=start,
        end_height=end,
        outdoor=outdoor,
        soft_solder=bool(segment.soft_solder),
    )


def _ambient(reader: Reader, segment: asked.PipeSegment, place: str, around: Run, *, outdoor: bool) -> float:
    if segment.ambient is not None:
        return reader.si(segment.ambient, _AMBIENT, place)
    if not outdoor:
        return reader.default("pipe-ambient", f"{place}/ambient")
    row = default("pipe-ambient-outdoor")
    return reader.derived(
        f"{place}/ambient", around.outdoor_air, row.kind, row.why, low=row.low, high=row.high
    )


def _tube(reader: Reader, tube: asked.Tube, place: str, *, hottest: float) -> _Tube:
    if isinstance(tube, asked.StandardTube):
        return _standard(reader, tube, place, hottest)
    if isinstance(tube, asked.BoreTube):
        bore = reader.si(tube.bore, _BORE, place)
        area = content_per_length(Length(bore))
        outer = reader.optional(tube.outer_diameter, _BORE_OUTER, place)
    else:
        area = ContentPerLength(reader.si(tube.content_per_length, _CONTENT, place))
        bore = bore_of_content(area)
        outer = reader.optional(tube.outer_diameter, _CONTENT_OUTER, place)
    if outer is None:
        row = default("tube-outer-over-bore")
        pointer, low, high = f"{place}/outerDiameter", bore + row.low, bore + row.high
        outer = reader.derived(pointer, bore + row.si, row.kind, row.why, low=low, high=high)
    elif outer <= bore:
        reader.contradiction(
            f"{place}/outerDiameter",
            f"An outer diameter of {1000 * outer:.4g} mm leaves no wall around a bore of "
            f"{1000 * bore:.4g} mm.",
            "Check both figures and their units.",
        )
    return _Tube(area, outer)


def _standard(reader: Reader, tube: asked.StandardTube, place: str, hottest: float) -> _Tube:
    try:
        row = _tube_of_standard(tube.standard, tube.size)
    except CalculationError as error:
        member = "standard" if error.code == "unknown-tube-standard" else "size"
        reader.refuse(error, f"{place}/{member}")
        return reader.stand_in(_Tube(5e-4, 0.03), _Tube(1e-4, 0.015))
    limit = row.highest_temperature
    if limit is not None and hottest > limit:
        reader.refuse(
            NotApplicable(
                f"Tube of {row.material} bears {limit - 273.15:.4g} degC; this loop reaches "
                f"{hottest - 273.15:.4g} degC.",
                remedy="Choose a metal tube: plastic pipe has no place in a loop that can stagnate.",
                facts={"highest": limit, "reached": hottest},
            ),
            f"{place}/standard",
        )
    return _Tube(row.content, row.outer_diameter)


def _insulation(
    reader: Reader, insulation: asked.Insulation | None, place: str, outer: float
) -> tuple[float, float, float]:
    """Thickness m, conductivity W/mK, and how many times the loss when new."""
    if isinstance(insulation, asked.NoInsulation):
        return 0.0, _BARE, 1.0
    stated = insulation or _INSULATED
    if stated.thickness is None:
        row = default("insulation-thickness-per-diameter")
        thickness = reader.derived(
            f"{place}/thickness",
            row.si * outer,
            _THICKNESS.kind,
            row.why,
            low=row.low * outer,
            high=row.high * outer,
        )
    else:
        thickness = reader.si(stated.thickness, _THICKNESS, place)
    conductivity = reader.or_default(stated.conductivity, _CONDUCTIVITY, place, "insulation-conductivity")
    if not isinstance(stated, asked.Weathered):
        return thickness, conductivity, 1.0
    factor = stated.loss_factor
    if factor is None:
        factor = reader.default("weathered-loss-factor", f"{place}/lossFactor")
    return thickness, conductivity, factor
