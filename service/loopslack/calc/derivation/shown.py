"""Steps of the vessel an answer shows: its window, its filling, its liquid states, its stagnation in the base case."""

from loopslack.calc.derivation.charge import Filled, charged_article, filled_to
from loopslack.calc.derivation.equilibrium import RestValues, at_rest
from loopslack.calc.derivation.frame import Frame, StateValues
from loopslack.calc.derivation.window import WindowSteps, WindowValues
from loopslack.calc.fit import Fit
from loopslack.calc.judge import membrane_full
from loopslack.calc.judgement import Judgement, StateResult
from loopslack.calc.scenarios import BASE
from loopslack.kernel import kinds
from loopslack.kernel.value import Value
from loopslack.physics import balance, balance_pressure, balance_steam, statics, vessel


class ShownSteps:
    """Writes one judged vessel in its loop. ``tag`` is empty: this is the vessel the answer speaks of."""

    def __init__(self, frame: Frame, fitted: Fit, judgement: Judgement, *, settings: bool) -> None:
        self.frame, self.book, self.fitted, self.judgement = frame, frame.book, fitted, judgement
        self.settings = settings
        self.charged = charged_article(frame, fitted.vessel, fitted.pieces)
        self.steps = WindowSteps(frame, self.charged, fitted.gas, "")

    def window(self) -> WindowValues:
        """The fill window."""
        book, window = self.book, self.fitted.window
        found = self.steps.write(window, self.membrane_limit())
        lower, upper = found.lower, found.upper
        if not self.fitted.counted or lower is None or upper is None or not lower.si < upper.si:
            return found
        for end, value in (("lower", lower), ("upper", upper)):
            gauge = self.gauge(value, f"fill pressure, {end} bound, gauge")
            book.report(gauge, f"/result/window/{end}", *self._card(f"/window/{end}"))
        width = book.step(
            balance_pressure.pressure_residual, "width of the window", first=upper, second=lower
        )
        book.report(width, "/result/window/width", *self._card("/window/width"))
        return found

    def stated_fill(self, number: float, pointer: str) -> Value:
        """A fill pressure that the question states."""
        book, air = self.book, self.frame.site.atmosphere
        book.chapter = "filling"
        reading = book.leaf(number - air.si, kinds.GAUGE_PRESSURE, "fill pressure as stated", pointer)
        return book.step(statics.absolute_from_gauge, "fill pressure", gauge=reading, atmosphere=air)

    def recommended_fill(self, window: WindowValues) -> Value:
        """The fill pressure that is recommended."""
        book, frame = self.book, self.frame
        book.chapter = "filling"
        if window.lower is None:
            return window.base
        return book.step(
            balance_pressure.recommended_fill,
            "recommended fill pressure",
            lower_bound=window.lower,
            distance=frame.leaves.criterion("window_step"),
            least=window.base,
        )

    def filled(self, pressure: Value) -> Filled:
        """The vessel when filled."""
        self.book.chapter = "filling"
        return filled_to(self.frame, self.charged, pressure)

    def liquid_states(self, filled: Filled) -> None:
        """Filled, cold, operating and at the cut-off: what the vessel holds and shows."""
        frame = self.frame
        values = {
            "fill": frame.fill,
            "cold": frame.cold,
            "operating": frame.operating,
            "cut-off": frame.cut_off,
        }
        for number, state in enumerate(self.judgement.states):
            self._liquid_state(values[state.id], state, filled, f"/result/states/{number}")

    def stagnation(self, filled: Filled) -> RestValues | None:
        """Stagnation in the base case; None where it could not be computed."""
        found = self.judgement.stagnation.get(BASE.id)
        if found is None:
            return None
        rest = at_rest(self.frame, BASE, self.charged, filled, found, "in stagnation")
        self._report_stagnation(rest)
        return rest

    def membrane_limit(self) -> Value:
        """The membrane's limit: the article's own, else the criterion."""
        article = self.fitted.vessel
        if article.membrane_limit is None:
            return self.frame.leaves.criterion("membrane_limit")
        pointer = f"{self.frame.parts.ground.vessels.get(article.id, '/vessel')}/membraneLimit"
        return self.book.leaf(article.membrane_limit, kinds.TEMPERATURE, "membrane limit", pointer)

    def gauge(self, absolute: Value, name: str) -> Value:
        """A pressure as the site reads it."""
        air = self.frame.site.atmosphere
        return self.book.step(statics.gauge_from_absolute, name, pressure=absolute, atmosphere=air)

    def _card(self, member: str) -> tuple[str, ...]:
        return (f"/result/settings{member}",) if self.settings else ()

    def _liquid_state(self, state: StateValues, result: StateResult, filled: Filled, place: str) -> None:
        book, charged = self.book, self.charged
        book.chapter = "states"
        liquid = filled.liquid
        if state.id != "fill":
            liquid = book.step(
                balance.liquid_in_vessel,
                f"liquid in the vessel, {state.id}",
                filled=filled.mass,
                expelled=state.expelled,
                density=state.density,
                allowance=state.allowance,
            )
        book.report(liquid, f"{place}/vesselLiquid")
        if result.pressure is None:  # the vessel is empty or full: its pressure is not defined
            return
        pressure = book.step(
            vessel.gas_pressure,
            f"pressure of the vessel, {state.id}",
            nominal_volume=charged.nominal,
            precharge=charged.precharge,
            liquid=liquid,
            gas_temperature=state.temperature,
            precharge_temperature=charged.temperature,
        )
        top, gauge = (
            book.step(
                statics.pressure_at_height,
                f"pressure at the {name}, {state.id}",
                pressure=pressure,
                density=density,
                height=height,
            )
            for name, density, height in (
                ("highest point", state.column_density, self.frame.leaves.top),
                ("gauge", state.density, self.frame.leaves.gauge),
            )
        )
        self._report_gauge(pressure, f"{place}/vesselPressure")
        if result.top_pressure is not None:
            self._report_gauge(top, f"{place}/topPressure")
        if result.gauge_pressure is not None:
            self._report_gauge(gauge, f"{place}/gaugeReading")

    def _report_gauge(self, absolute: Value, pointer: str) -> None:
        self.book.report(self.gauge(absolute, f"{absolute.name}, gauge"), pointer)

    def _report_stagnation(self, rest: RestValues) -> None:
        book, place = self.book, "/result/stagnation/0"
        found = self.judgement.stagnation[BASE.id]
        if rest.pressure is not None and rest.liquid.si >= 0 and not membrane_full(found, self.fitted.gas):
            self._report_gauge(rest.pressure, f"{place}/vesselPressure")
        for value, member in (
            (rest.liquid, "vesselLiquid"),
            (rest.gas, "gasTemperature"),
            (rest.mixed, "mixedTemperature"),
            (rest.last, "lastArrivingTemperature"),
            (max((s.temperature for s in rest.spaces), key=lambda value: value.si), "steamTemperature"),
        ):
            book.report(value, f"{place}/{member}")
        contents = [space.content for space in rest.spaces if space.content is not None]
        powers = [space.power for space in rest.spaces if space.power is not None]
        if contents:
            whole = book.sum(balance.content_sum, "steam volume in stagnation", contents)
            book.report(whole, f"{place}/steamVolume")
        if powers:
            total = book.sum(balance_steam.power_sum, "steam power in stagnation", powers)
            book.report(total, f"{place}/steamPower")
        if rest.unspent is not None:
            book.report(rest.unspent, f"{place}/unspentPower")
        number = 0
        spaces = self.frame.analysis.case(BASE).balance.spaces
        for space, values in zip(spaces, rest.spaces, strict=True):
            for k in range(len(space.path.branches)):
                if k < len(values.reaches):
                    book.report(values.reaches[k], f"{place}/reach/{number}/reach")
                number += 1
