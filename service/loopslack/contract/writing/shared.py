"""Writes the parts that every answer has: assumptions, cautions, provenance, and quantities of any kind."""

from functools import cache, lru_cache
from importlib import import_module
from pkgutil import walk_packages

from loopslack import __version__, calc, physics
from loopslack.contract.answers.shared import (
    AnyQuantity,
    Assumption,
    Caution,
    Provenance,
    SourceNote,
)
from loopslack.contract.reading.reader import Assumed
from loopslack.contract.writing.quantities import System, six_digits
from loopslack.kernel import kinds
from loopslack.kernel.citations import Cite
from loopslack.kernel.equation import fingerprint
from loopslack.kernel.kinds import Kind
from loopslack.kernel.units import scale_of

CONTRACT_VERSION = "1.1.0"

_NOISE_OF_OFFSET = 1e-9
_LINES = {
    (kind.name, system): (*scale_of(kind, unit), unit)
    for kind in kinds.KINDS
    if kind.units
    for system, unit in (("metric", kind.metric), ("us", kind.us))
}


def any_quantity(si: float, kind: Kind, system: System) -> AnyQuantity:
    """Write an SI number of a kind in the unit of a system, rounded once."""
    scale, offset, unit = _LINES[kind.name, system]
    number = (si - offset) / scale
    if offset and abs(number) < _NOISE_OF_OFFSET:
        number = 0.0
    return AnyQuantity(value=six_digits(number), unit=unit)  # type: ignore[arg-type]  # the table of units is closed


def optional_quantity(si: float | None, kind: Kind, system: System) -> AnyQuantity | None:
    """Write a number that may not exist."""
    return None if si is None else any_quantity(si, kind, system)


@lru_cache(maxsize=8192)
def assumption(assumed: Assumed, system: System) -> Assumption:
    """Write an assumption; equal ones are written once."""
    if assumed.kind is None or assumed.si is None:
        return Assumption(
            field=assumed.pointer, word=assumed.word, why=assumed.why, source=source_note(assumed.source)
        )
    ranged = assumed.low != assumed.high
    return Assumption(
        field=assumed.pointer,
        value=any_quantity(assumed.si, assumed.kind, system),
        low=any_quantity(assumed.low, assumed.kind, system) if ranged else None,
        high=any_quantity(assumed.high, assumed.kind, system) if ranged else None,
        why=assumed.why,
        source=source_note(assumed.source),
    )


def assumptions(assumed: tuple[Assumed, ...], system: System) -> list[Assumption]:
    """Write everything that was assumed, in the order it was met."""
    return [assumption(one, system) for one in assumed]


def source_note(cite: Cite) -> SourceNote:
    """Write where something comes from."""
    return SourceNote(key=cite.key, seen=cite.seen, place=cite.place or None)


@cache
def provenance() -> Provenance:
    """Say what computed an answer; worked out when first asked for, from every equation of the service."""
    for package in (physics, calc):
        for module in walk_packages(package.__path__, f"{package.__name__}."):
            import_module(module.name)
    return Provenance(service_version=__version__, contract_version=CONTRACT_VERSION, equations=fingerprint())


# Common practice, no source: what a careful installer tells every customer.
_CAUTIONS = (
    (
        "scalding",
        "Liquid and steam of a collector loop scald. Work on it only when it is cold and without pressure.",
    ),
    (
        "hot-surfaces",
        "Pipes, vessels and fittings can be hotter than 100 degC in the sun, also when the pump rests.",
    ),
    (
        "relief-discharge",
        "Pipe the relief valve's discharge down, without a valve, to a vented container of the collectors' content.",
    ),
    (
        "no-shut-off",
        "No valve that can be shut between collectors, relief valve and vessel; take the handle off a service valve.",
    ),
    (
        "automatic-vent",
        "Shut automatic vents at the collectors once the loop is filled: they would blow steam.",
    ),
    ("fill-covered", "Fill and flush only with the collectors covered or cold."),
    ("local-rules", "Local codes and a licensed installer decide; this calculation does not replace them."),
)
CAUTIONS = [Caution(code=code, message=message) for code, message in _CAUTIONS]
"""The cautions of every answer about a loop."""
