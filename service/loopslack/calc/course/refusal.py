"""The one way in which the course says that it does not describe a loop."""

from collections.abc import Mapping

from loopslack.kernel.errors import NotApplicable


def not_applicable(
    message: str, *, remedy: str, pointer: str = "", facts: Mapping[str, object] | None = None
) -> NotApplicable:
    """Refusal with the code of the course."""
    return NotApplicable(message, remedy=remedy, pointer=pointer, code="course-not-applicable", facts=facts)
