"""The pages of the operations: what is asked, what comes back, what is refused, with the examples of the contract.

Must not live here: anything the OpenAPI document does not say.
"""

from collections.abc import Iterator

from loopslack.api.docs.contract import Contract, Described, Schema, name_of
from loopslack.api.docs.frame import REVALIDATED, Section, framed
from loopslack.api.docs.markup import (
    Html,
    code,
    commas,
    disclosure,
    joined,
    json_text,
    link,
    listing,
    table,
    tag,
)
from loopslack.api.docs.prose import phrase, prose
from loopslack.api.docs.schemas import members
from loopslack.api.docs.start import SERVICE
from loopslack.api.reference import Page

_JSON = "application/json"
_LONGEST = 400
"""Most lines of an example that a page shows; the rest stands in the document."""


def operation_pages(contract: Contract) -> Iterator[Page]:
    """The index of the operations and the page of each."""
    yield _index(contract)
    for operation in contract.operations:
        yield _page(contract, operation)


def question_path(operation: Described, name: str, media_type: str) -> str:
    """Where the question of an example can be had as a file."""
    return f"/docs/questions/{operation.id}/{name}.{'json' if media_type == _JSON else 'ndjson'}"


def question_files(contract: Contract) -> Iterator[Page]:
    """The question of every example, as a file to send."""
    for operation in contract.operations:
        asked = operation.question()
        if asked is None:
            continue
        media_type, content = asked
        for name, example in contract.examples(content).items():
            value = example["value"]
            text = value if isinstance(value, str) else json_text(value) + "\n"
            yield Page(
                path=question_path(operation, name, media_type),
                media_type=media_type,
                body=text.encode(),
                cache_control=REVALIDATED,
            )


def plate(operation: Described) -> Html:
    """Method and path as a plate."""
    return tag(
        "p",
        tag("span", operation.method, class_="method"),
        tag("code", _breakable(operation.path), class_="path"),
        class_="plate",
        data_method=operation.method,
    )


def _breakable(path: str) -> Html:
    """A path that may be broken before a slash."""
    return Html(joined(path).replace("/", "<wbr>/"))


def _job(tag_name: str) -> str:
    return f"/docs/operations#{tag_name}"


def _index(contract: Contract) -> Page:
    sections = []
    for told in contract.document["tags"]:
        rows = [
            (
                link(operation.where, code(operation.id)),
                joined(operation.method, " ", tag("code", _breakable(operation.path))),
                operation.written["summary"],
            )
            for operation in contract.operations
            if operation.tag == told["name"]
        ]
        body = joined(
            tag("p", phrase(told["description"])),
            table(f"Operations: {told['name']}", ("operation", "request", "what it does"), rows),
        )
        sections.append(Section(anchor=told["name"], title=told["name"], body=body))
    lead = (
        "Every operation of the contract, by the job it is for. A question is a POST that changes nothing: the "
        "same body gets the same answer, so it may be sent again at any time."
    )
    return framed("/docs/operations", "Operations", lead, sections)


def _page(contract: Contract, operation: Described) -> Page:
    written = operation.written
    about = joined(
        plate(operation),
        prose(written["description"]),
        tag(
            "p",
            tag("strong", "Deprecated. "),
            "Its answers say in their headers when it ends.",
            class_="note",
        )
        if written.get("deprecated")
        else None,
        _parameters(contract, written.get("parameters", [])),
    )
    sections = [Section(anchor="request", title="Request", body=about)]
    asked = operation.question()
    if asked is not None:
        sections.append(Section(anchor="question", title="Question", body=_body(contract, operation, *asked)))
    answered = operation.answer()
    if answered is not None:
        sections.append(
            Section(anchor="answer", title="Answer", body=_answer(contract, operation, *answered))
        )
    sections.append(
        Section(anchor="statuses", title="Statuses and problems", body=_statuses(contract, operation))
    )
    lead = joined(
        "Operation ", code(operation.id), ", for the job ", link(_job(operation.tag), operation.tag), "."
    )
    return framed(operation.where, written["summary"], lead, sections)


def _parameters(contract: Contract, parameters: list[Schema]) -> Html | None:
    if not parameters:
        return None
    found = [contract.resolved(parameter) for parameter in parameters]
    rows = [
        (code(each["name"]), phrase(each["description"]), code(each.get("example", ""))) for each in found
    ]
    return table("Headers it reads", ("header", "meaning", "example"), rows)


def _body(contract: Contract, operation: Described, media_type: str, content: Schema) -> Html:
    examples = contract.examples(content)
    shown = next(iter(examples), None)
    path = None if shown is None else question_path(operation, shown, media_type)
    name = "question.json" if path is None else path.rpartition("/")[2]
    command = (
        f"{SERVICE}"
        f'curl "$SERVICE{operation.path}" \\\n'
        f"  --header 'Content-Type: {media_type}' \\\n"
        f"  --data-binary @{name}"
    )
    return joined(
        tag("p", "Media type ", code(media_type), "."),
        listing(command, "Command that sends the question"),
        None if path is None else tag("p", "The file: ", link(path, code(name)), "."),
        _content(contract, content),
        [_shown(each, "Question") for each in examples.values()],
    )


def _answer(contract: Contract, operation: Described, media_type: str, content: Schema) -> Html:
    response = contract.resolved(operation.written["responses"]["200"])
    headers = [
        (code(name), phrase(contract.resolved(header)["description"]))
        for name, header in response.get("headers", {}).items()
    ]
    examples = contract.examples(content)
    if "example" in content:
        examples["example"] = {"summary": "Example", "value": content["example"]}
    return joined(
        tag("p", phrase(response["description"]), " Media type ", code(media_type), "."),
        _content(contract, content),
        [_shown(each, "Answer") for each in examples.values()],
        table("Headers of the answer", ("header", "meaning"), headers) if headers else None,
    )


def _content(contract: Contract, content: Schema) -> Html:
    schema = content["schema"]
    if "$ref" not in schema:
        return tag("p", phrase(schema.get("description", "Text.")))
    name = name_of(schema["$ref"])
    resolved = contract.schemas[name]
    return joined(
        tag("h3", "Members of ", link(contract.where(name), code(name))),
        members(contract, name, resolved) if "properties" in resolved else None,
    )


def _shown(example: Schema, what: str) -> Html:
    value = example["value"]
    text = value if isinstance(value, str) else json_text(value)
    lines = text.splitlines()
    left = len(lines) - _LONGEST
    if left > 0:
        text = "\n".join(lines[:_LONGEST])
    return disclosure(
        f"{what}: {example['summary']}",
        tag("p", phrase(example["description"])) if "description" in example else None,
        listing(text, f"{what}: {example['summary']}"),
        tag("p", f"The remaining {left} lines stand in the document.") if left > 0 else None,
    )


def _statuses(contract: Contract, operation: Described) -> Html:
    rows = []
    for status, written in sorted(operation.written["responses"].items()):
        response = contract.resolved(written)
        problems = response.get("content", {}).get("application/problem+json")
        if problems is None:
            rows.append((status, phrase(response["description"])))
            continue
        slugs = contract.examples(problems)
        linked = commas(link(f"/docs/problems/{slug}", slugs[slug]["summary"]) for slug in slugs)
        rows.append((status, linked))
    return table("Every status it can give", ("status", "meaning"), rows)
