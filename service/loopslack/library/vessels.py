"""Vessel sizes to choose from when the caller has no stock list: preferred numbers, nobody's offer.

A size is a nominal volume only. It has no rated pressure and no acceptance volume, since those are a
maker's; checks that need them stay unassessed.
"""

from functools import cache

from msgspec import Struct

from loopslack.kernel.citations import Cite
from loopslack.kernel.kinds import NominalVolume
from loopslack.library.tables import table


class VesselSize(Struct, frozen=True, kw_only=True):
    """One preferred nominal volume, m3."""

    id: str
    nominal_volume: NominalVolume
    source: Cite


@cache
def preferred_vessels() -> tuple[VesselSize, ...]:
    """List the preferred sizes, smallest first; read once."""
    rows = table("vessels_iso_3")
    return tuple(
        VesselSize(
            id=row, nominal_volume=NominalVolume(rows.number(row, "nominal_volume")), source=rows.cite(row)
        )
        for row in rows.rows
    )
