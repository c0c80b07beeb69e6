"""Steps of the smallest nominal volumes: each a root of its own fill window, with the cooling vessel it needs."""

from loopslack.calc.cooling import Charged as Filling
from loopslack.calc.cooling import hottest
from loopslack.calc.derivation.book import System
from loopslack.calc.derivation.charge import charged, reserve, start_precharge
from loopslack.calc.derivation.frame import Frame
from loopslack.calc.derivation.parts import Parts
from loopslack.calc.derivation.site import Site
from loopslack.calc.derivation.window import WindowSteps, WindowValues
from loopslack.calc.precharge import precharge, precharge_temperature
from loopslack.calc.scenarios import Scenario
from loopslack.calc.sizing.rules.en_12977 import STANDARD as EN_12977
from loopslack.calc.sizing.rules.en_12977 import vessel as en_12977_vessel
from loopslack.calc.sizing.volumes import Sized
from loopslack.calc.window import Gas
from loopslack.kernel import kinds
from loopslack.kernel.citations import OWN_ASSUMPTION
from loopslack.kernel.value import Value
from loopslack.physics import balance_pressure, expansion, statics

_SMALLEST = "The smallest nominal volume whose fill window is just as wide, and as far from the precharge, as demanded."
_COOLING = (
    "The smallest content that keeps the mixed temperature in the vessel at or below the membrane's limit."
)
_MET = 1e-4  # K within which a scenario is the one that sets a cooling vessel


def cooling_content(parts: Parts, content: float, tag: str, times: float = 0.0) -> tuple[Value, bool]:
    """The cooling vessel: a root where it was sized, else as given; whether it is a root.

    ``times`` tells one that was taken at so many times the content the smallest volume has, for a wider window.
    """
    book = parts.book
    if times and content > 0:
        row = f"{times:g} times the content of the recommended smallest volume's"
        name = "content of the cooling vessel"
        return book.tabulated(content, kinds.VOLUME, name, "this design", row, OWN_ASSUMPTION), False
    if parts.ground.sized_cooling and content > 0:
        book.chapter = "cooling-vessel"
        system = System(id="cooling-content", meaning=_COOLING)
        return book.unknown(content, kinds.VOLUME, f"content of the cooling vessel{tag}", system), True
    pointer = "/coolingVessel/content" if content > 0 else "/coolingVessel"
    return book.leaf(content, kinds.VOLUME, "content of the cooling vessel", pointer), False


def close_cooling(
    steps: WindowSteps, content: Value, mass: Value, limit: Value, scenarios: tuple[Scenario, ...]
) -> None:
    """Hold the mixed temperature of the scenario that sets the cooling vessel against the membrane's limit."""
    frame, gas = steps.frame, steps.gas
    frame.book.chapter = "cooling-vessel"
    filling = Filling(frame.analysis, gas, mass.si)
    worst = None
    for scenario in reversed(scenarios):
        temperature, _ = hottest(filling, (scenario,))
        if worst is None or temperature > worst[0]:
            worst = temperature, scenario
        if abs(temperature - limit.si) < _MET:
            break
    if worst is not None:
        residual, closing = steps.membrane_residual(worst[1], mass, limit)
        frame.book.close(content, closing, residual)


class VolumeSteps:
    """Writes the volumes of a design."""

    def __init__(self, parts: Parts, site: Site) -> None:
        self.parts, self.site, self.book = parts, site, parts.book

    def write(self, sized: Sized, scenarios: tuple[Scenario, ...], name: str) -> None:
        """Write one of the volumes and note where the answer shows it."""
        parts, book, interval = self.parts, self.book, sized.interval
        tag, place = f", smallest {name}", f"/result/volumes/{name}"
        cooling, root = cooling_content(parts, sized.cooling, tag)
        frame = Frame(parts, self.site, sized.analysis, cooling)
        book.chapter = "volumes"
        system = System(id="smallest-volume", meaning=_SMALLEST)
        title = f"smallest nominal volume, {name}"
        nominal = book.unknown(interval.smallest, kinds.NOMINAL_VOLUME, title, system)
        steps, limit = self._steps(frame, nominal, tag), parts.leaves.criterion("membrane_limit")
        window = steps.write(interval.window, limit)
        _close(frame, nominal, window, tag)
        gauge = book.step(
            statics.gauge_from_absolute,
            f"precharge, gauge{tag}",
            pressure=steps.charged.precharge,
            atmosphere=self.site.atmosphere,
        )
        book.report(gauge, f"{place}/precharge")
        book.report(cooling, f"{place}/coolingContent")
        book.report(nominal, f"{place}/smallest")
        lowest = steps.lower_mass
        if sized.floor > interval.smallest:
            floor = self._floor(frame)
            book.report(floor, f"{place}/smallest", f"{place}/floor")
            steps = self._steps(frame, floor, tag)
        if root and lowest is not None:
            close_cooling(steps, cooling, lowest, limit, scenarios)

    def _steps(self, frame: Frame, nominal: Value, tag: str) -> WindowSteps:
        analysis = frame.analysis
        number = nominal.si
        gas = Gas(number, precharge(analysis, number), precharge_temperature(analysis))
        return WindowSteps(frame, charged(frame, nominal), gas, tag)

    def _floor(self, frame: Frame) -> Value:
        """The volume of EN 12977, asked for of a loop that relies on not boiling."""
        book = self.book
        book.chapter = "volumes"
        growth = book.step(
            expansion.relative_expansion,
            "expansion from filled to hot",
            cold_density=frame.fill_density,
            hot_density=frame.hot_density,
        )
        if frame.loop.criteria.reserve is None:
            large = book.tabulated(
                1.0, kinds.NOMINAL_VOLUME, "any vessel above 15 L", "en-12977", "reserve", EN_12977
            )
            kept = reserve(frame, large)
        else:
            kept = reserve(frame, growth)
        return book.step(
            en_12977_vessel,
            "volume of EN 12977",
            content=frame.content,
            expansion=growth,
            collectors=self.parts.collectors,
            reserve=kept,
            final_pressure=self.site.final,
            precharge=start_precharge(frame),
        )


def _close(frame: Frame, nominal: Value, window: WindowValues, tag: str) -> None:
    """Of the two demands on a window, the tighter one closes the volume."""
    if window.lower is None or window.upper is None:
        return
    book, leaves = frame.book, frame.leaves
    book.chapter = "volumes"
    wide, apart = (
        book.step(
            balance_pressure.window_slack,
            f"{title}{tag}",
            upper=window.upper,
            lower=lower,
            demanded=leaves.criterion(name),
        )
        for title, lower, name in (
            ("width beyond what is demanded", window.lower, "window_width"),
            ("distance from the precharge beyond what is demanded", window.base, "window_step"),
        )
    )
    residual = wide if wide.si <= apart.si else apart
    book.close(nominal, [window.lower, window.upper, window.base, wide, apart], residual)
