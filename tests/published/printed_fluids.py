"""The printed laws of the fluids in forty-digit decimals, written apart from the service's code.

Run as a program it writes ``fluid_digits.toml``; do so only when a coefficient is meant to change, and say so
in the change log. The tests compare that file with both these laws and the code.
"""

import tomllib
from decimal import Decimal, localcontext
from pathlib import Path

import loopslack.library

FILE = Path(__file__).parent / "fluid_digits.toml"
DATA = Path(loopslack.library.__file__).parent / "data" / "fluids.toml"
KINDS = ("propylene-glycol", "ethylene-glycol")
LIQUIDS = (("243.15", "0.55"), ("288.15", "0.05"), ("333.15", "0.3"), ("393.15", "0.43"), ("468.15", "0.62"))
BOILING = (("280.15", "0.1"), ("373.15", "0.4"), ("423.15", "0.25"), ("483.15", "0.6"))
WATERS = ("273.16", "320.15", "373.15", "430.15", "485.15")
FREEZING = ("0.05", "0.2", "0.4", "0.6")

D = Decimal
MOLAR_MASS, GAS = D("0.018015268"), D("8.314462618")
CRITICAL, PRESSURE, DENSITY = D("647.096"), D("22.064e6"), D("322")


def powers(coefficients: list[Decimal], x: Decimal) -> Decimal:
    return sum((c * x**n for n, c in enumerate(coefficients)), D(0))


def saturation(t: Decimal) -> Decimal:
    s = 1 - t / CRITICAL
    a = [
        D(c) for c in ("-7.85951783", "1.84408259", "-11.7866497", "22.6807411", "-15.9618719", "1.80122502")
    ]
    n = [D(c) for c in ("1", "1.5", "3", "3.5", "4", "7.5")]
    return PRESSURE * (CRITICAL / t * sum(x * s**y for x, y in zip(a, n, strict=True))).exp()


def water_liquid(t: Decimal) -> Decimal:
    s = 1 - t / CRITICAL
    b = [
        D(c)
        for c in ("1.99274064", "1.09965342", "-0.510839303", "-1.75493479", "-45.5170352", "-6.7469445e5")
    ]
    n = [D(c) / 3 for c in (1, 2, 5, 16, 43, 110)]
    return DENSITY * (1 + sum(x * s**y for x, y in zip(b, n, strict=True)))


def steam(t: Decimal) -> Decimal:
    s = 1 - t / CRITICAL
    c = [
        D(c)
        for c in ("-2.03150240", "-2.68302940", "-5.38626492", "-17.2991605", "-44.7586581", "-63.9201063")
    ]
    n = [D(c) / 6 for c in (2, 4, 8, 18, 37, 71)]
    return DENSITY * sum(x * s**y for x, y in zip(c, n, strict=True)).exp()


def slope(law, t: Decimal) -> Decimal:
    step = D("1e-12")
    return (law(t + step) - law(t - step)) / (2 * step)


def latent(t: Decimal) -> Decimal:
    return t * slope(saturation, t) * (1 / steam(t) - 1 / water_liquid(t))


def liquid(data: dict, g: dict, t: Decimal, w: Decimal) -> Decimal:
    x, u, c = (t - D("363.15")) / 110, 1 - 2 * w, g["excess_volume"]
    excess = c[0] + c[1] * x + c[2] * x**2 + c[3] * x**3 + u * (c[4] + c[5] * x) + u**2 * (c[6] + c[7] * x)
    ends = (1 - w) * powers(data["water"]["specific_volume"], x) + w * powers(g["specific_volume"], x)
    return 1000 / (ends + w * (1 - w) * excess)


def activities(g: dict, w: Decimal) -> tuple[Decimal, Decimal]:
    x2 = (w / g["molar_mass"]) / (w / g["molar_mass"] + (1 - w) / MOLAR_MASS)
    x1, (a, b) = 1 - x2, g["margules"]
    return x1 * (x2**2 * (a + b * (4 * x1 - 1))).exp(), x2 * (x1**2 * (a + b * (1 - 4 * x2))).exp()


def bubble(g: dict, t: Decimal, w: Decimal) -> tuple[Decimal, Decimal, Decimal]:
    """Pressure, part of the glycol, density of the vapour."""
    (first, second), (a, b, c) = activities(g, w), g["antoine"]
    pure, glycol = saturation(t), second * (a - b / (t + c)).exp()
    virial = (pure * MOLAR_MASS / (steam(t) * GAS * t) - 1) / pure
    pressure = pure
    for _ in range(80):
        pressure = first * pure * (virial * (pure - pressure)).exp() + glycol
    y = glycol / pressure
    molar = (1 - y) * MOLAR_MASS + y * g["molar_mass"]
    return pressure, glycol, pressure * molar / ((1 + virial * pressure) * GAS * t)


