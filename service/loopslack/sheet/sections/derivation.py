"""The derivation: equation, numbers put in, result and source, line by line, for a reader who does the sums again.

A loop takes hundreds of steps. Unless the question itself includes the derivation, the sheet prints the steps whose
numbers the answer shows and those they take their numbers from; all keep the numbers they have in the answer. Numbers
have all their digits here.
"""

from collections.abc import Iterable

from loopslack.contract.answers.derivation import Derivation, DerivationInput, DerivationStep
from loopslack.sheet.case import Case
from loopslack.sheet.formula import formula
from loopslack.sheet.lines import Block, Column, Row, Section, Table, Text
from loopslack.sheet.sections.names import source_name
from loopslack.sheet.words import plain


def derivation(case: Case) -> Section | None:
    """A table a chapter, then the fitted constants they use."""
    found = case.answer.derivation
    if found is None:
        return None
    words = case.words
    whole = "derivation" in (case.design.include or ())
    steps = found.steps if whole else _shown(found)
    lead = words("derivation.whole" if whole else "derivation.part", shown=len(steps), all=len(found.steps))
    blocks: list[Block] = [Text(f"{lead} {words.phrase(plain(found.redoing))}", "small")]
    sources = {equation.id: equation.source for equation in found.equations}
    for chapter in dict.fromkeys(step.chapter for step in steps):
        rows = tuple(
            _row(case, step, source_name(case, sources[step.equation]) if step.equation in sources else "")
            for step in steps
            if step.chapter == chapter
        )
        blocks.append(Table(words(f"chapter.{chapter}"), _columns(case), rows, compact=True))
    used = {name for step in steps for name in step.constants or ()}
    constants = [constant for constant in found.constants if constant.id in used]
    if constants:
        rows = tuple(
            Row(
                (
                    told_name(case, constant.id),
                    "; ".join(case.say.every_digit(value) for value in constant.values),
                    source_name(case, constant.source),
                )
            )
            for constant in constants
        )
        columns = (
            Column(words("column.constants")),
            Column(words("column.numbers")),
            Column(words("column.source")),
        )
        blocks.append(Table(words("table.constants"), columns, rows, compact=True))
    return Section("derivation", words("section.derivation"), tuple(blocks))


def told_name(case: Case, english: str) -> str:
    """A name of the derivation in the sheet's language; as the answer has it where a word of it is not known."""
    told = case.words.name(english, case.own_names)
    if told is None:
        told = case.words.unit_words(plain(english))
    return case.prose(told) if "degC" in english else told


def _columns(case: Case) -> tuple[Column, ...]:
    words = case.words
    return (
        Column(words("column.step"), share=2),
        Column(words("column.what"), share=11),
        Column(words("column.law"), share=29),
        Column(words("column.result"), "number", share=9),
        Column(words("column.source"), share=9),
    )


def _shown(found: Derivation) -> list[DerivationStep]:
    """The steps the answer shows and those their inputs come from."""
    by_number = {step.number: step for step in found.steps}
    shown = {step.number for step in found.steps if step.answers}
    shown |= {one.step for number in shown for one in by_number[number].inputs if one.step is not None}
    return [step for step in found.steps if step.number in shown]


def _row(case: Case, step: DerivationStep, source: str) -> Row:
    return Row(
        (str(step.number), told_name(case, step.name), _law(case, step), case.say.derived(step.value), source)
    )


def _law(case: Case, step: DerivationStep) -> str:
    """The law with its numbers, or what a root solves."""
    words = case.words
    if step.system is not None:
        steps = ", ".join(str(number) for number in step.system.equations)
        told = words("derivation.root", meaning=words.phrase(plain(step.system.meaning)), steps=steps)
        if step.system.residual is not None:
            told = f"{told} {words('derivation.residual', residual=case.say.derived(step.system.residual))}"
        return told
    numbers = ", ".join(_inputs(case, step.inputs))
    law = formula(plain(step.law or ""), words)
    outside = f" {words('derivation.outside')}" if step.outside else ""
    return f"{law};  {numbers}{outside}" if numbers else f"{law}{outside}"


def _inputs(case: Case, inputs: Iterable[DerivationInput]) -> Iterable[str]:
    for one in inputs:
        origin = case.words(f"origin.{one.origin}", step=one.step)
        symbol = told_name(case, one.name) if one.symbol is None else formula(plain(one.symbol), case.words)
        yield f"{symbol} = {case.say.derived(one.value)} {origin}"
