"""Changes to the real document, each with what it does to those who use it: breaks the wire, the source, or nothing.

Kept apart from the checker and written from the point of view of a caller, so that neither bends to the other.
"""

from __future__ import annotations

import copy
from collections.abc import Callable
from typing import Any, Literal

Document = dict[str, Any]
Effect = Literal["wire", "source", "nothing"]
Change = Callable[[Document], None]

CHANGES: dict[str, tuple[Change, Effect]] = {}


def change(effect: Effect) -> Callable[[Change], Change]:
    """Register a change under its name in words."""

    def register(function: Change) -> Change:
        CHANGES[function.__name__.strip("_").replace("_", " ")] = (function, effect)
        return function

    return register


def schema(document: Document, name: str) -> dict[str, Any]:
    found: dict[str, Any] = document["components"]["schemas"][name]
    return found


def operation(document: Document, name: str) -> dict[str, Any]:
    for item in document["paths"].values():
        for found in item.values():
            if found["operationId"] == name:
                chosen: dict[str, Any] = found
                return chosen
    raise KeyError(name)


def body(document: Document, name: str) -> dict[str, Any]:
    found: dict[str, Any] = operation(document, name)["requestBody"]["content"]["application/json"]
    return found


def success(document: Document, name: str) -> dict[str, Any]:
    found: dict[str, Any] = operation(document, name)["responses"]["200"]
    return found


def question(document: Document, name: str = "designLoop") -> dict[str, Any]:
    return schema(document, body(document, name)["schema"]["$ref"].rsplit("/", 1)[-1])


def answer(document: Document, name: str = "designLoop") -> dict[str, Any]:
    content = success(document, name)["content"]["application/json"]
    return schema(document, content["schema"]["$ref"].rsplit("/", 1)[-1])


def renamed(document: Document, old: str, new: str) -> None:
    """Give a schema another name wherever it is used."""
    schemas = document["components"]["schemas"]
    schemas[new] = schemas.pop(old)

    def walk(node: Any) -> None:
        if isinstance(node, dict):
            for key, value in node.items():
                if value == f"#/components/schemas/{old}":
                    node[key] = f"#/components/schemas/{new}"
                walk(value)
        elif isinstance(node, list):
            for value in node:
                walk(value)

    walk(document)


TEXT = {"type": "string", "maxLength": 64, "description": "A text."}


# Operations, parameters, responses.


@change("wire")
def an_operation_is_removed(document: Document) -> None:
    del document["paths"]["/v1/loop-volume"]


@change("wire")
def a_path_is_respelt(document: Document) -> None:
    document["paths"]["/v1/loop-designs"] = document["paths"].pop("/v1/loop-design")


@change("wire")
def a_method_is_changed(document: Document) -> None:
    item = document["paths"]["/v1/expansion"]
    item["put"] = item.pop("post")


@change("source")
def an_operation_is_renamed(document: Document) -> None:
    operation(document, "designLoop")["operationId"] = "createLoopDesign"


@change("source")
def an_operation_moves_to_another_tag(document: Document) -> None:
    operation(document, "computeExpansion")["tags"] = ["reference"]


@change("wire")
def a_header_that_was_read_is_read_no_more(document: Document) -> None:
    operation(document, "listFluids")["parameters"].pop()


@change("wire")
def a_parameter_becomes_required(document: Document) -> None:
    document["components"]["parameters"]["RequestId"]["required"] = True


@change("wire")
def a_required_parameter_is_added(document: Document) -> None:
    parameter = {"name": "edition", "in": "query", "required": True, "schema": {"type": "string"}}
    operation(document, "listTubes")["parameters"].append(parameter)


@change("wire")
def a_parameter_may_be_less_long(document: Document) -> None:
    document["components"]["parameters"]["RequestId"]["schema"]["maxLength"] = 64


@change("wire")
def a_media_type_of_a_question_is_changed(document: Document) -> None:
    content = operation(document, "designLoop")["requestBody"]["content"]
    content["application/cbor"] = content.pop("application/json")


@change("wire")
def a_media_type_of_an_answer_is_changed(document: Document) -> None:
    content = success(document, "designLoop")["content"]
    content["application/hal+json"] = content.pop("application/json")


@change("source")
def another_media_type_comes_first_in_an_answer(document: Document) -> None:
    found = success(document, "renderSheetHtml")
    found["content"] = {"text/plain": {"schema": {"type": "string"}}, **found["content"]}


