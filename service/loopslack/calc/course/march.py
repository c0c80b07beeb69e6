"""The march through the day, with steps as long as they may be and pauses for whoever waits."""

from msgspec import Struct

from loopslack.calc.course.books import Books
from loopslack.calc.course.chronicle import Chronicle
from loopslack.calc.course.curve import Curve, Recorder
from loopslack.calc.course.lumped import LumpedLoop
from loopslack.calc.course.plant import Plant
from loopslack.calc.course.refusal import not_applicable
from loopslack.calc.course.state import State
from loopslack.calc.course.step import step
from loopslack.calc.course.transport import accept
from loopslack.calc.course.weather import Weather
from loopslack.kernel.errors import Contradiction
from loopslack.kernel.work import Work

_SHUT = 0.999  # of the closing pressure, to which the pressure falls when the valve shuts, rounding apart
_STROKES = 100  # of the valve that are followed one by one, in steps as short as may be
_SLICE = 12  # steps between two pauses: some 2 ms
_MINUTE = 60.0


class Accuracy(Struct, frozen=True, kw_only=True):
    """How finely to march; the default is within 0.3 % of volume and 1.2 % of reach of the finest tried.

    A step is repeated shorter when it changes the steam volume by more than ``volume_change`` of collectors
    and pipes, the absorber by more than ``temperature_change`` (K) or the pressure by more than
    ``pressure_change`` of the precharge, unless it is already ``shortest`` (s): a collapse of steam is an
    event that is not resolved. After ``most_steps`` tries the march gives up and says so.
    """

    cells: int = 12
    longest: float = 120.0
    longest_at_night: float = 900.0
    shortest: float = 5.0
    volume_change: float = 0.05
    temperature_change: float = 3.0
    pressure_change: float = 0.05
    most_steps: int = 4000


class March:
    """One loop on its way through a day; ``advance`` tries one step."""

    def __init__(
        self,
        loop: LumpedLoop,
        weather: Weather,
        accuracy: Accuracy | None = None,
        *,
        interval: float = _MINUTE,
    ) -> None:
        self.accuracy, self.weather = accuracy or Accuracy(), weather
        self.plant = Plant(loop, self.accuracy.cells)
        begin = weather.dawn if loop.start.time is None else loop.start.time
        self.end = weather.end
        if not begin < self.end:
            raise Contradiction(
                f"The flow stops at {begin / 3600:g} h, when the weather has ended at {self.end / 3600:g} h.",
                remedy="Let the flow stop within the stated weather.",
            )
        _refuse_frozen(loop, weather, begin)
        self.state = State(self.plant, begin, weather.ambient(begin))
        self.books = Books(self.plant, self.state)
        self.chronicle = Chronicle(self.plant, self.state)
        self.recorder = Recorder(self.plant, self.state, weather, interval)
        self.tries = self.steps = 0
        self._dt, self._strokes = _MINUTE, 0
        # No step passes over a stated irradiance, as far as these are not finer than a minute.
        self._spacing = max(_MINUTE, weather.spacing)

    @property
    def done(self) -> bool:
        """Whether the end of the weather is reached or the steps are used up."""
        return self.complete or self.tries >= self.accuracy.most_steps

    @property
    def complete(self) -> bool:
        """Whether the end of the weather is reached."""
        return self.state.time >= self.end - 1e-6

    def advance(self) -> bool:
        """Try one step; whether it was accepted."""
        accuracy, state, plant = self.accuracy, self.state, self.plant
        self.tries += 1
        dt = min(self._dt, self.end - state.time)
        taken = step(plant, state, self.weather, dt)
        change = self._change(taken.balance.volume, taken.absorber, taken.balance.vessel_pressure)
        if change > 1.0 and dt > accuracy.shortest:
            self._dt = max(accuracy.shortest, dt * max(0.2, 0.8 / change))
            return False
        if change > 1.0 and state.discharged > 0.0:
            self._strokes += 1
        before = state.volume
        accept(plant, state, taken, self.books)
        self.steps += 1
        self.books.worst_mass = max(self.books.worst_mass, abs(state.mass() / plant.mass - 1.0))
        self.chronicle.saw(plant, state, taken, before)
        self.recorder.note(plant, state)
        quiet = state.volume == 0.0 and taken.balance.collector.irradiance == 0.0
        longest = min(accuracy.longest_at_night if quiet else accuracy.longest, self._spacing)
        growth = 1.6 if change < 0.25 else 1.25 if change < 0.5 else 1.0
        self._dt = max(accuracy.shortest, min(dt * growth, longest))
        return True

    def _change(self, volume: float, absorber: float, pressure: float) -> float:
        """Largest change of a step as a share of what is allowed."""
        accuracy, state, loop = self.accuracy, self.state, self.plant.loop
        whole = loop.collector_content + self.plant.grid.content_to[-1]
        change = max(
            abs(volume - state.volume) / (accuracy.volume_change * whole),
            abs(absorber - state.absorber) / accuracy.temperature_change,
        )
        low, high = sorted((pressure, state.vessel_pressure))
        if low > loop.vessel.precharge and not self.plant.rests(low):
            allowed = accuracy.pressure_change * loop.vessel.precharge
            if self._strokes > _STROKES and loop.relief and low >= _SHUT * loop.relief.closing_pressure:
                # A valve that opens again and again keeps the pressure in its band; its every stroke is no event.
                allowed = max(allowed, high - low)
            change = max(change, (high - low) / allowed)
        return change

    def curve(self) -> Curve:
        """Course found so far."""
        books, chronicle = self.books, self.chronicle
        return Curve(
            **self.recorder.written(),
            phases=chronicle.dated(),
            largest=dict(chronicle.extremes),
            reach_at_largest=chronicle.reach_at_largest,
            saturation_at_largest=chronicle.steam_at_largest,
            flags=frozenset(chronicle.flags),
            complete=self.complete,
            steps=self.steps,
            energy=books.sums(),
            energy_residual=books.residual(self.plant, self.state),
            mass_residual=books.worst_mass,
        )


def _refuse_frozen(loop: LumpedLoop, weather: Weather, begin: float) -> None:
    """Refuse a loop whose liquid is frozen when the flow stops."""
    coldest = weather.ambient(begin) if loop.start.collectors is None else loop.start.collectors
    if coldest < loop.fluid.freezing_point:
        raise not_applicable(
            f"The collectors start at {coldest - 273.15:.4g} degC; the fluid freezes at "
            f"{loop.fluid.freezing_point - 273.15:.4g} degC.",
            remedy="Choose a stronger mixture, or a warmer start of the day.",
            pointer="/weather" if loop.start.collectors is None else "/start/collectors",
            facts={"start": coldest, "freezing": loop.fluid.freezing_point},
        )


def marching(
    loop: LumpedLoop, weather: Weather, accuracy: Accuracy | None = None, *, interval: float = _MINUTE
) -> Work[Curve]:
    """Course of one loop, pausing every few milliseconds.

    Raises ``Contradiction`` for a start after the end of the weather, ``NotApplicable`` for frozen
    collectors.
    """
    march = March(loop, weather, accuracy, interval=interval)
    yield
    while not march.done:
        for _ in range(_SLICE):
            if march.done:
                break
            march.advance()
        yield
    return march.curve()
