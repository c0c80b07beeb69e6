"""The derivation computes anew what the calculation computed, and must come to the same numbers."""

from collections.abc import Iterator
from math import isfinite

import pytest

from calc.derivation.cases import CASES, case
from calc.loops import random_loop
from loopslack.calc.derivation.book import Book
from loopslack.calc.derivation.ground import Ground
from loopslack.calc.derivation.whole import derive_check, derive_design
from loopslack.calc.design import Design, Request, design
from loopslack.calc.existing import Checked, check
from loopslack.calc.fit import Fit
from loopslack.calc.judge import membrane_full
from loopslack.calc.judgement import Judgement
from loopslack.calc.model import Vessel
from loopslack.calc.order_list import order_list
from loopslack.calc.scenarios import BASE
from loopslack.calc.settings_card import closed_forms
from loopslack.kernel.errors import CalculationError
from loopslack.library.vessels import preferred_vessels

Numbers = Iterator[tuple[str, float | None]]
WITHIN = 1e-9


def shown_numbers(fitted: Fit, judgement: Judgement, *, card: bool) -> Numbers:
    """The numbers of the vessel an answer shows, at the places where the answer shows them; SI, gauge."""
    loop = fitted.analysis.loop
    air = loop.atmosphere
    contents = [group.content for group in loop.groups] + [branch.content for branch in loop.branches]
    for k, content in enumerate(contents):
        yield f"content/parts/{k}/content", content
    yield "content/total", loop.content
    yield "content/collectors", loop.collector_content
    yield "content/pipes", loop.pipe_content
    yield "stagnation/0/stagnationTemperature", max(group.stagnation_temperature for group in loop.groups)
    window = fitted.window
    if fitted.counted and isfinite(window.lower) and isfinite(window.upper) and window.upper > window.lower:
        for prefix in ("", "settings/") if card else ("",):
            yield f"{prefix}window/lower", window.lower - air
            yield f"{prefix}window/upper", window.upper - air
            yield f"{prefix}window/recommended", window.recommended - air
            yield f"{prefix}window/width", window.width
    for k, state in enumerate(judgement.states):
        yield f"states/{k}/vesselLiquid", state.liquid
        if state.pressure is not None:
            yield f"states/{k}/vesselPressure", state.pressure - air
        if state.top_pressure is not None:
            yield f"states/{k}/topPressure", state.top_pressure - air
        if state.gauge_pressure is not None:
            yield f"states/{k}/gaugeReading", state.gauge_pressure - air
    yield from stagnation_numbers(fitted, judgement, air)


def stagnation_numbers(fitted: Fit, judgement: Judgement, air: float) -> Numbers:
    found = judgement.stagnation.get(BASE.id)
    if found is None:
        return
    extent, here = found.extent, "stagnation/0"
    if isfinite(found.pressure) and found.liquid >= 0 and not membrane_full(found, fitted.gas):
        yield f"{here}/vesselPressure", found.pressure - air
    yield f"{here}/vesselLiquid", found.liquid
    yield f"{here}/gasTemperature", found.gas_temperature
    yield f"{here}/mixedTemperature", found.mixed_temperature
    yield f"{here}/lastArrivingTemperature", found.last_temperature
    yield f"{here}/steamTemperature", max(steam.temperature for steam in extent.spaces)
    if extent.boiling:
        yield f"{here}/steamVolume", extent.steam_volume
        yield f"{here}/steamPower", sum(steam.power for steam in extent.spaces)
    if extent.unspent > 0:
        yield f"{here}/unspentPower", extent.unspent
    number = 0
    for space, steam in zip(fitted.analysis.case(BASE).balance.spaces, extent.spaces, strict=True):
        reaches = space.path.reach(steam.place)
        for k in range(len(space.path.branches)):
            if steam.boiling and steam.power > 0:
                yield f"{here}/reach/{number + k}/reach", reaches[k]
        number += len(space.path.branches)