@change("wire")
def a_success_gets_another_status(document: Document) -> None:
    responses = operation(document, "designLoop")["responses"]
    responses["201"] = responses.pop("200")


@change("wire")
def a_second_success_is_added(document: Document) -> None:
    operation(document, "designLoops")["responses"]["202"] = {"description": "Taken on."}


@change("source")
def a_documented_refusal_is_no_longer_documented(document: Document) -> None:
    del operation(document, "designLoop")["responses"]["422"]


@change("wire")
def a_header_of_an_answer_is_removed(document: Document) -> None:
    del success(document, "listFluids")["headers"]["ETag"]


@change("wire")
def a_header_of_an_answer_is_no_longer_always_there(document: Document) -> None:
    document["components"]["headers"]["EntityTag"]["required"] = False


@change("wire")
def a_header_of_a_refusal_becomes_a_text(document: Document) -> None:
    document["components"]["headers"]["RetryAfter"]["schema"] = {"type": "string"}


@change("wire")
def a_key_is_asked_for(document: Document) -> None:
    schemes = document["components"].setdefault("securitySchemes", {})
    schemes["key"] = {"type": "http", "scheme": "bearer"}
    document["security"] = [{"key": []}]


@change("wire")
def one_operation_asks_for_a_key(document: Document) -> None:
    operation(document, "designLoops")["security"] = [{"key": []}]


@change("wire")
def the_server_moves(document: Document) -> None:
    document["servers"] = [{"url": "/loopslack"}]


# Questions.


@change("wire")
def a_required_member_is_added_to_a_question(document: Document) -> None:
    question(document)["properties"]["country"] = TEXT
    question(document)["required"].append("country")


@change("wire")
def a_member_of_a_question_becomes_required(document: Document) -> None:
    question(document)["required"].append("station")


@change("wire")
def a_member_deep_in_a_question_becomes_required(document: Document) -> None:
    schema(document, "CollectorGroup")["required"].append("emptyingClass")


@change("wire")
def a_member_of_a_question_is_removed(document: Document) -> None:
    del question(document)["properties"]["pump"]


@change("wire")
def a_member_of_a_question_is_renamed(document: Document) -> None:
    members = schema(document, "ReliefValve")["properties"]
    members["reseatDifference"] = members.pop("blowdown")


@change("wire")
def a_unit_is_removed(document: Document) -> None:
    listed = schema(document, "PressureUnit")
    for keyword in ("enum", "x-enum-varnames", "x-enum-descriptions"):
        listed[keyword].pop()


@change("wire")
def a_word_of_a_question_is_removed(document: Document) -> None:
    schema(document, "EmptyingClass")["enum"].remove("fair")


@change("wire")
def a_word_of_a_question_is_respelt(document: Document) -> None:
    listed = schema(document, "PumpSide")["enum"]
    listed[listed.index("discharge")] = "pressure"


@change("wire")
def a_least_count_is_raised(document: Document) -> None:
    schema(document, "CollectorGroup")["properties"]["count"]["minimum"] = 2


@change("wire")
def a_greatest_number_is_lowered(document: Document) -> None:
    schema(document, "CollectorCoefficients")["properties"]["eta0"]["maximum"] = 0.9


@change("wire")
def a_bound_is_put_where_there_was_none(document: Document) -> None:
    schema(document, "Length")["properties"]["value"]["minimum"] = 0


@change("wire")
def the_edge_of_a_range_is_excluded(document: Document) -> None:
    member = schema(document, "Price")["properties"]["amount"]
    member["exclusiveMinimum"] = member.pop("minimum")


@change("wire")
def a_text_may_be_less_long(document: Document) -> None:
    schema(document, "StockVessel")["properties"]["id"]["maxLength"] = 32


@change("wire")
def a_text_must_be_longer(document: Document) -> None:
    schema(document, "StockVessel")["properties"]["id"]["minLength"] = 3


@change("wire")
def a_batch_may_be_less_long(document: Document) -> None:
    question(document, "designLoops")["properties"]["designs"]["maxItems"] = 500


@change("wire")
def a_list_must_be_longer(document: Document) -> None:
    question(document)["properties"]["pipeRuns"]["minItems"] = 2


@change("wire")
def a_list_must_not_repeat(document: Document) -> None:
    question(document)["properties"]["include"]["uniqueItems"] = True


