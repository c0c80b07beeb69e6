"""What happened: phases dated from events, largest values, and the flags that limit what may be believed."""

from typing import Literal

from msgspec import Struct

from loopslack.calc.course.plant import Plant
from loopslack.calc.course.state import State
from loopslack.calc.course.step import Step

Flag = Literal[
    "above-lowest-opening",
    "beyond-property-range",
    "discharge",
    "liquid-freezes",
    "membrane-full",
    "residue-strength-extrapolated",
    "start-above-set",
    "steam-at-cooler",
    "steam-at-station",
    "valve-overloaded",
    "vessel-empty",
    "void",
]

_STRENGTH_KNOWN = 0.63  # mass fraction to which boiling and density were measured
_OVERPRESSURE = (
    1.1  # of the set pressure: above, the valve passes all it can and it is not enough; own assumption
)
_NEAR_STOP = 0.95  # of the nominal volume, where no acceptance volume is stated; own assumption


class Phases(Struct, frozen=True, kw_only=True):
    """When each phase began, s after midnight; None if it never did.

    ``emptying``: first steam; ``boiling``: the collectors are down to their residue and steam enters the
    pipes; ``receding``: the largest steam volume is passed; ``refilling``: the front is back at the
    collectors; ``end``: the last steam is gone. Refilling ends in one or two sudden collapses whose instant
    means little; ``end`` is sound.
    """

    start: float
    emptying: float | None
    boiling: float | None
    receding: float | None
    refilling: float | None
    end: float | None


class Extreme(Struct, frozen=True, kw_only=True):
    """A largest value and when it was reached, s after midnight."""

    value: float
    time: float


class Chronicle:
    """Watches the march, step by step."""

    __slots__ = ("extremes", "flags", "phases", "reach_at_largest", "steam_at_largest")

    def __init__(self, plant: Plant, state: State) -> None:
        self.flags: set[Flag] = set()
        self.phases: dict[str, float | None] = {"start": state.time}
        self.extremes: dict[str, Extreme] = {}
        self.reach_at_largest, self.steam_at_largest = 0.0, state.steam
        relief = plant.loop.relief
        if relief is not None and state.vessel_pressure > relief.set_pressure:
            self.flags.add("start-above-set")
        self._extremes(plant, state)
        self._vessel(plant, state)

    def saw(self, plant: Plant, state: State, taken: Step, volume_before: float) -> None:
        """Note what an accepted step brought; ``state`` is already at its end."""
        phases, time = self.phases, state.time
        if volume_before == 0.0 and state.volume > 0.0:
            phases.setdefault("emptying", time)
            phases["end"] = None
        if state.place > 0.0 and taken.ending != "no-steam":
            phases.setdefault("boiling", time)
        back = state.place == 0.0 and state.volume < taken.balance.collector.gap
        if "boiling" in phases and (back or state.volume == 0.0):
            phases.setdefault("refilling", time)
        if volume_before > 0.0 and state.volume == 0.0:
            phases["end"] = time
        if state.volume > self.extremes["steam_volume"].value:
            phases["receding"] = time
            self.reach_at_largest = plant.grid.at(plant.grid.reach_at, state.place)
            self.steam_at_largest = state.steam
        self._extremes(plant, state)
        self._events(plant, state, taken)
        self._vessel(plant, state)

    def dated(self) -> Phases:
        """Phases so far; without steam in the pipes there is no receding front."""
        phases = self.phases
        boiled = "boiling" in phases
        return Phases(
            start=phases["start"] or 0.0,
            emptying=phases.get("emptying"),
            boiling=phases.get("boiling"),
            receding=phases.get("receding") if boiled else None,
            refilling=phases.get("refilling"),
            end=phases.get("end"),
        )

    def _extremes(self, plant: Plant, state: State) -> None:
        seen = {
            "steam_volume": state.volume,
            "reach": plant.grid.at(plant.grid.reach_at, state.place),
            "vessel_pressure": state.vessel_pressure,
            "vessel_liquid": state.vessel_liquid(plant),
            "collector_temperature": state.absorber,
            "vessel_temperature": state.temperatures[-1],
            "steam_power": state.steam_power if "refilling" not in self.phases else 0.0,
            "residue_strength": state.strength,
        }
        for name, value in seen.items():
            known = self.extremes.get(name)
            if known is None or value > known.value:
                self.extremes[name] = Extreme(value=value, time=state.time)

    def _events(self, plant: Plant, state: State, taken: Step) -> None:
        flags, relief = self.flags, plant.loop.relief
        if taken.ending == "overfull":
            power = taken.surplus * taken.balance.latent / taken.balance.dt
            flags.add("steam-at-station" if power > plant.loop.station_loss else "steam-at-cooler")
        if state.discharged > 0.0:
            flags.add("discharge")
        lowest = relief.lowest_opening if relief is not None else None
        if lowest is not None and state.vessel_pressure > lowest:
            flags.add("above-lowest-opening")
        if (
            relief is not None
            and state.valve_open
            and state.vessel_pressure > _OVERPRESSURE * relief.set_pressure
        ):
            flags.add("valve-overloaded")
        if taken.ending == "no-steam" and state.volume > 0.0:
            flags.add("void")
        if max(state.liquid, state.boiling if state.volume > 0.0 else 0.0) > plant.tables.hottest:
            flags.add("beyond-property-range")
        if (
            state.volume > 0.0
            and taken.balance.collector.follows_strength
            and state.strength > _STRENGTH_KNOWN
        ):
            flags.add("residue-strength-extrapolated")
        if state.liquid < plant.loop.fluid.freezing_point:
            flags.add("liquid-freezes")

    def _vessel(self, plant: Plant, state: State) -> None:
        vessel = plant.loop.vessel
        liquid = state.vessel_liquid(plant)
        if liquid < 0.0:
            self.flags.add("vessel-empty")
        if liquid > (vessel.acceptance_volume or _NEAR_STOP * vessel.nominal_volume):
            self.flags.add("membrane-full")
