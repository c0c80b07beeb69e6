"""Takes a remedy as a caller would: reads its changes, makes them, and asks again."""

import json
from copy import deepcopy
from typing import Any, NamedTuple

import msgspec
from msgspec.structs import replace

from loopslack.calc.design import Request, design
from loopslack.calc.remedies.bench import Bench
from loopslack.calc.remedies.case import Case, case_of_design, case_of_vessel
from loopslack.calc.remedies.seek import Remedies, remedies
from loopslack.contract.answering.loop import candidates, check_stagnation, design_loop
from loopslack.contract.answers import remedies as out
from loopslack.contract.questions.operations import LoopDesignQuestion, StagnationCheckQuestion
from loopslack.contract.reading.existing import read_check
from loopslack.contract.reading.loop import read_loop
from loopslack.contract.reading.reader import Reader
from loopslack.contract.reading.vessels import read_choice
from loopslack.contract.writing.changes import Asked
from loopslack.contract.writing.remedies import RemedyWriter
from loopslack.kernel.work import finished

WITHOUT_EXTRAS: dict[str, Any] = {"include": []}


def changed(question: dict[str, Any], changes: list[dict[str, Any]]) -> dict[str, Any]:
    """The question after its changes, made as the answer describes them."""
    found = deepcopy(question)
    for change in changes:
        *path, last = change["field"].strip("/").split("/")
        place: Any = found
        for step in path:
            if isinstance(place, list):
                place = place[int(step)]
            else:
                if place.get(step) is None:
                    place[step] = {}
                place = place[step]
        if change["action"] == "repeat":
            place.insert(int(last), deepcopy(place[int(last)]))
        elif change["action"] == "remove":
            place.pop(last, None)
        else:
            value = next(change[name] for name in ("value", "word", "number") if name in change)
            place[last] = value
    return found


class Sought(NamedTuple):
    """A question with what was found for it, as the calculation has it and as an answer tells it."""

    verdict: str
    case: Case
    found: Remedies
    told: out.Remedies


def remedies_of_design(question: dict[str, Any]) -> Sought:
    """Remedies of a design question."""
    asked = decoded(question, LoopDesignQuestion)
    reader = Reader()
    reading = read_loop(asked, reader)
    choice = read_choice(reader, asked.vessel)
    assert not reader.refused
    case = case_of_design(
        design(
            reading.loop,
            Request(
                candidates(choice),
                asked.vessels_in_parallel or 1,
                reading.cooling,
                reading.policy,
                reading.accept_without_boiling,
                choice.fill_pressure,
            ),
        )
    )
    case = replace(case, strength=reading.strength)
    stock = len(choice.vessels) if choice.kind == "stock" else 0
    found = finished(remedies(case, Bench()))
    told = RemedyWriter(case, Asked("design", stock), reading.write).remedies(found)
    return Sought(verdict_of_design(question), case, found, told)


def remedies_of_check(question: dict[str, Any]) -> Sought:
    """Remedies of a stagnation check."""
    asked = decoded(question, StagnationCheckQuestion)
    read = read_check(asked)
    reading = read.reading
    case = case_of_vessel(
        reading.loop,
        read.vessel,
        asked.vessels_in_parallel or 1,
        reading.policy,
        fill_pressure=read.fill_pressure,
    )
    case = replace(case, strength=reading.strength)
    found = finished(remedies(case, Bench()))
    told = RemedyWriter(case, Asked("check"), reading.write).remedies(found)
    return Sought(verdict_of_check(question), case, found, told)


def verdict_of_design(question: dict[str, Any]) -> str:
    """Verdict of a design question, or that a vessel is lacking."""
    result = design_loop(decoded(question | WITHOUT_EXTRAS, LoopDesignQuestion)).result
    return result.verdict if result.chosen_vessel is not None else f"{result.verdict}, no vessel chosen"


def verdict_of_check(question: dict[str, Any]) -> str:
    """Verdict of a stagnation check."""
    return check_stagnation(decoded(question | WITHOUT_EXTRAS, StagnationCheckQuestion)).result.verdict


def offered(found: out.Remedies) -> list[tuple[str, list[dict[str, Any]]]]:
    """Every remedy offered, with its changes as JSON."""
    plain = msgspec.to_builtins(found)
    offers = [(remedy["code"], remedy["changes"]) for remedy in plain["single"]]
    if "pair" in plain:
        pair = plain["pair"]
        offers.append(("+".join(step["code"] for step in pair["steps"]), pair["changes"]))
    return offers


def decoded(question: dict[str, Any], kind: type) -> Any:
    return msgspec.json.decode(json.dumps(question), type=kind)
