"""Steps of the steam front: how far steam fills each open run, and what the filled pipes lose.

Where the front stands is a root; its equation, that the filled lengths lose the whole steam power, follows it.
"""

from typing import NamedTuple

from loopslack.calc.balance import is_open
from loopslack.calc.derivation.book import System
from loopslack.calc.derivation.frame import Frame
from loopslack.calc.derivation.parts import SegmentValues
from loopslack.calc.scenarios import Scenario
from loopslack.calc.steam import SteamSpace
from loopslack.calc.steam_state import Steam
from loopslack.kernel import kinds
from loopslack.kernel.value import Value
from loopslack.physics import balance, balance_steam, heat_loss

_SAME = 1e-9  # of a share or a metre: the rounding of heights and lengths


class FrontValues(NamedTuple):
    """The front in the book; ``left`` is the power the runs do not lose, None where there is none to lose."""

    reaches: list[Value]
    filled: list[tuple[SegmentValues, Value]]
    height: Value
    left: Value | None


class FrontSteps:
    """Writes the front of one steam space."""

    def __init__(self, frame: Frame, scenario: Scenario, space: SteamSpace, found: Steam, tag: str) -> None:
        self.frame, self.book, self.parts = frame, frame.book, frame.parts
        self.path, self.found, self.tag = space.path, found, tag
        number = space.groups[0].space
        branches = frame.loop.branches
        self.indices = [k for k, b in enumerate(branches) if b.space == number and is_open(b, scenario)]
        self.start = frame.leaves.height(
            space.path.heights[0], "height of the collectors", self._height_pointer(space)
        )

    def open_content(self) -> Value:
        """Content of the open runs."""
        contents = [self.parts.run_contents[index] for index in self.indices]
        return self.parts.total(contents, f"content of the runs open to steam {self.tag}")

    def write(self, power: Value, temperature: Value) -> FrontValues:
        """Write where the steam of a power ends."""
        if not self.indices:
            return FrontValues([], [], self.start, power)
        if power.si <= 0:
            return FrontValues([], [], self.start, None)
        reaches, height, roots = self._reaches()
        filled = [
            pair
            for index, reach in zip(self.indices, reaches, strict=True)
            for pair in self._filled(index, reach)
        ]
        losses = [self._loss(stretch, length, temperature) for stretch, length in filled]
        lost = self.book.sum(balance_steam.power_sum, f"heat lost by the filled pipes {self.tag}", losses)
        left = self.book.step(
            balance_steam.power_left,
            f"steam power less what the filled pipes lose {self.tag}",
            steam_power=power,
            lost=lost,
        )
        for root in roots:
            self.book.close(root, [*reaches, *losses, lost, left], left)
        return FrontValues(reaches, filled, height, left)

    def _reaches(self) -> tuple[list[Value], Value, list[Value]]:
        """Reach in each run, height of the front, and the roots among them."""
        path, found, book = self.path, self.found, self.book
        lengths = [self._length(index) for index in self.indices]
        end = self.frame.leaves.height(path.heights[-1], "height of the runs' end", self._end_pointer())
        if found.unspent > 0:
            return lengths, end, []
        numbers = path.reach(found.place)
        share = min(numbers[0] / lengths[0].si, 1.0)
        even = all(abs(n / length.si - share) < _SAME for n, length in zip(numbers, lengths, strict=True))
        if even and abs(found.height - (self.start.si + share * (end.si - self.start.si))) < _SAME:
            root = book.unknown(share, kinds.RATIO, f"share of the runs filled {self.tag}", self._system())
            reaches = [
                book.step(
                    balance_steam.share_of_length,
                    f"reach in {self._name(index)} {self.tag}",
                    share=root,
                    length=length,
                )
                for index, length in zip(self.indices, lengths, strict=True)
            ]
            height = book.step(
                balance_steam.front_height,
                f"height of the steam front {self.tag}",
                start_height=self.start,
                share=root,
                end_height=end,
            )
            return reaches, height, [root]
        # Runs of different courses: the front sinks from height to height, and the calculation has followed it.
        roots = [
            book.unknown(number, kinds.LENGTH, f"reach in {self._name(index)} {self.tag}", self._system())
            for index, number in zip(self.indices, numbers, strict=True)
        ]
        title = f"height of the steam front {self.tag}"
        height = book.unknown(found.height, kinds.LENGTH, title, self._system())
        return roots, height, [*roots, height]

    def _system(self) -> System:
        return System(
            id="steam-front",
            meaning=(
                "The fronts of all open runs stand at one height, and the filled pipes lose the whole steam power."
            ),
        )

    def _filled(self, index: int, reach: Value) -> list[tuple[SegmentValues, Value]]:
        """The stretches of a run that steam reaches, with the lengths it fills."""
        run = self.parts.runs[index]
        if len(run) == 1:
            return [(run[0], reach)]
        filled = []
        distance = self.frame.leaves.none(kinds.LENGTH, "stretches before the first")
        for k, stretch in enumerate(run):
            if reach.si <= distance.si:
                break
            length = self.book.step(
                balance_steam.filled_length,
                f"steam-filled length of {stretch.name} {self.tag}",
                reach=reach,
                distance=distance,
                length=stretch.length,
            )
            filled.append((stretch, length))
            distance = self.book.sum(
                balance.length_sum,
                f"length up to the end of {stretch.name}",
                [stretch.length] if k == 0 else [distance, stretch.length],
            )
        return filled

    def _loss(self, stretch: SegmentValues, length: Value, temperature: Value) -> Value:
        segment = stretch.segment
        conductance = self.parts.conductance(stretch)
        self.book.chapter = "stagnation"
        loss = self.book.step(
            heat_loss.pipe_heat_loss,
            f"heat loss per metre of {stretch.name} {self.tag}",
            conductance=conductance,
            temperature=temperature,
            ambient=self.book.leaf(
                segment.ambient, kinds.TEMPERATURE, f"air around {stretch.name}", f"{stretch.place}/ambient"
            ),
        )
        title = f"heat loss of the steam in {stretch.name} {self.tag}"
        return self.book.step(balance_steam.stretch_loss, title, loss=loss, length=length)

    def _length(self, index: int) -> Value:
        lengths = [stretch.length for stretch in self.parts.runs[index]]
        return self.book.sum(balance.length_sum, f"length of {self._name(index)}", lengths)

    def _name(self, index: int) -> str:
        return self.frame.loop.branches[index].name

    def _end_pointer(self) -> str:
        """The member that says where the runs end: that of their last stretch, else the station's height."""
        index = self.indices[0]
        last = len(self.parts.runs[index]) - 1
        pointer = f"/pipeRuns/{index}/segments/{last}/endHeight"
        return pointer if pointer in self.parts.ground.heights else "/station/height"

    def _height_pointer(self, space: SteamSpace) -> str:
        """The member that says how high the space begins: that of its highest group, else the static height."""
        groups = self.frame.loop.groups
        highest = max(space.groups, key=lambda group: group.height)
        index = next(k for k, group in enumerate(groups) if group is highest)
        pointer = f"/collectors/{index}/height"
        return pointer if pointer in self.parts.ground.heights else "/staticHeight"
