"""Breaks in what callers receive. Each says what it does to those who use the document."""

from contract.mutations import TEXT, Document, answer, change, renamed, schema


@change("wire")
def a_member_of_an_answer_is_removed(document: Document) -> None:
    members = answer(document)["properties"]
    del members[next(iter(members))]


@change("wire")
def a_member_of_an_answer_is_no_longer_always_there(document: Document) -> None:
    answer(document)["required"].pop()


@change("wire")
def a_member_of_an_answer_may_be_null(document: Document) -> None:
    schema(document, "Problem")["properties"]["detail"]["type"] = ["string", "null"]


@change("wire")
def a_member_of_a_refusal_is_removed(document: Document) -> None:
    del schema(document, "FaultyField")["properties"]["pointer"]


@change("wire")
def a_member_of_a_refusal_changes_its_type(document: Document) -> None:
    schema(document, "Problem")["properties"]["status"] = TEXT


@change("wire")
def a_list_of_an_answer_becomes_a_map(document: Document) -> None:
    member = schema(document, "Problem")["properties"]["errors"]
    member["additionalProperties"] = member.pop("items")
    member["type"] = "object"


@change("wire")
def a_range_of_an_answer_is_widened(document: Document) -> None:
    schema(document, "Problem")["properties"]["status"]["maximum"] = 999


@change("wire")
def a_list_of_an_answer_may_be_longer(document: Document) -> None:
    schema(document, "Problem")["properties"]["errors"]["maxItems"] = 5000


@change("wire")
def a_word_is_added_to_an_answer(document: Document) -> None:
    schema(document, "HealthStatus")["enum"].append("warn")


@change("wire")
def a_unit_is_added_that_answers_use_too(document: Document) -> None:
    schema(document, "PowerUnit")["enum"].append("hp")


@change("wire")
def a_quantity_gets_a_member_that_strict_readers_refuse(document: Document) -> None:
    schema(document, "Volume")["properties"]["uncertainty"] = {"type": "number", "format": "double"}


@change("wire")
def a_quantity_of_an_answer_is_opened(document: Document) -> None:
    del schema(document, "Volume")["additionalProperties"]


@change("wire")
def a_quantity_gets_another_width(document: Document) -> None:
    schema(document, "Volume")["properties"]["value"]["format"] = "float"


@change("source")
def a_schema_of_an_answer_is_renamed(document: Document) -> None:
    renamed(document, "FaultyField", "Fault")