@change("wire")
def a_pattern_is_changed(document: Document) -> None:
    schema(document, "Price")["properties"]["currency"]["pattern"] = "^(EUR|USD)$"


@change("wire")
def a_pattern_is_added(document: Document) -> None:
    schema(document, "StockVessel")["properties"]["id"]["pattern"] = "^[A-Z0-9-]+$"


@change("wire")
def null_is_no_longer_taken(document: Document) -> None:
    question(document)["properties"]["vesselsInParallel"]["type"] = "integer"


@change("wire")
def a_number_must_be_whole(document: Document) -> None:
    member = schema(document, "Area")["properties"]["value"]
    member["type"] = "integer"
    del member["format"]


@change("wire")
def a_list_becomes_a_single_one(document: Document) -> None:
    members = question(document)["properties"]
    members["pipeRuns"] = members["pipeRuns"]["items"]


@change("wire")
def an_object_becomes_another(document: Document) -> None:
    question(document)["properties"]["staticHeight"] = {"$ref": "#/components/schemas/Pressure"}


@change("wire")
def a_kind_is_no_longer_taken(document: Document) -> None:
    union = schema(document, "Fluid")
    tag, reference = next(iter(union["discriminator"]["mapping"].items()))
    del union["discriminator"]["mapping"][tag]
    union["oneOf"].remove({"$ref": reference})


@change("wire")
def a_kind_is_respelt(document: Document) -> None:
    mapping = schema(document, "Tube")["discriminator"]["mapping"]
    mapping["inner-diameter"] = mapping.pop("bore")
    schema(document, "BoreTube")["properties"]["kind"]["const"] = "inner-diameter"


@change("wire")
def the_member_that_names_the_kind_is_renamed(document: Document) -> None:
    union = schema(document, "Insulation")
    union["discriminator"]["propertyName"] = "type"
    for reference in union["discriminator"]["mapping"].values():
        member = schema(document, reference.rsplit("/", 1)[-1])
        member["properties"]["type"] = member["properties"].pop("kind")
        member["required"] = ["type" if name == "kind" else name for name in member["required"]]


@change("wire")
def a_member_of_one_kind_becomes_required(document: Document) -> None:
    schema(document, "Insulated")["required"].append("thickness")


@change("wire")
def a_union_becomes_its_first_kind(document: Document) -> None:
    union = schema(document, "Precharge")
    document["components"]["schemas"]["Precharge"] = copy.deepcopy(
        schema(document, union["oneOf"][0]["$ref"].rsplit("/", 1)[-1])
    )


@change("source")
def a_whole_number_of_a_question_may_be_a_fraction(document: Document) -> None:
    schema(document, "CollectorGroup")["properties"]["count"] |= {"type": "number"}


@change("source")
def a_number_of_a_question_loses_its_width(document: Document) -> None:
    del schema(document, "CollectorCoefficients")["properties"]["eta0"]["format"]


@change("source")
def a_schema_is_renamed(document: Document) -> None:
    renamed(document, "ReliefValve", "SafetyValve")


@change("source")
def a_list_of_words_is_renamed(document: Document) -> None:
    renamed(document, "VolumeUnit", "CapacityUnit")


@change("source")
def a_constant_is_renamed(document: Document) -> None:
    names = schema(document, "PressureUnit")["x-enum-varnames"]
    names[0] = "BARG"


@change("source")
def the_constants_are_no_longer_named(document: Document) -> None:
    del schema(document, "PressureUnit")["x-enum-varnames"]


# Answers.


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


# Harmless.


@change("nothing")
def an_operation_is_added(document: Document) -> None:
    document["paths"]["/v1/pumps"] = {"get": copy.deepcopy(operation(document, "listFluids"))}
    document["paths"]["/v1/pumps"]["get"]["operationId"] = "listPumps"


@change("nothing")
def an_optional_header_is_read(document: Document) -> None:
    parameter = {"name": "Accept-Language", "in": "header", "required": False, "schema": {"type": "string"}}
    operation(document, "designLoop")["parameters"].append(parameter)


@change("nothing")
def a_header_is_added_to_an_answer(document: Document) -> None:
    success(document, "designLoop")["headers"]["Deprecation"] = {"schema": {"type": "string"}}


