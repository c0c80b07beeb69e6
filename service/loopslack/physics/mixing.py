"""How warm the vessel becomes when the loop pushes hot liquid into it, and how a cooling vessel helps.

Mixing by volume without heat losses. Which liquid lies where in the loop is the calculation's knowledge.
"""

from collections.abc import Iterable

from msgspec import Struct

from loopslack.kernel.citations import DERIVED
from loopslack.kernel.equation import Range, equation
from loopslack.kernel.errors import OutOfRange
from loopslack.kernel.kinds import Temperature, Volume

_FROM_ZERO = Range(0.0)


@equation(
    "mixing-temperature",
    law="T = (V_1 * T_1 + V_2 * T_2) / (V_1 + V_2)",
    symbols={
        "V_1": "first volume",
        "T_1": "first temperature",
        "V_2": "second volume",
        "T_2": "second temperature",
    },
    source=DERIVED,
    note="By volume; weighing by heat capacity instead would lower the result by a few kelvin at most.",
    valid={"first_volume": _FROM_ZERO, "second_volume": _FROM_ZERO},
)
def mixing_temperature(
    first_volume: Volume,
    first_temperature: Temperature,
    second_volume: Volume,
    second_temperature: Temperature,
) -> Temperature:
    """Temperature, K, of two volumes of the same liquid once mixed.

    No losses, and hot liquid counted at its own larger volume: both err towards hot, the safe side for a
    membrane. ZeroDivisionError if both volumes are zero: nothing has no temperature.
    """
    return Temperature(
        (first_volume * first_temperature + second_volume * second_temperature)
        / (first_volume + second_volume)
    )


class Arrival(Struct, frozen=True, kw_only=True):
    """What a vessel holds after liquid came in: mixed temperature and that of the last liquid to come, K."""

    mixed: Temperature
    last: Temperature


def mixed_after_arrival(
    held: Volume,
    held_temperature: Temperature,
    arriving: Volume,
    queue: Iterable[tuple[Volume, Temperature]],
    rest_temperature: Temperature,
) -> Arrival:
    """Temperatures in the vessel after ``arriving`` m3 came in, in the order in which they stand before it.

    ``queue`` lists the volumes from the vessel outwards with their temperatures; whatever arrives beyond
    them comes at ``rest_temperature``. With nothing arriving both temperatures are the held one. Negative
    ``arriving`` (the loop draws liquid) leaves the temperature as it is: what leaves has the mixed
    temperature.
    """
    volume, mixed, last, left = held, held_temperature, held_temperature, arriving
    for part, temperature in (*queue, (arriving, rest_temperature)):
        taken = Volume(min(part, left))
        if taken <= 0:
            continue
        mixed = mixing_temperature(volume, mixed, taken, temperature)
        volume, left, last = Volume(volume + taken), Volume(left - taken), temperature
    return Arrival(mixed=mixed, last=last)


@equation(
    "cooling-content",
    law="V_c = V_h * (T_h - T_m) / (T_m - T_c)",
    symbols={
        "V_h": "hot volume",
        "T_h": "hot temperature",
        "T_m": "membrane limit",
        "T_c": "cool temperature",
    },
    source=DERIVED,
    note="The mixing temperature solved for the cool volume at the membrane's limit.",
    valid={"hot_volume": _FROM_ZERO},
)
def cooling_content(
    hot_volume: Volume,
    hot_temperature: Temperature,
    membrane_limit: Temperature,
    cool_temperature: Temperature,
) -> Volume:
    """Cool liquid, m3, that must mix with hot liquid so that the membrane stays at its limit.

    Liquid already in the expansion vessel counts as cool content. Negative when the hot liquid is below the
    limit: none is needed, and the number says how much cool liquid could be missing. Raises ``OutOfRange``
    unless the limit lies above the cool temperature: no amount of it would help.
    """
    if not membrane_limit > cool_temperature:
        raise OutOfRange(
            f"Liquid of {cool_temperature - 273.15:.4g} degC cannot cool a membrane to its limit of "
            f"{membrane_limit - 273.15:.4g} degC.",
            remedy="Place the cooling vessel where it is cooler than the membrane's limit.",
            facts={"membrane_limit": membrane_limit, "cool_temperature": cool_temperature},
        )
    return Volume(hot_volume * (hot_temperature - membrane_limit) / (membrane_limit - cool_temperature))
