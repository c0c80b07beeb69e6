"""The publications that laws, tables and defaults cite, by their key.

Every ``Cite`` of the service has its key here; a test holds that.
"""

from collections.abc import Mapping
from functools import cache
from types import MappingProxyType

from msgspec import Struct, convert

from loopslack.kernel.citations import HowSeen
from loopslack.library.tables import data


class Source(Struct, frozen=True, kw_only=True, forbid_unknown_fields=True):
    """A publication: title, who published it, when (absent if undated), and how far we saw it.

    ``used_for`` says in a sentence what the service takes from it.
    """

    title: str
    publisher: str
    seen: HowSeen
    used_for: str
    year: int | None = None


@cache
def sources() -> Mapping[str, Source]:
    """Every publication by its key, in the order of the keys; read once."""
    found = convert(data("sources"), dict[str, Source])
    return MappingProxyType(dict(sorted(found.items())))
