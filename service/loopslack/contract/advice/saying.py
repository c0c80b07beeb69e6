"""How every advisory is put into words: its numbers in the caller's units, as a sentence says them."""

from collections.abc import Mapping

from loopslack.contract.answers.shared import Advisory, AnyQuantity, Severity
from loopslack.contract.writing.quantities import System
from loopslack.contract.writing.shared import any_quantity
from loopslack.kernel.kinds import Kind

Numbers = Mapping[str, tuple[float, Kind]]
"""SI numbers with their kinds, by the names that a sentence and its parameters have for them."""


def said(quantity: AnyQuantity) -> str:
    """A quantity as a sentence says it: four digits at most."""
    return f"{quantity.value:.4g} {quantity.unit}"


def written(numbers: Numbers, system: System) -> tuple[dict[str, AnyQuantity], dict[str, str]]:
    """Numbers as parameters of an advisory, and as its sentence says them."""
    parameters = {name: any_quantity(si, kind, system) for name, (si, kind) in numbers.items()}
    return parameters, {name: said(quantity) for name, quantity in parameters.items()}


def advisory(
    severity: Severity, code: str, message: str, remedy: str, numbers: Numbers, system: System
) -> Advisory:
    """An advisory whose message has a gap for each number."""
    parameters, shown = written(numbers, system)
    return Advisory(
        severity=severity, code=code, message=message.format(**shown), remedy=remedy, parameters=parameters
    )
