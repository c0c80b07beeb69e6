"""Answers the two questions that need no whole loop: contents, and the expansion of a fluid."""

from loopslack.calc.fluids.base import Fluid
from loopslack.contract.answers import operations as answers
from loopslack.contract.answers.loop import PartKind
from loopslack.contract.questions import operations as questions
from loopslack.contract.reading.small import ExpansionReading, read_contents, read_expansion
from loopslack.contract.writing.loop import Held, Pressures, content
from loopslack.contract.writing.quantities import Writer, writer
from loopslack.contract.writing.shared import CAUTIONS, assumptions, provenance
from loopslack.kernel.errors import CalculationError

_KINDS: dict[str, PartKind] = {
    "collectors": "collectors",
    "flow": "pipe-run",
    "return": "pipe-run",
    "station": "station",
    "vessel-line": "vessel-line",
    "cooling-vessel": "cooling-vessel",
}


def compute_loop_volume(question: questions.LoopVolumeQuestion) -> answers.LoopVolumeAnswer:
    """Answer a loop volume question."""
    reading = read_contents(question)
    held = [
        Held(_KINDS[part.part], part.name, part.content, part.pointer, part.pieces) for part in reading.parts
    ]
    return answers.LoopVolumeAnswer(
        result=answers.LoopVolumeResult(content=content(held, writer(reading.system), reading.assumed)),
        assumptions=assumptions(reading.assumed, reading.system),
        advisories=[],
        cautions=CAUTIONS,
        provenance=provenance(),
    )


def compute_expansion(question: questions.ExpansionQuestion) -> answers.ExpansionAnswer:
    """Answer an expansion question; a temperature at which the fluid is no liquid is refused."""
    reading = read_expansion(question)
    write, fluid = writer(reading.system), reading.fluid
    pressure = Pressures(write, reading.atmosphere)
    relative = fluid.expansion(reading.start, reading.end)
    boiling = _boiling(fluid, reading)
    result = answers.ExpansionResult(
        mass_concentration=write.mass_percent(fluid.mass_fraction),
        volume_concentration=write.volume_percent(fluid.volume_fraction),
        start=_state(fluid, reading.start, write, pressure),
        end=_state(fluid, reading.end, write, pressure),
        relative_expansion=write.ratio(relative),
        expansion_volume=None if reading.content is None else write.volume(relative * reading.content),
        freezing_point=write.temperature(fluid.freezing_point),
        boiling_point=None if boiling is None else write.temperature(boiling),
        boiling_pressure=None if boiling is None else pressure(reading.pressure),
    )
    return answers.ExpansionAnswer(
        result=result,
        assumptions=assumptions(reading.assumed, reading.system),
        advisories=[],
        cautions=CAUTIONS,
        provenance=provenance(),
    )


def _boiling(fluid: Fluid, reading: ExpansionReading) -> float | None:
    """Boiling point, K; none where the bubble line is not known at that pressure."""
    try:
        return fluid.boiling_temperature(reading.pressure)
    except CalculationError:
        return None


def _state(fluid: Fluid, temperature: float, write: Writer, pressure: Pressures) -> answers.FluidState:
    bubble = None
    if fluid.boiling_lowest <= temperature <= fluid.boiling_highest:
        bubble = pressure(fluid.bubble_pressure(temperature))
    try:
        heat = write.specific_heat(fluid.heat_capacity(temperature))
    except CalculationError:
        heat = None
    return answers.FluidState(
        temperature=write.temperature(temperature),
        density=write.density(fluid.density(temperature)),
        bubble_pressure=bubble,
        heat_capacity=heat,
    )
