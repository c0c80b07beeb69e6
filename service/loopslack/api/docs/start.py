"""The first page: what the service is for, a first question with its real answer, and what to know before the next.

The answer shown is computed when the page is made, by the function that answers callers, so it cannot be out of
date. Must not live here: numbers of its own.
"""

from functools import cache

import msgspec

from loopslack.api.docs.clients import asset
from loopslack.api.docs.codes import verdict_list
from loopslack.api.docs.contract import Contract
from loopslack.api.docs.frame import Section, framed, verdict_plate
from loopslack.api.docs.markup import Html, code, joined, json_text, link, listing, table, tag
from loopslack.api.docs.prose import paragraph, phrase, prose
from loopslack.api.docs.words import LIMITS, shown
from loopslack.api.reference import Page
from loopslack.contract.answering.loop import design_loop
from loopslack.contract.answers.operations import LoopDesignAnswer
from loopslack.contract.quantity import Pressure, Volume
from loopslack.contract.questions.operations import LoopDesignQuestion
from loopslack.settings import PREFIX, Settings

ADDRESS = "http://127.0.0.1:8000"
SERVICE = f"SERVICE={ADDRESS}   # or the address this page came from\n"
"""First line of a command: pages are made before anybody knows under which address they will be read."""

FIRST_QUESTION = "/docs/questions/first-question.json"


def first_question() -> object:
    """The question a newcomer sends first: only what is required, and how well the collectors empty."""
    return msgspec.json.decode(asset("first-question.json"))


@cache
def first_answer() -> LoopDesignAnswer:
    """What the service answers to it."""
    return design_loop(msgspec.json.decode(asset("first-question.json"), type=LoopDesignQuestion))


def start_page(contract: Contract) -> Page:
    """The page `/docs`."""
    told = _chapters(contract.document["info"]["description"])
    sections = [
        Section(anchor="first-request", title="A first request", body=_first_request()),
        Section(anchor="verdict", title="The verdict", body=_verdict(contract, told)),
        Section(anchor="asking", title="Asking", body=prose(told["Asking"])),
        Section(anchor="units", title="Units", body=_units()),
        Section(anchor="refusals", title="Refusals", body=_refusals(told)),
        Section(anchor="limits", title="Limits", body=_limits()),
        Section(anchor="bulk", title="Many designs", body=_bulk(contract)),
        Section(anchor="versions", title="Versions", body=_versions(told)),
    ]
    title = "Expansion vessels for glycol collector loops"
    return framed("/docs", title, phrase(told[""]), sections)


def _chapters(description: str) -> dict[str, str]:
    """The introduction of the document by its headings; what stands before the first one under an empty name."""
    chapters = {}
    for part in f"## \n{description}".split("## ")[1:]:
        title, _, text = part.partition("\n")
        chapters[title.strip()] = " ".join(text.split()) if not title.strip() else text.strip()
    return chapters


def _first_request() -> Html:
    command = (
        f"{SERVICE}"
        'curl "$SERVICE/v1/loop-design" \\\n'
        "  --header 'Content-Type: application/json' \\\n"
        "  --data-binary @first-question.json"
    )
    return joined(
        tag(
            "p",
            "A dozen numbers make a first quote. Save this as ",
            link(FIRST_QUESTION, code("first-question.json")),
            ", or send it from the page ",
            link("/docs/try", "Try it"),
            " without leaving the browser.",
        ),
        listing(json_text(first_question()), "The first question"),
        listing(command, "Command that sends the first question"),
        tag("p", "The answer begins with the verdict. In short:"),
        _in_short(first_answer()),
        tag(
            "p",
            f"It also lists {len(first_answer().assumptions)} assumptions that stood in for what was not stated, "
            f"and {len(first_answer().result.to_confirm)} things to confirm before anything is built.",
        ),
    )


def _in_short(answer: LoopDesignAnswer) -> Html:
    result = answer.result
    lines: list[tuple[object, object]] = [
        ("Verdict", joined(verdict_plate(result.verdict), " ", tag("span", result.basis, class_="basis")))
    ]
    vessel = result.chosen_vessel
    if vessel is not None:
        pieces = f"{vessel.pieces} of " if vessel.pieces > 1 else ""
        lines.append(("Expansion vessel", pieces + _said(vessel.nominal_volume)))
        if vessel.cooling_vessel is not None:
            lines.append(("Cooling vessel before it", _said(vessel.cooling_vessel.content)))
    if result.settings is not None:
        lines.append(("Precharge", _said(result.settings.precharge)))
        lines.append(("Fill to", _said(result.settings.fill_pressure)))
    worst = result.stagnation[-1]
    if worst.vessel_pressure is not None:
        lines.append(("Pressure in stagnation, every doubt at once", _said(worst.vessel_pressure)))
    return tag("dl", [(tag("dt", name), tag("dd", text)) for name, text in lines], class_="facts")


def _said(quantity: Volume | Pressure) -> str:
    return shown(quantity.value, quantity.unit)


def _verdict(contract: Contract, told: dict[str, str]) -> Html:
    return joined(
        verdict_list(contract),
        prose(told["Reading the answer"]),
        tag("p", link("/docs/checks", "All checks, advisories and their codes"), "."),
    )


def _units() -> Html:
    return joined(
        paragraph(
            'A quantity is a number with its unit: `{"value": 6, "unit": "barg"}`. Gauge or absolute is part of a '
            "pressure's unit, and gauge counts from the atmosphere at the site's altitude. A share by mass and one by "
            "volume are different kinds, and so are a temperature and a difference."
        ),
        tag("p", link("/docs/units", "Every unit of every kind"), "."),
    )


def _refusals(told: dict[str, str]) -> Html:
    return joined(
        prose(told["Refusals"]),
        tag("p", link("/docs/problems", "Every kind of problem and every code"), "."),
    )


_UNITS = {"bytes": " bytes", "seconds": " s"}
"""What a setting counts, by the end of its name."""


def _limits() -> Html:
    known = {field.name: field for field in msgspec.structs.fields(Settings)}
    rows = [
        (
            phrase(msgspec.json.schema(known[name].type)["description"]),
            f"{known[name].default:,.10g}{_UNITS.get(name.rpartition('_')[2], '')}",
            code(PREFIX + name.upper()),
        )
        for name in LIMITS
    ]
    return joined(
        paragraph(
            "These hold unless whoever runs the service has set others. Where keys are asked for, send "
            "`Authorization: Bearer` and yours. A caller beyond its rate, and any caller while the service is full, is "
            "told so at once with `Retry-After` in seconds: wait that long and send the same again."
        ),
        table("Limits", ("limit", "as delivered", "setting"), rows),
    )


def _bulk(contract: Contract) -> Html:
    many = {"designLoops", "streamLoopDesigns"} & {operation.id for operation in contract.operations}
    entries = [
        tag("li", link(operation.where, code(operation.id)), ": ", operation.written["summary"], ".")
        for operation in contract.operations
        if operation.id in many
    ]
    return joined(
        paragraph(
            "A batch takes up to 1,000 designs, a stream tens of thousands as lines. Both share a stock list and "
            "defaults among their designs, and answer each design on its own, in order, under the caller's `id`: with "
            "its answer or with the problem that stands in its way."
        ),
        tag("ul", entries) if entries else None,
    )


def _versions(told: dict[str, str]) -> Html:
    return joined(
        prose(told["Versions"]),
        paragraph(
            "Every answer says under `provenance` which version of the service and of the contract made it, and has a "
            "fingerprint of all equations, so that a calculation can be repeated."
        ),
    )
