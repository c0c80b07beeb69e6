"""Structs become the schemas that generated clients digest, and what they cannot digest is refused by its
place.
"""

from typing import Annotated, Any, Literal

import pytest
from msgspec import Meta, Struct

from loopslack.api.document.schemas import SchemaBook, unwrapped
from loopslack.api.document.vocabulary import DocumentError, NamedUnion, NamedValues, Vocabulary, Word, named

Colour = Literal["red", "deep-blue"]
COLOURS = named("Colour", "Colours.", {"red": "Red", "deep-blue": "Blue"})


def said(text: str = "What it is.", **more: Any) -> Meta:
    return Meta(description=text, **more)


class Part(Struct, frozen=True, kw_only=True, forbid_unknown_fields=True, rename="camel"):
    """A part.

    Told in two
    lines.
    """

    outer_width: Annotated[float, said(gt=0, le=2.5)]
    colour: Annotated[Colour | None, said()] = None
    note: Annotated[Annotated[str, Meta(max_length=9)] | None, said()] = None
    twin: "Annotated[Part | None, said()]" = None
    marks: Annotated[list[Annotated[int, Meta(ge=0, le=9)]], Meta(description="Marks.", max_length=3)] = []


class Round(Struct, frozen=True, kw_only=True, forbid_unknown_fields=True, tag_field="kind", tag="round"):
    """A round one."""


class Square(Struct, frozen=True, kw_only=True, forbid_unknown_fields=True, tag_field="kind", tag="square"):
    """A square one."""

    side: Annotated[float, said()]


SHAPES = NamedUnion(name="Shape", meaning="A shape.", members=(Round, Square))


class Answer(Struct, frozen=True, kw_only=True, omit_defaults=True):
    """An answer."""

    shape: Annotated[Round | Square, said()]
    share: Annotated[float | None, said()] = None
    counts: Annotated[dict[str, float], said()] = {}


def schemas_of(*structs: Any) -> dict[str, Any]:
    book = SchemaBook(Vocabulary([COLOURS], [SHAPES]))
    book.read(structs)
    return book.schemas


def test_a_question_is_closed_and_its_optional_scalars_take_null() -> None:
    part = schemas_of(Part)["Part"]
    assert part["additionalProperties"] is False
    assert part["required"] == ["outerWidth"]
    assert part["description"] == "A part.\n\nTold in two lines."
    assert part["properties"]["note"]["type"] == ["string", "null"]
    assert part["properties"]["note"]["maxLength"] == 9


def test_numbers_are_doubles_with_their_bounds() -> None:
    assert schemas_of(Part)["Part"]["properties"]["outerWidth"] == {
        "type": "number",
        "format": "double",
        "exclusiveMinimum": 0,
        "maximum": 2.5,
        "description": "What it is.",
    }


def test_bounds_of_entries_and_of_the_list_are_both_kept() -> None:
    marks = schemas_of(Part)["Part"]["properties"]["marks"]
    assert marks["items"] == {"type": "integer", "minimum": 0, "maximum": 9}
    assert marks["maxItems"] == 3


def test_optional_objects_and_words_are_plain_references_and_say_that_null_is_absence() -> None:
    members = schemas_of(Part)["Part"]["properties"]
    for name, target in (("colour", "Colour"), ("twin", "Part")):
        assert members[name] == {
            "$ref": f"#/components/schemas/{target}",
            "description": "What it is. Null counts as absent.",
        }


def test_a_list_of_words_is_named_with_its_constants() -> None:
    assert schemas_of(Part)["Colour"] == {
        "type": "string",
        "description": "Colours.\n\n`red`: Red. `deep-blue`: Blue.",
        "enum": ["red", "deep-blue"],
        "x-enum-varnames": ["RED", "DEEP_BLUE"],
        "x-enum-descriptions": ["Red", "Blue"],
        "examples": ["red"],
    }


def test_a_union_is_named_and_discriminated_by_a_constant_of_type_string() -> None:
    schemas = schemas_of(Answer)
    references = {tag: f"#/components/schemas/{tag.title()}" for tag in ("round", "square")}
    assert schemas["Shape"] == {
        "description": "A shape.",
        "oneOf": [{"$ref": reference} for reference in references.values()],
        "discriminator": {"propertyName": "kind", "mapping": references},
    }
    assert schemas["Round"]["properties"]["kind"]["type"] == "string"
    assert schemas["Round"]["properties"]["kind"]["const"] == "round"
    assert schemas["Square"]["required"] == ["kind", "side"]


def test_an_answer_is_open_and_never_null() -> None:
    answer = schemas_of(Answer)["Answer"]
    assert "additionalProperties" not in answer
    assert answer["properties"]["share"]["type"] == "number"
    assert answer["required"] == ["shape"]


class Undescribed(Struct):
    """One."""

    member: float


class Undocumented(Struct):
    member: Annotated[float, said()]


class Nameless(Struct):
    """One."""

    member: Annotated[Literal["a", "b"], said()]


class NamelessUnion(Struct):
    """One."""

    member: Annotated[Round | Answer, said()]


class Mixed(Struct):
    """One."""

    member: Annotated[float | str, said()]


class Anything(Struct):
    """One."""

    member: Annotated[Any, said()]


class Pair(Struct):
    """One."""

    member: Annotated[tuple[float, float], said()]


class Unit(Struct):
    """One."""

    member: Annotated[float, said()]


@pytest.mark.parametrize(
    "struct",
    [Undescribed, Undocumented, Nameless, Mixed, Anything, Pair, Unit],
    ids=lambda struct: struct.__name__,
)
def test_what_clients_cannot_digest_is_refused_by_name(struct: type[Struct]) -> None:
    with pytest.raises(DocumentError, match=struct.__name__):
        schemas_of(struct)


def test_two_structs_of_one_name_are_refused() -> None:
    def another() -> type[Struct]:
        class Part(Struct):
            """Another."""

            member: Annotated[float, said()]

        return Part

    with pytest.raises(DocumentError, match="Part"):
        schemas_of(Part, another())


@pytest.mark.parametrize("words", [("red",), ("red", "deep-blue", "green")])
def test_a_word_without_a_meaning_and_a_meaning_without_a_word_are_refused(words: tuple[str, ...]) -> None:
    book = SchemaBook(Vocabulary([named("Colour", "Colours.", dict.fromkeys(words, "A colour"))], []))
    with pytest.raises(DocumentError, match=r"Part\.colour"):
        book.read([Part])


def test_one_name_for_two_lists_and_two_names_for_one_are_refused() -> None:
    same_name = NamedValues(name="Colour", meaning="Other.", words=(Word("x", "X", "X"),))
    same_words = NamedValues(name="Paint", meaning="Same.", words=COLOURS.words)
    for second in (same_name, same_words):
        with pytest.raises(DocumentError):
            Vocabulary([COLOURS, second], [])


def test_prose_loses_line_breaks_but_keeps_paragraphs_and_lists() -> None:
    assert unwrapped("One\ntwo.\n\n* a\n  b\n* c\n") == "One two.\n\n* a b\n* c"
