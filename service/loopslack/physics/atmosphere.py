"""The pressure of the air outside, which every gauge and every gas cushion counts from.

Weather is neglected: it moves the pressure by about 3 % either way, 0.03 bar. Gauge and absolute readings
are turned into each other in ``statics``.
"""

from loopslack.kernel.citations import Cite
from loopslack.kernel.equation import Range, equation
from loopslack.kernel.errors import OutOfRange
from loopslack.kernel.kinds import AbsolutePressure, Length

LOWEST_ALTITUDE = Length(-500.0)
HIGHEST_ALTITUDE = Length(11_000.0)


@equation(
    "atmospheric-pressure",
    law="p_atm = 101325 * (1 - 2.25577e-5 * h)^5.25588",
    symbols={"h": "altitude"},
    source=Cite("iso-2533", "from-memory"),
    note="Standard atmosphere below the tropopause.",
    valid={"altitude": Range(LOWEST_ALTITUDE, HIGHEST_ALTITUDE)},
)
def atmospheric_pressure(altitude: Length) -> AbsolutePressure:
    """Pressure of the standard atmosphere, Pa absolute, at a height above mean sea level, m.

    Weather and local temperature are neglected (about 3 %). Raises ``OutOfRange`` below the lowest land and
    above the tropopause, where the power law no longer describes the air.
    """
    if not LOWEST_ALTITUDE <= altitude <= HIGHEST_ALTITUDE:
        raise OutOfRange(
            f"The altitude is {altitude:g} m; the standard atmosphere is used from {LOWEST_ALTITUDE:g} to "
            f"{HIGHEST_ALTITUDE:g} m.",
            remedy="State the height of the site above mean sea level, in the unit it is given with.",
            facts={"number": altitude, "low": LOWEST_ALTITUDE, "high": HIGHEST_ALTITUDE},
        )
    return AbsolutePressure(101325 * (1 - 2.25577e-5 * altitude) ** 5.25588)
