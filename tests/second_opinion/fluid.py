"""Water and glycol mixtures for the second opinion: density, boiling line, steam density.

Sources. Water: IAPWS-95 as implemented by CoolProp (HEOS). Mixtures up to 100 degC: Melinder 2010 as
implemented by CoolProp (INCOMP::MPG, INCOMP::MEG). Above 100 degC an own form: the mixture expands as its
parts do,

    v(t, w) = v(100, w) + (1 - w) [v_w(t) - v_w(100)] + w (b1 s + b2 s^2),   s = (t - 100 degC)/100 K,

with b1, b2 by least squares from the points below, offset left free so that only their slope counts. They
stand at the upper end of the fractions in use, so lower ones lie between them and water. Points: Sun and
Teja, J. Chem. Eng. Data 2004, 49, 1311 (propylene) and 2003, 48, 198 (ethylene), through the NIST TRC
ThermoML archive. Boiling: ideal Raoult law, Antoine equations of the pure glycols from memory (checked only
by their normal boiling points, 188 and 197 degC, in the tests). Good to about 1 K up to 200 degC.

Must not live here: anything about loops.
"""

from __future__ import annotations

from bisect import bisect_right
from functools import lru_cache
from math import exp, log
from typing import NamedTuple

import numpy as np
from CoolProp import CoolProp

from .case import ZERO_CELSIUS

GAS_CONSTANT = 8.314462618
WATER_MOLAR_MASS = 0.018015268
COLDEST, HOTTEST, STEP = 273.16, 523.16, 0.5
CALORIC_TOP = 373.15
MERCURY = 133.322368


class _Glycol(NamedTuple):
    coolprop_name: str
    molar_mass: float
    antoine: tuple[float, float, float]
    measured_fraction: float
    measured_volumes: tuple[tuple[float, float], ...]  # degC, L/kg


_GLYCOLS = {
    "PG": _Glycol(
        "MPG",
        0.07609442,
        (8.2082, 2085.90, 203.540),
        0.5847,
        ((100.3, 1.0211), (117.4, 1.0380), (134.6, 1.0554), (151.4, 1.0750), (171.4, 1.1010)),
    ),
    "EG": _Glycol(
        "MEG",
        0.06206784,
        (8.09083, 2088.936, 203.454),
        0.5345,
        ((101.7, 0.9872), (123.8, 1.0045), (144.0, 1.0231), (158.4, 1.0364)),
    ),
}


class _WaterTable(NamedTuple):
    temperature: list[float]
    pressure: list[float]
    steam_compressibility: list[float]


@lru_cache(maxsize=1)
def _water_state() -> CoolProp.AbstractState:
    return CoolProp.AbstractState("HEOS", "Water")


def water_density(temperature: float) -> float:
    """Saturated liquid water, kg/m3."""
    state = _water_state()
    state.update(CoolProp.QT_INPUTS, 0.0, temperature)
    return float(state.rhomass())


@lru_cache(maxsize=1)
def _water_table() -> _WaterTable:
    state = _water_state()
    rows = _WaterTable([], [], [])
    for index in range(round((HOTTEST - COLDEST) / STEP) + 1):
        temperature = COLDEST + STEP * index
        state.update(CoolProp.QT_INPUTS, 1.0, temperature)
        molar_volume = WATER_MOLAR_MASS / state.rhomass()
        rows.temperature.append(temperature)
        rows.pressure.append(state.p())
        rows.steam_compressibility.append(state.p() * molar_volume / (GAS_CONSTANT * temperature))
    return rows


@lru_cache(maxsize=2)
def glycol_expansion(kind: str) -> tuple[float, float]:
    """b1, b2 in m3/kg of the form above."""
    fraction = _GLYCOLS[kind].measured_fraction
    top = 1.0 / water_density(CALORIC_TOP)
    rows, targets = [], []
    for degrees, litres in _GLYCOLS[kind].measured_volumes:
        s = (degrees - 100.0) / 100.0
        water_part = (1.0 - fraction) * (1.0 / water_density(degrees + ZERO_CELSIUS) - top)
        rows.append([fraction * s, fraction * s * s, 1.0])
        targets.append(litres * 1e-3 - water_part)
    solution = np.linalg.lstsq(np.array(rows), np.array(targets), rcond=None)[0]
    return float(solution[0]), float(solution[1])


def glycol_vapour_pressure(kind: str, temperature: float) -> float:
    """Pure glycol, Pa. Antoine, mmHg and degC, constants from memory."""
    a, b, c = _GLYCOLS[kind].antoine
    return float(10.0 ** (a - b / (temperature - ZERO_CELSIUS + c)) * MERCURY)


