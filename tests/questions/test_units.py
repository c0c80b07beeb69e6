"""Every unit of every kind, in and out, against factors written here by hand."""

from typing import get_args, get_type_hints

import pytest

from loopslack.contract import quantity as q
from loopslack.contract.writing.quantities import METRIC, US, six_digits, write, writer
from loopslack.kernel import kinds
from loopslack.kernel.units import to_si

FOOT, POUND, GALLON = 0.3048, 0.45359237, 3.785411784e-3
BTU = 1055.056  # as ISO 31-4 rounds it; the international table has 1055.05585262
PSI = POUND * 9.80665 / 0.0254**2
BTU_H = BTU / 3600
KELVIN_PER_F = 5 / 9

# (kind, unit, SI of one unit); temperatures are checked apart.
FACTORS = [
    (kinds.LENGTH, "m", 1),
    (kinds.LENGTH, "mm", 1e-3),
    (kinds.LENGTH, "cm", 1e-2),
    (kinds.LENGTH, "in", 0.0254),
    (kinds.LENGTH, "ft", FOOT),
    (kinds.AREA, "m2", 1),
    (kinds.AREA, "ft2", FOOT**2),
    (kinds.VOLUME, "L", 1e-3),
    (kinds.VOLUME, "mL", 1e-6),
    (kinds.VOLUME, "m3", 1),
    (kinds.VOLUME, "gal_us", GALLON),
    (kinds.VOLUME, "gal_uk", 4.54609e-3),
    (kinds.VOLUME, "ft3", FOOT**3),
    (kinds.CONTENT_PER_LENGTH, "L/m", 1e-3),
    (kinds.CONTENT_PER_LENGTH, "gal_us/ft", GALLON / FOOT),
    (kinds.GAUGE_PRESSURE, "barg", 1e5),
    (kinds.ABSOLUTE_PRESSURE, "bara", 1e5),
    (kinds.GAUGE_PRESSURE, "kPag", 1e3),
    (kinds.ABSOLUTE_PRESSURE, "kPaa", 1e3),
    (kinds.GAUGE_PRESSURE, "psig", PSI),
    (kinds.ABSOLUTE_PRESSURE, "psia", PSI),
    (kinds.PRESSURE_DIFFERENCE, "bar", 1e5),
    (kinds.PRESSURE_DIFFERENCE, "kPa", 1e3),
    (kinds.PRESSURE_DIFFERENCE, "psi", PSI),
    (kinds.PRESSURE_DIFFERENCE, "mH2O", 9806.65),
    (kinds.PRESSURE_DIFFERENCE, "ftH2O", 9806.65 * FOOT),
    (kinds.TEMPERATURE_DIFFERENCE, "K", 1),
    (kinds.TEMPERATURE_DIFFERENCE, "delta_degF", KELVIN_PER_F),
    (kinds.IRRADIANCE, "W/m2", 1),
    (kinds.IRRADIANCE, "BTU/h/ft2", BTU_H / FOOT**2),
    (kinds.HEAT_LOSS_COEFFICIENT, "W/m2K", 1),
    (kinds.HEAT_LOSS_COEFFICIENT, "BTU/h/ft2/degF", BTU_H / FOOT**2 / KELVIN_PER_F),
    (kinds.QUADRATIC_HEAT_LOSS_COEFFICIENT, "W/m2K2", 1),
    (kinds.QUADRATIC_HEAT_LOSS_COEFFICIENT, "BTU/h/ft2/degF2", BTU_H / FOOT**2 / KELVIN_PER_F**2),
    (kinds.CONDUCTIVITY, "W/mK", 1),
    (kinds.CONDUCTIVITY, "BTU.in/h/ft2/degF", BTU_H * 0.0254 / FOOT**2 / KELVIN_PER_F),
    (kinds.LINEAR_HEAT_LOSS, "W/m", 1),
    (kinds.LINEAR_HEAT_LOSS, "BTU/h/ft", BTU_H / FOOT),
    (kinds.LINEAR_CONDUCTANCE, "W/mK", 1),
    (kinds.LINEAR_CONDUCTANCE, "BTU/h/ft/degF", BTU_H / FOOT / KELVIN_PER_F),
    (kinds.POWER, "W", 1),
    (kinds.POWER, "kW", 1e3),
    (kinds.POWER, "BTU/h", BTU_H),
    (kinds.MASS, "kg", 1),
    (kinds.MASS, "lb", POUND),
    (kinds.DENSITY, "kg/m3", 1),
    (kinds.DENSITY, "lb/ft3", POUND / FOOT**3),
    (kinds.SPECIFIC_ENTHALPY, "kJ/kg", 1e3),
    (kinds.SPECIFIC_ENTHALPY, "BTU/lb", BTU / POUND),
    (kinds.SPECIFIC_HEAT, "kJ/kgK", 1e3),
    (kinds.SPECIFIC_HEAT, "BTU/lb/degF", BTU / POUND / KELVIN_PER_F),
    (kinds.VISCOSITY, "mPa.s", 1e-3),
    (kinds.MASS_FRACTION, "mass-percent", 1e-2),
    (kinds.VOLUME_FRACTION, "volume-percent", 1e-2),
    (kinds.DURATION, "s", 1),
    (kinds.DURATION, "min", 60),
    (kinds.DURATION, "h", 3600),
    (kinds.RATIO, "1", 1),
    (kinds.RATIO, "percent", 1e-2),
]


