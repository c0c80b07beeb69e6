"""The doubts about the base case and what came of each."""

from loopslack.sheet.case import Case
from loopslack.sheet.lines import Column, Mark, Row, Table

_MARKS: dict[str, Mark] = {
    "holds": "holds",
    "does-not-hold": "fails",
    "not-assessed": "open",
    "not-applicable": "",
}


def _together(case: Case) -> Mark:
    """All doubts at once, from the checks that decide: what fails without any doubt is told where it fails."""
    verdicts = {
        check.verdict
        for check in case.result.checks
        if check.scenario == "all-doubts" and check.group == "core"
    }
    if "does-not-hold" in verdicts:
        return "fails"
    return "open" if "not-assessed" in verdicts or not verdicts else "holds"


def doubts(case: Case) -> Table:
    """Every doubt on its own, then all at once, and which of them count."""
    words = case.words
    shift = case.say(case.write.temperature_difference(case.loop.criteria.stagnation_doubt))
    outcomes: list[tuple[str, Mark]] = [(doubt.id, _MARKS[doubt.verdict]) for doubt in case.result.doubts]
    outcomes.append(("all-doubts", _together(case)))
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
