"""A steam space at one vessel pressure: plain data, no computing."""

from msgspec import Struct


class Steam(Struct, frozen=True, gc=False):
    """One steam space at one vessel pressure.

    ``temperature`` (K) of the steam, or of the hottest liquid where nothing boils; ``place`` of the front on the
    path; ``emptied`` collector content and ``pipe`` content filled by steam (m3); ``power`` sent out as steam and
    ``unspent`` (W); ``liquid_mass`` left in the collectors and open branches plus the vapour (kg).
    """

    temperature: float
    boiling: bool
    place: float
    height: float
    emptied: float
    pipe: float
    power: float
    unspent: float
    mass: float
    vapour_density: float
