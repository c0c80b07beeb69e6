"""Steps of the loop in stagnation: every steam space, the mass the loop pushes out, what the vessel holds and bears.

Two readings: at a vessel pressure that is given (a bound of the fill window), and at rest with a filled vessel, where
the vessel's own law closes the roots.
"""

from collections.abc import Sequence
from typing import NamedTuple

from loopslack.calc.balance import Extent, is_open
from loopslack.calc.derivation.book import System
from loopslack.calc.derivation.charge import Charged, Filled
from loopslack.calc.derivation.frame import Frame
from loopslack.calc.derivation.steam import SpaceValues, close_space, write_space
from loopslack.calc.equilibrium import Equilibrium
from loopslack.calc.scenarios import Scenario
from loopslack.kernel import kinds
from loopslack.kernel.value import Value
from loopslack.physics import balance, balance_pressure, balance_steam, vessel

_GAS_FOLLOWS = "Gas and liquid in the vessel are as warm as the liquid that has arrived, mixed."


class RestValues(NamedTuple):
    """A stagnation in the book; ``pressure`` is None where it is not defined."""

    spaces: list[SpaceValues]
    expelled: Value
    liquid: Value
    pressure: Value | None
    gas: Value
    mixed: Value
    last: Value
    unspent: Value | None


def expelled_at(
    frame: Frame, scenario: Scenario, extent: Extent, pressure: Value, tag: str
) -> tuple[Value, list[SpaceValues]]:
    """Mass the loop pushes out with the vessel at a given pressure, and its steam."""
    spaces = _spaces(frame, scenario, extent, tag, pinned=False)
    expelled = _expelled(frame, scenario, spaces, tag)
    for space in spaces:
        close_space(frame, space, pressure, tag, [])
    return expelled, spaces


def at_rest(
    frame: Frame, scenario: Scenario, charged: Charged, filled: Filled, found: Equilibrium, tag: str
) -> RestValues:
    """The equilibrium of a filled vessel and its loop."""
    book = frame.book
    spaces = _spaces(frame, scenario, found.extent, tag, pinned=found.regime == "pinned")
    expelled = _expelled(frame, scenario, spaces, tag)
    book.chapter = "stagnation"
    room = frame.leaves.temperature("vessel_room")
    gas, density, root = room, frame.room_density, None
    if scenario.gas_follows:
        system = System(id="gas-follows-liquid", meaning=_GAS_FOLLOWS)
        title = f"temperature in the vessel {tag}"
        gas = root = book.unknown(found.gas_temperature, kinds.TEMPERATURE, title, system)
        density = frame.fluid.density(gas)
    liquid = book.step(
        balance.liquid_in_vessel,
        f"liquid in the vessel {tag}",
        filled=filled.mass,
        expelled=expelled,
        density=density,
        allowance=frame.allowance,
    )
    mixed, last = _arrived(frame, filled.liquid, liquid, tag)
    if root is not None:
        residual = book.step(
            balance_pressure.temperature_residual,
            f"mixed temperature less that in the vessel {tag}",
            first=mixed,
            second=root,
        )
        book.close(root, [density, liquid, mixed, residual], residual)
    pressure = _pressure(frame, charged, found, liquid, gas, tag)
    for space in spaces:
        if pressure is not None:
            close_space(frame, space, pressure, tag, [expelled, liquid, pressure])
    unspent = _unspent(frame, spaces, tag) if found.extent.unspent > 0 else None
    return RestValues(spaces, expelled, liquid, pressure, gas, mixed, last, unspent)


def _pressure(
    frame: Frame, charged: Charged, found: Equilibrium, liquid: Value, gas: Value, tag: str
) -> Value | None:
    """What the vessel bears: the gas squeezed by the liquid, or the final pressure where the valve opens."""
    book = frame.book
    if found.regime == "valve-opens":
        final = frame.site.final
        room = book.step(
            vessel.liquid_held,
            f"room in the vessel at the final pressure {tag}",
            nominal_volume=charged.nominal,
            precharge=charged.precharge,
            pressure=final,
            gas_temperature=gas,
            precharge_temperature=charged.temperature,
        )
        title = f"liquid that finds no room {tag}"
        book.step(balance_pressure.volume_residual, title, first=liquid, second=room)
        return final
    return book.step(
        vessel.gas_pressure,
        f"pressure of the vessel {tag}",
        nominal_volume=charged.nominal,
        precharge=charged.precharge,
        liquid=liquid,
        gas_temperature=gas,
        precharge_temperature=charged.temperature,
    )


def _spaces(frame: Frame, scenario: Scenario, extent: Extent, tag: str, *, pinned: bool) -> list[SpaceValues]:
    spaces = frame.analysis.case(scenario).balance.spaces
    names = [""] if len(spaces) == 1 else [f", steam space {k + 1}" for k in range(len(spaces))]
    return [
        write_space(frame, scenario, space, steam, f"{tag}{name}", pinned=pinned)
        for space, steam, name in zip(spaces, extent.spaces, names, strict=True)
    ]


def _expelled(frame: Frame, scenario: Scenario, spaces: Sequence[SpaceValues], tag: str) -> Value:
    """What has left the loop since filling: its filled mass less what its parts now hold."""
    book = frame.book
    closed = [
        content
        for branch, content in zip(frame.loop.branches, frame.parts.run_contents, strict=True)
        if not is_open(branch, scenario)
    ]
    still = frame.parts.total(
        [frame.leaves.station, frame.vessel_side, *closed], f"content that stays liquid {tag}"
    )
    book.chapter = "stagnation"
    resting = book.step(
        balance.liquid_mass, f"mass that stays liquid {tag}", density=frame.hot_density, content=still
    )
    masses = [resting, *(space.mass for space in spaces)]
    mass = book.sum(balance.mass_sum, f"mass in the loop {tag}", masses)
    title = f"mass expelled {tag}"
    return book.step(balance.mass_expelled, title, filled=frame.filled_mass, in_state=mass)


def _arrived(frame: Frame, filled: Value, held: Value, tag: str) -> tuple[Value, Value]:
    """Temperatures of the liquid in the vessel: mixed, and of what came last."""
    inputs = {
        "filled": filled,
        "held": held,
        "vessel_side": frame.vessel_side,
        "return_pipes": frame.return_pipes,
        "room_temperature": frame.leaves.temperature("vessel_room"),
        "return_temperature": frame.leaves.temperature("back"),
        "hot_temperature": frame.leaves.temperature("hot_liquid"),
    }
    mixed = frame.book.step(
        balance_pressure.mixed_vessel_temperature, f"mixed temperature in the vessel {tag}", **inputs
    )
    last = frame.book.step(
        balance_pressure.last_arriving_temperature, f"temperature that arrives last {tag}", **inputs
    )
    return mixed, last


def mixed_temperature(frame: Frame, filled: Value, held: Value, tag: str) -> Value:
    """Mixed temperature of the liquid in the vessel."""
    return _arrived(frame, filled, held, tag)[0]


def _unspent(frame: Frame, spaces: Sequence[SpaceValues], tag: str) -> Value:
    """Steam power that reaches the station and that nothing there takes."""
    book = frame.book
    lefts = [space.left for space in spaces if space.arrives and space.left is not None]
    arriving = book.sum(balance_steam.power_sum, f"steam power that reaches the station {tag}", lefts)
    title = f"steam power that nothing condenses {tag}"
    return book.step(balance_steam.unspent_power, title, arriving=arriving, taken=frame.leaves.taken)
