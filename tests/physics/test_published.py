"""Every law against figures published or worked by hand for it, and against its own printed form."""

import math
from importlib import import_module
from pathlib import Path
from pkgutil import iter_modules

import pytest

import loopslack.physics
from loopslack.kernel.equation import EQUATIONS, Equation
from published.checks import MODULES, Check, Refusal, published

for module in MODULES:
    import_module(f"loopslack.physics.{module}")

# The properties of fluids have tables of their own and tests beside them.
FLUIDS = {"water", "mixture", "mixture_vapour", "own_fluid"}
CHECKS = [check for module in MODULES for check in published(module).check]
REFUSALS = [refusal for module in MODULES for refusal in published(module).refused]
WORDS = {"pi": math.pi, "sqrt": math.sqrt, "ln": math.log, "abs": abs, "max": max, "min": min}


def laws(module: str) -> dict[str, Equation]:
    name = f"loopslack.physics.{module}"
    return {key: law for key, law in EQUATIONS.items() if law.function.__module__ == name}


@pytest.mark.parametrize("check", CHECKS, ids=lambda check: f"{check.equation}: {check.source}"[:90])
def test_a_law_gives_the_published_figure(check: Check) -> None:
    assert check.found() == check.expected()


@pytest.mark.parametrize("refusal", REFUSALS, ids=lambda refusal: f"{refusal.equation}: {refusal.why}")
def test_a_law_refuses_what_it_does_not_describe(refusal: Refusal) -> None:
    assert refusal.passes()


def test_every_module_of_physics_has_its_checks() -> None:
    assert {module.name for module in iter_modules(loopslack.physics.__path__)} == {*MODULES, *FLUIDS}
    assert {path.stem for path in Path(__file__).parents[1].glob("published/*.toml")} >= {*MODULES}


@pytest.mark.parametrize("module", MODULES)
def test_every_law_of_a_module_has_a_check_and_every_check_a_law(module: str) -> None:
    assert laws(module).keys() == {check.equation for check in published(module).check}


@pytest.mark.parametrize("check", CHECKS, ids=lambda check: f"{check.equation}: {check.source}"[:90])
def test_the_printed_law_is_the_law_that_runs(check: Check) -> None:
    equation = EQUATIONS[check.equation]
    inputs = check.values(equation)
    numbers = {symbol: inputs[meaning.replace(" ", "_")].si for symbol, meaning in equation.symbols.items()}
    ran = equation.derive(**inputs).si
    assert printed(equation, numbers) == pytest.approx(ran, rel=1e-12, abs=1e-15)


@pytest.mark.parametrize("module", MODULES)
def test_every_argument_of_a_law_has_one_symbol_that_the_law_prints(module: str) -> None:
    for law in laws(module).values():
        meanings = [meaning.replace(" ", "_") for meaning in law.symbols.values()]
        assert sorted(meanings) == sorted(law.arguments)
        missing = [symbol for symbol in law.symbols if symbol not in law.law]
        # The five psi of common practice do not depend on the set pressure.
        assert missing == (["p_sv"] if law.id == "allowance-five-psi" else [])


def printed(equation: Equation, numbers: dict[str, float]) -> float:
    """Evaluate a law as it is printed: one formula, perhaps with one name defined after ``where``."""
    formula, _, definition = equation.law.partition(" where ")
    names = {**WORDS, **{python(symbol): number for symbol, number in numbers.items()}}
    if definition:
        name, _, right = definition.partition(" = ")
        names[name] = evaluated(right, names)
    return evaluated(formula.partition(" = ")[2], names)


def evaluated(formula: str, names: dict[str, object]) -> float:
    return float(eval(python(formula), {"__builtins__": {}}, names))  # noqa: S307 - our own text


def python(formula: str) -> str:
    return formula.replace("^", "**").replace("lambda", "lambda_")
