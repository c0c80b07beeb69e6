"""Numbers and units as the trade writes them, rounded once.

An answer carries six significant digits. A sheet shows fewer: pressures to 0.01 bar or 0.1 psi, which is finer than
an installer's gauge; temperatures to 0.1; heights and lengths to 0.1 m or 0.1 ft; volumes, powers and areas to three
digits, and no finer than anybody can fill, heat or measure. Rounding is to the nearest, halves away from nought, in
one step from the number of the answer. A number that is not nought never shows as nought: it keeps its first digit,
so that a small negative margin stays negative; only what a root leaves over in a derivation is told as nought.
Nothing here converts units, but for the thickness of walls and insulation.
"""

from decimal import ROUND_HALF_UP, Decimal
from functools import lru_cache
from typing import Literal, Protocol

Language = Literal["en", "de"]

NO_BREAK = "\N{NO-BREAK SPACE}"
MINUS = "\N{MINUS SIGN}"
NOTHING = "\N{EN DASH}"
_GROUP = "\N{NARROW NO-BREAK SPACE}"

# Decimals that are always shown, also as noughts: what is read off a gauge has a fixed number of places.
_PLACES = {
    "barg": 2,
    "bara": 2,
    "bar": 2,
    "kPag": 0,
    "kPaa": 0,
    "kPa": 0,
    "psig": 1,
    "psia": 1,
    "psi": 1,
}
# Decimals shown at most; noughts at the end are left out.
_AT_MOST = {
    "m": 1,
    "ft": 1,
    "mm": 1,
    "cm": 1,
    "in": 2,
    "degC": 1,
    "degF": 1,
    "K": 1,
    "delta_degF": 1,
    "mass-percent": 1,
    "volume-percent": 1,
    "percent": 1,
    "mH2O": 1,
    "ftH2O": 1,
    "min": 0,
}
_DIGITS = 3  # for everything else: litres, gallons, watts, areas, densities
_FINEST = {
    "L": 2,
    "gal_us": 2,
    "gal_uk": 2,
    "kg": 2,
    "lb": 2,
    "m2": 2,
    "ft2": 1,
    "W": 1,
    "BTU/h": 1,
}
"""Decimals beyond which three digits would be a show of precision."""
_THIN = {"m": (1000, "mm"), "ft": (12, "in")}
_RESIDUE = 1e-5  # of a unit: what a solver leaves over and nobody could measure in any unit an answer uses

_UNITS = {
    "barg": "bar(g)",
    "bara": "bar(a)",
    "kPag": "kPa(g)",
    "kPaa": "kPa(a)",
    "degC": "°C",
    "degF": "°F",
    "delta_degF": "°F",
    "m2": "m²",
    "m3": "m³",
    "ft2": "ft²",
    "ft3": "ft³",
    "gal_us": "gal",
    "gal_uk": "gal (UK)",
    "gal_us/ft": "gal/ft",
    "W/m2": "W/m²",
    "W/m2K": "W/(m²·K)",
    "W/m2K2": "W/(m²·K²)",
    "W/mK": "W/(m·K)",
    "BTU/h/ft2": "BTU/(h·ft²)",
    "BTU/h/ft2/degF": "BTU/(h·ft²·°F)",
    "BTU/h/ft2/degF2": "BTU/(h·ft²·°F²)",
    "BTU.in/h/ft2/degF": "BTU·in/(h·ft²·°F)",
    "BTU/h/ft": "BTU/(h·ft)",
    "BTU/h/ft/degF": "BTU/(h·ft·°F)",
    "BTU/lb/degF": "BTU/(lb·°F)",
    "kg/m3": "kg/m³",
    "lb/ft3": "lb/ft³",
    "kJ/kgK": "kJ/(kg·K)",
    "mPa.s": "mPa·s",
    "mH2O": "mWC",
    "ftH2O": "ftWC",
    "mass-percent": "% (mass)",
    "volume-percent": "% (vol.)",
    "percent": "%",
    "1": "",
}
_GERMAN_UNITS = {
    "barg": "bar(ü)",
    "kPag": "kPa(ü)",
    "mH2O": "mWS",
    "ftH2O": "ftWS",
    "mass-percent": "% (Masse)",
}


class Quantity(Protocol):
    """A number and its unit, as answers and questions have them."""

    @property
    def value(self) -> float:
        """The number."""

    @property
    def unit(self) -> str:
        """Its unit."""


def rounded(value: float, unit: str) -> str:
    """The digits of a number as the trade rounds them in this unit, with a point and a hyphen."""
    exact = Decimal(repr(value))
    if exact == 0:
        return f"{Decimal(0):.{_PLACES.get(unit, 0)}f}"
    fixed = _PLACES.get(unit)
    places = _AT_MOST.get(unit) if fixed is None else fixed
    if places is None:
        places = min(_DIGITS - 1 - exact.adjusted(), _FINEST.get(unit, 99))
    places = max(places, 0) if unit in _PLACES or unit in _AT_MOST else places
    shown = _to(exact, places)
    if shown == 0:  # keeps its first digit
        shown = _to(exact, -exact.adjusted())
    text = f"{shown:f}"
    if fixed is None and "." in text:
        text = text.rstrip("0").rstrip(".")
    return text


