"""Volumes of round tubes: bore, content per length, content of a run.

Only geometry lives here. Which tube has which diameter is a table of the library; which parts a loop has is
the calculation's business.
"""

from math import pi, sqrt

from loopslack.kernel.citations import DERIVED
from loopslack.kernel.equation import Range, equation
from loopslack.kernel.kinds import ContentPerLength, Length, Volume

_FROM_ZERO = Range(0.0)


@equation(
    "tube-bore",
    law="d_i = d - 2 * s",
    symbols={"d": "outer diameter", "s": "wall"},
    source=DERIVED,
    note="Definition of the bore of a round tube.",
    valid={"outer_diameter": _FROM_ZERO, "wall": _FROM_ZERO},
    yields=_FROM_ZERO,
)
def bore_of_tube(outer_diameter: Length, wall: Length) -> Length:
    """Clear diameter of a round tube, m, from its outer diameter and wall, both nominal.

    Tolerances of drawn tube (about 1 % of the bore) are neglected. Negative when the wall is thicker than
    half the diameter: such a tube does not exist and a derivation refuses it.
    """
    return Length(outer_diameter - 2 * wall)


@equation(
    "content-per-length",
    law="a = pi / 4 * d_i^2",
    symbols={"d_i": "bore"},
    source=DERIVED,
    note="Area of a circle.",
    valid={"bore": _FROM_ZERO},
)
def content_per_length(bore: Length) -> ContentPerLength:
    """Liquid per length of a round tube, m3/m (that is m2), from its bore.

    A nominal bore under-states the content of a corrugated tube; state its content per length instead.
    """
    return ContentPerLength(pi / 4 * bore * bore)


@equation(
    "bore-of-content",
    law="d_i = sqrt(4 * a / pi)",
    symbols={"a": "content"},
    source=DERIVED,
    note="Inverse of the content per length.",
    valid={"content": _FROM_ZERO},
)
def bore_of_content(content: ContentPerLength) -> Length:
    """Bore of the round tube, m, that holds as much liquid per length. ValueError for a negative content."""
    return Length(sqrt(4 * content / pi))


@equation(
    "pipe-content",
    law="V = a * L",
    symbols={"a": "content", "L": "length"},
    source=DERIVED,
    note="Fittings count as the length of pipe they replace.",
    valid={"content": _FROM_ZERO, "length": _FROM_ZERO},
)
def pipe_content(content: ContentPerLength, length: Length) -> Volume:
    """Liquid in a run of pipe, m3. Negative for a negative length, which a derivation refuses."""
    return Volume(content * length)