def design_numbers(found: Design) -> Numbers:
    shown, air = found.shown, found.loop.atmosphere
    window = shown.window
    card = shown.counted and isfinite(window.lower) and isfinite(window.upper) and window.upper > window.lower
    yield from shown_numbers(shown, found.judgement, card=card)
    if card:
        yield "settings/fillPressure", window.recommended - air
        yield "settings/finalPressure", shown.analysis.final_pressure - air
        yield "settings/precharge", shown.gas.precharge - air
        forms = closed_forms(shown)
        if forms is not None:
            yield "settings/closedForms/lower", forms.lower - air
            yield "settings/closedForms/upper", forms.upper - air
    for name, sized in zip(("base", "recommended", "robust"), found.volumes, strict=True):
        if sized is not None:
            yield f"volumes/{name}/smallest", sized.smallest
            yield f"volumes/{name}/coolingContent", sized.cooling
            yield f"volumes/{name}/precharge", sized.interval.precharge - air
            if sized.floor > sized.interval.smallest:
                yield f"volumes/{name}/floor", sized.floor
    yield from order_numbers(shown)


def order_numbers(shown: Fit) -> Numbers:
    order = order_list(shown)
    yield "order/content", order.content
    yield "order/dischargeContainer", order.discharge_container
    yield "order/freezingPoint", order.freezing_point
    yield "order/freezingMargin", order.freezing_margin
    if shown.mass >= 0:
        yield "order/vesselContent", order.vessel_content
        yield "order/readyMix", order.ready_mix
        if order.water is not None:
            yield "order/water", order.water
            yield "order/glycol", order.glycol
            yield "order/massConcentration", order.mass_fraction
            yield "order/volumeConcentration", order.volume_fraction
        if order.ice_fraction is not None:
            yield "order/iceFraction", order.ice_fraction


def check_numbers(found: Checked) -> Numbers:
    air = found.fitted.analysis.loop.atmosphere
    yield from shown_numbers(found.fitted, found.judgement, card=False)
    yield "precharge", found.fitted.gas.precharge - air
    if isfinite(found.fill_pressure):
        yield "fillPressure", found.fill_pressure - air


def compare(book: Book, expected: Numbers) -> None:
    derived = {pointer.removeprefix("/result/"): value.si for pointer, value in book.reported.items()}
    numbers = dict(expected)
    assert derived.keys() == numbers.keys()
    # A gauge pressure is a small difference of larger ones, so pressures are held to a billionth of a bar as well.
    off = {
        pointer: (number, numbers[pointer])
        for pointer, number in derived.items()
        if number != pytest.approx(numbers[pointer], rel=WITHIN, abs=1e-4 if "ressure" in pointer else 1e-12)
    }
    assert off == {}


@pytest.mark.parametrize(("kind", "name"), CASES, ids=[f"{kind}: {name}" for kind, name in CASES])
def test_every_derived_number_is_the_reported_one(kind: str, name: str) -> None:
    found = case(kind, name)
    compare(
        found.book,
        design_numbers(found.found) if isinstance(found.found, Design) else check_numbers(found.found),
    )


SERIES = tuple(
    Vessel(id=size.id, nominal_volume=size.nominal_volume, rated_pressure=10e5)
    for size in preferred_vessels()
)
SEEDS = range(60)


@pytest.mark.parametrize("seed", SEEDS)
def test_random_loops_are_derived_to_the_same_numbers(seed: int) -> None:
    """Loops of every kind: crests, several steam spaces, coolers, valves nobody can make hold."""
    loop = random_loop(seed)
    policy = ("single", "combined", "none")[seed % 3]
    sized = seed % 2 == 0
    try:
        found = design(loop, Request(SERIES, 1, "size" if sized else "none", policy))
    except CalculationError:
        return
    compare(derive_design(found, Ground(sized_cooling=sized)), design_numbers(found))


@pytest.mark.parametrize("seed", SEEDS)
def test_random_vessels_are_derived_to_the_same_numbers(seed: int) -> None:
    """Vessels of any size at any filling: empty, pinned, opening, with steam at the station."""
    loop = random_loop(1000 + seed)
    litres = (8, 18, 50, 140, 400, 1500)[seed % 6]
    vessel = Vessel(
        id="given",
        nominal_volume=litres / 1000,
        rated_pressure=10e5,
        acceptance_volume=litres / 2000 if seed % 4 == 0 else None,
        delivered_precharge=2e5,
        precharge_adjustable=seed % 5 != 0,
    )
    fill = loop.atmosphere + (0.6 + 0.05 * seed) * 1e5
    try:
        found = check(loop, vessel, 1 + seed % 2, "single", fill_pressure=fill)
    except CalculationError:
        return
    compare(derive_check(found, Ground(fill=(fill, "/fillPressure"))), check_numbers(found))
