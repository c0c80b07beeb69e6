"""Every check in every state and under every doubt."""

from loopslack.sheet.case import Case
from loopslack.sheet.lines import Column, Row, Section, Table
from loopslack.sheet.sections.names import check_name, mark_of, state_name, verdict_word


def checks(case: Case) -> Section:
    """One row a check, in the order of the answer."""
    words, say = case.words, case.say
    rows = []
    for check in case.result.checks:
        mark = mark_of(case, check)
        reason = "" if check.reason is None else words.or_else(f"reason.{check.reason}", "")
        verdict = verdict_word(case, mark)
        cells = (
            check_name(case, check),
            state_name(case, check.scenario),
            f"{'≥ ' if check.at_least else ''}{say(check.value)}",
            say(check.limit),
            say.signed(check.margin),
            f"{verdict} ({reason})" if reason else verdict,
        )
        rows.append(Row(cells, mark))
    columns = (
        Column(words("column.check")),
        Column(words("column.state")),
        Column(words("column.value"), "number"),
        Column(words("column.limit"), "number"),
        Column(words("column.margin"), "number"),
        Column(words("column.verdict")),
    )
    table = Table(words("table.checks"), columns, tuple(rows), words("table.checks-note"), compact=True)
    return Section("checks", words("section.checks"), (table,))
