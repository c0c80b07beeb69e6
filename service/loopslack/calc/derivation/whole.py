"""The derivation of a whole answer: every computed number it shows, in the order in which a reader would redo them.

The base case is written out. Every doubt is computed with the same equations from its own stagnation temperature,
steam power, open runs or gas temperature; where a doubt sets a bound of the window, its steam is written out too.
"""

from collections.abc import Sequence
from math import isfinite

from loopslack.calc.analysis import Analysis
from loopslack.calc.derivation.book import Book
from loopslack.calc.derivation.charge import Filled
from loopslack.calc.derivation.frame import Frame
from loopslack.calc.derivation.ground import Ground
from loopslack.calc.derivation.order import write_closed_forms, write_order
from loopslack.calc.derivation.parts import Parts
from loopslack.calc.derivation.shown import ShownSteps
from loopslack.calc.derivation.site import Site
from loopslack.calc.derivation.volumes import VolumeSteps, close_cooling, cooling_content
from loopslack.calc.design import Design
from loopslack.calc.existing import Checked
from loopslack.calc.fit import Fit
from loopslack.calc.judge import required
from loopslack.calc.scenarios import BASE, Scenario
from loopslack.kernel.value import Value

_CARD = "/result/settings"


def derive_design(found: Design, ground: Ground, *, sizing: bool = False) -> Book:
    """Derive a design: the vessel shown, the volumes, the order list; ``sizing`` where only a sizing is answered."""
    whole = _Whole(found.analysis, found.shown, ground)
    window_shown = _has_window(found.shown)
    shown = whole.shown(found.shown, found, settings=window_shown)
    window = shown.window()
    fill = ground.fill
    pressure = shown.recommended_fill(window) if fill is None else shown.stated_fill(*fill)
    gauge = shown.gauge(pressure, "fill pressure, gauge")
    if window_shown:
        whole.book.report(gauge, "/result/window/recommended", f"{_CARD}/fillPressure")
        whole.book.report(gauge, f"{_CARD}/window/recommended")
        final = shown.gauge(whole.site.final, "final pressure, gauge")
        whole.book.report(final, f"{_CARD}/finalPressure")
    precharge = shown.gauge(shown.charged.precharge, "precharge, gauge")
    if sizing:
        whole.book.report(precharge, "/result/precharge")
    elif window_shown:
        whole.book.report(precharge, f"{_CARD}/precharge")
    filled = whole.at_rest(shown, pressure)
    scenarios: Sequence[Scenario] = required(found.analysis, found.request.policy)
    own = found.shown.under or scenarios
    whole.cooling(shown, tuple(own))
    volumes = VolumeSteps(whole.parts, whole.site)
    sets = {"base": (BASE,), "recommended": tuple(scenarios), "robust": found.analysis.every}
    for name, sized in zip(sets, found.volumes, strict=True):
        if sized is not None:
            volumes.write(sized, sets[name], name)
    if sizing:
        whole.book.keep_reported("/result/window/", "/result/volumes/", "/result/precharge")
        return whole.book
    write_order(whole.frame, filled)
    if window_shown:
        write_closed_forms(whole.frame, shown.charged)
    return whole.book


def derive_check(found: Checked, ground: Ground) -> Book:
    """Derive a stagnation check of a given vessel."""
    whole = _Whole(found.fitted.analysis, found.fitted, ground)
    shown = whole.shown(found.fitted, found, settings=False)
    window = shown.window()
    pressure = shown.recommended_fill(window)
    if _has_window(found.fitted):
        recommended = shown.gauge(pressure, "recommended fill pressure, gauge")
        whole.book.report(recommended, "/result/window/recommended")
    if ground.fill is not None:
        pressure = shown.stated_fill(*ground.fill)
    if isfinite(found.fill_pressure):
        whole.book.report(shown.gauge(pressure, "fill pressure, gauge"), "/result/fillPressure")
    gauge = shown.gauge(shown.charged.precharge, "precharge, gauge")
    whole.book.report(gauge, "/result/precharge")
    whole.at_rest(shown, pressure)
    return whole.book


def _has_window(fitted: Fit) -> bool:
    window = fitted.window
    return (
        fitted.counted and isfinite(window.lower) and isfinite(window.upper) and window.upper > window.lower
    )


class _Whole:
    """Parts, site and the frame of the vessel shown."""

    def __init__(self, analysis: Analysis, fitted: Fit, ground: Ground) -> None:
        self.book = Book(ground.assumed)
        self.parts = Parts(self.book, analysis.loop, ground)
        self.site = Site(self.parts, ground.allowance)
        self._site()
        content = fitted.analysis.loop.cooling_content
        self.content, self.root = cooling_content(self.parts, content, "", fitted.cooling_times)
        self.frame = Frame(self.parts, self.site, fitted.analysis, self.content)

    def shown(self, fitted: Fit, found: Design | Checked, *, settings: bool) -> ShownSteps:
        """Contents and states first, then the vessel."""
        self._contents()
        frame = self.frame
        for state in (frame.cold, frame.operating, frame.cut_off):
            frame.column(state)
        return ShownSteps(frame, fitted, found.judgement, settings=settings)

    def at_rest(self, shown: ShownSteps, pressure: Value) -> Filled:
        """The vessel filled, its liquid states and its stagnation."""
        filled = shown.filled(pressure)
        shown.liquid_states(filled)
        shown.stagnation(filled)
        return filled

    def cooling(self, shown: ShownSteps, scenarios: tuple[Scenario, ...]) -> None:
        """Close the cooling vessel's content, if it was sized."""
        if self.root and shown.steps.lower_mass is not None:
            close_cooling(
                shown.steps, self.content, shown.steps.lower_mass, shown.membrane_limit(), scenarios
            )

    def _site(self) -> None:
        _ = self.site.atmosphere
        self.book.chapter = "fluid"
        if self.parts.loop.fluid.kind in ("propylene-glycol", "ethylene-glycol"):
            _ = self.parts.fluid.strength
        _ = self.parts.fluid.freezing

    def _contents(self) -> None:
        book, parts, frame = self.book, self.parts, self.frame
        contents = [*(group.content for group in parts.groups), *parts.run_contents]
        for number, value in enumerate(contents):
            book.report(value, f"/result/content/parts/{number}/content")
        book.report(parts.collectors, "/result/content/collectors")
        book.report(parts.pipes, "/result/content/pipes")
        book.report(frame.content, "/result/content/total")
        hottest = max((group.stagnation for group in parts.groups), key=lambda value: value.si)
        book.report(hottest, "/result/stagnation/0/stagnationTemperature")
        for run in parts.runs:
            for stretch in run:
                parts.conductance(stretch)
        _ = self.site.final
