"""The code's answers to the states of ``fluid_digits.toml``, from any version of laws and coefficients."""

from collections.abc import Callable, Mapping
from types import SimpleNamespace
from typing import Any

from loopslack.library.fluids import GlycolData, WaterData, glycol_data, water_data
from loopslack.physics import mixture, mixture_vapour, water

Laws = Any


class Code:
    """The laws of water, the mixture and its vapour, with the coefficients they are fed."""

    def __init__(
        self,
        *,
        water: Laws = water,
        mixture: Laws = mixture,
        mixture_vapour: Laws = mixture_vapour,
        water_end: WaterData | None = None,
        glycols: Mapping[str, GlycolData] | None = None,
    ) -> None:
        self.water, self.mixture, self.vapour = water, mixture, mixture_vapour
        self.water_end = water_end or water_data()
        self.glycols = {kind: glycol_data(kind) for kind in ("propylene-glycol", "ethylene-glycol")} | dict(
            glycols or {}
        )

    def answer(self, key: str) -> float:
        """What this code says to a state such as ``bubble propylene-glycol 373.15 0.4``."""
        law, *state = key.split()
        if len(state) == 1:
            return OF_WATER[law](self.water, float(state[0]))
        kind, temperature, strength = state[0], float(state[1]), float(state[2])
        return OF_MIXTURE[law](self, self.glycols[kind], temperature, strength)

    def constants(self, g: GlycolData, w: float) -> tuple[tuple[float, float], tuple[float, ...]]:
        return self.vapour.activities(w, g.molar_mass, g.margules), g.antoine

    def shares(self, g: GlycolData, share: float) -> float:
        x = (293.15 - self.mixture.MIDDLE) / self.mixture.HALF_SPAN
        glycol, pure = 1000 / self.mixture.polynomial(g.specific_volume, x), self.water_end.density_at_20
        strength = self.mixture.mass_fraction_of(share, glycol, pure)
        back = self.mixture.volume_fraction_of(strength, glycol, pure)
        return strength + (back - share)


OF_WATER: dict[str, Callable[[Laws, float], float]] = {
    "saturation": lambda law, t: law.saturation_pressure(t),
    "water_liquid": lambda law, t: law.liquid_density(t),
    "steam": lambda law, t: law.vapour_density(t),
    "latent": lambda law, t: law.latent_heat(t),
    "virial": lambda law, t: law.second_virial(t),
    "saturation_slope": lambda law, t: law.saturation_slope(t),
    "steam_growth": lambda law, t: law.vapour_growth(t),
}

OF_MIXTURE: dict[str, Callable[[Code, GlycolData, float, float], float]] = {
    "liquid": lambda code, g, t, w: code.mixture.liquid_density(
        t, w, code.water_end.specific_volume, g.specific_volume, g.excess_volume
    ),
    "heat": lambda code, g, t, w: code.mixture.heat_capacity(
        t, w, code.water_end.heat_capacity, g.heat_capacity
    ),
    "thickness": lambda code, g, t, w: code.mixture.viscosity(t, w, code.water_end.viscosity, g.viscosity),
    "bubble": lambda code, g, t, w: code.vapour.bubble_pressure(t, w, g.molar_mass, g.margules, g.antoine),
    "bubble_slope": lambda code, g, t, w: code.vapour.bubble_slope(t, *code.constants(g, w))[1],
    "glycol_part": lambda code, g, t, w: (
        code.constants(g, w)[0][1] * code.vapour.glycol_pressure(t, g.antoine)
    ),
    "vapour": lambda code, g, t, w: code.vapour.vapour_density(t, w, g.molar_mass, g.margules, g.antoine),
    "glycol_latent": lambda code, g, t, _: code.vapour.glycol_latent_heat(t, g.molar_mass, g.antoine),
    "freezing_pure": lambda code, g, _, w: code.mixture.freezing_point(w, g.freezing_pure),
    "freezing_inhibited": lambda code, g, _, w: code.mixture.freezing_point(w, g.freezing_inhibited),
    "vapour_share": lambda code, g, _, w: code.vapour.mass_fraction_of_vapour(w / 10, g.molar_mass),
    "ice": lambda code, _, __, w: code.mixture.ice_share(w, 0.61),
    "shares": lambda code, g, _, w: code.shares(g, w),
}


def laws(names: dict[str, Any]) -> Laws:
    """The names of an executed module as something with attributes."""
    return SimpleNamespace(**names)