def heat(data: dict, g: dict, t: Decimal, w: Decimal) -> Decimal:
    x, u, d = (t - D("363.15")) / 110, 1 - 2 * w, g["heat_capacity"]
    excess = d[2] + d[3] * x + d[4] * x**2 + u * (d[5] + d[6] * x)
    return 1000 * (
        (1 - w) * powers(data["water"]["heat_capacity"], x) + w * (d[0] + d[1] * x) + w * (1 - w) * excess
    )


def thickness(data: dict, g: dict, t: Decimal, w: Decimal) -> Decimal:
    h, m = 1000 / t - D("2.9"), g["viscosity"]
    mixed = w * powers(m[:4], h) + w**2 * powers(m[4:7], h) + w**3 * powers(m[7:], h)
    return (powers(data["water"]["viscosity"], h) + mixed).exp() / 1000


def shares(data: dict, g: dict, share: Decimal) -> Decimal:
    glycol = 1000 / powers(g["specific_volume"], (D("293.15") - D("363.15")) / 110)
    return share * glycol / (share * glycol + (1 - share) * data["water"]["density_at_20"])


def glycol_latent(g: dict, t: Decimal) -> Decimal:
    _, b, c = g["antoine"]
    return GAS * b * (t / (t + c)) ** 2 / g["molar_mass"]


def digits() -> dict[str, float]:
    """Every law at a few states, by a key of law, fluid, temperature in K (or 0) and strength."""
    data = tomllib.loads(DATA.read_text(encoding="utf-8"), parse_float=Decimal)
    found: dict[str, Decimal] = {}
    with localcontext() as context:
        context.prec = 40
        for t in WATERS:
            for law in (saturation, water_liquid, steam, latent):
                found[f"{law.__name__} {t}"] = law(D(t))
            found[f"virial {t}"] = (MOLAR_MASS * saturation(D(t)) / (steam(D(t)) * GAS * D(t)) - 1) * (
                GAS * D(t) / saturation(D(t))
            )
            found[f"saturation_slope {t}"] = slope(saturation, D(t))
            found[f"steam_growth {t}"] = slope(steam, D(t)) / steam(D(t))
        for kind in KINDS:
            g = data[kind]
            for t, w in LIQUIDS:
                found[f"liquid {kind} {t} {w}"] = liquid(data, g, D(t), D(w))
                found[f"heat {kind} {t} {w}"] = heat(data, g, D(t), D(w))
                found[f"thickness {kind} {t} {w}"] = thickness(data, g, D(t), D(w))
            for t, w in BOILING:
                pressure, glycol, density = bubble(g, D(t), D(w))
                found[f"bubble {kind} {t} {w}"] = pressure
                found[f"bubble_slope {kind} {t} {w}"] = slope(
                    lambda at, g=g, w=w: bubble(g, at, D(w))[0], D(t)
                )
                found[f"glycol_part {kind} {t} {w}"] = glycol
                found[f"vapour {kind} {t} {w}"] = density
                found[f"glycol_latent {kind} {t} {w}"] = glycol_latent(g, D(t))
            for w in FREEZING:
                found[f"freezing_pure {kind} 0 {w}"] = D("273.15") + D(w) * powers(g["freezing_pure"], D(w))
                found[f"freezing_inhibited {kind} 0 {w}"] = D("273.15") + D(w) * powers(
                    g["freezing_inhibited"], D(w)
                )
                y = D(w) / 10
                found[f"vapour_share {kind} 0 {w}"] = (
                    y * g["molar_mass"] / (y * g["molar_mass"] + (1 - y) * MOLAR_MASS)
                )
                found[f"ice {kind} 0 {w}"] = 1 - D(w) / D("0.61")
                found[f"shares {kind} 0 {w}"] = shares(data, g, D(w))
        return {key: float(value) for key, value in found.items()}


def stored() -> dict[str, float]:
    """The digits as committed."""
    return tomllib.loads(FILE.read_text(encoding="utf-8"))["digits"]


def write() -> None:
    """Write the digits anew."""
    head = "# Written by printed_fluids.py: the printed laws in forty-digit decimals.\n"
    lines = [f'"{key}" = {value!r}' for key, value in digits().items()]
    FILE.write_text(head + "\n[digits]\n" + "\n".join(lines) + "\n", encoding="utf-8")


if __name__ == "__main__":
    write()
