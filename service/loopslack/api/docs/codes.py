"""The pages of codes: verdicts, checks, advisories and cautions; and every kind of problem with its own page.

Must not live here: the kinds of problems, their codes and the cautions themselves, which the contract keeps.
"""

from collections.abc import Iterator, Mapping

from loopslack.api.docs.contract import Contract, Schema
from loopslack.api.docs.frame import Section, framed, verdict_plate
from loopslack.api.docs.markup import (
    Html,
    anchored,
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
from loopslack.api.docs.prose import paragraph, phrase
from loopslack.api.docs.words import ADVISORIES, CHECKS, METHOD_CODES, REASONS, TO_CONFIRM, VERDICT_HINTS
from loopslack.api.reference import Page
from loopslack.contract.advice.words import FAILING
from loopslack.contract.problems import FIELD_CODES, PROBLEM_TYPES, ProblemType
from loopslack.contract.writing.shared import CAUTIONS


def code_pages(contract: Contract) -> Iterator[Page]:
    """`/docs/checks`, `/docs/problems` and the page of each kind of problem."""
    yield _checks(contract)
    yield _problems()
    for kind in PROBLEM_TYPES.values():
        yield _problem(contract, kind)


def verdict_list(contract: Contract) -> Html:
    """The four verdicts with their signs and what they mean for the roof."""
    entries = [
        (tag("dt", verdict_plate(word)), tag("dd", f"{meaning}. ", tag("strong", VERDICT_HINTS[word])))
        for word, meaning in contract.words("Verdict").items()
    ]
    return tag("dl", entries, class_="verdicts")


def _checks(contract: Contract) -> Page:
    sections = [
        Section(anchor="verdicts", title="Verdicts", body=_verdicts(contract)),
        Section(anchor="doubts", title="Doubts", body=_doubts(contract)),
        Section(anchor="checks", title="Checks", body=_check_codes()),
        Section(anchor="reasons", title="Reasons", body=_coded("Why there is no number", "reason", REASONS)),
        Section(anchor="refused", title="Refused vessels", body=_refused(contract)),
        Section(anchor="to-confirm", title="To be confirmed", body=_to_confirm()),
        Section(anchor="advisories", title="Advisories", body=_advisories(contract)),
        Section(anchor="cautions", title="Cautions", body=_cautions()),
    ]
    lead = (
        "What the words in an answer mean. Codes are stable and may grow; a program passes over those it does not "
        "know."
    )
    return framed("/docs/checks", "Verdicts, checks and advisories", lead, sections)


def _coded(label: str, prefix: str, meanings: Mapping[str, str], head: str = "meaning") -> Html:
    """A table of codes, each with an anchor."""
    rows = [(anchored(f"{prefix}.{word}", code(word)), phrase(text)) for word, text in meanings.items()]
    return table(label, ("code", head), rows)


def _verdicts(contract: Contract) -> Html:
    return joined(
        verdict_list(contract),
        paragraph(
            "The verdict of a design is the worst of its core checks, in the base case and under the doubts asked for. "
            "It is taken before any number is rounded."
        ),
    )


def _doubts(contract: Contract) -> Html:
    return joined(
        paragraph(
            "What may be worse than stated. `doubtPolicy` says which of it a design must survive: each alone, all at "
            "once, or none, and then nothing is ever called holding."
        ),
        _words(contract, "ScenarioName"),
    )


def _check_codes() -> Html:
    rows = [
        (
            anchored(word, code(word)),
            phrase(meaning),
            FAILING[word][1] if word in FAILING else "Ask its maker.",
        )
        for word, meaning in CHECKS.items()
    ]
    return joined(
        paragraph(
            "Each check has a value, a limit and a margin that is negative where it fails. Core checks decide the "
            "verdict; the others must be confirmed by somebody, and one without a limit is not assessed, which is "
            "never a pass."
        ),
        table("Codes of checks", ("code", "what is compared", "what to do if it fails"), rows),
    )


def _refused(contract: Contract) -> Html:
    return joined(
        paragraph(
            "Why a vessel of a series or of a stock is not chosen, each with its numbers in `reasons`."
        ),
        _words(contract, "VesselRefusal"),
    )


def _to_confirm() -> Html:
    return joined(
        paragraph(
            "These, and every check that is not assessed, stand in `toConfirm` and make the basis of the verdict "
            "provisional."
        ),
        _coded("Codes of what was assumed", "confirm", TO_CONFIRM),
    )


def _advisories(contract: Contract) -> Html:
    rows = [
        (
            anchored(f"advisory.{word}", code(word)),
            tag("span", severity, class_="severity", data_severity=severity),
            phrase(text),
        )
        for word, (severity, text) in ADVISORIES.items()
    ]
    return joined(
        _words(contract, "Severity"),
        paragraph(
            "A failing core check that counts towards the verdict is always a `stop` under the code of the check. "
            "Beside them there are:"
        ),
        table("Codes of advisories", ("code", "severity", "meaning"), rows),
    )


def _cautions() -> Html:
    return joined(
        paragraph(
            "Dangers that every such loop has; every answer about a loop carries them. Common practice, no source."
        ),
        _coded("Cautions", "caution", {each.code: each.message for each in CAUTIONS}, "caution"),
    )


def _words(contract: Contract, name: str) -> Html:
    rows = [(code(word), meaning) for word, meaning in contract.words(name).items()]
    return table(f"Words of {name}", ("word", "meaning"), rows)


def _problems() -> Page:
    kinds = [
        (
            anchored(kind.slug, link(kind.uri, code(kind.slug))),
            str(kind.status),
            joined(tag("strong", kind.title), ". ", phrase(kind.meaning)),
            phrase(kind.remedy),
        )
        for kind in PROBLEM_TYPES.values()
    ]
    lead = phrase(
        "Whatever cannot be answered comes back as a problem document (RFC 9457), media type "
        "`application/problem+json`, with all faulty members at once. Its `type` is the address of a page here. A "
        "design that does not hold is no problem: it is an answer."
    )
    types = table("Kinds of problems", ("type", "status", "meaning", "what to do"), kinds)
    codes = joined(
        paragraph(
            "Each entry of `errors` has a JSON Pointer (RFC 6901), one of these codes, and a message that names value, "
            "rule and remedy."
        ),
        _coded("Codes of faulty members", "code", FIELD_CODES | METHOD_CODES),
    )
    before = paragraph(
        "What the HTTP server refuses before the service sees it has a plain or empty body: 400 for a malformed "
        "request line or header, 414 and 431 for too long ones."
    )
    sections = [
        Section(anchor="types", title="Types", body=types),
        Section(anchor="codes", title="Codes of faulty members", body=codes),
        Section(anchor="before", title="Before the service", body=before),
    ]
    return framed("/docs/problems", "Problems", lead, sections)


def _problem(contract: Contract, kind: ProblemType) -> Page:
    given = [
        link(operation.where, code(operation.id))
        for operation in contract.operations
        if kind.slug in _slugs(contract, operation.written["responses"].get(str(kind.status)))
    ]
    example = _example(contract, kind)
    sections = [
        Section(anchor="meaning", title="What it means", body=tag("p", phrase(kind.meaning))),
        Section(anchor="remedy", title="What to do", body=tag("p", phrase(kind.remedy))),
        Section(
            anchor="where",
            title="Which operations give it",
            body=tag("p", commas(given), ".") if given else tag("p", "None of this version."),
        ),
    ]
    if example is not None:
        body = disclosure("The document", listing(json_text(example), f"Problem {kind.slug}"))
        sections.append(Section(anchor="example", title="Example", body=body))
    lead = joined(
        "Status ",
        tag("strong", kind.status),
        ", type ",
        code(kind.uri),
        ". ",
        link("/docs/problems", "All problems"),
        ".",
    )
    return framed(kind.uri, kind.title, lead, sections, contents=False)


def _slugs(contract: Contract, response: Schema | None) -> dict[str, Schema]:
    """The problems that a response of the document can carry, by slug, with their examples."""
    content = contract.resolved(response or {}).get("content", {}).get("application/problem+json", {})
    return contract.examples(content)


def _example(contract: Contract, kind: ProblemType) -> object:
    for operation in contract.operations:
        found = _slugs(contract, operation.written["responses"].get(str(kind.status))).get(kind.slug)
        if found is not None:
            return found["value"]
    return None
