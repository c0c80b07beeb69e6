"""The pages of what the service knows: rules, sources, assumptions and units, read from where it keeps them.

Must not live here: any number or citation of its own.
"""

from collections.abc import Iterable, Iterator
from typing import Any

from loopslack.api.docs.contract import Contract, name_of
from loopslack.api.docs.frame import Section, framed
from loopslack.api.docs.markup import Html, anchored, code, commas, joined, link, table, tag
from loopslack.api.docs.prose import phrase
from loopslack.api.docs.words import shown
from loopslack.api.reference import Page
from loopslack.calc.sizing.rules.register import RECOMMENDED, RULES
from loopslack.calc.sizing.rules.rule import Rule
from loopslack.contract.quantity import STRUCT_OF
from loopslack.kernel.citations import Cite
from loopslack.kernel.kinds import KINDS, Kind
from loopslack.kernel.units import from_si, is_gauge, scale_of
from loopslack.library.defaults import Default, choices, defaults
from loopslack.library.sources import sources


def knowledge_pages(contract: Contract) -> Iterator[Page]:
    """The pages `/docs/rules`, `/docs/assumptions`, `/docs/units` and `/docs/sources`."""
    seen = contract.words("SourceSeen")
    yield _rules()
    yield _assumptions()
    yield _units(contract)
    yield _sources(seen)


def cited(source: Cite) -> Html:
    """A citation: the publication, the place in it where it was read, and how far it was seen."""
    title = sources()[source.key].title
    place = f", {source.place}" if source.place else ""
    return joined(
        link(f"/docs/sources#{source.key}", title), place, " ", tag("span", f"({source.seen})", class_="seen")
    )


def _rules() -> Page:
    sections = [
        Section(anchor=rule.id, title=rule.title, body=_rule(rule, recommended=rule.id == RECOMMENDED))
        for rule in RULES.values()
    ]
    lead = joined(
        "Every rule is run on the same loop and its vessel is put through the same checks, so that two answers can "
        "be compared and the difference explained. The one the service recommends is ",
        link(f"#{RECOMMENDED}", RULES[RECOMMENDED].title),
        ". The same list for programs: ",
        link("/v1/rules", code("GET /v1/rules")),
        ".",
    )
    return framed("/docs/rules", "Sizing rules and their sources", lead, sections)


def _rule(rule: Rule, *, recommended: bool) -> Html:
    return joined(
        tag("p", code(rule.id), " Recommended by this service." if recommended else None),
        tag("p", code(rule.law), class_="law"),
        tag(
            "dl",
            tag("dt", "Counts"),
            tag("dd", phrase(rule.counts)),
            tag("dt", "Holds"),
            tag("dd", phrase(rule.range)),
            tag("dt", "Sources"),
            [tag("dd", cited(source)) for source in rule.sources],
            class_="facts",
        ),
    )


def _sources(seen: dict[str, str]) -> Page:
    told = [(anchored(f"seen.{word}", code(word)), meaning) for word, meaning in seen.items()]
    known = [
        (
            anchored(key, code(key)),
            joined(found.title, ". ", found.publisher, f", {found.year}" if found.year else "", "."),
            link(f"#seen.{found.seen}", found.seen),
            phrase(found.used_for),
        )
        for key, found in sources().items()
    ]
    lead = (
        "Every law, table and default names its source, and every source says how far the authors of this service "
        "saw it. Places inside a publication are given only where they were read."
    )
    parts = [
        Section(
            anchor="seen", title="How far a source was seen", body=table("Words", ("word", "meaning"), told)
        ),
        Section(
            anchor="publications",
            title="Publications",
            body=table("Sources by key", ("key", "publication", "seen", "used for"), known),
        ),
    ]
    return framed("/docs/sources", "Sources", lead, parts)


def _assumptions() -> Page:
    numbers = [
        (
            anchored(key, code(key)),
            tag("strong", _in_trade(found, found.si)),
            _range(found),
            phrase(found.why),
            cited(found.source),
        )
        for key, found in defaults().items()
    ]
    words = [
        (
            anchored(key, code(key)),
            tag("strong", found.word),
            commas(code(word) for word in found.among),
            phrase(found.why),
            cited(found.source),
        )
        for key, found in choices().items()
    ]
    lead = (
        "Whatever a question leaves open is filled in from these, and every one that was used is listed in the "
        "answer under `assumptions` with its range, reason and source. The range is what the trade knows, not a "
        "limit on what may be stated. No rated pressure is ever assumed. A content per area is a length: 1 mm is one "
        "litre on a square metre."
    )
    heads = ("default", "value", "range", "why", "source")
    sections = [
        Section(anchor="numbers", title="Numbers", body=table("Default numbers", heads, numbers)),
        Section(anchor="words", title="Words", body=table("Default words", heads, words)),
    ]
    return framed("/docs/assumptions", "What is assumed", phrase(lead), sections)


def _in_trade(found: Default, si: float) -> str:
    return shown(from_si(si, found.unit, found.kind), found.unit)


def _range(found: Default) -> str:
    if found.low == found.high:
        return "fixed"
    return f"{_in_trade(found, found.low)} to {_in_trade(found, found.high)}"


def _units(contract: Contract) -> Page:
    by_struct: dict[str, list[Kind]] = {}
    for kind in KINDS:
        if kind.units:
            by_struct.setdefault(STRUCT_OF[kind.name].__name__, []).append(kind)
    sections = [
        Section(anchor=name, title=_spaced(name), body=_unit_table(contract, name, kinds))
        for name, kinds in by_struct.items()
    ]
    lead = joined(
        "A quantity is a number with its unit. The unit is one of a closed list for its kind, spelled exactly as "
        "here. Gauge or absolute is part of a pressure's unit, and a temperature is another kind than a difference "
        "of temperatures. ",
        code("units"),
        " of a question chooses whether answers are written in metric or US units.",
    )
    return framed("/docs/units", "Units of each kind", lead, sections)


def _unit_table(contract: Contract, name: str, kinds: Iterable[Kind]) -> Html:
    first, *others = kinds
    written: dict[str, Any] = contract.schemas.get(name, {})
    meanings = {}
    if written:
        meanings = contract.words(name_of(written["properties"]["unit"]["$ref"]))
    rows = [
        (
            anchored(f"{name}.{unit}", code(unit)),
            meanings.get(unit, ""),
            _factor(first, unit),
            _answered(unit, [first, *others]),
        )
        for unit in first.units
    ]
    what = written["description"].split("\n")[0] if written else ""
    schema = joined(" Schema ", link(contract.where(name), code(name)), ".") if written else None
    return joined(
        tag("p", phrase(what), schema),
        table(f"Units of {_spaced(name)}", ("unit", "meaning", "in SI", "answers in it"), rows),
    )


def _factor(kind: Kind, unit: str) -> str:
    scale, offset = scale_of(kind, unit)
    base = "" if kind.si == "1" else f" {kind.si}"
    if offset:
        return f"({scale:.7g} x + {offset:.7g}){base}"
    above = " above the atmosphere at the site" if is_gauge(unit) else ""
    return f"{scale:.7g}{base}{above}"


def _answered(unit: str, kinds: list[Kind]) -> str:
    found = [system for system in ("metric", "us") if any(getattr(kind, system) == unit for kind in kinds)]
    return " and ".join(found)


def _spaced(name: str) -> str:
    """A schema's name as words: `HeatLossCoefficient` becomes `Heat loss coefficient`."""
    words = "".join(f" {letter.lower()}" if letter.isupper() else letter for letter in name).strip()
    return words[0].upper() + words[1:]
