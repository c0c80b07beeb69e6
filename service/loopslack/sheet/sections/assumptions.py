"""Every default that was used: what was left open, what stood in, why, and where that comes from."""

from loopslack.contract.answers.shared import Assumption
from loopslack.sheet.case import Case
from loopslack.sheet.lines import Column, Row, Section, Table, Text
from loopslack.sheet.sections.names import (
    assumption_range,
    assumption_value,
    field_name,
    member_name,
    source_name,
)

_NAMED = 3  # places named of a default that was used in many


def assumptions(case: Case) -> Section:
    """One row a default; the same default used in several places is told once."""
    words = case.words
    alike: dict[tuple[object, ...], list[Assumption]] = {}
    for one in case.answer.assumptions:
        steps = [step for step in one.field.strip("/").split("/") if not step.isdigit()]
        alike.setdefault((*steps, one.value, one.word, one.why), []).append(one)
    if not alike:
        return Section("assumptions", words("section.assumptions"), (Text(words("assumptions.none")),))
    rows = []
    for group in alike.values():
        first = group[0]
        rows.append(
            Row(
                (
                    _names(case, group),
                    assumption_value(case, first),
                    assumption_range(case, first),
                    case.phrase(first.why),
                    source_name(case, first.source),
                )
            )
        )
    columns = (
        Column(words("column.open")),
        Column(words("column.stood-in"), "number"),
        Column(words("column.range"), "number"),
        Column(words("column.why")),
        Column(words("column.source")),
    )
    note = words("table.assumptions-note")
    return Section(
        "assumptions",
        words("section.assumptions"),
        (Table(words("table.assumptions"), columns, tuple(rows), note, compact=True),),
    )


def _names(case: Case, group: list[Assumption]) -> str:
    if len(group) == 1:
        return member_name(case, group[0].field)
    places = [member_name(case, one.field).rpartition(": ")[0] for one in group]
    named = ", ".join(dict.fromkeys(places[:_NAMED]))
    if len(group) > _NAMED:
        named = f"{named} {case.words('figure.and-more', number=len(group) - _NAMED)}"
    return f"{named}: {field_name(case, group[0].field.strip('/').split('/'))}"
