"""Why a vessel is refused: the reasons and their numbers. Plain data; ``selection`` finds them."""

from typing import Literal

from msgspec import Struct

from loopslack.kernel.kinds import Kind

ReasonCode = Literal[
    "nominal-volume",
    "nominal-volume-beyond-interval",
    "acceptance-volume",
    "rated-pressure",
    "membrane-temperature",
    "precharge-as-delivered",
    "unspent-power",
    "no-window",
]


class Reason(Struct, frozen=True, gc=False):
    """Why a vessel is refused: the number it has, the number it needs, and by how much it misses it.

    Applied, ``short`` makes this check hold. None where no number of this vessel would.
    """

    code: ReasonCode
    kind: Kind
    value: float | None
    limit: float | None
    short: float | None


def shortage(code: ReasonCode, kind: Kind, value: float, limit: float) -> Reason:
    """A reason whose number, changed by what is short, would do."""
    return Reason(code, kind, value, limit, limit - value)