def _to(exact: Decimal, places: int) -> Decimal:
    return exact.quantize(Decimal(1).scaleb(-places), ROUND_HALF_UP)


class Numerals:
    """Numbers in one language."""

    def __init__(self, language: Language) -> None:
        self._to = "bis" if language == "de" else "to"
        self.point = "," if language == "de" else "."
        self._units = {**_UNITS, **(_GERMAN_UNITS if language == "de" else {})}

    def __call__(self, quantity: Quantity | None) -> str:
        """A quantity of an answer, rounded, with its unit; a dash where there is none."""
        if quantity is None:
            return NOTHING
        return self.joined(self.digits(quantity), quantity.unit)

    def digits(self, quantity: Quantity) -> str:
        """A quantity of an answer, rounded, without its unit."""
        if quantity.unit == "1":
            return self._share(quantity.value)
        return self.plain(rounded(quantity.value, quantity.unit))

    def signed(self, quantity: Quantity | None) -> str:
        """A margin: with its sign, also where it is positive."""
        if quantity is None:
            return NOTHING
        text = self(quantity)
        return f"+{text}" if quantity.value > 0 else text

    def size(self, quantity: Quantity) -> str:
        """A change without its sign, where the words around it say which way."""
        return self(quantity).lstrip(MINUS)

    def between(self, low: Quantity, high: Quantity) -> str:
        """A range."""
        return f"{self.digits(low)} {self._to} {self(high)}"

    def apart(self, value: Quantity, limit: Quantity) -> tuple[str, str]:
        """A number and the limit it misses: with all their digits where rounded ones would read alike."""
        shown = self(value), self(limit)
        if shown[0] == shown[1] and value.value != limit.value:
            return self.stated(value), self.stated(limit)
        return shown

    def thin(self, quantity: Quantity) -> str:
        """A thickness: the trade says millimetres and inches, where an answer says metres and feet."""
        return self.joined(*self._thin(quantity))

    def thin_between(self, low: Quantity, high: Quantity) -> str:
        """A range of thicknesses."""
        return f"{self._thin(low)[0]} {self._to} {self.thin(high)}"

    def _thin(self, quantity: Quantity) -> tuple[str, str]:
        factor, unit = _THIN.get(quantity.unit, (1, quantity.unit))
        return self.plain(rounded(float(Decimal(repr(quantity.value)) * factor), unit)), unit

    def stated(self, quantity: Quantity | None) -> str:
        """A quantity of a question, with every digit it was stated with."""
        if quantity is None:
            return NOTHING
        return self.joined(self.every_digit(quantity.value), quantity.unit)

    def every_digit(self, value: float) -> str:
        """A number with all its digits, for a reader who does the sum again."""
        return self.plain(f"{Decimal(repr(float(value))).normalize():f}")

    def derived(self, quantity: Quantity) -> str:
        """A number of the derivation with all its digits, and nought with its unit for what a root leaves over.

        A number without a unit is a share or a factor and keeps its digits however small it is.
        """
        if quantity.unit != "1" and abs(quantity.value) < _RESIDUE:
            return self.joined("0", quantity.unit)
        return self.stated(quantity)

    def unit(self, code: str) -> str:
        """How a unit is written."""
        return self._units.get(code, code)

    def joined(self, digits: str, unit: str) -> str:
        """Digits and a unit that stay on one line."""
        if unit == "1":
            return digits if digits.endswith("%") else f"{digits}"
        return f"{digits}{NO_BREAK}{self.unit(unit).replace(' ', NO_BREAK)}"

    def plain(self, digits: str) -> str:
        """Digits with the language's decimal sign, a true minus and groups of three from five digits on."""
        return _written(digits, self.point)

    def _share(self, value: float) -> str:
        """A number without unit, which the sheet shows in percent below one and as it is above."""
        if abs(value) < 1:
            return f"{self.plain(rounded(float(Decimal(repr(value)) * 100), 'percent'))}{NO_BREAK}%"
        return self.plain(rounded(value, "1"))


@lru_cache(maxsize=4096)
def _written(digits: str, point: str) -> str:
    sign = MINUS if digits.startswith("-") else ""
    whole, _, fraction = digits.lstrip("-").partition(".")
    if len(whole) > 4:
        head = len(whole) % 3
        groups = ([whole[:head]] if head else []) + [whole[k : k + 3] for k in range(head, len(whole), 3)]
        whole = _GROUP.join(groups)
    return f"{sign}{whole}{point}{fraction}" if fraction else f"{sign}{whole}"


@lru_cache(maxsize=2)
def numerals(language: Language) -> Numerals:
    """The numbers of a language."""
    return Numerals(language)
