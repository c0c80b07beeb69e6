"""Faults as they are found in a question: how many are kept, and what is said of each.

Where the faults are is found in `faults`.
"""

import re
from collections.abc import Collection, Iterable, Sequence

import msgspec

from loopslack.contract.problems import MOST_COUNTED, MOST_FAULTS, FaultyField
from loopslack.contract.refusals import fault_of
from loopslack.contract.strict.field_rules import Broke, word
from loopslack.contract.strict.hints import listing, members_near, shown
from loopslack.kernel.errors import CalculationError, Refusals

MOST_HINTS = 20
"""Near misses looked for in one question; a search costs up to a millisecond."""


class EnoughError(Exception):
    """Ends a search that has found as many faults as are counted."""


class Findings:
    """The faults of one question, up to so many as are counted."""

    def __init__(self) -> None:
        self.found: list[FaultyField] = []
        self._hints = 0

    def add(self, pointer: str, code: str, message: str) -> None:
        """Keep a fault."""
        self._keep(FaultyField(pointer=pointer, code=code, message=message))

    def _keep(self, fault: FaultyField) -> None:
        if len(self.found) == MOST_COUNTED:
            raise EnoughError
        self.found.append(fault)

    def add_all(self, pointer: str, broken: Iterable[Broke]) -> None:
        """Keep the faults of one value."""
        for one in broken:
            self._keep(
                FaultyField(
                    pointer=pointer,
                    code=one.code,
                    message=one.message,
                    parameters=dict(one.parameters),
                    words=dict(one.words),
                )
            )

    def add_shared(self, searches: Sequence["Findings"]) -> None:
        """Keep the faults that each of several searches has found in the same words."""
        told = [
            {(fault.pointer, fault.code, fault.message) for fault in other.found} for other in searches[1:]
        ]
        for fault in searches[0].found:
            if all((fault.pointer, fault.code, fault.message) in known for known in told):
                self._keep(fault)

    def forget(self, pointers: Collection[str]) -> None:
        """Drop the faults at these places."""
        self.found = [fault for fault in self.found if fault.pointer not in pointers]

    def add_cause(self, cause: CalculationError, pointer: str) -> None:
        """Take over a fault that the question's own rules found at this place."""
        for one in cause.errors if isinstance(cause, Refusals) else (cause,):
            self._keep(fault_of(one, pointer))

    def may_hint(self) -> bool:
        """Whether a near miss may still be looked for."""
        return self._hints < MOST_HINTS and len(self.found) < MOST_FAULTS

    def add_word(self, pointer: str, value: object, words: tuple[object, ...]) -> None:
        """Keep the fault of a word that is none of some."""
        self.add_all(pointer, word(value, words, hint=self.may_hint()))

    def add_unknown(self, name: str, known: set[str], pointer: str) -> None:
        """Keep the fault of a member that an object does not have."""
        near = members_near(name, known) if self.may_hint() else ()
        self._hints += 1
        remedy = f"Did you mean {listing(near, last='or')}?" if near else f"It has {listing(sorted(known))}."
        place = f"{pointer}/{escaped(name[:64])}"
        self.add(place, "unknown-field", f"{shown(name)} is no member of this object. {remedy}")


def first_fault(error: msgspec.ValidationError) -> FaultyField:
    """The one fault the decoder itself reports, in its words."""
    path = re.search(r"`\$((?:\.[A-Za-z0-9_-]+|\[\d+\])*)", str(error))
    place = "" if path is None else path[1].replace(".", "/").replace("[", "/").replace("]", "")
    return FaultyField(pointer=place, code="invalid", message=sentence(error))


def escaped(name: str) -> str:
    """A member's name as one step of a JSON Pointer."""
    return name.replace("~", "~0").replace("/", "~1")


def sentence(error: msgspec.ValidationError) -> str:
    """What the decoder says of a value, without the place."""
    return str(error).partition(" - at ")[0].rstrip(".") + "."
