"""The questions that are no design: contents, expansion, a vessel that is there, a day without flow, tolerances."""

import json

import msgspec
import pytest

from loopslack.contract.answering.course import compute_stagnation_course
from loopslack.contract.questions.criteria import Tolerances
from loopslack.contract.questions.existing import StagnationCourseQuestion, VesselAuditQuestion
from loopslack.contract.questions.operations import (
    ExpansionQuestion,
    LoopVolumeQuestion,
    StagnationCheckQuestion,
)
from loopslack.contract.reading.existing import read_audit, read_check, read_course
from loopslack.contract.reading.reader import Reader
from loopslack.contract.reading.small import read_contents, read_expansion
from loopslack.contract.reading.tolerances import read_tolerances
from loopslack.kernel.errors import CalculationError, Refusals
from questions.wash_house import changed, wash_house

SEA_LEVEL = 101325.0


def quantity(value, unit):
    return {"value": value, "unit": unit}


def asked(data, struct):
    return msgspec.json.decode(json.dumps(data), type=struct)


def with_vessel(**more):
    data = wash_house()
    for name in ("vessel", "coolingVessel"):
        del data[name]
    vessel = {"nominalVolume": quantity(80, "L"), "ratedPressure": quantity(10, "barg")}
    return {**data, "vessel": vessel, **more}


def pointers(read, question):
    with pytest.raises(CalculationError) as raised:
        read(question)
    error = raised.value
    return [one.pointer for one in (error.errors if isinstance(error, Refusals) else (error,))]


def test_contents_come_part_by_part():
    data = {name: wash_house()[name] for name in ("collectors", "pipeRuns", "station")}
    data["coolingVessel"] = {"kind": "given", "content": quantity(20, "L")}
    found = read_contents(asked(data, LoopVolumeQuestion))
    held = {(part.part, part.name): 1000 * part.content for part in found.parts}
    assert held == pytest.approx(
        {
            ("collectors", "wash house roof"): 13.6,
            ("flow", "flow"): 11.29,
            ("return", "return"): 11.29,
            ("station", "station"): 6.4,
            ("vessel-line", "vessel line"): 0.5,
            ("cooling-vessel", "cooling vessel"): 20.0,
        },
        abs=1e-3,
    )
    assert [assumed.pointer for assumed in found.assumed] == ["/vesselLine/content"]


def test_an_expansion_question_is_read_in_si():
    data = {
        "fluid": wash_house()["fluid"],
        "startTemperature": quantity(59, "degF"),
        "endTemperature": quantity(120, "degC"),
        "content": quantity(42.6, "L"),
        "pressure": quantity(3, "bara"),
        "units": "us",
    }
    found = read_expansion(asked(data, ExpansionQuestion))
    assert (found.start, found.end) == (pytest.approx(288.15), pytest.approx(393.15))
    assert found.pressure == pytest.approx(3e5)
    assert found.content == pytest.approx(0.0426)
    assert found.system == "us"


def test_without_a_pressure_a_fluid_boils_in_the_open():
    data = {
        "fluid": {"kind": "water"},
        "startTemperature": quantity(10, "degC"),
        "endTemperature": quantity(80, "degC"),
    }
    assert read_expansion(asked(data, ExpansionQuestion)).pressure == SEA_LEVEL


def test_a_check_reads_vessel_fill_and_cooling_vessel():
    data = with_vessel(
        fillPressure=quantity(1.9, "barg"), coolingVessel={"kind": "given", "content": quantity(20, "L")}
    )
    found = read_check(asked(data, StagnationCheckQuestion))
    assert found.fill_pressure == pytest.approx(1.9e5 + SEA_LEVEL)
    assert found.vessel.nominal_volume == pytest.approx(0.08)
    assert found.reading.loop.cooling_content == pytest.approx(0.02)
    assert found.reading.cooling == "given"
    assert "/coolingVessel/ratedPressure" in [one.pointer for one in found.reading.provisional]


def test_a_check_without_cooling_vessel_has_none():
    found = read_check(asked(with_vessel(), StagnationCheckQuestion))
    assert (found.reading.cooling, found.reading.loop.cooling_content) == ("none", 0.0)
    assert found.fill_pressure is None


def test_faults_of_loop_and_vessel_come_together():
    data = with_vessel(fillPressure=quantity(90, "barg"))
    data = changed(data, "/vessel/nominalVolume", quantity(0.1, "L"))
    data = changed(data, "/staticHeight", quantity(900, "m"))
    assert sorted(pointers(read_check, asked(data, StagnationCheckQuestion))) == [
        "/fillPressure",
        "/staticHeight",
        "/vessel/nominalVolume",
    ]


def test_a_clear_day_follows_the_design_sun():
    data = with_vessel(designSun={"irradiance": quantity(1050, "W/m2"), "ambient": quantity(34, "degC")})
    found = read_course(asked(data, StagnationCourseQuestion))
    assert found.weather.highest_irradiance == pytest.approx(1050)
    assert found.weather.ambient(15 * 3600) == pytest.approx(273.15 + 34)
    assert found.weather.ambient(3 * 3600) == pytest.approx(273.15 + 20)
    assert found.start.time is None
    assert (found.interval, found.residue_share, found.reflux_share, found.gas_follows) == (
        60.0,
        None,
        None,
        False,
    )


