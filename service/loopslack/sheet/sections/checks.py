"""Every check in every state and under every doubt, and what came of the doubts."""

from loopslack.sheet.case import Case
from loopslack.sheet.lines import Column, Row, Section, Table
from loopslack.sheet.sections.names import check_name, mark_of, state_name, verdict_word

_DOUBT_MARK = {"holds": "holds", "does-not-hold": "fails", "not-assessed": "open", "not-applicable": ""}


def checks(case: Case) -> Section:
    """The doubts, then every check."""
    words, say = case.words, case.say
    rows = []
    for check in case.result.checks:
        mark = mark_of(case, check)
        reason = "" if check.reason is None else words.or_else(f"reason.{check.reason}", "")
        value = f"{'≥ ' if check.at_least else ''}{say(check.value)}"
        verdict = verdict_word(case, mark)
        cells = (
            check_name(case, check),
            state_name(case, check.scenario),
            value,
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
    every = Table(words("table.checks"), columns, tuple(rows), words("table.checks-note"), compact=True)
    return Section("checks", words("section.checks"), (_doubts(case), every))


def _doubts(case: Case) -> Table:
    words = case.words
    shift = case.say(case.write.temperature_difference(case.loop.criteria.stagnation_doubt))
    rows = []
    for doubt in case.result.doubts:
        mark = _DOUBT_MARK[doubt.verdict]
        if mark == "fails" and doubt.id not in case.counted:
            mark = "aside"
        word = words("mark.not-applicable") if mark == "" else words(f"mark.{mark}")
        rows.append(Row((words(f"state.{doubt.id}"), words(f"doubt.{doubt.id}", shift=shift), word), mark))  # type: ignore[arg-type]
    robust = (
        words("mark.holds")
        if case.result.robust
        else words("mark.aside" if "all-doubts" not in case.counted else "mark.fails")
    )
    rows.append(
        Row(
            (words("state.all-doubts"), words("doubt.all-doubts"), robust),
            "holds" if case.result.robust else "aside" if "all-doubts" not in case.counted else "fails",
        )
    )
    columns = (
        Column(words("column.doubt")),
        Column(words("column.meaning")),
        Column(words("column.verdict")),
    )
    policy = words(f"policy.{case.reading.policy}")
    return Table(words("table.doubts"), columns, tuple(rows), policy)
