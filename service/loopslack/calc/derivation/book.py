"""The book a derivation is written in: numbers that know where they came from, one step per equation, in order.

A step is computed by the function of the register from numbers already in the book, never copied from the result it
explains. Equal steps are written once. Which steps a loop needs is not known here.
"""

from collections.abc import Callable, Mapping
from typing import Literal, NamedTuple

from msgspec import Struct

from loopslack.kernel.citations import Cite
from loopslack.kernel.equation import Equation, papers
from loopslack.kernel.kinds import Kind
from loopslack.kernel.value import Assumed, Computed, Given, Origin, Solved, Tabulated, Value

Chapter = Literal[
    "site",
    "fluid",
    "content",
    "collectors",
    "pipes",
    "relief-valve",
    "states",
    "precharge",
    "window",
    "filling",
    "stagnation",
    "cooling-vessel",
    "volumes",
    "order",
]


class Constant(NamedTuple):
    """Fitted numbers of a law, as the table of the service has them."""

    name: str
    number: float | tuple[float, ...]
    unit: str
    source: Cite


class System(Struct, gc=False):
    """Equations that hold at once: the unknown is the root that leaves ``residual`` at nought.

    ``closing`` are the steps of the equations with their numbers put in at the root.
    """

    id: str
    meaning: str
    closing: list[Value] = []
    residual: Value | None = None


class Step(Struct, gc=False):
    """One line of a derivation; ``equation`` is None for an unknown, which ``system`` then defines.

    ``outside`` names the inputs, or ``result``, that lie beyond the range the law was published for.
    """

    number: int
    chapter: Chapter
    value: Value
    equation: Equation | None
    inputs: Mapping[str, Value]
    constants: tuple[Constant, ...]
    outside: tuple[str, ...]
    system: System | None


class Book:
    """Collects the steps. ``assumed`` gives the source of every member of the question that was left open."""

    def __init__(self, assumed: Mapping[str, Cite]) -> None:
        self.assumed = assumed
        self.chapter: Chapter = "site"
        self.steps: list[Step] = []
        self.step_of: dict[int, Step] = {}
        self.reported: dict[str, Value] = {}
        self.pointer_of: dict[int, str] = {}
        self._leaves: dict[tuple[str, str, float], Value] = {}
        self._known: dict[tuple[object, ...], Value] = {}

    def leaf(self, si: float, kind: Kind, name: str, pointer: str) -> Value:
        """A number the question states, or that stands in where it states none."""
        key = (pointer, kind.name, si)
        found = self._leaves.get(key)
        if found is None:
            source = self.assumed.get(pointer)
            origin: Origin = Given(pointer) if source is None else Assumed(source)
            found = self._leaves[key] = Value(si, kind, name, origin)
            self.pointer_of[id(found)] = pointer
        return found

    def stated(self, si: float, kind: Kind, name: str, pointer: str) -> Value:
        """A number the question states, also where what it was turned into counts as assumed."""
        found = Value(si, kind, name, Given(pointer))
        self.pointer_of[id(found)] = pointer
        return found

    def tabulated(self, si: float, kind: Kind, name: str, table: str, row: str, source: Cite) -> Value:
        """A number from a table that ships with the service."""
        key = (f"{table}#{row}#{name}", kind.name, si)
        found = self._leaves.get(key)
        if found is None:
            found = self._leaves[key] = Value(si, kind, name, Tabulated(table, row, source))
        return found

    def step(
        self,
        function: Callable[..., float],
        name: str,
        constants: Mapping[str, Constant] | None = None,
        /,
        **inputs: Value,
    ) -> Value:
        """Work out one equation from numbers of the book and write the line.

        Raises ``TypeError`` for an input of another kind, and what the function raises.
        """
        equation = papers(function)
        arguments, valid = equation.arguments, equation.valid
        key: list[object] = [equation.id]
        numbers: dict[str, float] = {}
        outside: tuple[str, ...] = ()
        for argument, value in inputs.items():
            key.append(id(value))
            number = numbers[argument] = value.si
            if value.kind is not arguments[argument]:
                raise TypeError(f"{equation.id}: {argument} is given as a {value.kind.name}")
            if argument in valid and not valid[argument].holds(number):
                outside += (argument,)
        fitted: tuple[Constant, ...] = ()
        if constants:
            fitted = tuple(constants.values())
            key += [id(constant.number) for constant in fitted]
        known = tuple(key)
        found = self._known.get(known)
        if found is not None:
            return found
        if constants:
            result = function(**numbers, **{name_: one.number for name_, one in constants.items()})
        else:
            result = function(**numbers)
        if not equation.yields.holds(result):
            outside += ("result",)
        value = Value(result, equation.kind, name, Computed(equation.id, inputs))
        self._known[known] = value
        self._write(value, equation, inputs, fitted, outside)
        return value

    def sum(self, function: Callable[..., float], name: str, parts: list[Value]) -> Value:
        """A running total of one or more parts by an equation of ``first`` and ``second``."""
        total = parts[0]
        for count, part in enumerate(parts[1:], start=2):
            title = name if count == len(parts) else f"{name}, so far"
            total = self.step(function, title, first=total, second=part)
        return total

    def unknown(self, si: float, kind: Kind, name: str, system: System) -> Value:
        """The root of a system whose equations follow; close it with ``close``."""
        value = Value(si, kind, name, Solved(system.id, {}))
        self._write(value, None, {}, (), (), system)
        return value

    def close(self, unknown: Value, closing: list[Value], residual: Value) -> None:
        """Say which steps make up the system of an unknown, and what its root leaves over."""
        system = self.step_of[id(unknown)].system
        if system is not None:
            system.closing = [value for value in closing if id(value) in self.step_of]
            system.residual = residual

    def _write(
        self,
        value: Value,
        equation: Equation | None,
        inputs: Mapping[str, Value],
        constants: tuple[Constant, ...],
        outside: tuple[str, ...],
        system: System | None = None,
    ) -> None:
        line = Step(len(self.steps) + 1, self.chapter, value, equation, inputs, constants, outside, system)
        self.steps.append(line)
        self.step_of[id(value)] = line

    def report(self, value: Value, *pointers: str) -> None:
        """Note where the answer shows a number."""
        for pointer in pointers:
            self.reported[pointer] = value

    def keep_reported(self, *prefixes: str) -> None:
        """Forget where an answer would show numbers that this one does not show."""
        self.reported = {pointer: v for pointer, v in self.reported.items() if pointer.startswith(prefixes)}
