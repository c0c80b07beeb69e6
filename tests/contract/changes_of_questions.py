"""Breaks in what callers send. Each says what it does to those who use the document."""

import copy

from contract.mutations import TEXT, Document, change, question, renamed, schema


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
