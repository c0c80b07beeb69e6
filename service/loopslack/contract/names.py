"""Remembers which names were used, for many more of them than fit into a plain set of texts."""

from array import array
from hashlib import blake2b
from struct import Struct as Layout

_PAIR = Layout("<QQ")
_FULLEST = 0.6


class Names:
    """Names seen so far, 27 to 53 bytes each (a set of texts takes four times that).

    A name is kept as its digest of 128 bits: that two of a million share one has a chance of one in 10^27.
    """

    def __init__(self) -> None:
        self._count = 0
        self._slots = 1024
        self._table = array("Q", bytes(16 * self._slots))

    def is_new(self, name: str) -> bool:
        """Remember a name; False if it was there before."""
        high, low = _PAIR.unpack(blake2b(name.encode(errors="surrogatepass"), digest_size=16).digest())
        low |= 1  # an empty slot is 0
        place = self._place(high, low)
        if self._table[place + 1]:
            return False
        self._table[place], self._table[place + 1] = high, low
        self._count += 1
        if self._count > _FULLEST * self._slots:
            self._grow()
        return True

    def _place(self, high: int, low: int) -> int:
        """Where a digest is, or else where it would go."""
        table, last = self._table, 2 * self._slots - 1
        place = 2 * high & last
        while table[place + 1] and (table[place + 1] != low or table[place] != high):
            place = place + 2 & last
        return place

    def _grow(self) -> None:
        before = self._table
        self._slots *= 2
        self._table = array("Q", bytes(16 * self._slots))
        for at in range(0, len(before), 2):
            if before[at + 1]:
                place = self._place(before[at], before[at + 1])
                self._table[place], self._table[place + 1] = before[at], before[at + 1]
