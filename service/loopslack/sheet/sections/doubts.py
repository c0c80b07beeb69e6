"""The doubts about the base case and what came of each."""

from loopslack.sheet.case import Case
from loopslack.sheet.lines import Column, Mark, Row, Table

_MARKS: dict[str, Mark] = {
    "holds": "holds",
    "does-not-hold": "fails",
    "not-assessed": "open",
    "not-applicable": "",
}


def doubts(case: Case) -> Table:
    """Every doubt on its own, then all at once, and which of them count."""
    words = case.words
    shift = case.say(case.write.temperature_difference(case.loop.criteria.stagnation_doubt))
    outcomes: list[tuple[str, Mark]] = [(doubt.id, _MARKS[doubt.verdict]) for doubt in case.result.doubts]
    outcomes.append(("all-doubts", "holds" if case.result.robust else "fails"))
    rows = []
    for id, mark in outcomes:
        shown: Mark = "aside" if mark == "fails" and id not in case.counted else mark
        word = words(f"mark.{shown or 'not-applicable'}")
        rows.append(Row((words(f"state.{id}"), words(f"doubt.{id}", shift=shift), word), shown))
    columns = (
        Column(words("column.doubt")),
        Column(words("column.meaning")),
        Column(words("column.verdict")),
    )
    return Table(
        words("table.doubts"), columns, tuple(rows), words(f"policy.{case.reading.policy}"), compact=True
    )
