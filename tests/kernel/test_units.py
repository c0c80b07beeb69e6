"""Units against their legal definitions, worked in fractions and not by the library that the service uses."""

from fractions import Fraction

import pytest
from hypothesis import given
from hypothesis import strategies as st

from loopslack.kernel.kinds import KIND_OF, KINDS, Kind
from loopslack.kernel.units import ABSOLUTE_UNITS, GAUGE_UNITS, from_si, is_gauge, scale_of, to_si

INCH, FOOT, POUND = Fraction("0.0254"), Fraction("0.3048"), Fraction("0.45359237")
GRAVITY = Fraction("9.80665")
GALLON = 231 * INCH**3
PSI = POUND * GRAVITY / INCH**2
# The British thermal unit of ISO 31-4, rounded there to 1055.056 J; that of the steam tables is 1.4e-7 smaller.
BTU = Fraction("1055.056")
HOUR, FAHRENHEIT = Fraction(3600), Fraction(5, 9)

EXACT = {
    "length": {"m": Fraction(1), "mm": Fraction(1, 1000), "cm": Fraction(1, 100), "in": INCH, "ft": FOOT},
    "area": {"m2": Fraction(1), "ft2": FOOT**2},
    "content per length": {"L/m": Fraction(1, 1000), "gal_us/ft": GALLON / FOOT},
    "pressure difference": {
        "bar": Fraction(100_000),
        "kPa": Fraction(1000),
        "psi": PSI,
        "mH2O": 1000 * GRAVITY,
        "ftH2O": 1000 * GRAVITY * FOOT,
    },
    "temperature difference": {"K": Fraction(1), "delta_degF": FAHRENHEIT},
    "irradiance": {"W/m2": Fraction(1), "BTU/h/ft2": BTU / HOUR / FOOT**2},
    "heat loss coefficient": {"W/m2K": Fraction(1), "BTU/h/ft2/degF": BTU / HOUR / FOOT**2 / FAHRENHEIT},
    "quadratic heat loss coefficient": {
        "W/m2K2": Fraction(1),
        "BTU/h/ft2/degF2": BTU / HOUR / FOOT**2 / FAHRENHEIT**2,
    },
    "conductivity": {"W/mK": Fraction(1), "BTU.in/h/ft2/degF": BTU * INCH / HOUR / FOOT**2 / FAHRENHEIT},
    "heat loss per length": {"W/m": Fraction(1), "BTU/h/ft": BTU / HOUR / FOOT},
    "heat loss per length and kelvin": {"W/mK": Fraction(1), "BTU/h/ft/degF": BTU / HOUR / FOOT / FAHRENHEIT},
    "power": {"W": Fraction(1), "kW": Fraction(1000), "BTU/h": BTU / HOUR},
    "mass": {"kg": Fraction(1), "lb": POUND},
    "density": {"kg/m3": Fraction(1), "lb/ft3": POUND / FOOT**3},
    "specific enthalpy": {"kJ/kg": Fraction(1000), "BTU/lb": BTU / POUND},
    "specific heat": {"kJ/kgK": Fraction(1000), "BTU/lb/degF": BTU / POUND / FAHRENHEIT},
    "viscosity": {"mPa.s": Fraction(1, 1000)},
    "mass fraction": {"mass-percent": Fraction(1, 100)},
    "volume fraction": {"volume-percent": Fraction(1, 100)},
    "duration": {"s": Fraction(1), "min": Fraction(60), "h": HOUR},
    "ratio": {"1": Fraction(1), "percent": Fraction(1, 100)},
    "relative expansion": {"1": Fraction(1), "percent": Fraction(1, 100)},
    "molar mass": {},
}
VOLUME = {
    "L": Fraction(1, 1000),
    "mL": Fraction(1, 1_000_000),
    "m3": Fraction(1),
    "gal_us": GALLON,
    "gal_uk": Fraction("0.00454609"),
    "ft3": FOOT**3,
}
PRESSURE = {
    "barg": Fraction(100_000),
    "bara": Fraction(100_000),
    "kPag": Fraction(1000),
    "kPaa": Fraction(1000),
    "psig": PSI,
    "psia": PSI,
}
for name in ("volume", "nominal volume", "acceptance volume"):
    EXACT[name] = VOLUME