def test_a_given_day_is_read_point_by_point():
    points = [
        {"time": quantity(hour, "h"), "irradiance": quantity(sun, "W/m2"), "ambient": quantity(77, "degF")}
        for hour, sun in ((11, 900), (12, 1000), (13, 900))
    ]
    stop = {
        "kind": "pump-stop",
        "time": quantity(12, "h"),
        "collectors": quantity(90, "degC"),
        "pipes": quantity(80, "degC"),
        "station": quantity(75, "degC"),
        "vessel": quantity(30, "degC"),
    }
    data = with_vessel(
        weather={"kind": "given", "points": points},
        start=stop,
        interval=quantity(5, "min"),
        residueShare=quantity(45, "percent"),
        gas="follows-liquid",
    )
    found = read_course(asked(data, StagnationCourseQuestion))
    assert found.weather.irradiance(11.5 * 3600) == pytest.approx(950)
    assert found.weather.ambient(0.0) == pytest.approx(298.15)
    assert found.start.time == pytest.approx(43200)
    assert found.start.collectors == pytest.approx(363.15)
    assert found.interval == pytest.approx(300)
    assert found.residue_share == pytest.approx(0.45)
    assert found.gas_follows


def test_weather_out_of_order_is_refused():
    points = [
        {"time": quantity(hour, "h"), "irradiance": quantity(900, "W/m2"), "ambient": quantity(20, "degC")}
        for hour in (12, 11)
    ]
    data = with_vessel(weather={"kind": "given", "points": points})
    (pointer,) = pointers(read_course, asked(data, StagnationCourseQuestion))
    assert pointer.startswith("/weather")


def test_an_audit_reads_gauge_precharge_and_record():
    data = with_vessel(
        gaugeReading={"pressure": quantity(1.4, "barg"), "temperature": quantity(18, "degC")},
        measuredPrecharge={"pressure": quantity(20, "psig")},
        commissioning={"precharge": quantity(1.6, "barg"), "fillPressure": quantity(1.9, "barg")},
    )
    found = read_audit(asked(data, VesselAuditQuestion))
    assert found.gauge == pytest.approx((1.4e5 + SEA_LEVEL, 291.15))
    assert found.measured_precharge == pytest.approx((20 * 6894.757293168 + SEA_LEVEL, 293.15))
    assert found.commissioned == pytest.approx((1.6e5 + SEA_LEVEL, 1.9e5 + SEA_LEVEL, 288.15))
    books = [assumed.pointer for assumed in found.reading.assumed]
    assert "/measuredPrecharge/temperature" in books
    assert "/commissioning/temperature" in books


def test_an_audit_without_record_leaves_it_open():
    data = with_vessel(gaugeReading={"pressure": quantity(1.4, "barg"), "temperature": quantity(18, "degC")})
    found = read_audit(asked(data, VesselAuditQuestion))
    assert (found.measured_precharge, found.commissioned) == (None, None)


def test_a_record_filled_below_its_precharge_is_refused():
    data = with_vessel(
        gaugeReading={"pressure": quantity(1.4, "barg"), "temperature": quantity(18, "degC")},
        commissioning={"precharge": quantity(1.9, "barg"), "fillPressure": quantity(1.6, "barg")},
    )
    assert pointers(read_audit, asked(data, VesselAuditQuestion)) == ["/commissioning/fillPressure"]


def test_a_gauge_read_on_ice_is_refused():
    data = with_vessel(gaugeReading={"pressure": quantity(1.4, "barg"), "temperature": quantity(-40, "degC")})
    assert pointers(read_audit, asked(data, VesselAuditQuestion)) == ["/gaugeReading/temperature"]


def test_tolerances_are_read_in_si():
    stated = {
        "pipeLength": quantity(10, "percent"),
        "stagnationTemperature": quantity(18, "delta_degF"),
        "staticHeight": quantity(50, "cm"),
        "precharge": quantity(0.1, "bar"),
    }
    reader = Reader()
    found = read_tolerances(reader, msgspec.convert(stated, Tolerances))
    assert found == (
        pytest.approx(0.1),
        None,
        None,
        None,
        pytest.approx(10.0),
        pytest.approx(0.5),
        None,
        pytest.approx(1e4),
    )
    assert not reader.refused
    assert read_tolerances(reader, None) == (None,) * 8


def test_a_temperature_at_which_the_fluid_is_no_liquid_is_pointed_at():
    data = {
        "fluid": {"kind": "water"},
        "startTemperature": quantity(-3, "degC"),
        "endTemperature": quantity(240, "degC"),
    }
    assert pointers(read_expansion, asked(data, ExpansionQuestion)) == [
        "/startTemperature",
        "/endTemperature",
    ]


def day(**more):
    return asked(with_vessel(**more), StagnationCourseQuestion)


@pytest.mark.parametrize(
    ("changes", "at"),
    [
        (
            {"reliefValve": {"setPressure": quantity(4, "barg"), "height": quantity(-150, "m")}},
            "/reliefValve/height",
        ),
        (
            {
                "start": {
                    "kind": "pump-stop",
                    "time": quantity(12, "h"),
                    "collectors": quantity(-20, "degC"),
                    "pipes": quantity(20, "degC"),
                    "station": quantity(20, "degC"),
                    "vessel": quantity(20, "degC"),
                },
                "fluid": {
                    "kind": "propylene-glycol",
                    "concentration": {"kind": "by-mass", "share": quantity(20, "mass-percent")},
                },
            },
            "/start/collectors",
        ),
    ],
)
def test_a_day_that_cannot_be_followed_is_refused_at_the_member_that_stands_in_the_way(changes, at):
    with pytest.raises(CalculationError) as raised:
        compute_stagnation_course(day(**changes))
    assert raised.value.pointer == at


def test_a_day_out_of_order_is_refused_at_the_point_that_is():
    points = [
        {"time": quantity(hour, "h"), "irradiance": quantity(500, "W/m2"), "ambient": quantity(20, "degC")}
        for hour in (10, 11, 10.5)
    ]
    refused = pointers(read_course, day(weather={"kind": "given", "points": points}))
    assert refused == ["/weather/points/2/time"]
