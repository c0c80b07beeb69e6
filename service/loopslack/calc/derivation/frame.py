"""Steps of the loop with one cooling vessel: its content, and the mass it pushes into the vessel in each liquid state.

A derivation has one frame for the loop shown and one for each volume it reports, since each may have a cooling vessel
of its own content. Nothing here knows a vessel.
"""

from functools import cached_property
from typing import NamedTuple

from loopslack.calc.analysis import Analysis
from loopslack.calc.derivation.parts import Parts
from loopslack.calc.derivation.site import Site
from loopslack.calc.states import StateId
from loopslack.kernel import kinds
from loopslack.kernel.value import Value
from loopslack.physics import balance, balance_pressure, balance_steam, statics


class StateValues(NamedTuple):
    """A liquid state in the book: what the loop pushed out, and the vessel's side of it."""

    id: StateId
    expelled: Value
    temperature: Value
    density: Value
    column_density: Value
    allowance: Value


class Frame:
    """Writes one loop with its cooling vessel."""

    def __init__(self, parts: Parts, site: Site, analysis: Analysis, cooling: Value) -> None:
        self.parts, self.site, self.analysis, self.cooling = parts, site, analysis, cooling
        self.book, self.fluid, self.leaves = parts.book, parts.fluid, parts.leaves
        self.loop = analysis.loop

    @cached_property
    def content(self) -> Value:
        """The whole loop without its vessel."""
        collectors, pipes = self.parts.collectors, self.parts.pipes
        self.book.chapter = "content"
        return self.book.step(
            balance.loop_content,
            "content of the loop",
            collectors=collectors,
            pipes=pipes,
            station=self.leaves.station,
            vessel_line=self.leaves.line,
            cooling_vessel=self.cooling,
        )

    @cached_property
    def vessel_side(self) -> Value:
        """Vessel line and cooling vessel."""
        if self.cooling.si == 0:
            return self.leaves.line
        return self.book.step(
            balance.content_sum,
            "content of vessel line and cooling vessel",
            first=self.leaves.line,
            second=self.cooling,
        )

    @cached_property
    def return_pipes(self) -> Value:
        """All return runs."""
        return self._role("return")

    @cached_property
    def fill_density(self) -> Value:
        """Density when filled."""
        return self.fluid.density(self.leaves.temperature("fill"))

    @cached_property
    def room_density(self) -> Value:
        """Density of the liquid in the vessel while the loop is hot."""
        return self.fluid.density(self.leaves.temperature("vessel_room"))

    @cached_property
    def hot_density(self) -> Value:
        """Density of the hot liquid in pipes and station during stagnation."""
        return self.fluid.density(self.leaves.temperature("hot_liquid"))

    @cached_property
    def filled_mass(self) -> Value:
        """Mass in the loop when filled."""
        return self.book.step(
            balance.liquid_mass,
            "mass in the loop when filled",
            density=self.fill_density,
            content=self.content,
        )

    @cached_property
    def allowance(self) -> Value:
        """Allowance for the fluid's data in hot states."""
        return self.book.step(
            balance.fluid_allowance,
            "allowance for the fluid's data, hot",
            share=self.leaves.criterion("fluid_allowance"),
            content=self.content,
        )

    @cached_property
    def no_allowance(self) -> Value:
        """States that are neither cold nor in stagnation carry none."""
        return self.leaves.none(kinds.VOLUME, "allowances in this state")

    @cached_property
    def cold(self) -> StateValues:
        """Outdoor parts at the site minimum, indoor ones cold, none colder than the freezing point."""
        book, leaves = self.book, self.leaves
        book.chapter = "states"
        outdoor = self._no_ice(leaves.temperature("site_minimum"))
        indoor = self._no_ice(leaves.temperature("indoor_cold"))
        vessel = self._no_ice(leaves.temperature("vessel_cold"))
        outside, inside = self.fluid.density(outdoor), self.fluid.density(indoor)
        out_content, in_content = self._zones()
        mass = book.step(
            balance.loop_mass_cold,
            "mass in the loop, cold",
            outdoor_density=outside,
            outdoor_content=out_content,
            indoor_density=inside,
            indoor_content=in_content,
        )
        allowance = book.step(
            balance.fluid_allowance_cold,
            "allowance for the fluid's data, cold",
            share=leaves.criterion("fluid_allowance"),
            content=self.content,
        )
        heavier = outside if outside.si >= inside.si else inside
        return StateValues(
            "cold", self._expelled("cold", mass), vessel, self.fluid.density(vessel), heavier, allowance
        )

    @cached_property
    def operating(self) -> StateValues:
        """The pump runs at design temperatures."""
        mean = self._mean()
        return self._running("operating", mean, self.leaves.temperature("flow"))

    @cached_property
    def cut_off(self) -> StateValues:
        """Collectors and flow at the cut-off temperature."""
        hottest = self.leaves.temperature("cut_off")
        return self._running("cut-off", hottest, hottest)

    @cached_property
    def fill(self) -> StateValues:
        """Filled: nothing has moved yet."""
        nothing = self.book.leaf(0.0, kinds.MASS, "nothing expelled yet", "/temperatures/fill")
        density = self.fill_density
        return StateValues(
            "fill", nothing, self.leaves.temperature("fill"), density, density, self.no_allowance
        )

    def column(self, state: StateValues) -> Value:
        """Pressure between the vessel and the highest point."""
        return self.book.step(
            statics.column_pressure,
            f"column to the highest point, {state.id}",
            density=state.column_density,
            height=self.leaves.top,
        )

    @cached_property
    def top_requirement(self) -> Value:
        """Vessel pressure that keeps the top of the cold loop above its least pressure."""
        return self.book.step(
            balance_pressure.pressure_for_top,
            "vessel pressure that holds the least pressure at the top, cold",
            atmosphere=self.site.atmosphere,
            least_top_pressure=self.leaves.criterion("top_pressure"),
            column=self.column(self.cold),
        )

    @cached_property
    def cut_off_requirement(self) -> Value:
        """Vessel pressure that keeps the top from boiling at the cut-off."""
        discharge = self.loop.pump_side == "discharge"
        head = self.loop.pump_head if discharge else 0.0
        pointer = "/pump/head" if discharge else "/pump/side"
        name = "head of the pump" if discharge else "the vessel is on the suction side"
        return self.book.step(
            balance_pressure.pressure_against_boiling,
            "vessel pressure that keeps the top from boiling at the cut-off",
            bubble_pressure=self.fluid.bubble(self.leaves.temperature("cut_off")),
            margin=self.leaves.criterion("boiling_margin"),
            column=self.column(self.cut_off),
            pump_head=self.book.leaf(head, kinds.PRESSURE_DIFFERENCE, name, pointer),
        )

    def _running(self, id: StateId, collectors: Value, flow: Value) -> StateValues:
        book, leaves, fluid = self.book, self.leaves, self.fluid
        back, room = leaves.temperature("back"), leaves.temperature("vessel_room")
        collector_contents, side = self.parts.collectors, self.vessel_side
        flow_pipes, return_pipes = self._role("flow"), self.return_pipes
        book.chapter = "states"
        return_density = fluid.density(back)
        mass = book.step(
            balance.loop_mass_running,
            f"mass in the loop, {id}",
            collector_density=fluid.density(collectors),
            collectors=collector_contents,
            flow_density=fluid.density(flow),
            flow_pipes=flow_pipes,
            return_density=return_density,
            return_pipes=return_pipes,
            mean_density=fluid.density(self._mean()),
            station=leaves.station,
            room_density=self.room_density,
            vessel_side=side,
        )
        return StateValues(
            id, self._expelled(id, mass), room, self.room_density, return_density, self.no_allowance
        )

    def _expelled(self, id: str, mass: Value) -> Value:
        return self.book.step(
            balance.mass_expelled, f"mass expelled, {id}", filled=self.filled_mass, in_state=mass
        )

    def _mean(self) -> Value:
        return self.book.step(
            balance_steam.mean_temperature,
            "mean of flow and return",
            first=self.leaves.temperature("flow"),
            second=self.leaves.temperature("back"),
        )

    def _no_ice(self, temperature: Value) -> Value:
        """A cold temperature, or the freezing point where that is the warmer."""
        if temperature.si >= self.loop.fluid.freezing_point:
            return temperature
        return self.book.step(
            balance_steam.higher_temperature,
            f"{temperature.name}, not below freezing",
            first=temperature,
            second=self.fluid.freezing,
        )

    def _role(self, role: str) -> Value:
        contents = [
            content
            for branch, content in zip(self.loop.branches, self.parts.run_contents, strict=True)
            if branch.role == role
        ]
        return self.parts.total(contents, f"content of the {role} pipes")

    def _zones(self) -> tuple[Value, Value]:
        """Contents that get as cold as the site and as the house."""
        outdoor: list[Value] = [self.parts.collectors]
        indoor: list[Value] = []
        for run in self.parts.runs:
            for stretch in run:
                (outdoor if stretch.segment.outdoor else indoor).append(stretch.content)
        (outdoor if self.loop.station.outdoor else indoor).append(self.leaves.station)
        (outdoor if self.loop.vessel_outdoor else indoor).append(self.vessel_side)
        return (
            self.parts.total(outdoor, "content outdoors"),
            self.parts.total(indoor, "content indoors"),
        )