@change("nothing")
def a_refusal_is_documented_in_addition(document: Document) -> None:
    responses = operation(document, "designLoop")["responses"]
    responses["409"] = copy.deepcopy(responses["422"])


@change("nothing")
def another_media_type_is_read(document: Document) -> None:
    content = operation(document, "designLoop")["requestBody"]["content"]
    content["application/cbor"] = copy.deepcopy(content["application/json"])


@change("nothing")
def an_operation_is_deprecated(document: Document) -> None:
    operation(document, "sizeVessel")["deprecated"] = True


@change("nothing")
def an_optional_member_is_added_to_a_question(document: Document) -> None:
    question(document)["properties"]["remark"] = {**TEXT, "type": ["string", "null"]}


@change("nothing")
def a_member_of_a_question_becomes_optional(document: Document) -> None:
    schema(document, "CollectorGroup")["required"].remove("areaBasis")


@change("nothing")
def a_word_is_added_to_a_question(document: Document) -> None:
    listed = schema(document, "SheetLanguage")
    listed["enum"].append("es")
    listed["x-enum-varnames"].append("ES")
    listed["x-enum-descriptions"].append("Spanish")


@change("nothing")
def a_kind_is_added_to_a_question(document: Document) -> None:
    kind = copy.deepcopy(schema(document, "Water"))
    kind["properties"]["kind"]["const"] = "ethanol"
    document["components"]["schemas"]["Ethanol"] = kind
    union = schema(document, "Fluid")
    union["oneOf"].append({"$ref": "#/components/schemas/Ethanol"})
    union["discriminator"]["mapping"]["ethanol"] = "#/components/schemas/Ethanol"


@change("nothing")
def a_range_of_a_question_is_widened(document: Document) -> None:
    schema(document, "CollectorGroup")["properties"]["count"]["maximum"] = 20_000


@change("nothing")
def a_bound_of_a_question_is_dropped(document: Document) -> None:
    del schema(document, "CollectorCoefficients")["properties"]["eta0"]["minimum"]


@change("nothing")
def a_longer_batch_is_taken(document: Document) -> None:
    question(document, "designLoops")["properties"]["designs"]["maxItems"] = 2_000


@change("nothing")
def a_longer_text_is_taken(document: Document) -> None:
    schema(document, "StockVessel")["properties"]["id"]["maxLength"] = 128


@change("nothing")
def null_is_taken_in_addition(document: Document) -> None:
    schema(document, "CollectorGroup")["properties"]["count"]["type"] = ["integer", "null"]


@change("nothing")
def a_part_of_a_question_is_opened(document: Document) -> None:
    del schema(document, "Site")["additionalProperties"]


@change("nothing")
def a_member_is_added_to_an_answer(document: Document) -> None:
    answer(document)["properties"]["elapsed"] = {"type": "number", "format": "double"}


@change("nothing")
def a_member_is_added_to_a_refusal(document: Document) -> None:
    schema(document, "Problem")["properties"]["help"] = TEXT


@change("nothing")
def a_member_of_an_answer_is_always_there_now(document: Document) -> None:
    schema(document, "Problem")["required"].append("errors")


@change("nothing")
def a_range_of_an_answer_is_narrowed(document: Document) -> None:
    schema(document, "Problem")["properties"]["status"]["maximum"] = 505


@change("nothing")
def a_word_of_an_answer_is_no_longer_used(document: Document) -> None:
    schema(document, "HealthStatus")["enum"].remove("fail")


@change("nothing")
def descriptions_and_examples_are_reworded(document: Document) -> None:
    question(document)["description"] = "A loop."
    question(document)["examples"] = []
    document["info"]["description"] = "Better."
    operation(document, "designLoop")["summary"] = "Design it"
    success(document, "designLoop")["description"] = "It."
    schema(document, "PressureUnit")["x-enum-descriptions"][0] = "Bar (gauge)"


@change("nothing")
def everything_changes_its_order(document: Document) -> None:
    for part in ("schemas", "responses", "headers", "parameters"):
        document["components"][part] = dict(reversed(document["components"][part].items()))
    document["paths"] = dict(reversed(document["paths"].items()))
    for found in document["components"]["schemas"].values():
        if "properties" in found:
            found["properties"] = dict(reversed(found["properties"].items()))
            found["required"] = list(reversed(found.get("required", [])))


@change("nothing")
def the_version_is_raised(document: Document) -> None:
    document["info"]["version"] = "1.1.0"
