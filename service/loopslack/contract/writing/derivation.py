"""Writes a derivation in the caller's units: each number, equation and set of constants once.

Values are rounded once, like every answered number, so a redone step agrees within what the printed digits leave open.
"""

from functools import lru_cache
from math import isfinite

from loopslack.calc.derivation.book import Book, Constant, Step
from loopslack.calc.derivation.whole import derive_check, derive_design
from loopslack.calc.design import Design
from loopslack.calc.existing import Checked
from loopslack.contract.answers import derivation as out
from loopslack.contract.answers.shared import AnyQuantity
from loopslack.contract.questions.operations import LoopQuestion, VesselSizingQuestion
from loopslack.contract.reading.derivation import ground_of
from loopslack.contract.reading.loop import Reading
from loopslack.contract.writing.quantities import System
from loopslack.contract.writing.shared import any_quantity, source_note
from loopslack.kernel.equation import EQUATIONS, Equation
from loopslack.kernel.kinds import Kind
from loopslack.kernel.value import Assumed, Given, Tabulated, Value

DOUBTS = (
    "The base case is written out. Every doubt is computed again with the same equations from its own stagnation "
    "temperature, steam power, open runs or gas temperature. Where a doubt sets a bound of the fill window or the "
    "cooling vessel, its steam is written out as well and named by the doubt."
)
REDOING = (
    "Turn every number into SI (m, m2, m3, kg, K, Pa absolute where the unit says so, W) before it goes into a law. "
    "Printed numbers are rounded to six digits, so a redone step may differ in the last ones. A root is not computed "
    "by an equation: put it in, and the steps of its system leave over the residual. Fill pressures by the temperature "
    "of the day follow from the masses that bound the window with the density of that day."
)


def derivation(found: Design | Checked, reading: Reading, question: LoopQuestion) -> out.Derivation:
    """Derive a design or a check: the base case, from the members of its question."""
    ground = ground_of(question, reading)
    if isinstance(found, Design):
        book = derive_design(found, ground, sizing=isinstance(question, VesselSizingQuestion))
    else:
        book = derive_check(found, ground)
    return write_book(book, reading.system)


def write_book(book: Book, system: System) -> out.Derivation:
    """Write what a book holds."""
    return _Writing(book, system).all()


