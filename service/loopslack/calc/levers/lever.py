"""What a lever is: an input of a loop, the range it commonly lies in, and how to move it. Nothing is judged here.

Ranges are those of the service's defaults; where none is published there, an own assumption says so. A caller who
knows an input better narrows its lever by replacing ``low`` and ``high``.
"""

from collections.abc import Callable
from typing import Literal

from msgspec import Struct

from loopslack.calc.model import Loop
from loopslack.kernel.kinds import Kind
from loopslack.library.defaults import default

RangeBasis = Literal["default", "own-assumption", "stated"]


class Lever(Struct, frozen=True, kw_only=True):
    """One input: its present number, the range it is moved over, and how. SI of ``kind``; gauge pressures.

    ``id`` is the key of the default whose range it has, which names the type of collector where there are several.
    """

    id: str
    kind: Kind
    value: float
    low: float
    high: float
    basis: RangeBasis
    moved: Callable[[Loop, float], Loop]


def lever(id: str, kind: Kind, value: float, moved: Callable[[Loop, float], Loop]) -> Lever:
    """A lever over the range of the default of the same name, widened to the number the loop has."""
    row = default(id)
    return ranged(id, kind, value, (row.low, row.high), moved)


def ranged(
    id: str, kind: Kind, value: float, within: tuple[float, float], moved: Callable[[Loop, float], Loop]
) -> Lever:
    """A lever over a range that follows from defaults, widened to the number the loop has."""
    low, high = min(within[0], value), max(within[1], value)
    return Lever(id=id, kind=kind, value=value, low=low, high=high, basis="default", moved=moved)