for name in ("absolute pressure", "gauge pressure"):
    EXACT[name] = PRESSURE
# Degrees: scale and offset, (t_F + 459.67) 5/9 K.
DEGREES = {
    "degC": (Fraction(1), Fraction("273.15")),
    "degF": (FAHRENHEIT, Fraction("459.67") * FAHRENHEIT),
    "K": (Fraction(1), Fraction(0)),
}

EVERY_UNIT = [(kind, unit) for kind in KINDS for unit in kind.units]


def test_every_unit_of_every_kind_has_a_legal_definition_here() -> None:
    here = {name: set(units) for name, units in EXACT.items()} | {"temperature": set(DEGREES)}
    assert here == {kind.name: set(kind.units) for kind in KINDS}


@pytest.mark.parametrize(("kind", "unit"), EVERY_UNIT, ids=lambda x: x if isinstance(x, str) else x.name)
def test_a_unit_is_its_legal_definition_to_the_last_digit(kind: Kind, unit: str) -> None:
    exact = DEGREES[unit] if kind.name == "temperature" else (EXACT[kind.name][unit], Fraction(0))
    assert scale_of(kind, unit) == (float(exact[0]), float(exact[1]))


@given(st.floats(-1e6, 1e6), st.sampled_from(EVERY_UNIT))
def test_there_and_back_is_the_same_number(number: float, case: tuple[Kind, str]) -> None:
    kind, unit = case
    # A temperature near absolute zero of its scale loses digits to its offset.
    assert from_si(to_si(number, unit, kind), unit, kind) == pytest.approx(number, rel=1e-12, abs=1e-9)


@pytest.mark.parametrize(
    ("number", "unit", "kelvin"),
    [
        (0, "degC", 273.15),
        (100, "degC", 373.15),
        (32, "degF", 273.15),
        (212, "degF", 373.15),
        (-40, "degF", 233.15),
    ],
)
def test_temperatures_meet_at_the_fixed_points(number: float, unit: str, kelvin: float) -> None:
    temperature = next(kind for kind in KINDS if kind.name == "temperature")
    assert to_si(number, unit, temperature) == pytest.approx(kelvin, rel=1e-15)


@pytest.mark.parametrize(("kind", "unit"), [(0, "furlong"), (0, "degC"), (1, "9**9**9**9"), (1, "")])
def test_a_unit_that_the_kind_does_not_have_is_never_parsed(kind: int, unit: str) -> None:
    with pytest.raises(KeyError):
        to_si(1.0, unit, KINDS[kind])


def test_gauge_and_absolute_units_are_told_apart_by_name() -> None:
    pressures = set(PRESSURE)
    assert pressures == GAUGE_UNITS | ABSOLUTE_UNITS
    assert not GAUGE_UNITS & ABSOLUTE_UNITS
    assert {unit for unit in pressures if is_gauge(unit)} == GAUGE_UNITS


@pytest.mark.parametrize("kind", KINDS, ids=lambda kind: kind.name)
def test_a_kind_answers_in_units_it_has_and_has_a_range(kind: Kind) -> None:
    assert kind.low < kind.high
    assert {kind.metric, kind.us} <= {*kind.units, ""}
    assert (kind.metric == "") == (not kind.units)


def test_names_of_kinds_are_unique() -> None:
    assert len({kind.name for kind in KINDS}) == len(KINDS) == len(set(KIND_OF.values())) == len(KIND_OF)


def test_the_british_thermal_unit_is_that_of_the_steam_tables_to_seven_digits() -> None:
    assert float(BTU / POUND) == pytest.approx(2326, rel=2e-7)
