"""Collectors far below the vessel: the column asks for pressures that no gas has, and no search may be led astray."""

import itertools
from dataclasses import dataclass
from math import inf, isfinite, nan

import pytest
from msgspec.structs import replace

from calc.reference import BAR, CRITERIA, loop
from loopslack.calc import checks
from loopslack.calc.analysis import Analysis
from loopslack.calc.balance import Mixing
from loopslack.calc.charge import Charge
from loopslack.calc.model import Precharge, Vessel
from loopslack.calc.precharge import gas_of
from loopslack.calc.stagnation import stagnation
from loopslack.calc.window import Gas
from loopslack.kernel import kinds
from loopslack.kernel.errors import Contradiction


@dataclass
class _Low:
    analysis: Analysis
    gas: Gas


@pytest.fixture
def low() -> _Low:
    group = loop().groups[0]
    low_group = type(group)(
        **{name: getattr(group, name) for name in group.__struct_fields__} | {"height": -20.0}
    )
    branches = tuple(
        type(run)(
            name=run.name,
            role=run.role,
            access=run.access,
            segments=tuple(
                type(piece)(
                    **{name: getattr(piece, name) for name in piece.__struct_fields__}
                    | {"start_height": -20.0, "end_height": 0.0}
                )
                for piece in run.segments
            ),
        )
        for run in loop().branches
    )
    return _Low(Analysis(loop(groups=(low_group,), branches=branches, top=0.0)), Gas(0.06, 2.5 * BAR, 288.15))


def test_every_equilibrium_has_a_pressure_that_holds_its_liquid(low: _Low) -> None:
    for nominal in (0.02, 0.04, 0.06, 0.1, 0.3):
        for mass in (2.0, 5.0, 9.0, 14.0):
            for scenario in low.analysis.every:
                gas = replace(low.gas, nominal=nominal)
                found = stagnation(low.analysis, scenario, gas, mass)
                assert isfinite(found.pressure)
                if found.regime != "valve-opens":
                    assert found.liquid < nominal
                    assert found.pressure <= low.analysis.final_pressure * (1 + 1e-9)


def test_room_grows_with_pressure_through_nought() -> None:
    charge = Charge(0.1, 2 * BAR, 288.15, 0.005, 5.0, 293.15, 0.0)
    pressures = [step * 0.001 * BAR for step in range(-400, 400)]
    rooms = [charge.room_at(pressure, 293.15) for pressure in pressures]
    assert all(a < b for a, b in itertools.pairwise(rooms))


@pytest.mark.parametrize("value", [inf, nan])
def test_no_number_without_end_reads_as_a_pass(value: float) -> None:
    assert (
        checks.compare("relief-valve", "base", kinds.POWER, value, 6e5, at_most=True).verdict
        == "does-not-hold"
    )


def test_a_loop_short_of_liquid_mixes_what_arrives_and_no_more() -> None:
    mix = Mixing(293.15, 0.001, 313.15, 0.01, 393.15)
    assert mix.temperature(-0.05, 0.02) == mix.temperature(0.0, 0.02) < mix.hot
    assert mix.last(-0.05, 0.0005) == mix.room
    assert mix.temperature(-0.05, 0.0) == mix.room


@pytest.mark.parametrize("nominal", [0.001, 0.003, 0.0035, 0.005, 0.008, 0.08])
def test_an_optimised_precharge_can_be_read_off_a_gauge(nominal: float) -> None:
    """A vessel hardly larger than its reserve once got less than the atmosphere, one no larger a vacuum."""
    analysis = Analysis(
        loop(precharge=Precharge(kind="optimised"), criteria=replace(CRITERIA, reserve=0.003))
    )
    gas = gas_of(analysis, Vessel(id="small", nominal_volume=nominal), 1)
    assert gas.precharge >= analysis.loop.atmosphere
    assert isfinite(stagnation(analysis, analysis.every[0], gas, 1.0).pressure)


def test_a_valve_so_far_below_that_it_never_shuts_is_refused_where_it_stands() -> None:
    relief = replace(loop().relief, height=-120.0)
    with pytest.raises(Contradiction) as raised:
        Analysis(loop(relief=relief))
    assert raised.value.pointer == "/reliefValve/height"
    assert Analysis(loop(relief=replace(relief, height=-50.0))).final_pressure > 0
