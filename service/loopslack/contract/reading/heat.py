"""Reads what collectors can give off: sun, coefficients on the aperture, steam power, stagnation temperature."""

from typing import cast

from loopslack.calc.model import Emptying, Sun
from loopslack.contract.questions import collectors as asked
from loopslack.contract.questions.fields import field_of
from loopslack.contract.reading.reader import Reader
from loopslack.kernel import kinds
from loopslack.kernel.kinds import (
    Area,
    HeatLossCoefficient,
    Irradiance,
    QuadraticHeatLossCoefficient,
    Ratio,
    Temperature,
)
from loopslack.library.defaults import default
from loopslack.physics.collector import stagnation_temperature, stagnation_temperature_at_other_sun
from loopslack.physics.collector_area import (
    linear_loss_on_area,
    optical_efficiency_on_area,
    quadratic_loss_on_area,
)

_STEAM_POWER = field_of(asked.CollectorGroup, "measured_steam_power")
_A1 = field_of(asked.CollectorCoefficients, "a1")
_A2 = field_of(asked.CollectorCoefficients, "a2")
_MEASURED = field_of(asked.MeasuredStagnation, "temperature")
_MEASURED_SUN = field_of(asked.MeasuredStagnation, "irradiance")
_MEASURED_AIR = field_of(asked.MeasuredStagnation, "ambient")
_IRRADIANCE = field_of(asked.DesignSun, "irradiance")
_AMBIENT = field_of(asked.DesignSun, "ambient")

_NO_SUN = asked.DesignSun()
_WORSE = {"good": "fair", "fair": "poor"}


def read_sun(reader: Reader, sun: asked.DesignSun | None) -> Sun:
    """Read the design sun; absent members come from the trade."""
    sun = sun or _NO_SUN
    return Sun(
        irradiance=reader.or_default(sun.irradiance, _IRRADIANCE, "/designSun", "design-irradiance"),
        ambient=reader.or_default(sun.ambient, _AMBIENT, "/designSun", "design-ambient"),
    )


def no_area(reader: Reader, basis: str, pointer: str, reason: str) -> None:
    """Note that an area is needed that was not stated."""
    reader.missing(
        pointer,
        f"{reason}, and the {basis} area of the collector is not stated.",
        f"State the {basis} area as the data sheet gives it. No area is ever converted without it.",
    )


def read_coefficients(
    reader: Reader, group: asked.CollectorGroup, place: str, areas: dict[str, float]
) -> tuple[float, float, float]:
    """Read peak efficiency, linear and quadratic loss, all on the aperture."""
    here = f"{place}/coefficients"
    stated = group.coefficients
    if stated is None:
        reader.doubtful("coefficients-assumed", here)
        return (
            reader.default(f"optical-efficiency-{group.type}", f"{here}/eta0"),
            reader.default(f"linear-loss-{group.type}", f"{here}/a1"),
            reader.default(f"quadratic-loss-{group.type}", f"{here}/a2"),
        )
    linear = reader.si(stated.a1, _A1, here)
    quadratic = reader.si(stated.a2, _A2, here)
    if linear == 0 and quadratic == 0:
        reader.contradiction(
            f"{here}/a1",
            "Both loss coefficients are 0; such a collector would heat up without end.",
            "State them as the test report gives them.",
        )
        linear = reader.stand_in(1.0, 5.0)
    basis = stated.basis
    if basis == "aperture":
        return stated.eta0, linear, quadratic
    if basis not in areas:
        no_area(reader, basis, f"{place}/{basis}Area", f"The coefficients refer to the {basis} area")
        return reader.stand_in(stated.eta0, 0.9 * stated.eta0), linear, quadratic
    test, aperture = Area(areas[basis]), Area(areas["aperture"])
    efficiency = optical_efficiency_on_area(Ratio(stated.eta0), test, aperture)
    if efficiency > 1:
        reader.contradiction(
            f"{here}/eta0",
            f"On the aperture of {aperture:.5g} m2 a peak efficiency of {stated.eta0:g} on {test:.5g} m2 "
            f"({basis}) would be {efficiency:.3g}, more than all of the sun.",
            "Check the basis of the coefficients and both areas.",
        )
    return (
        efficiency,
        linear_loss_on_area(HeatLossCoefficient(linear), test, aperture),
        quadratic_loss_on_area(QuadraticHeatLossCoefficient(quadratic), test, aperture),
    )


def read_steam_power(
    reader: Reader, group: asked.CollectorGroup, place: str
) -> tuple[Emptying, float, float | None]:
    """Read the emptying, the steam power and the next worse one, W/m2 of aperture."""
    stated = group.emptying_class
    if group.measured_steam_power is not None:
        if stated is not None:
            reader.contradiction(
                f"{place}/emptyingClass",
                "An emptying class and a measured steam power are both stated.",
                "State one of them; the measured figure says more.",
            )
        measured = reader.si(group.measured_steam_power, _STEAM_POWER, place)
        return "measured", measured, measured * default("doubt-measured-steam-power").si
    if stated is None:
        word = reader.word("emptying-class", f"{place}/emptyingClass")
        reader.doubtful("emptying-class-assumed", f"{place}/emptyingClass")
    else:
        word = stated
    worse = _WORSE.get(word)
    power = default(f"steam-power-{group.type}-{word}").si
    worse_power = None if worse is None else default(f"steam-power-{group.type}-{worse}").si
    return cast("Emptying", word), power, worse_power


def read_stagnation(
    reader: Reader,
    group: asked.CollectorGroup,
    place: str,
    sun: Sun,
    coefficients: tuple[float, float, float],
) -> float:
    """Find the stagnation temperature under the design sun, K: the higher of computed and measured."""
    efficiency = Ratio(coefficients[0])
    linear, quadratic = HeatLossCoefficient(coefficients[1]), QuadraticHeatLossCoefficient(coefficients[2])
    irradiance, ambient = Irradiance(sun.irradiance), Temperature(sun.ambient)
    computed = stagnation_temperature(efficiency, irradiance, linear, quadratic, ambient)
    stated = group.measured_stagnation
    if stated is None:
        return computed
    here = f"{place}/measuredStagnation"
    measured = reader.si(stated.temperature, _MEASURED, here)
    measured_sun = reader.si(stated.irradiance, _MEASURED_SUN, here)
    measured_air = reader.si(stated.ambient, _MEASURED_AIR, here)
    if measured <= measured_air:
        reader.contradiction(
            f"{here}/temperature",
            "The measured stagnation temperature is not above the air it was measured in.",
            "Check both temperatures and their units.",
        )
        return computed
    if measured_sun == sun.irradiance and measured_air == sun.ambient:
        return max(computed, measured)
    carried = stagnation_temperature_at_other_sun(
        Temperature(measured),
        Irradiance(measured_sun),
        Temperature(measured_air),
        linear,
        quadratic,
        irradiance,
        ambient,
    )
    reader.derived(
        f"{here}/temperature",
        carried,
        kinds.TEMPERATURE,
        "The measured temperature carried to the design sun; the coefficients give the shape of the loss.",
        low=min(measured, carried),
        high=max(measured, carried),
    )
    return max(computed, carried)
