"""Puts the faults of a question into the order of its body, so that a person can mend them from top to bottom."""

from collections.abc import Iterable

from loopslack.contract.problems import FaultyField

_LAST = 1 << 30


def in_order(faults: Iterable[FaultyField], body: object) -> list[FaultyField]:
    """The faults by their place in a body as decoded.

    What is missing comes after what its object states, and what is said of the whole body last. Faults of one place
    stay as they are, and none is told twice.
    """
    places: dict[int, dict[str, int]] = {}
    told = {(fault.pointer, fault.code, fault.message): fault for fault in faults}
    return sorted(told.values(), key=lambda fault: _place(fault.pointer, body, places))


def _place(pointer: str, body: object, places: dict[int, dict[str, int]]) -> tuple[int, ...]:
    if not pointer:
        return (_LAST + 1,)
    found: list[int] = []
    value = body
    for step in pointer.split("/")[1:]:
        name = step.replace("~1", "/").replace("~0", "~")
        if isinstance(value, dict):
            if id(value) not in places:
                places[id(value)] = {member: place for place, member in enumerate(value)}
            found.append(places[id(value)].get(name, _LAST))
            value = value.get(name)
        elif isinstance(value, list) and name.isdigit():
            found.append(int(name))
            value = value[int(name)] if int(name) < len(value) else None
        else:
            found.append(_LAST)
            value = None
    return tuple(found)
