"""Where a law, a figure or a default was published, and how far it was seen."""

from typing import Literal

from msgspec import Struct

HowSeen = Literal[
    "read", "read-in-part", "read-second-hand", "from-memory", "derived", "own-assumption", "common-practice"
]


class Cite(Struct, frozen=True):
    """A key of ``library/data/sources.toml``, the place in that publication, and how it was seen.

    ``place`` stays empty unless the place was read; a clause number nobody read is never given.
    """

    key: str
    seen: HowSeen
    place: str = ""

    def __str__(self) -> str:
        place = f", {self.place}" if self.place else ""
        return f"{self.key}{place} ({self.seen})"


DERIVED = Cite("derived", "derived")
OWN_ASSUMPTION = Cite("own-assumption", "own-assumption")
COMMON_PRACTICE = Cite("common-practice", "common-practice")
