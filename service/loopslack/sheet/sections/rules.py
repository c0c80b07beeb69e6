"""The published rules side by side, what their vessels would see, and the walk to the recommended volume."""

from loopslack.contract.answers.sizing import RuleComparison, SeenStagnation, Walk, WalkStep
from loopslack.sheet.case import Case
from loopslack.sheet.figures.bars import moving
from loopslack.sheet.figures.bars import rules as rules_figure
from loopslack.sheet.figures.bars import walk as walk_figure
from loopslack.sheet.lines import Beside, Block, Bullets, Column, Mark, Row, Section, Table, Text
from loopslack.sheet.sections.sizing_names import rule_title
from loopslack.sheet.words import plain

# A rule that fails here is no fault of the design: told in words and a sign, not with the weight of a failed check.
_MARKS: dict[str, Mark] = {
    "holds": "holds",
    "favourable-only": "aside",
    "does-not-hold": "aside",
    "not-assessed": "aside",
}


def rules(case: Case) -> Section | None:
    """Figures side by side, the table, then the walk step by step."""
    found = case.answer.rules
    if not found:
        return None
    words = case.words
    drawn = [figure for figure in (rules_figure(case), walk_figure(case)) if figure is not None]
    blocks: list[Block] = [Beside((drawn[0],), (drawn[1],))] if len(drawn) == 2 else list(drawn)
    rows = [Row(_cells(case, rule), _MARKS[rule.verdict]) for rule in found]
    columns = (
        Column(words("column.rule")),
        Column(words("column.counts")),
        Column(words("column.answer"), "number"),
        Column(words("column.would-see"), "number"),
        Column(words("column.verdict")),
    )
    blocks.append(Table(words("table.rules"), columns, tuple(rows), words("table.rules-note"), compact=True))
    if case.answer.walk is not None:
        blocks += _walk(case, case.answer.walk)
    return Section("rules", words("section.rules"), tuple(blocks))


def _cells(case: Case, rule: RuleComparison) -> tuple[str, ...]:
    words, say = case.words, case.say
    counts = case.prose(words.or_else(f"rule.{rule.rule}.counts", plain(rule.counts)))
    if rule.nominal_volume is None:
        reason = words.or_else(f"rule.{rule.rule}.refuses", case.phrase(plain(rule.reason or "")))
        return (
            rule_title(case, rule),
            f"{counts} {reason}",
            "\N{EN DASH}",
            "\N{EN DASH}",
            words("mark.no-answer"),
        )
    return (
        rule_title(case, rule),
        counts,
        say(rule.nominal_volume),
        _seen(case, rule.stagnation),
        words(f"rule-verdict.{rule.verdict}"),
    )


def _seen(case: Case, seen: list[SeenStagnation]) -> str:
    """The pressure in the base case; what the valve would have to hold back where it opens."""
    base = next((one for one in seen if one.scenario == "base"), None)
    if base is None or base.pressure is None:
        return "\N{EN DASH}"
    return f"≥ {case.say(base.pressure)}" if base.at_least else case.say(base.pressure)


def _walk(case: Case, walk: Walk) -> list[Text | Bullets]:
    words, say = case.words, case.say
    lead = words(
        "walk-lead",
        start=words(f"rule.{walk.start}.title"),
        from_=say(walk.start_volume),
        to=say(walk.end_volume),
    )
    told = tuple(_told(case, step) for step in walk.steps if moving(step))
    unmoved = [
        case.words.or_else(f"walk.{code}", plain(code))
        for step in walk.steps
        if not moving(step)
        for code in step.codes
    ]
    blocks: list[Text | Bullets] = [Text(lead, "lead"), Bullets(told, numbered=True)]
    if unmoved:
        blocks.append(Text(words("walk-unmoved", steps=", ".join(unmoved)), "small"))
    return blocks


def _told(case: Case, step: WalkStep) -> str:
    """A step as a sentence, its numbers rounded as everywhere on the sheet."""
    words, say = case.words, case.say
    parts = []
    for code in step.codes:
        if f"step.{code}" not in words:
            return plain(step.sentence)
        numbers = {one.name: say(one.value) for one in step.parameters if one.code == code}
        parts.append(words(f"step.{code}", subject=words(f"subject.{step.subject}"), **numbers))
    text = parts[0] if len(parts) == 1 else words("walk-joint", steps="; ".join(parts))
    change = say.size(step.change)
    return f"{text} {words('walk-adds' if step.change.value > 0 else 'walk-saves', change=change)}"
