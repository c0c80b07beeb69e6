"""Breaks above the schemas: operations, parameters, headers, media types, statuses, security.

Each says what it does to those who use the document.
"""

from contract.mutations import Document, change, operation, success


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
