"""Steps of the parts: what each holds and what each pipe loses. When collectors stagnate is in ``collectors``.

Everything that does not depend on the vessel, its cooling vessel or a doubt; written once per derivation.
"""

from functools import cached_property
from typing import NamedTuple

from loopslack.calc.derivation.book import Book
from loopslack.calc.derivation.collectors import CollectorSteps, GroupValues
from loopslack.calc.derivation.fluid import FluidSteps
from loopslack.calc.derivation.ground import Ground, TubeGround
from loopslack.calc.derivation.leaves import Leaves
from loopslack.calc.model import Branch, Loop, Segment
from loopslack.kernel import kinds
from loopslack.kernel.value import Value
from loopslack.physics import balance, geometry, heat_loss

_PLAIN = TubeGround()
_NEW = 1e-12


class SegmentValues(NamedTuple):
    """A stretch of pipe in the book."""

    segment: Segment
    length: Value
    area: Value
    content: Value
    place: str
    name: str


class Parts:
    """Writes the parts of a loop."""

    def __init__(self, book: Book, loop: Loop, ground: Ground) -> None:
        self.book, self.loop, self.ground = book, loop, ground
        self.leaves = Leaves(book, loop)
        self.fluid = FluidSteps(book, loop.fluid, ground.fluid)
        self._conductances: dict[str, Value] = {}

    @cached_property
    def groups(self) -> list[GroupValues]:
        """The collector groups."""
        self.book.chapter = "collectors"
        writer = CollectorSteps(self.book, self.loop, self.ground, self.leaves)
        return [writer.write(number, group) for number, group in enumerate(self.loop.groups)]

    @cached_property
    def runs(self) -> list[list[SegmentValues]]:
        """The pipe runs, stretch by stretch."""
        self.book.chapter = "content"
        return [
            [self._segment(branch, index, k, segment) for k, segment in enumerate(branch.segments)]
            for index, branch in enumerate(self.loop.branches)
        ]

    @cached_property
    def run_contents(self) -> list[Value]:
        """The content of each pipe run."""
        runs = self.runs
        self.book.chapter = "content"
        return [
            self.book.sum(balance.content_sum, f"content of {branch.name}", [s.content for s in runs[k]])
            for k, branch in enumerate(self.loop.branches)
        ]

    @cached_property
    def collectors(self) -> Value:
        """The content of all collectors."""
        groups = self.groups
        self.book.chapter = "content"
        return self.book.sum(
            balance.content_sum, "content of the collectors", [group.content for group in groups]
        )

    @cached_property
    def pipes(self) -> Value:
        """The content of all pipe runs."""
        return self.total(self.run_contents, "content of the pipes")

    def total(self, contents: list[Value], name: str) -> Value:
        """The sum of contents; of none it is nought, as the list of runs says."""
        if not contents:
            return self.leaves.none(kinds.VOLUME, name)
        return self.book.sum(balance.content_sum, name, contents)

    def conductance(self, stretch: SegmentValues) -> Value:
        """What a stretch loses per metre and kelvin."""
        found = self._conductances.get(stretch.place)
        if found is None:
            found = self._conductances[stretch.place] = self._conductance(stretch)
        return found

    def _conductance(self, stretch: SegmentValues) -> Value:
        book, segment, place = self.book, stretch.segment, stretch.place
        book.chapter = "pipes"
        insulation = f"{place}/insulation"
        if segment.insulation > 0:
            pointer = f"{insulation}/thickness"
            conductivity = book.leaf(
                segment.conductivity, kinds.CONDUCTIVITY, "conductivity", f"{insulation}/conductivity"
            )
        else:
            pointer = insulation
            conductivity = self.leaves.default("insulation-conductivity")
        new = book.step(
            heat_loss.pipe_conductance,
            f"heat loss per metre and kelvin of {stretch.name}",
            outer_diameter=self._outer(segment, place),
            insulation_thickness=book.leaf(segment.insulation, kinds.LENGTH, "insulation thickness", pointer),
            conductivity=conductivity,
            film_coefficient=self.leaves.default("film-coefficient"),
        )
        factor = segment.conductance / new.si
        if abs(factor - 1.0) < _NEW:
            return new
        return book.step(
            balance.weathered_conductance,
            f"weathered heat loss per metre and kelvin of {stretch.name}",
            loss_factor=book.leaf(factor, kinds.RATIO, "loss factor", f"{insulation}/lossFactor"),
            conductance=new,
        )

    def _outer(self, segment: Segment, place: str) -> Value:
        row = self.ground.tubes.get(place, _PLAIN).row
        if row is None:
            pointer = f"{place}/tube/outerDiameter"
            return self.book.leaf(segment.outer_diameter, kinds.LENGTH, "outer diameter", pointer)
        return self.book.tabulated(
            row.outer_diameter, kinds.LENGTH, "outer diameter", row.standard, row.size, row.source
        )

    def _segment(self, branch: Branch, index: int, k: int, segment: Segment) -> SegmentValues:
        book = self.book
        place = f"/pipeRuns/{index}/segments/{k}"
        name = branch.name
        if len(branch.segments) > 1:
            name = f"stretch {k + 1} of {name}"
        length = book.leaf(segment.length, kinds.LENGTH, f"length of {name}", f"{place}/length")
        area = self._area(segment, place)
        content = book.step(geometry.pipe_content, f"content of {name}", content=area, length=length)
        return SegmentValues(segment, length, area, content, place, name)

    def _area(self, segment: Segment, place: str) -> Value:
        """Content per length, from the tube as it was named."""
        book, tube = self.book, self.ground.tubes.get(place, _PLAIN)
        if tube.row is not None:
            row = tube.row
            if (
                abs(row.outer_diameter - 2 * row.wall - row.bore) > 1e-12
            ):  # listed by its content, not by its wall
                return book.tabulated(
                    row.content,
                    kinds.CONTENT_PER_LENGTH,
                    "content per length",
                    row.standard,
                    row.size,
                    row.source,
                )
            bore = book.step(
                geometry.bore_of_tube,
                f"bore of {row.size}",
                outer_diameter=self._outer(segment, place),
                wall=book.tabulated(row.wall, kinds.LENGTH, "wall", row.standard, row.size, row.source),
            )
        elif tube.bore is not None:
            bore = book.leaf(tube.bore, kinds.LENGTH, "bore", f"{place}/tube/bore")
        else:
            pointer = f"{place}/tube/contentPerLength"
            return book.leaf(segment.area, kinds.CONTENT_PER_LENGTH, "content per length", pointer)
        return book.step(geometry.content_per_length, "content per length", bore=bore)
