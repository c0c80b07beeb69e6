"""The page with a form: a first question in fields and as JSON, sent to the service by a script of this package.

Without a script the page still shows the question and how to send it. Must not live here: how an answer is shown,
which is in the assets.
"""

from msgspec import Struct

from loopslack.api.docs.contract import Contract, Schema
from loopslack.api.docs.frame import Section, framed
from loopslack.api.docs.markup import Html, code, data_block, joined, json_text, link, listing, tag
from loopslack.api.docs.start import SERVICE, first_question
from loopslack.api.docs.words import STATES, UNIT_SIGNS, VERDICT_HINTS
from loopslack.api.reference import Page
from loopslack.library.tubes import tube_standards

_OPERATION = "designLoop"
_WORD_LISTS = (
    "Verdict",
    "Severity",
    "Basis",
    "ScenarioName",
    "StagnationRegime",
    "VesselRefusal",
    "ReadingState",
)
_LEGS = ("/pipeRuns/0/segments/0", "/pipeRuns/1/segments/0")


class Field(Struct, frozen=True):
    """A labelled field and the members of the question it writes."""

    id: str
    label: str
    at: tuple[str, ...]
    words: tuple[tuple[str, str], ...] = ()
    lowest: int | None = None


_FIELDS: tuple[tuple[str, tuple[Field, ...]], ...] = (
    (
        "Site and fluid",
        (
            Field("coldest", "Coldest outdoor temperature", ("/site/coldestOutdoorTemperature/value",)),
            Field("protection", "Glycol protects down to", ("/fluid/concentration/temperature/value",)),
            Field("height", "Collectors above the vessel", ("/staticHeight/value",)),
            Field("valve", "Relief valve opens at", ("/reliefValve/setPressure/value",)),
        ),
    ),
    (
        "Collectors",
        (
            Field("count", "Number of collectors", ("/collectors/0/count",), lowest=1),
            Field("area", "Area of one", ("/collectors/0/area/value",)),
            Field("type", "Build", ("/collectors/0/type",), words=(("", "CollectorType"),)),
            Field(
                "emptying",
                "How well they empty in stagnation",
                ("/collectors/0/emptyingClass",),
                words=(("not stated", "EmptyingClass"),),
            ),
        ),
    ),
    (
        "Pipes and answer",
        (
            Field("length", "Length of pipe, each way", tuple(f"{leg}/length/value" for leg in _LEGS)),
            Field(
                "tube", "Copper tube", tuple(f"{leg}/tube/size" for leg in _LEGS), words=(("", "en-1057"),)
            ),
            Field("units", "Units of the answer", ("/units",), words=(("not stated: metric", "UnitSystem"),)),
        ),
    ),
)


def try_page(contract: Contract) -> Page:
    """The page `/docs/try`."""
    operation = contract.operation(_OPERATION)
    written = operation.question()
    examples = {
        "first-question": {"summary": "A first quote, only what is required", "value": first_question()}
    }
    if written is not None:
        examples |= contract.examples(written[1])
    examples["refused"] = {
        "summary": "A question with three faults, to see a refusal",
        "value": _faulty(first_question()),
    }
    sections = [
        Section(anchor="ask", title="The question", body=_form(contract, examples)),
        Section(anchor="result", title="The answer", body=_result()),
    ]
    lead = joined(
        "Change the fields or the question itself and send it to ",
        code("POST /v1/loop-design"),
        " of the service that served this page. Nothing is stored. Every member is described at ",
        link(contract.where("LoopDesignQuestion"), "LoopDesignQuestion"),
        ".",
    )
    return framed("/docs/try", "Try it", lead, sections, script="try.js", contents=False)


def _faulty(question: object) -> object:
    """A copy of a question with a misspelt member, a unit that is none and a count of zero."""
    if not isinstance(question, dict):
        raise TypeError("a question is an object")
    group = {**question["collectors"][0], "count": 0}
    valve = {"setPresure": question["reliefValve"]["setPressure"]}
    height = {**question["staticHeight"], "unit": "metres"}
    return {**question, "collectors": [group], "reliefValve": valve, "staticHeight": height}


