"""Writes the band of stated tolerances in the caller's units."""

from loopslack.calc.band import Band, Outcome, ToleranceId
from loopslack.contract.answers import band as out
from loopslack.contract.reading.tolerances import Tolerances
from loopslack.contract.writing.loop import Pressures
from loopslack.contract.writing.quantities import Writer


def by_id(stated: Tolerances) -> dict[ToleranceId, float]:
    """Tolerances by the name of their input, without those nobody stated."""
    named: dict[ToleranceId, float | None] = {
        "pipe-length": stated.pipe_length,
        "collector-content": stated.collector_content,
        "insulation-conductivity": stated.insulation_conductivity,
        "steam-power": stated.steam_power,
        "stagnation-temperature": stated.stagnation_temperature,
        "static-height": stated.static_height,
        "fill-pressure": stated.fill_pressure,
        "precharge": stated.precharge,
    }
    return {id: value for id, value in named.items() if value is not None}


def tolerance_band(found: Band | None, write: Writer, pressure: Pressures) -> out.ToleranceBand | None:
    """The band, if there is one."""
    if found is None:
        return None
    return out.ToleranceBand(
        verdict=found.unfavourable.verdict,
        rows=[
            out.BandRow(
                input=row.id,
                low=_outcome(row.low, write, pressure),
                high=_outcome(row.high, write, pressure),
            )
            for row in found.rows
        ],
        unfavourable=_outcome(found.unfavourable, write, pressure),
        favourable=_outcome(found.favourable, write, pressure),
    )


def _outcome(found: Outcome, write: Writer, pressure: Pressures) -> out.BandOutcome:
    return out.BandOutcome(
        verdict=found.verdict,
        vessel_pressure=pressure.optional(found.pressure),
        steam_volume=None if found.steam_volume is None else write.volume(found.steam_volume),
        reach=None if found.reach is None else write.length(found.reach),
        mixed_temperature=None
        if found.mixed_temperature is None
        else write.temperature(found.mixed_temperature),
        unspent_power=None if found.unspent is None else write.power(found.unspent),
    )