@pytest.mark.parametrize(("kind", "unit", "factor"), FACTORS)
def test_a_unit_has_the_factor_of_the_handbook(kind, unit, factor):
    assert to_si(1.0, unit, kind) == pytest.approx(factor, rel=1e-12)


def test_no_unit_of_a_quantity_is_left_unchecked():
    checked = {(kind.name, unit) for kind, unit, _ in FACTORS}
    checked |= {("temperature", unit) for unit in ("degC", "degF", "K")}
    names = {name for name, _ in checked}
    for name, struct in q.STRUCT_OF.items():
        if name in {"nominal volume", "acceptance volume", "relative expansion"}:
            continue
        units = get_args(get_type_hints(struct)["unit"])
        for unit in units:
            if struct is q.Pressure:
                assert any((other, unit) in checked for other in ("gauge pressure", "absolute pressure")), (
                    unit
                )
            else:
                assert (name, unit) in checked, (name, unit)
        assert name in names


@pytest.mark.parametrize(
    ("value", "unit", "kelvin"),
    [(-40, "degC", 233.15), (-40, "degF", 233.15), (212, "degF", 373.15), (32, "degF", 273.15), (5, "K", 5)],
)
def test_temperatures_have_their_zero(value, unit, kelvin):
    assert to_si(value, unit, kinds.TEMPERATURE) == pytest.approx(kelvin, rel=1e-12)


@pytest.mark.parametrize("system", ["metric", "us"])
@pytest.mark.parametrize("kind", [kind for kind in kinds.KINDS if kind.units])
def test_what_is_written_reads_back_to_six_digits(kind, system):
    for si in (0.5, 123456.789, 3.3e-3):
        written = write(si, kind, system)
        assert isinstance(written, q.STRUCT_OF[kind.name])
        back = to_si(written.value, written.unit, kind)
        # Six digits of the number as shown; a temperature is shown from another zero.
        shown = abs(written.value) * abs(to_si(1, written.unit, kind) - to_si(0, written.unit, kind))
        assert abs(back - si) <= 0.51e-5 * max(shown, 1e-12)


def test_answers_use_the_units_of_their_system():
    assert METRIC.gauge(3e5) == q.Pressure(value=3.0, unit="barg")
    assert METRIC.absolute(3e5) == q.Pressure(value=3.0, unit="bara")
    assert US.gauge(PSI * 30).unit == "psig"
    assert US.volume(GALLON).value == 1.0
    assert METRIC.temperature(273.15).value == 0.0
    assert US.temperature(273.15).value == 32.0
    assert writer("us") is US


def test_a_small_negative_margin_stays_negative():
    assert METRIC.pressure_difference(-1e-12).value < 0
    assert US.power(-1e-30).value < 0
    assert METRIC.volume(-0.0).value == 0.0
    assert str(METRIC.volume(-0.0).value) == "0.0"


def test_rounding_keeps_six_digits():
    assert six_digits(123456.5) == 123456.0
    assert six_digits(0.00012345678) == 0.000123457
    assert six_digits(-2 / 3) == -0.666667


@pytest.mark.parametrize("number", [float("nan"), float("inf"), float("-inf")])
def test_a_number_that_is_not_finite_is_never_answered(number):
    with pytest.raises(ValueError, match="finite"):
        METRIC.length(number)
