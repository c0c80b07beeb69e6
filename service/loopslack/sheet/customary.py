"""Sentences and trade names in the units of the United States.

Numbers of an answer come in the units that were asked for. The sentences an answer brings along (why a default stood
in, what a day takes for granted) have their numbers in SI whatever was asked for, and so have those of the catalogues
about published rules: they are converted here, to as many digits as they have, two at least.
"""

import re
from decimal import Decimal

from loopslack.kernel import kinds
from loopslack.kernel.kinds import Kind
from loopslack.kernel.units import scale_of

_INCHES = {15: "1/2", 20: "3/4", 25: "1", 32: "1 1/4", 40: "1 1/2", 50: "2"}
"""Nominal sizes of valves in millimetres, as pipe threads call them."""


def _times(kind: Kind, metric: str, customary: str) -> float:
    return scale_of(kind, metric)[0] / scale_of(kind, customary)[0]


_DEGREE = scale_of(kinds.TEMPERATURE_DIFFERENCE, "delta_degF")[0]  # K
_BTU_HOUR = scale_of(kinds.POWER, "BTU/h")[0]  # W
_BTU = 3600.0 * _BTU_HOUR  # J
_FOOT, _INCH = (scale_of(kinds.LENGTH, unit)[0] for unit in ("ft", "in"))
_UNITS = {
    "m": (_times(kinds.LENGTH, "m", "ft"), "ft"),
    "mm": (_times(kinds.LENGTH, "mm", "in"), "in"),
    "m²": (_times(kinds.AREA, "m2", "ft2"), "ft²"),
    "mm²": (1e-6 / _INCH**2, "in²"),
    "L": (_times(kinds.VOLUME, "L", "gal_us"), "gal"),
    "bar": (_times(kinds.PRESSURE_DIFFERENCE, "bar", "psi"), "psi"),
    "K": (1.0 / _DEGREE, "°F"),
    "W/K": (_DEGREE / _BTU_HOUR, "BTU/(h·°F)"),
    "kJ/K": (1000.0 * _DEGREE / _BTU, "BTU/°F"),
    "W/(m²·K)": (_times(kinds.HEAT_LOSS_COEFFICIENT, "W/m2K", "BTU/h/ft2/degF"), "BTU/(h·ft²·°F)"),
    "kJ/(m²·K)": (1000.0 * _DEGREE * _FOOT**2 / _BTU, "BTU/(ft²·°F)"),
    "J/(kg·K)": (_times(kinds.SPECIFIC_HEAT, "kJ/kgK", "BTU/lb/degF") / 1000.0, "BTU/(lb·°F)"),
    "kg/m³": (_times(kinds.DENSITY, "kg/m3", "lb/ft3"), "lb/ft³"),
}
_NUMBER = r"(?<![\w.,])[-\N{MINUS SIGN}]?\d+(?:[.,]\d+)?"
_JOINED = rf"({_NUMBER})(?:( (?:to|bis|and|und) )({_NUMBER}))?[ \u00a0]"
_QUANTITY = re.compile(rf"{_JOINED}({'|'.join(re.escape(unit) for unit in (*_UNITS, '°C'))})(?![\w²³/·(])")
_BOTH = re.compile(rf"{_JOINED}°C \(([^()]*°F)\)")  # a rule that has its own numbers in degrees Fahrenheit
_NOMINAL = re.compile(r"((?:nominal size(?: of)?|Nennweite) )(\d+) mm")


def customary(text: str, point: str) -> str:
    """A sentence with its SI numbers in the units of the United States; ``point`` is the language's decimal sign."""
    text = _NOMINAL.sub(lambda found: f"{found[1]}{_inches(int(found[2]))}", text)
    text = _BOTH.sub(lambda found: found[4], text)
    return _QUANTITY.sub(lambda found: _converted(found, point), text)


def nominal_size(millimetres: int) -> str:
    """A nominal size of a valve as the trade of the United States calls it, and by its metric name."""
    return f"{_inches(millimetres)} (DN {millimetres})"


def _inches(millimetres: int) -> str:
    return f"{_INCHES[millimetres]} in" if millimetres in _INCHES else f"DN {millimetres}"


def _converted(found: "re.Match[str]", point: str) -> str:
    low, join, high, unit = found.groups()
    told = _number(low, unit)
    if high is not None:
        told = f"{told}{join}{_number(high, unit)}"
    return f"{told.replace('.', point)}\N{NO-BREAK SPACE}{'°F' if unit == '°C' else _UNITS[unit][1]}"


def _number(digits: str, unit: str) -> str:
    stated = Decimal(digits.replace(",", ".").replace("\N{MINUS SIGN}", "-"))
    places = -int(stated.as_tuple().exponent)
    if unit == "°C":
        number = stated * 9 / 5 + 32
    else:
        number = stated * Decimal(repr(_UNITS[unit][0]))
        wanted = max(2, len(str(abs(int(stated.scaleb(places)))).strip("0")))
        places = wanted - 1 - number.adjusted() if number else 0
    number = number.quantize(Decimal(1).scaleb(-places))
    text = f"{number:f}"
    return text.rstrip("0").rstrip(".") if "." in text else text
