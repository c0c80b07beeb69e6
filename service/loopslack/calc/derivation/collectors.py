"""Steps of the collectors: areas, contents, coefficients on the aperture, stagnation temperatures."""

from typing import NamedTuple

from loopslack.calc.derivation.book import Book
from loopslack.calc.derivation.ground import CollectorGround, Ground
from loopslack.calc.derivation.leaves import Leaves
from loopslack.calc.model import CollectorGroup, Loop
from loopslack.kernel import kinds
from loopslack.kernel.value import Value
from loopslack.physics import balance, balance_steam, collector, collector_area


class GroupValues(NamedTuple):
    """A collector group in the book, coefficients on the aperture."""

    group: CollectorGroup
    number: int
    place: str
    name: str
    pieces: Value
    aperture: Value
    content: Value
    efficiency: Value
    linear: Value
    quadratic: Value
    stagnation: Value


class CollectorSteps:
    """Writes the collector groups of a loop."""

    def __init__(self, book: Book, loop: Loop, ground: Ground, leaves: Leaves) -> None:
        self.book, self.loop, self.ground, self.leaves = book, loop, ground, leaves

    def write(self, number: int, group: CollectorGroup) -> GroupValues:
        """Write one group."""
        book = self.book
        place = f"/collectors/{number}"
        ground = self.ground.collectors.get(number) or CollectorGround(aperture=f"{place}/area")
        name = group.name
        count = book.leaf(float(group.count), kinds.RATIO, "how many collectors", f"{place}/count")
        one = book.leaf(group.aperture / group.count, kinds.AREA, "aperture of one", ground.aperture)
        aperture = book.step(balance_steam.area_of_equal, f"aperture of {name}", pieces=count, area=one)
        held = book.leaf(group.content / group.count, kinds.VOLUME, "content of one", f"{place}/content")
        content = book.step(balance.content_of_equal, f"content of {name}", pieces=count, content=held)
        efficiency, linear, quadratic = self._coefficients(group, place, ground)
        stagnation = book.step(
            collector.stagnation_temperature,
            f"stagnation temperature of {name}",
            optical_efficiency=efficiency,
            irradiance=self.leaves.irradiance,
            linear_loss=linear,
            quadratic_loss=quadratic,
            ambient=self.leaves.ambient,
        )
        if group.measured_stagnation:
            stagnation = self._measured(group, place, ground, (linear, quadratic), stagnation)
        return GroupValues(
            group, number, place, name, count, aperture, content, efficiency, linear, quadratic, stagnation
        )

    def _coefficients(
        self, group: CollectorGroup, place: str, ground: CollectorGround
    ) -> tuple[Value, Value, Value]:
        book, here = self.book, f"{place}/coefficients"
        stated = ground.coefficients or (group.peak_efficiency, group.linear_loss, group.quadratic_loss)
        efficiency = book.leaf(stated[0], kinds.RATIO, "peak efficiency", f"{here}/eta0")
        linear = book.leaf(stated[1], kinds.HEAT_LOSS_COEFFICIENT, "linear loss", f"{here}/a1")
        quadratic = book.leaf(
            stated[2], kinds.QUADRATIC_HEAT_LOSS_COEFFICIENT, "quadratic loss", f"{here}/a2"
        )
        if ground.areas is None:
            return efficiency, linear, quadratic
        test, aperture = (
            book.leaf(area, kinds.AREA, name, pointer)
            for (area, pointer), name in zip(
                ground.areas, ("area of the test", "aperture of one"), strict=True
            )
        )
        areas = {"stated_area": test, "other_area": aperture}
        return (
            book.step(
                collector_area.optical_efficiency_on_area,
                "peak efficiency on the aperture",
                optical_efficiency=efficiency,
                **areas,
            ),
            book.step(
                collector_area.linear_loss_on_area, "linear loss on the aperture", linear_loss=linear, **areas
            ),
            book.step(
                collector_area.quadratic_loss_on_area,
                "quadratic loss on the aperture",
                quadratic_loss=quadratic,
                **areas,
            ),
        )

    def _measured(
        self,
        group: CollectorGroup,
        place: str,
        ground: CollectorGround,
        losses: tuple[Value, Value],
        computed: Value,
    ) -> Value:
        """The higher of the computed and the measured stagnation temperature, carried to the design sun."""
        book, here, sun = self.book, f"{place}/measuredStagnation", self.loop.sun
        if ground.measured is None:
            measured = book.leaf(
                group.stagnation_temperature, kinds.TEMPERATURE, "measured stagnation", f"{here}/temperature"
            )
        else:
            temperature, irradiance, ambient = ground.measured
            # The question's own member, although what it is carried to counts as assumed there.
            measured = book.stated(
                temperature, kinds.TEMPERATURE, "measured stagnation", f"{here}/temperature"
            )
            if (irradiance, ambient) != (sun.irradiance, sun.ambient):
                measured = book.step(
                    collector.stagnation_temperature_at_other_sun,
                    "measured stagnation carried to the design sun",
                    measured=measured,
                    measured_irradiance=book.leaf(
                        irradiance, kinds.IRRADIANCE, "sun measured in", f"{here}/irradiance"
                    ),
                    measured_ambient=book.leaf(
                        ambient, kinds.TEMPERATURE, "air measured in", f"{here}/ambient"
                    ),
                    linear_loss=losses[0],
                    quadratic_loss=losses[1],
                    irradiance=self.leaves.irradiance,
                    ambient=self.leaves.ambient,
                )
        return book.step(
            balance_steam.higher_temperature,
            "stagnation temperature that counts",
            first=computed,
            second=measured,
        )
