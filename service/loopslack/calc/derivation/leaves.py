"""The numbers of the loop that are no step: temperatures, criteria, heights, each at its place in the question."""

from functools import cached_property

from loopslack.calc.derivation.book import Book
from loopslack.calc.model import Loop
from loopslack.kernel import kinds
from loopslack.kernel.kinds import Kind
from loopslack.kernel.value import Value
from loopslack.library.defaults import default

_TEMPERATURES = {
    "fill": ("fill temperature", "/temperatures/fill"),
    "site_minimum": ("site minimum", "/site/coldestOutdoorTemperature"),
    "indoor_cold": ("indoor temperature in the cold", "/temperatures/indoorCold"),
    "vessel_room": ("temperature of the vessel's room", "/temperatures/vesselRoom"),
    "flow": ("flow temperature", "/temperatures/flowPipe"),
    "back": ("return temperature", "/temperatures/returnPipe"),
    "cut_off": ("cut-off temperature", "/temperatures/cutOff"),
    "hot_liquid": ("temperature of hot liquid", "/temperatures/hotLiquid"),
}
_CRITERIA: dict[str, tuple[str, str, Kind]] = {
    "reserve": ("reserve", "reserve", kinds.VOLUME),
    "top_pressure": ("least top pressure", "topPressure", kinds.GAUGE_PRESSURE),
    "window_width": ("width demanded", "windowWidth", kinds.PRESSURE_DIFFERENCE),
    "fill_above_precharge": ("fill above precharge", "fillAbovePrecharge", kinds.PRESSURE_DIFFERENCE),
    "window_step": ("distance from the bounds", "windowEdgeDistance", kinds.PRESSURE_DIFFERENCE),
    "boiling_margin": ("margin against boiling", "boilingMargin", kinds.PRESSURE_DIFFERENCE),
    "membrane_limit": ("membrane limit", "membraneLimit", kinds.TEMPERATURE),
    "fluid_allowance": ("allowance for the fluid's data", "fluidAllowance", kinds.RATIO),
    "stagnation_doubt": ("doubt about stagnation", "stagnationDoubt", kinds.TEMPERATURE_DIFFERENCE),
}


class Leaves:
    """Looks the numbers of a loop up in the book."""

    def __init__(self, book: Book, loop: Loop) -> None:
        self.book, self.loop = book, loop

    def temperature(self, name: str) -> Value:
        """A temperature of the states by its name in the loop."""
        number = getattr(self.loop.temperatures, name)
        if name == "vessel_cold":
            # As cold as the vessel's zone, which is where the question says so.
            name = "site_minimum" if self.loop.vessel_outdoor else "indoor_cold"
        title, pointer = _TEMPERATURES[name]
        return self.book.leaf(number, kinds.TEMPERATURE, title, pointer)

    def criterion(self, name: str) -> Value:
        """A criterion by its name in the loop."""
        title, member, kind = _CRITERIA[name]
        return self.book.leaf(getattr(self.loop.criteria, name), kind, title, f"/criteria/{member}")

    def height(self, number: float, name: str, pointer: str) -> Value:
        """A height."""
        return self.book.leaf(number, kinds.LENGTH, name, pointer)

    def default(self, key: str) -> Value:
        """A number of the trade that no question states."""
        row = default(key)
        return self.book.tabulated(row.si, row.kind, key.replace("-", " "), "defaults", key, row.source)

    def none(self, kind: Kind, name: str) -> Value:
        """Nought, where the loop has no such part."""
        return self.book.leaf(0.0, kind, f"{name}: there are none", "/pipeRuns")

    @cached_property
    def irradiance(self) -> Value:
        """Design sun."""
        return self.book.leaf(
            self.loop.sun.irradiance, kinds.IRRADIANCE, "design sun", "/designSun/irradiance"
        )

    @cached_property
    def ambient(self) -> Value:
        """Air of the design sun."""
        return self.book.leaf(
            self.loop.sun.ambient, kinds.TEMPERATURE, "air of the design sun", "/designSun/ambient"
        )

    @cached_property
    def top(self) -> Value:
        """Highest point."""
        return self.height(self.loop.top, "highest point", "/highestPoint")

    @cached_property
    def gauge(self) -> Value:
        """The gauge."""
        return self.height(self.loop.gauge_height, "height of the gauge", "/gauge/height")

    @cached_property
    def station(self) -> Value:
        """What the station holds."""
        content = self.loop.station.content
        return self.book.leaf(content, kinds.VOLUME, "content of the station", "/station/content")

    @cached_property
    def line(self) -> Value:
        """What the vessel line holds."""
        content = self.loop.line_content
        return self.book.leaf(content, kinds.VOLUME, "content of the vessel line", "/vesselLine/content")

    @cached_property
    def taken(self) -> Value:
        """Steam power that a cooler, or the station itself, takes."""
        power = self.loop.station.steam_loss
        return self.book.leaf(power, kinds.POWER, "what the station takes", "/station/steamCooler")
