"""Every member of a question has a name on the sheet, wherever it may be stated or stand in."""

from typing import get_args

import pytest
from msgspec import Struct
from msgspec.structs import fields

from loopslack.contract.questions.operations import LoopDesignQuestion
from loopslack.sheet.sections import inputs
from loopslack.sheet.words import words

EN = words("en")


def struct_of(annotation: object) -> type[Struct] | None:
    if isinstance(annotation, type) and issubclass(annotation, Struct):
        return annotation
    return next((found for part in get_args(annotation) if (found := struct_of(part))), None)


MEMBERS = [
    (parent, field.encode_name)
    for parent in inputs.NESTED
    for field in fields(
        struct_of(next(f.type for f in fields(LoopDesignQuestion) if f.name == parent)) or Struct
    )
]


@pytest.mark.parametrize(("parent", "name"), MEMBERS)
def test_a_stated_member_has_a_name(parent: str, name: str) -> None:
    camel = parent.split("_", maxsplit=1)[0] + "".join(word.capitalize() for word in parent.split("_")[1:])
    assert f"field.{camel}-{name}" in EN or f"field.{name}" in EN


def test_every_member_of_the_question_stands_somewhere_on_the_sheet() -> None:
    shown = {*inputs.NESTED, *inputs.ALONE}
    elsewhere = {"collectors", "pipe_runs", "parts", "include", "units", "rules"}
    assert {field.name for field in fields(LoopDesignQuestion)} - shown - elsewhere == set()
