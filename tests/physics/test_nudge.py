"""No number in these laws may change unnoticed: nudge each one by a thousandth, and a check must fail."""

import ast
from collections.abc import Iterator
from functools import cache
from importlib import import_module
from pathlib import Path
from typing import Any

import pytest

import loopslack.physics
from loopslack.kernel import equation as register
from loopslack.kernel.equation import EQUATIONS
from published.checks import MODULES, published

for module in MODULES:
    import_module(f"loopslack.physics.{module}")


def half_a_litre_arrives(mixing: dict[str, Any]) -> bool:
    """Half a litre of 80 degC into half a litre of 20 degC, by hand: 50 degC."""
    arrival = mixing["mixed_after_arrival"](5e-4, 293.15, 5e-4, [(2e-4, 353.15)], 353.15)
    return (arrival.mixed, arrival.last) == (pytest.approx(323.15), 353.15)


# Numbers of functions that are no law, each with a figure worked by hand.
BESIDES = {"mixing": half_a_litre_arrives}

PHYSICS = Path(loopslack.physics.__file__).parent


class Nudge(ast.NodeTransformer):
    """Changes the n-th number of a module by a thousandth, a zero to a thousandth."""

    def __init__(self, n: int) -> None:
        self.left = n
        self.was = ""

    def visit_Constant(self, node: ast.Constant) -> ast.AST:
        if not isinstance(node.value, int | float) or isinstance(node.value, bool):
            return node
        self.left -= 1
        if self.left != -1:
            return node
        self.was = f"{node.value} in line {node.lineno}"
        return ast.copy_location(ast.Constant(node.value * 1.001 or 0.001), node)


@cache
def source(module: str) -> str:
    return (PHYSICS / f"{module}.py").read_text(encoding="utf-8")


def numbers(module: str) -> Iterator[tuple[str, int]]:
    counter = Nudge(-1)
    counter.visit(ast.parse(source(module)))
    yield from ((module, n) for n in range(-1 - counter.left))


def test_there_are_numbers_to_nudge() -> None:
    assert sum(1 for module in MODULES for _ in numbers(module)) > 60


@pytest.mark.parametrize(("module", "n"), [case for module in MODULES for case in numbers(module)])
def test_a_nudged_number_is_noticed(module: str, n: int, monkeypatch: pytest.MonkeyPatch) -> None:
    nudge = Nudge(n)
    tree = nudge.visit(ast.parse(source(module)))
    name = f"loopslack.physics.{module}"
    own = [key for key, law in EQUATIONS.items() if law.function.__module__ == name]
    for key in own:
        monkeypatch.delitem(EQUATIONS, key)
    monkeypatch.setattr(register, "_PAPERS", dict(register._PAPERS))
    names: dict[str, Any] = {"__name__": "nudged"}
    exec(compile(tree, f"{module}.py", "exec"), names)  # noqa: S102 - our own text
    try:
        passes = all(case.passes() for case in (*published(module).check, *published(module).refused))
        besides = BESIDES.get(module)
        assert not passes or (besides and not besides(names)), f"{nudge.was} can change unnoticed"
    finally:
        for key in own:
            del EQUATIONS[key]


def test_what_stands_beside_the_laws_holds_without_a_nudge() -> None:
    assert all(holds(vars(import_module(f"loopslack.physics.{module}"))) for module, holds in BESIDES.items())
