"""Between a caller's units and SI: the only module that knows pint.

Pint works once, at import, to find ``si = scale * x + offset`` for every unit of every kind. A request then costs
one multiplication, and no text that a caller sends is ever parsed as a unit expression. Gauge pressures become
absolute with the site's atmosphere, which is no constant and so no business of this table: ``is_gauge`` tells.
"""

from fractions import Fraction

from pint import UnitRegistry

from loopslack.kernel.kinds import KINDS, Kind

# Our words for units, in pint's. What is missing here pint reads as it stands.
_SPELLING = {
    "m2": "m**2",
    "ft2": "ft**2",
    "m3": "m**3",
    "ft3": "ft**3",
    "gal_us": "gallon",
    "gal_uk": "imperial_gallon",
    "L/m": "L/m",
    "gal_us/ft": "gallon/ft",
    "barg": "bar",
    "bara": "bar",
    "kPag": "kPa",
    "kPaa": "kPa",
    "psig": "psi",
    "psia": "psi",
    "mH2O": "m*water_density*standard_gravity",
    "ftH2O": "ft*water_density*standard_gravity",
    "delta_degF": "delta_degF",
    "W/m2": "W/m**2",
    "BTU/h/ft2": "Btu/hour/ft**2",
    "W/m2K": "W/m**2/delta_degC",
    "BTU/h/ft2/degF": "Btu/hour/ft**2/delta_degF",
    "W/m2K2": "W/m**2/delta_degC**2",
    "BTU/h/ft2/degF2": "Btu/hour/ft**2/delta_degF**2",
    "W/mK": "W/m/delta_degC",
    "BTU.in/h/ft2/degF": "Btu*inch/hour/ft**2/delta_degF",
    "BTU/h/ft": "Btu/hour/ft",
    "BTU/h/ft/degF": "Btu/hour/ft/delta_degF",
    "BTU/h": "Btu/hour",
    "kg/m3": "kg/m**3",
    "lb/ft3": "lb/ft**3",
    "J/kg": "J/kg",
    "kJ/kg": "kJ/kg",
    "BTU/lb": "Btu/lb",
    "J/kgK": "J/kg/delta_degC",
    "kJ/kgK": "kJ/kg/delta_degC",
    "BTU/lb/degF": "Btu/lb/delta_degF",
    "Pas": "Pa*s",
    "mPa.s": "mPa*s",
    "1": "dimensionless",
    "mass-percent": "percent",
    "volume-percent": "percent",
}

GAUGE_UNITS = frozenset({"barg", "kPag", "psig"})
ABSOLUTE_UNITS = frozenset({"bara", "kPaa", "psia"})


class _Registry(UnitRegistry[Fraction]):
    """pint's registry without what it works out beforehand for each of its thousand units, which takes 0.1 s."""

    def _build_cache(self, loaded_files: object = None) -> None:  # noqa: ARG002 - pint calls it with this name
        """Leave the cache empty; what is asked for is worked out then."""
        self._caches[()] = self._cache


def _lines() -> dict[tuple[str, str], tuple[float, float]]:
    # Fractions keep the factors exact: 1 L is 0.001 m3, not 0.0010000000000000002.
    registry = _Registry(non_int_type=Fraction)
    # The head of water that gauges are marked in: 1000 kg/m3, conventional.
    registry.define("water_density = 1000 * kilogram / meter ** 3")

    def line(unit: str, si: str) -> tuple[float, float]:
        def at(x: int) -> Fraction:
            quantity = registry.Quantity(Fraction(x), _SPELLING.get(unit, unit))
            return Fraction(quantity.to(_SPELLING.get(si, si)).magnitude)

        return float(at(1) - at(0)), float(at(0))

    return {(kind.name, unit): line(unit, kind.si) for kind in KINDS for unit in kind.units}


_LINES = _lines()


def scale_of(kind: Kind, unit: str) -> tuple[float, float]:
    """``(scale, offset)`` such that ``si = scale * x + offset``; KeyError for a unit the kind does not have."""
    return _LINES[kind.name, unit]


def to_si(x: float, unit: str, kind: Kind) -> float:
    """A number of ``unit`` in the SI unit of ``kind``; pressures keep their datum, gauge or absolute."""
    scale, offset = _LINES[kind.name, unit]
    return scale * x + offset


def from_si(si: float, unit: str, kind: Kind) -> float:
    """An SI number of ``kind`` in ``unit``; pressures keep their datum."""
    scale, offset = _LINES[kind.name, unit]
    return (si - offset) / scale


def is_gauge(unit: str) -> bool:
    """Whether a pressure unit counts from the atmosphere of the site."""
    return unit in GAUGE_UNITS
