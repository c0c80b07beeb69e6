"""Levers of the collectors and of the sun they stand in, all groups of one type moved together."""

from collections.abc import Callable

from msgspec.structs import replace

from loopslack.calc.levers.lever import Lever, lever, ranged
from loopslack.calc.model import Build, CollectorGroup, Loop
from loopslack.kernel import kinds
from loopslack.kernel.kinds import (
    HeatLossCoefficient,
    Irradiance,
    Kind,
    QuadraticHeatLossCoefficient,
    Ratio,
    Temperature,
)
from loopslack.library.defaults import default
from loopslack.physics.collector import stagnation_temperature, stagnation_temperature_at_other_sun

_COEFFICIENTS = (
    ("optical-efficiency", "peak_efficiency", kinds.RATIO),
    ("linear-loss", "linear_loss", kinds.HEAT_LOSS_COEFFICIENT),
    ("quadratic-loss", "quadratic_loss", kinds.QUADRATIC_HEAT_LOSS_COEFFICIENT),
)

Change = Callable[[Loop, CollectorGroup, float], CollectorGroup]


def collector_levers(loop: Loop) -> list[Lever]:
    """Sun and air, then content, coefficients and steam power by build of the collector."""
    found = [
        _sun(loop, "design-irradiance", kinds.IRRADIANCE, "irradiance"),
        _sun(loop, "design-ambient", kinds.TEMPERATURE, "ambient"),
    ]
    for build in sorted({group.build for group in loop.groups}):
        groups = [group for group in loop.groups if group.build == build]
        found.append(_content(groups, build))
        found.extend(_coefficient(groups, build, *names) for names in _COEFFICIENTS)
        found.append(_steam_power(groups, build))
    return found


def _content(groups: list[CollectorGroup], build: Build) -> Lever:
    """Content of all collectors of a build, m3, shared out by aperture; the range is one per area."""
    row = default(f"collector-content-{build}")
    aperture = sum(group.aperture for group in groups)

    def change(_: Loop, group: CollectorGroup, number: float) -> CollectorGroup:
        return replace(group, content=number * group.aperture / aperture)

    value = sum(group.content for group in groups)
    within = (row.low * aperture, row.high * aperture)
    return ranged(f"collector-content-{build}", kinds.VOLUME, value, within, _mover(build, change))


def _mean(groups: list[CollectorGroup], number: Callable[[CollectorGroup], float]) -> float:
    return sum(number(g) * g.aperture for g in groups) / sum(g.aperture for g in groups)


def _mover(build: Build, change: Change) -> Callable[[Loop, float], Loop]:
    def moved(loop: Loop, number: float) -> Loop:
        return replace(
            loop,
            groups=tuple(
                change(loop, group, number) if group.build == build else group for group in loop.groups
            ),
        )

    return moved


def _coefficient(groups: list[CollectorGroup], build: Build, word: str, name: str, kind: Kind) -> Lever:
    def change(loop: Loop, group: CollectorGroup, number: float) -> CollectorGroup:
        return _stagnating(loop, replace(group, **{name: number}))

    value = _mean(groups, lambda group: float(getattr(group, name)))
    return lever(f"{word}-{build}", kind, value, _mover(build, change))


def _stagnating(loop: Loop, group: CollectorGroup) -> CollectorGroup:
    """A group whose coefficients changed, with the stagnation temperature they give; a measured one is a floor."""
    computed = stagnation_temperature(
        Ratio(group.peak_efficiency),
        Irradiance(loop.sun.irradiance),
        HeatLossCoefficient(group.linear_loss),
        QuadraticHeatLossCoefficient(group.quadratic_loss),
        Temperature(loop.sun.ambient),
    )
    if group.measured_stagnation:
        return replace(group, stagnation_temperature=max(group.stagnation_temperature, computed))
    return replace(group, stagnation_temperature=computed)


def _steam_power(groups: list[CollectorGroup], build: Build) -> Lever:
    """Steam power over the range of the groups' emptying classes, or over the doubt about a measured one."""
    measured = default("doubt-measured-steam-power")
    low, high = float("inf"), 0.0
    for group in groups:
        if group.emptying == "measured":
            within = (group.steam_power * measured.low, group.steam_power * measured.high)
        else:
            row = default(f"steam-power-{build}-{group.emptying}")
            within = (row.low, row.high)
        low, high = min(low, within[0]), max(high, within[1])

    def change(_: Loop, group: CollectorGroup, number: float) -> CollectorGroup:
        # The doubt stays what it was, but is never better than the number itself.
        worse = group.worse_steam_power
        return replace(
            group, steam_power=number, worse_steam_power=None if worse is None else max(worse, number)
        )

    value = _mean(groups, lambda group: group.steam_power)
    return ranged(f"steam-power-{build}", kinds.IRRADIANCE, value, (low, high), _mover(build, change))


def _sun(loop: Loop, id: str, kind: Kind, name: str) -> Lever:
    def moved(loop: Loop, number: float) -> Loop:
        sun = replace(loop.sun, **{name: number})
        groups = tuple(
            replace(
                group,
                stagnation_temperature=stagnation_temperature_at_other_sun(
                    Temperature(group.stagnation_temperature),
                    Irradiance(loop.sun.irradiance),
                    Temperature(loop.sun.ambient),
                    HeatLossCoefficient(group.linear_loss),
                    QuadraticHeatLossCoefficient(group.quadratic_loss),
                    Irradiance(sun.irradiance),
                    Temperature(sun.ambient),
                ),
            )
            for group in loop.groups
        )
        return replace(loop, sun=sun, groups=groups)

    return lever(id, kind, getattr(loop.sun, name), moved)