class Fluid:
    """One liquid: `kind` is water, PG or EG; the mass fraction of glycol is ignored for water."""

    def __init__(self, kind: str, glycol_mass_fraction: float) -> None:
        self.kind = kind
        self.fraction = 0.0 if kind == "water" else glycol_mass_fraction
        self._incompressible: CoolProp.AbstractState | None = None
        if self.fraction > 0.0:
            self._incompressible = CoolProp.AbstractState("INCOMP", _GLYCOLS[kind].coolprop_name)
            self._incompressible.set_mass_fractions([self.fraction])
            self._volume_at_top = 1.0 / self._mixture_density(CALORIC_TOP)
        self._log_pressure: list[float] = []
        self._log_steam_density: list[float] = []
        self._tabulate()

    @property
    def freezing_point(self) -> float:
        """K, after Melinder 2010 (pure glycol); water at its triple point, where its table starts."""
        if self._incompressible is None:
            return COLDEST
        name = f"INCOMP::{_GLYCOLS[self.kind].coolprop_name}[{self.fraction:.6f}]"
        return float(CoolProp.PropsSI("T_freeze", "T", 300.0, "P", 1e6, name))

    def _mixture_density(self, temperature: float) -> float:
        assert self._incompressible is not None
        self._incompressible.update(CoolProp.PT_INPUTS, 1e6, temperature)
        return float(self._incompressible.rhomass())

    def density(self, temperature: float) -> float:
        """Liquid, kg/m3. The effect of pressure on the liquid (below 0.1 % per 10 bar) is neglected."""
        if self._incompressible is None:
            return water_density(temperature)
        if temperature <= CALORIC_TOP:
            return self._mixture_density(temperature)
        b1, b2 = glycol_expansion(self.kind)
        s = (temperature - CALORIC_TOP) / 100.0
        water_part = 1.0 / water_density(temperature) - 1.0 / water_density(CALORIC_TOP)
        return 1.0 / (
            self._volume_at_top + (1.0 - self.fraction) * water_part + self.fraction * (b1 * s + b2 * s * s)
        )

    def _tabulate(self) -> None:
        water_share, glycol_mass = 1.0, 0.0
        if self.fraction > 0.0:
            glycol_mass = _GLYCOLS[self.kind].molar_mass
            water_moles = (1.0 - self.fraction) / WATER_MOLAR_MASS
            water_share = water_moles / (water_moles + self.fraction / glycol_mass)
        for temperature, saturation, compressibility in zip(*_water_table(), strict=True):
            water_part = water_share * saturation
            glycol_part = 0.0
            if self.fraction > 0.0:
                glycol_part = (1.0 - water_share) * glycol_vapour_pressure(self.kind, temperature)
            pressure = water_part + glycol_part
            # steam departs from the ideal gas in proportion to pressure (second virial coefficient only)
            departure = 1.0 - (1.0 - compressibility) * pressure / saturation
            mass = (water_part * WATER_MOLAR_MASS + glycol_part * glycol_mass) / pressure
            self._log_pressure.append(log(pressure))
            self._log_steam_density.append(log(pressure * mass / (departure * GAS_CONSTANT * temperature)))

    def boiling_temperature(self, pressure: float) -> float:
        """K at a pressure, 1/T linear in ln p between rows; held at the ends, which callers must flag."""
        rows = self._log_pressure
        if pressure <= 0.0:
            return COLDEST
        wanted = log(pressure)
        index = bisect_right(rows, wanted) - 1
        if index < 0:
            return COLDEST
        if index >= len(rows) - 1:
            return HOTTEST
        share = (wanted - rows[index]) / (rows[index + 1] - rows[index])
        below = 1.0 / (COLDEST + STEP * index)
        above = 1.0 / (COLDEST + STEP * (index + 1))
        return 1.0 / (below + share * (above - below))

    def _row(self, temperature: float, rows: list[float]) -> float:
        index = min(int((temperature - COLDEST) / STEP), len(rows) - 2)
        below, above = COLDEST + STEP * index, COLDEST + STEP * (index + 1)
        share = (1.0 / temperature - 1.0 / below) / (1.0 / above - 1.0 / below)
        return exp(rows[index] + share * (rows[index + 1] - rows[index]))

    def bubble_pressure(self, temperature: float) -> float:
        """Pa; the exact inverse of `boiling_temperature`. Between the ends of the table only."""
        if not COLDEST <= temperature <= HOTTEST:
            raise ValueError(f"{temperature:.1f} K lies outside the boiling table")
        return self._row(temperature, self._log_pressure)

    def steam_density(self, temperature: float) -> float:
        """kg/m3 of the vapour over the boiling liquid, glycol share included."""
        return self._row(temperature, self._log_steam_density)


@lru_cache(maxsize=2048)
def fluid(kind: str, glycol_mass_fraction: float) -> Fluid:
    """The liquid, built once."""
    return Fluid(kind, glycol_mass_fraction)
