"""Changes that hurt nobody. Each says what it does to those who use the document."""

import copy

from contract.mutations import TEXT, Document, answer, change, operation, question, schema, success


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
    document["info"]["version"] = "1.99.0"
