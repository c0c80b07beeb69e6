"""What a derivation starts from: how the question named its tubes, areas, strengths and vessels.

A question that has been read once already; nothing is refused here.
"""

from collections.abc import Mapping

from loopslack.calc.derivation.ground import CollectorGround, FluidGround, Ground, TubeGround
from loopslack.contract.quantity import Quantity
from loopslack.contract.questions import collectors, pipes, vessels
from loopslack.contract.questions import fluid as fluids
from loopslack.contract.questions import operations as questions
from loopslack.contract.questions.fields import field_of
from loopslack.contract.questions.plant import AllowanceStated
from loopslack.contract.reading.loop import Reading
from loopslack.kernel.units import GAUGE_UNITS
from loopslack.library.tubes import tube as tube_of_standard

_GROUP, _COEFFICIENTS = collectors.CollectorGroup, collectors.CollectorCoefficients
_A1, _A2 = field_of(_COEFFICIENTS, "a1"), field_of(_COEFFICIENTS, "a2")
_AREA = field_of(_GROUP, "area")
_MEASURED = {
    name: field_of(collectors.MeasuredStagnation, name) for name in ("temperature", "irradiance", "ambient")
}
_BORE = field_of(pipes.BoreTube, "bore")
_VOLUME_SHARE = field_of(fluids.ByVolume, "share")
_PROTECT = field_of(fluids.ProtectTo, "temperature")
_ALLOWANCE = field_of(AllowanceStated, "value")
_FILL = field_of(vessels.GivenVessel, "fill_pressure")
_WORSE = {"good": "fair", "fair": "poor"}


def ground_of(question: questions.LoopQuestion, reading: Reading) -> Ground:
    """Find what a derivation starts from beside the loop."""
    valve = question.relief_valve.opening_allowance
    return Ground(
        assumed={entry.pointer: entry.source for entry in reading.assumed},
        tubes=_tubes(question),
        collectors={k: _collector(group, k, reading) for k, group in enumerate(question.collectors)},
        fluid=_fluid(question.fluid),
        vessels=_vessels(question),
        heights=_heights(question),
        sized_cooling=reading.cooling == "size",
        fill=_fill(question, reading.loop.atmosphere),
        allowance=_si(valve.value, _ALLOWANCE.lines) if isinstance(valve, AllowanceStated) else None,
    )


def _si(stated: Quantity, lines: Mapping[str, tuple[float, float]]) -> float:
    value, unit = stated.value, stated.unit  # type: ignore[attr-defined]  # every quantity has both
    scale, offset = lines[unit]
    return float(scale * value + offset)


def _tubes(question: questions.LoopQuestion) -> dict[str, TubeGround]:
    found = {}
    for index, run in enumerate(question.pipe_runs):
        for k, segment in enumerate(run.segments):
            tube = segment.tube
            place = f"/pipeRuns/{index}/segments/{k}"
            if isinstance(tube, pipes.StandardTube):
                found[place] = TubeGround(row=tube_of_standard(tube.standard, tube.size))
            elif isinstance(tube, pipes.BoreTube):
                found[place] = TubeGround(bore=_si(tube.bore, _BORE.lines))
    return found


def _collector(group: collectors.CollectorGroup, k: int, reading: Reading) -> CollectorGround:
    place = f"/collectors/{k}"
    aperture = f"{place}/area" if group.area_basis == "aperture" else f"{place}/apertureArea"
    areas = coefficients = measured = None
    stated = group.coefficients
    if stated is not None and stated.basis != "aperture":
        coefficients = (stated.eta0, _si(stated.a1, _A1.lines), _si(stated.a2, _A2.lines))
        one = reading.loop.groups[k].aperture / group.count
        areas = (_area(group, stated.basis, place), (one, aperture))
    if group.measured_stagnation is not None:
        seen = group.measured_stagnation
        measured = (
            _si(seen.temperature, _MEASURED["temperature"].lines),
            _si(seen.irradiance, _MEASURED["irradiance"].lines),
            _si(seen.ambient, _MEASURED["ambient"].lines),
        )
    power = worse = ""
    emptying = reading.loop.groups[k].emptying
    if emptying != "measured":
        power = f"steam-power-{group.type}-{emptying}"
        worse = f"steam-power-{group.type}-{_WORSE[emptying]}" if emptying in _WORSE else ""
    return CollectorGround(
        aperture=aperture, areas=areas, coefficients=coefficients, measured=measured, power=power, worse=worse
    )


def _area(group: collectors.CollectorGroup, basis: str, place: str) -> tuple[float, str]:
    """The area a test refers to, m2, and where it is stated."""
    if group.area_basis == basis:
        return _si(group.area, _AREA.lines), f"{place}/area"
    stated = {"gross": group.gross_area, "absorber": group.absorber_area}[basis]
    if stated is None:  # reading refuses coefficients on an area that is not stated
        raise TypeError(f"the {basis} area is not stated")
    return _si(stated, _AREA.lines), f"{place}/{basis}Area"


def _fluid(fluid: fluids.Fluid) -> FluidGround:
    if isinstance(fluid, fluids.PropyleneGlycol | fluids.EthyleneGlycol):
        strength = fluid.concentration
        if isinstance(strength, fluids.ByVolume):
            return FluidGround(way="by-volume", number=_si(strength.share, _VOLUME_SHARE.lines))
        if isinstance(strength, fluids.ProtectTo):
            return FluidGround(way="protect-to", number=_si(strength.temperature, _PROTECT.lines))
    return FluidGround()


def _vessels(question: questions.LoopQuestion) -> dict[str, str]:
    """Pointers of the articles by the names reading gives them."""
    if isinstance(question, questions.VesselQuestion):
        return {question.vessel.id or "given": "/vessel"}
    choice = question.vessel if isinstance(question, questions.SizingQuestion) else None
    if isinstance(choice, vessels.GivenVessel):
        return {choice.id or "given": "/vessel"}
    if isinstance(choice, vessels.FromStock):
        return {item.id: f"/vessel/items/{k}" for k, item in enumerate(choice.items)}
    return {}


def _heights(question: questions.LoopQuestion) -> frozenset[str]:
    collectors_stated = {
        f"/collectors/{k}/height" for k, group in enumerate(question.collectors) if group.height is not None
    }
    ends_stated = {
        f"/pipeRuns/{index}/segments/{k}/endHeight"
        for index, run in enumerate(question.pipe_runs)
        for k, segment in enumerate(run.segments)
        if segment.end_height is not None
    }
    return frozenset(collectors_stated | ends_stated)


def _fill(question: questions.LoopQuestion, atmosphere: float) -> tuple[float, str] | None:
    """A stated fill pressure, Pa absolute, and its pointer; None where it is recommended."""
    stated, pointer = None, "/fillPressure"
    if isinstance(question, questions.StagnationCheckQuestion):
        stated = question.fill_pressure
    elif isinstance(question, questions.SizingQuestion) and isinstance(question.vessel, vessels.GivenVessel):
        stated, pointer = question.vessel.fill_pressure, "/vessel/fillPressure"
    if stated is None:
        return None
    datum = atmosphere if stated.unit in GAUGE_UNITS else 0.0
    return _FILL.lines[stated.unit][0] * stated.value + datum, pointer
