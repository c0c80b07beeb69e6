"""Steps of the fluid: its strength, its freezing point, its densities, its boiling.

A caller's own fluid has no law: its numbers are read off the stated tables and stand as stated.
"""

from collections.abc import Callable

from loopslack.calc.derivation.book import Book, Constant, System
from loopslack.calc.derivation.ground import FluidGround
from loopslack.calc.fluids.base import ZERO_CELSIUS, Fluid
from loopslack.calc.fluids.glycol import (
    FREEZING_STRENGTH_HIGHEST,
    Glycol,
    pure_density_at_20,
    strength_freezing_at,
)
from loopslack.calc.fluids.own import OwnFluid
from loopslack.kernel import kinds
from loopslack.kernel.citations import Cite
from loopslack.kernel.kinds import Kind
from loopslack.kernel.value import Value
from loopslack.library.fluids import glycol_data, water_data
from loopslack.physics import balance_pressure, balance_steam, mixture, mixture_vapour, order, water

FIT = Cite("glycol-fit", "derived")
_STANDARD = Cite("iapws-sr1-86", "read-second-hand")


class FluidSteps:
    """Writes the properties of one fluid, each at a temperature of the book."""

    def __init__(self, book: Book, fluid: Fluid, ground: FluidGround) -> None:
        self.book, self.fluid, self.ground = book, fluid, ground
        like = fluid.like if isinstance(fluid, OwnFluid) else None
        boils = fluid if like is None else like
        self.glycol = boils if isinstance(boils, Glycol) else None
        self._own = isinstance(fluid, OwnFluid)
        self._boiling: dict[str, Constant] = {}
        self._volume: dict[str, Constant] = {}
        if self.glycol is not None:
            data = glycol_data(self.glycol.glycol_kind)
            self._boiling = {
                "molar_mass": Constant("molar mass of the glycol", data.molar_mass, "kg/mol", FIT),
                "margules": Constant("A, B' of the activities", data.margules, "", FIT),
                "antoine": Constant("a, b, c of the glycol's vapour pressure", data.antoine, "", FIT),
            }
            self._volume = {
                "water_volume": Constant("v_w of water", water_data().specific_volume, "L/kg", FIT),
                "glycol_volume": Constant("v_g of glycol", data.specific_volume, "L/kg", FIT),
                "excess": Constant("c0 to c7 of mixing", data.excess_volume, "L/kg", FIT),
            }
        self._strength: Value | None = None
        self._freezing: Value | None = None
        self._read: dict[tuple[str, int], Value] = {}

    @property
    def strength(self) -> Value:
        """Glycol by mass."""
        if self._strength is None:
            self._strength = self._of_strength()
        return self._strength

    @property
    def freezes_slowly(self) -> bool:
        """Whether ice is known as a share: glycol mixtures only."""
        return self.glycol is not None and not self._own

    @property
    def volume_fraction(self) -> Value:
        """Glycol by volume before mixing."""
        if self.glycol is None:
            return self.book.leaf(0.0, kinds.VOLUME_FRACTION, "no glycol", "/fluid/kind")
        return self.book.step(
            mixture.volume_fraction_of,
            "glycol by volume",
            mass_fraction=self.strength,
            glycol_density=self._pure(),
            water_density=self.water_at_20(),
        )

    @property
    def freezing(self) -> Value:
        """Freezing point."""
        if self._freezing is None:
            self._freezing = self._of_freezing()
        return self._freezing

    def density(self, temperature: Value) -> Value:
        """Liquid density at a temperature."""
        name = f"density at {temperature.name}"
        if self._own:
            return self._table("/fluid/points", temperature, kinds.DENSITY, name, self.fluid.density)
        if self.glycol is None:
            return self.book.step(water.liquid_density, name, temperature=temperature)
        return self.book.step(
            mixture.liquid_density,
            name,
            self._volume,
            temperature=temperature,
            mass_fraction=self.strength,
        )

    def bubble(self, temperature: Value) -> Value:
        """Bubble pressure at a temperature."""
        name = f"bubble pressure at {temperature.name}"
        if self.glycol is not None:
            return self.book.step(
                mixture_vapour.bubble_pressure,
                name,
                self._boiling,
                temperature=temperature,
                mass_fraction=self.strength,
            )
        if self._own:
            pointer = "/fluid/boiling/points"
            return self._table(
                pointer, temperature, kinds.ABSOLUTE_PRESSURE, name, self.fluid.bubble_pressure
            )
        return self.book.step(water.saturation_pressure, name, temperature=temperature)

    def vapour(self, temperature: Value) -> Value:
        """Density of the vapour over the boiling liquid."""
        name = f"density of the steam at {temperature.name}"
        if self.glycol is not None:
            return self.book.step(
                mixture_vapour.vapour_density,
                name,
                self._boiling,
                temperature=temperature,
                mass_fraction=self.strength,
            )
        saturated = self.book.step(
            water.vapour_density, "density of saturated steam", temperature=temperature
        )
        if not self._own:
            return saturated
        return self.book.step(
            balance_steam.steam_density_at_pressure,
            name,
            pressure=self.bubble(temperature),
            temperature=temperature,
            saturation_pressure=self.book.step(
                water.saturation_pressure, "saturation pressure of water", temperature=temperature
            ),
            saturated_density=saturated,
        )

    def water_at_20(self) -> Value:
        """Density of water as it is measured before mixing."""
        return self.book.tabulated(
            water_data().density_at_20,
            kinds.DENSITY,
            "density of water at 20 degC",
            "fluids",
            "water",
            _STANDARD,
        )

    def ice(self, minimum: Value) -> Value:
        """Ice in a mixture colder than its freezing point."""
        kind = self.glycol.glycol_kind  # type: ignore[union-attr]  # only glycols have curves
        left = self._freezing_at(
            strength_freezing_at(kind, minimum.si),
            minimum,
            "strength left in the liquid",
            "strength-freezing-at",
        )[0]
        return self.book.step(
            order.ice_share, "ice at the site minimum", mass_fraction=self.strength, strength_left=left
        )

    def _table(self, pointer: str, at: Value, kind: Kind, name: str, read: Callable[[float], float]) -> Value:
        """Read a number off a table of the question; interpolated, so no equation stands behind it."""
        key = (pointer, id(at))
        found = self._read.get(key)
        if found is None:
            title = f"{name}, interpolated"
            found = self._read[key] = self.book.leaf(read(at.si), kind, title, pointer)
        return found

    def _pure(self) -> Value:
        kind = "propylene-glycol" if self.fluid.kind == "propylene-glycol" else "ethylene-glycol"
        return self.book.tabulated(
            pure_density_at_20(kind),  # type: ignore[arg-type]  # one of the two
            kinds.DENSITY,
            "density of the glycol at 20 degC",
            "fluids",
            kind,
            FIT,
        )

    def _of_strength(self) -> Value:
        book, fluid, ground = self.book, self.fluid, self.ground
        share = fluid.mass_fraction
        if self.glycol is None:
            return book.leaf(share, kinds.MASS_FRACTION, "no glycol", "/fluid/kind")
        if self._own:
            return book.leaf(share, kinds.MASS_FRACTION, "strength it boils like", "/fluid/boiling/share")
        if ground.way == "by-volume":
            stated = book.leaf(
                ground.number,
                kinds.VOLUME_FRACTION,
                "glycol by volume, as stated",
                "/fluid/concentration/share",
            )
            return book.step(
                mixture.mass_fraction_of,
                "glycol by mass",
                volume_fraction=stated,
                glycol_density=self._pure(),
                water_density=self.water_at_20(),
            )
        if ground.way == "protect-to":
            pointer = "/fluid/concentration/temperature"
            wanted = book.leaf(ground.number, kinds.TEMPERATURE, "temperature to protect to", pointer)
            strength, self._freezing = self._freezing_at(
                share, wanted, "glycol by mass", "strength-protecting-to"
            )
            return strength
        return book.leaf(share, kinds.MASS_FRACTION, "glycol by mass", "/fluid/concentration/share")

    def _freezing_at(self, share: float, wanted: Value, name: str, id: str) -> tuple[Value, Value]:
        """A strength that freezes at a temperature, and its freezing point."""
        book = self.book
        system = System(
            id=id, meaning="The least strength whose warmer freezing curve lies at or below the temperature."
        )
        unknown = book.unknown(share, kinds.MASS_FRACTION, name, system)
        point = self._curves(unknown)
        title = f"freezing point less {wanted.name}"
        residual = book.step(balance_pressure.temperature_residual, title, first=point, second=wanted)
        book.close(unknown, [point, residual], residual)
        return unknown, point

    def _of_freezing(self) -> Value:
        fluid, book = self.fluid, self.book
        if self._own:
            return book.leaf(
                fluid.freezing_point, kinds.TEMPERATURE, "freezing point", "/fluid/freezingPoint"
            )
        if self.glycol is None:
            return book.tabulated(
                ZERO_CELSIUS, kinds.TEMPERATURE, "freezing point", "fluids", "water", _STANDARD
            )
        if fluid.mass_fraction > FREEZING_STRENGTH_HIGHEST:
            ends = book.tabulated(
                FREEZING_STRENGTH_HIGHEST,
                kinds.MASS_FRACTION,
                "strength at which the freezing curves end",
                "fluids",
                fluid.kind,
                FIT,
            )
            return self._curves(ends)
        strength = self.strength
        return self._freezing or self._curves(strength)

    def _curves(self, strength: Value) -> Value:
        """The warmer of the two freezing curves."""
        data = glycol_data(self.glycol.glycol_kind)  # type: ignore[union-attr]  # only glycols have curves
        points = [
            self.book.step(
                mixture.freezing_point,
                f"freezing point, {name}",
                {"curve": Constant(f"f0 to f4, {name}", curve, "", FIT)},
                mass_fraction=strength,
            )
            for name, curve in (
                ("pure glycol", data.freezing_pure),
                ("inhibited glycol", data.freezing_inhibited),
            )
        ]
        return self.book.step(
            balance_steam.higher_temperature, "freezing point", first=points[0], second=points[1]
        )
