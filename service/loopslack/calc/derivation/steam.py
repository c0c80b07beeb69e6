"""Steps of one steam space: what boils, how far steam reaches, which pressure it makes at the vessel, what it holds.

The steam temperature, or the share of a group that has evaporated, is a root that the vessel's pressure closes;
whoever knows that pressure closes it.
"""

from typing import NamedTuple

from loopslack.calc.derivation.boiling import GroupSteps
from loopslack.calc.derivation.book import System
from loopslack.calc.derivation.frame import Frame
from loopslack.calc.derivation.front import FrontSteps
from loopslack.calc.scenarios import Scenario
from loopslack.calc.steam import SteamSpace
from loopslack.calc.steam_state import Steam
from loopslack.kernel import kinds
from loopslack.kernel.value import Value
from loopslack.physics import balance, balance_pressure, balance_steam, geometry

_AT_REST = (
    "The steam's pressure, through the liquid below its front, is the vessel's; the filled pipes lose what the "
    "collectors send out; the vessel holds what the loop has pushed out."
)


class SpaceValues(NamedTuple):
    """A steam space in the book; members are None where nothing boils.

    ``root`` is closed by the vessel's pressure. ``mass`` is all liquid and steam in the space's collectors and open
    runs, ``content`` the room steam takes, ``left`` the power its runs do not lose, which ``arrives`` at the station
    unless it is only what the root leaves over. ``reaches`` stand in the order of the open runs.
    """

    root: Value | None
    temperature: Value
    mass: Value
    content: Value | None
    power: Value | None
    pressure: Value | None
    left: Value | None
    arrives: bool
    reaches: list[Value]


def write_space(
    frame: Frame, scenario: Scenario, space: SteamSpace, found: Steam, tag: str, *, pinned: bool
) -> SpaceValues:
    """Write a steam space; with ``pinned`` a group may have evaporated in part at its stagnation temperature."""
    book = frame.book
    groups = GroupSteps(frame, scenario, space, tag)
    front = FrontSteps(frame, scenario, space, found, tag)
    book.chapter = "stagnation"
    if not found.boiling:
        masses = [*groups.liquid(), *_in_pipes(frame, front.open_content(), None, tag)]
        mass = book.sum(balance.mass_sum, f"mass in collectors and open runs {tag}", masses)
        return SpaceValues(None, groups.hottest(), mass, None, None, None, None, False, [])
    system = System(id="steam-at-rest", meaning=_AT_REST)
    share: Value | None = None
    at = groups.at_stagnation(found.temperature) if pinned else []
    if at:
        temperature = groups.stagnation(at[0])
        number = groups.share_evaporated(found)
        root = share = book.unknown(number, kinds.RATIO, f"share evaporated {tag}", system)
    else:
        root = temperature = book.unknown(
            found.temperature, kinds.TEMPERATURE, f"steam temperature {tag}", system
        )
    bubble = frame.fluid.bubble(temperature)
    power = groups.power(temperature)
    reached = front.write(power, temperature)
    emptied, liquid = groups.emptied(temperature, share)
    filled = [
        book.step(
            geometry.pipe_content, f"steam in {stretch.name} {tag}", content=stretch.area, length=length
        )
        for stretch, length in reached.filled
    ]
    in_pipes = frame.parts.total(filled, f"steam in the pipes {tag}") if filled else None
    volumes = emptied if in_pipes is None else [*emptied, in_pipes]
    content = frame.parts.total(volumes, f"steam volume {tag}")
    steam = book.step(
        balance.liquid_mass,
        f"mass of the steam {tag}",
        density=frame.fluid.vapour(temperature),
        content=content,
    )
    masses = [steam, *liquid, *_in_pipes(frame, front.open_content(), in_pipes, tag)]
    mass = book.sum(balance.mass_sum, f"mass in collectors and open runs {tag}", masses)
    pressure = book.step(
        balance_steam.pressure_below_steam,
        f"pressure of the steam at the vessel {tag}",
        steam_pressure=bubble,
        density=frame.hot_density,
        front_height=reached.height,
    )
    return SpaceValues(
        root,
        temperature,
        mass,
        content,
        power,
        pressure,
        reached.left,
        found.unspent > 0,
        reached.reaches,
    )


def close_space(
    frame: Frame, space: SpaceValues, vessel_pressure: Value, tag: str, also: list[Value]
) -> None:
    """Hold the steam's pressure against the vessel's, which closes the root of the space."""
    if space.root is None or space.pressure is None:
        return
    residual = frame.book.step(
        balance_pressure.pressure_residual,
        f"pressure of the steam less that of the vessel {tag}",
        first=space.pressure,
        second=vessel_pressure,
    )
    members = [value for value in (space.power, space.content, space.mass) if value is not None]
    frame.book.close(space.root, [*members, space.pressure, *also, residual], residual)


def _in_pipes(frame: Frame, open_content: Value, steam: Value | None, tag: str) -> list[Value]:
    """Mass of the liquid that stands in the open runs."""
    if open_content.si == 0:
        return []
    book = frame.book
    left = open_content
    if steam is not None:
        left = book.step(
            balance.content_left, f"liquid content of the open runs {tag}", whole=open_content, part=steam
        )
    title = f"mass of the liquid in the open runs {tag}"
    return [book.step(balance.liquid_mass, title, density=frame.hot_density, content=left)]
