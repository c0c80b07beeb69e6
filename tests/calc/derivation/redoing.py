"""Redoes a printed step: from its own printed inputs, through the register and through the printed law.

A printed number is rounded to six digits, so each redone result carries a tolerance: what half a last digit of every
printed input moves it by, and half a last digit of its own.
"""

from collections.abc import Callable, Mapping
from decimal import Decimal, localcontext
from math import floor, log10
from typing import Any

from loopslack.kernel.equation import EQUATIONS, Equation
from loopslack.kernel.kinds import Kind
from loopslack.kernel.units import scale_of, to_si
from physics.test_published import evaluated, printed
from published import printed_fluids

Plain = dict[str, Any]
D = Decimal

# Two conversions are printed with blanks for products and with a common symbol for two densities.
_STRENGTH = {
    "volume_fraction": "phi",
    "mass_fraction": "w",
    "glycol_density": "rho_g",
    "water_density": "rho_w",
}


class Redone:
    """A step as its reader sees it: numbers in SI, each with half a last printed digit."""

    def __init__(self, step: Plain, derivation: Plain) -> None:
        self.step = step
        self.equation: Equation = EQUATIONS[step["equation"]]
        self.numbers: dict[str, float] = {}
        self.halves: dict[str, float] = {}
        for entry in step["inputs"]:
            name = entry["name"].replace(" ", "_")
            kind = self.equation.arguments[name]
            self.numbers[name] = si(entry["value"], kind)
            self.halves[name] = half_digit(entry["value"], kind)
        listed = {constant["id"]: constant["values"] for constant in derivation["constants"]}
        self.constants = [listed[name] for name in step.get("constants", ())]
        self.printed = si(step["value"], self.equation.kind)
        self.half = half_digit(step["value"], self.equation.kind)

    def by_register(self, numbers: Mapping[str, float]) -> float:
        """The function of the register."""
        names = [name for name in self.equation.function.__annotations__ if name != "return"]
        missing = [name for name in names if name not in numbers]
        fitted = {
            name: values[0] if name == "molar_mass" else tuple(values)
            for name, values in zip(missing, self.constants, strict=True)
        }
        return self.equation.function(**numbers, **fitted)

    def by_law(self, numbers: Mapping[str, float]) -> float:
        """The law as it is printed; the laws of the fluids as they are transcribed beside their digits."""
        transcribed = FLUID_LAWS.get(self.equation.id)
        if transcribed is not None:
            with localcontext() as context:
                context.prec = 40
                return float(transcribed({n: D(x) for n, x in numbers.items()}, self.constants))
        if self.equation.id in {"mass-fraction-of-volumes", "volume-fraction-of-masses"}:
            names = {_STRENGTH[name]: number for name, number in numbers.items()}
            law = self.step["law"].partition(" = ")[2]
            return evaluated(law.replace("phi rho_g", "phi * rho_g").replace(") rho_w", ") * rho_w"), names)
        symbols = {symbol: meaning.replace(" ", "_") for symbol, meaning in self.equation.symbols.items()}
        return printed(self.equation, {symbol: numbers[name] for symbol, name in symbols.items()})

    def misses_by(self, law: Callable[[Mapping[str, float]], float]) -> float:
        """How far beyond its tolerance a redone step lies from the printed number; at most nought if it agrees."""
        here = law(self.numbers)
        tolerance = self.half + 1e-11 * abs(here) + 1e-300
        for name, half in self.halves.items():
            if half:
                moved = [law({**self.numbers, name: self.numbers[name] + sign * half}) for sign in (1, -1)]
                tolerance += max(abs(number - here) for number in moved)
        return abs(here - self.printed) - 1.01 * tolerance


def si(quantity: Plain, kind: Kind) -> float:
    return to_si(quantity["value"], quantity["unit"], kind)


def half_digit(quantity: Plain, kind: Kind) -> float:
    """Half of the sixth digit of a printed number, in SI."""
    value = abs(quantity["value"])
    if value == 0:
        return 0.0
    return 0.5 * 10 ** (floor(log10(value)) - 5) * scale_of(kind, quantity["unit"])[0]


def _decimals(values: list[float]) -> list[Decimal]:
    return [D(repr(value)) for value in values]


def _glycol(constants: list[list[float]]) -> Plain:
    molar, margules, antoine = (_decimals(values) for values in constants)
    return {"molar_mass": molar[0], "margules": margules, "antoine": antoine}


def _density(numbers: Mapping[str, Decimal], constants: list[list[float]]) -> Decimal:
    water, glycol, excess = (_decimals(values) for values in constants)
    return printed_fluids.liquid(
        {"water": {"specific_volume": water}},
        {"specific_volume": glycol, "excess_volume": excess},
        numbers["temperature"],
        numbers["mass_fraction"],
    )


def _boiling(part: int) -> Callable[[Mapping[str, Decimal], list[list[float]]], Decimal]:
    def law(numbers: Mapping[str, Decimal], constants: list[list[float]]) -> Decimal:
        found = printed_fluids.bubble(_glycol(constants), numbers["temperature"], numbers["mass_fraction"])
        return found[part]

    return law


def _freezing(numbers: Mapping[str, Decimal], constants: list[list[float]]) -> Decimal:
    strength = numbers["mass_fraction"]
    return D("273.15") + strength * printed_fluids.powers(_decimals(constants[0]), strength)


FLUID_LAWS: Mapping[str, Callable[[Mapping[str, Decimal], list[list[float]]], Decimal]] = {
    "mixture-density": _density,
    "mixture-bubble-pressure": _boiling(0),
    "mixture-vapour-density": _boiling(2),
    "freezing-point": _freezing,
    "water-saturation-pressure": lambda numbers, _: printed_fluids.saturation(numbers["temperature"]),
    "water-liquid-density": lambda numbers, _: printed_fluids.water_liquid(numbers["temperature"]),
    "water-vapour-density": lambda numbers, _: printed_fluids.steam(numbers["temperature"]),
}