class _Writing:
    """One book in one system of units."""

    def __init__(self, book: Book, system: System) -> None:
        self.book, self.system = book, system
        self._quantities: dict[int, AnyQuantity] = {}
        self._inputs: dict[tuple[str, str, int], out.DerivationInput] = {}
        self._equations: dict[str, Equation] = {}
        self._constants: dict[str, Constant] = {}
        self._answers: dict[int, list[str]] = {}
        for pointer, value in book.reported.items():
            self._answers.setdefault(id(value), []).append(pointer)

    def all(self) -> out.Derivation:
        """The steps, and beside them what they refer to."""
        steps = [self._step(step) for step in self.book.steps]
        return out.Derivation(
            scenario="base",
            doubts=DOUBTS,
            redoing=REDOING,
            steps=steps,
            equations=[_equation(id, self.system) for id in self._equations],
            constants=[_constant(constant) for constant in self._constants.values()],
        )

    def _step(self, step: Step) -> out.DerivationStep:
        equation, value = step.equation, step.value
        if equation is None:
            return out.DerivationStep(
                number=step.number,
                chapter=step.chapter,
                name=value.name,
                value=self._quantity(value),
                inputs=[],
                system=self._system(step),
                answers=self._answers.get(id(value)),
            )
        id_ = equation.id
        self._equations[id_] = equation
        for constant in step.constants:
            self._constants[constant.name] = constant
        return out.DerivationStep(
            number=step.number,
            chapter=step.chapter,
            name=value.name,
            value=self._quantity(value),
            equation=id_,
            law=equation.law,
            inputs=[self._input(id_, name, number) for name, number in step.inputs.items()],
            constants=[constant.name for constant in step.constants] if step.constants else None,
            outside=[name.replace("_", " ") for name in step.outside] if step.outside else None,
            answers=self._answers.get(id(value)),
        )

    def _quantity(self, value: Value) -> AnyQuantity:
        found = self._quantities.get(id(value))
        if found is None:
            found = self._quantities[id(value)] = any_quantity(value.si, value.kind, self.system)
        return found

    def _input(self, equation: str, argument: str, value: Value) -> out.DerivationInput:
        key = (equation, argument, id(value))
        found = self._inputs.get(key)
        if found is None:
            found = self._inputs[key] = self._new_input(equation, argument, value)
        return found

    def _new_input(self, equation: str, argument: str, value: Value) -> out.DerivationInput:
        name, symbol = _named(equation)[argument]
        step = self.book.step_of.get(id(value))
        quantity = self._quantity(value)
        if step is not None:
            return out.DerivationInput(
                name=name, symbol=symbol, meaning=value.name, value=quantity, origin="step", step=step.number
            )
        origin = value.origin
        if isinstance(origin, Tabulated):
            return out.DerivationInput(
                name=name,
                symbol=symbol,
                meaning=value.name,
                value=quantity,
                origin="tabulated",
                table=origin.table,
                row=origin.row or None,
                source=source_note(origin.source),
            )
        assumed = isinstance(origin, Assumed)
        pointer = origin.pointer if isinstance(origin, Given) else self.book.pointer_of[id(value)]
        return out.DerivationInput(
            name=name,
            symbol=symbol,
            meaning=value.name,
            value=quantity,
            origin="assumed" if assumed else "given",
            pointer=pointer,
            source=source_note(origin.source) if isinstance(origin, Assumed) else None,
        )

    def _system(self, step: Step) -> out.DerivationSystem:
        system, numbers = step.system, self.book.step_of
        if system is None:  # a step without an equation is a root
            raise TypeError(f"step {step.number} has neither an equation nor a system")
        residual = system.residual
        return out.DerivationSystem(
            id=system.id,
            meaning=system.meaning,
            equations=[numbers[id(value)].number for value in system.closing],
            residual=None if residual is None else self._quantity(residual),
            residual_step=None if residual is None else numbers[id(residual)].number,
        )


@lru_cache(maxsize=512)
def _named(id: str) -> dict[str, tuple[str, str | None]]:
    """What an equation's arguments are called and their symbols, where the law has one symbol for them."""
    equation = EQUATIONS[id]
    symbols = {meaning.replace(" ", "_"): symbol for symbol, meaning in equation.symbols.items()}
    return {name: (name.replace("_", " "), symbols.get(name)) for name in equation.arguments}


@lru_cache(maxsize=512)
def _equation(id: str, system: System) -> out.DerivationEquation:
    equation = EQUATIONS[id]
    ranges = [
        _range(name.replace("_", " "), low.low, low.high, equation.arguments[name], system)
        for name, low in equation.valid.items()
    ]
    ranges.append(_range("result", equation.yields.low, equation.yields.high, equation.kind, system))
    return out.DerivationEquation(
        id=id,
        law=equation.law,
        symbols=[
            out.DerivationSymbol(symbol=symbol, meaning=meaning)
            for symbol, meaning in equation.symbols.items()
        ],
        source=source_note(equation.source),
        valid=[entry for entry in ranges if entry is not None],
        note=equation.note or None,
    )


def _range(of: str, low: float, high: float, kind: Kind, system: System) -> out.DerivationRange | None:
    if not (isfinite(low) or isfinite(high)) or not kind.units:
        return None
    return out.DerivationRange(
        of=of,
        low=any_quantity(low, kind, system) if isfinite(low) else None,
        high=any_quantity(high, kind, system) if isfinite(high) else None,
    )


def _constant(constant: Constant) -> out.DerivationConstant:
    numbers = constant.number
    return out.DerivationConstant(
        id=constant.name,
        values=list(numbers) if isinstance(numbers, tuple) else [numbers],
        unit=constant.unit or None,
        source=source_note(constant.source),
    )