def _form(contract: Contract, examples: dict[str, Schema]) -> Html:
    starts = [tag("option", example["summary"], value=name) for name, example in examples.items()]
    fieldsets = [
        tag("fieldset", tag("legend", title), [_field(contract, field) for field in fields])
        for title, fields in _FIELDS
    ]
    start = tag(
        "div",
        tag("label", "Start from", for_="start"),
        tag("select", starts, id="start"),
        tag("button", "Load", type="button", id="load"),
        class_="starts scripted",
    )
    send = tag(
        "p",
        tag("button", "Design the loop", type="submit", id="send"),
        tag("span", id="progress", role="status"),
        class_="send scripted",
    )
    return joined(
        _without_script(),
        tag(
            "form",
            start,
            tag("div", fieldsets, class_="fields scripted"),
            _editor(),
            _key(),
            send,
            id="form",
            novalidate=True,
        ),
        data_block("examples", {name: example["value"] for name, example in examples.items()}),
        data_block("vocabulary", _vocabulary(contract)),
    )


def _without_script() -> Html:
    command = (
        f"{SERVICE}"
        "curl \"$SERVICE/v1/loop-design\" --header 'Content-Type: application/json' --data-binary @question.json"
    )
    told = "The form needs a script, which your browser does not run. Send the question below by other means:"
    return tag("noscript", tag("p", told, class_="note"), listing(command, "Command that sends a question"))


def _editor() -> Html:
    hint = "Fields and JSON follow each other. Control and Enter send it from here."
    return joined(
        tag("label", "The question as JSON", for_="question"),
        tag("p", hint, id="question-hint", class_="hint scripted"),
        tag(
            "textarea",
            json_text(first_question()),
            id="question",
            rows=22,
            spellcheck="false",
            autocomplete="off",
            autocapitalize="off",
            aria_describedby="question-hint question-fault",
            wrap="off",
        ),
        tag("p", id="question-fault", class_="fault", role="status"),
    )


def _key() -> Html:
    return tag(
        "details",
        tag("summary", "The service asks for a key"),
        tag("label", "Key, sent as a bearer token and kept nowhere", for_="key"),
        tag("input", id="key", type="password", autocomplete="off"),
        class_="scripted",
    )


def _field(contract: Contract, field: Field) -> Html:
    shared = {"id": field.id, "data_at": " ".join(field.at), "aria_describedby": f"{field.id}-note"}
    if field.words:
        control = tag("select", _options(contract, *field.words[0]), **shared)
    else:
        control = joined(
            tag("input", type="number", step="1" if field.lowest else "any", min=field.lowest, **shared),
            tag("span", class_="unit", id=f"{field.id}-unit"),
        )
    return tag(
        "div",
        tag("label", field.label, for_=field.id),
        tag("div", control, class_="control"),
        tag("p", id=f"{field.id}-note", class_="hint"),
        class_="field",
    )


def _options(contract: Contract, unstated: str, words: str) -> list[Html]:
    standard = tube_standards().get(words)
    known = {size: f"{size} mm" for size in standard.tubes} if standard else contract.words(words)
    absent = [tag("option", unstated, value="")] if unstated else []
    return absent + [tag("option", meaning, value=word) for word, meaning in known.items()]


def _result() -> Html:
    return joined(
        tag(
            "div",
            tag("p", "Nothing has been asked yet.", class_="hint"),
            id="answer",
        ),
        tag(
            "p",
            "What the words mean: ",
            link("/docs/checks", "verdicts, checks and advisories"),
            "; ",
            link("/docs/problems", "problems"),
            ".",
        ),
    )


def _vocabulary(contract: Contract) -> dict[str, object]:
    """What the script needs to say an answer: the contract's own words, and units as a person writes them."""
    return {
        "words": {name: contract.words(name) for name in _WORD_LISTS},
        "states": contract.words("LiquidStateName") | contract.words("ScenarioName") | STATES,
        "hints": VERDICT_HINTS,
        "units": UNIT_SIGNS,
    }
