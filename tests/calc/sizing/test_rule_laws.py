"""The printed laws of the rules against figures published or worked by hand for them."""

import pytest

from loopslack.calc.fluids.making import water
from loopslack.calc.sizing.rules import ashrae
from loopslack.calc.sizing.rules.register import RULES
from loopslack.kernel.equation import EQUATIONS
from loopslack.kernel.units import to_si
from loopslack.library.sources import sources
from physics.test_published import printed
from published.checks import Check, Refusal, published

CHECKS = published("rules").check
REFUSALS = published("rules").refused
OWN = {
    key: law
    for key, law in EQUATIONS.items()
    if law.function.__module__.startswith("loopslack.calc.sizing.rules")
}
STEEL_PER_FAHRENHEIT = 6.5e-6


@pytest.mark.parametrize("check", CHECKS, ids=lambda check: f"{check.equation}: {check.source}"[:90])
def test_a_rule_gives_the_published_figure(check: Check) -> None:
    assert check.found() == check.expected()


@pytest.mark.parametrize("refusal", REFUSALS, ids=lambda refusal: f"{refusal.equation}: {refusal.why}")
def test_a_rule_refuses_what_it_does_not_describe(refusal: Refusal) -> None:
    assert refusal.passes()


def test_every_law_of_the_rules_has_a_check() -> None:
    assert OWN.keys() == {check.equation for check in CHECKS}


@pytest.mark.parametrize("check", CHECKS, ids=lambda check: f"{check.equation}: {check.source}"[:90])
def test_the_printed_rule_is_the_rule_that_runs(check: Check) -> None:
    law = EQUATIONS[check.equation]
    inputs = check.values(law)
    numbers = {symbol: inputs[meaning.replace(" ", "_")].si for symbol, meaning in law.symbols.items()}
    assert printed(law, numbers) == pytest.approx(law.derive(**inputs).si, rel=1e-12, abs=1e-15)


@pytest.mark.parametrize(
    ("fahrenheit", "net"), [(100, 0.0057), (140, 0.0149), (180, 0.0279), (220, 0.0433)], ids=str
)
def test_the_net_expansion_of_water_in_steel_is_that_of_the_engineering_table(
    fahrenheit: float, net: float
) -> None:
    """Engineering table of net water expansion in steel, 40 degF base (read); used as E V_s / (1 - Pf/Po)."""
    cold, hot = (
        to_si(t, "degF", EQUATIONS["us-mechanical-code"].arguments["temperature"]) for t in (40, fahrenheit)
    )
    volume = ashrae.diaphragm_tank(
        1.0,
        water().density(cold),
        water().density(hot),
        STEEL_PER_FAHRENHEIT * (fahrenheit - 40),
        1e5,
        2e5,
    )
    assert volume * (1 - 1 / 2) == pytest.approx(net, abs=0.0004)


def test_every_source_of_a_rule_is_in_the_list_of_publications() -> None:
    for rule in RULES.values():
        assert rule.sources
        for source in rule.sources:
            assert source.key in sources()
            assert not source.place or source.seen == "read"
