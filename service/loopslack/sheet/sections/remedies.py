"""What would make the loop hold: measures, the smallest intervention first, and what to mind with each."""

import re
from collections.abc import Iterable

from loopslack.contract.answers.loop import VesselResult
from loopslack.contract.answers.remedies import QuestionChange, Remedies, RemedyStep
from loopslack.sheet.case import Case
from loopslack.sheet.lines import Block, Bullets, Column, Row, Section, Table, Text
from loopslack.sheet.words import plain

_RUN = re.compile(r"/pipeRuns/(\d+)(?:/|\Z)")


def remedies(case: Case) -> Section | None:
    """Measures that do by themselves, else the pair that does; then what might help but must be measured."""
    found = case.answer.remedies
    if found is None or not (found.single or found.pair or found.to_be_proved or found.none_found):
        return None
    words = case.words
    blocks: list[Block] = []
    if found.single:
        rows = tuple(
            Row(
                (
                    str(place),
                    _sentence(case, one, one.changes),
                    _vessel(case, one.vessel),
                    case.say(one.fill_pressure),
                    words("word.yes" if one.robust else "word.no"),
                )
            )
            for place, one in enumerate(found.single, 1)
        )
        blocks.append(_table(case, "table.remedies", rows))
    if found.pair is not None:
        pair = found.pair
        told = "; ".join(_sentence(case, step, pair.changes) for step in pair.steps)
        row = Row(
            (
                "1",
                told,
                _vessel(case, pair.vessel),
                case.say(pair.fill_pressure),
                words("word.yes" if pair.robust else "word.no"),
            )
        )
        blocks += [Text(words("remedies.pair")), _table(case, "table.remedies-pair", (row,))]
    if found.none_found:
        blocks.append(Text(words("remedies.none"), "stop"))
    if not found.complete:
        blocks.append(Text(words("remedies.incomplete"), "small"))
    blocks += _proofs(case, found)
    minded = _cautions(case, found)
    if minded:
        blocks += [Text(words("remedies.mind"), "lead"), Bullets(minded)]
    return Section("remedies", words("section.remedies"), tuple(blocks))


def _table(case: Case, caption: str, rows: tuple[Row, ...]) -> Table:
    words = case.words
    columns = (
        Column(words("column.step")),
        Column(words("column.measure")),
        Column(words("column.with-vessel"), "number"),
        Column(words("fact.fill"), "number"),
        Column(words("column.robust")),
    )
    return Table(words(caption), columns, rows, words(f"{caption}-note"))


def _vessel(case: Case, vessel: VesselResult | None) -> str:
    """The vessel that then holds, with its cooling vessel."""
    if vessel is None:
        return case.say(None)
    size = case.say(vessel.nominal_volume)
    told = f"{vessel.pieces} \N{MULTIPLICATION SIGN} {size}" if vessel.pieces > 1 else size
    if vessel.cooling_vessel is None:
        return told
    return case.words("remedies.cooled", vessel=told, content=case.say(vessel.cooling_vessel.content))


def _sentence(case: Case, step: RemedyStep, changes: list[QuestionChange]) -> str:
    """What to do, from the code and its numbers."""
    words, say = case.words, case.say
    opens = step.code == "open-run"
    runs = dict.fromkeys(
        int(found[1])
        for change in changes
        if (found := _RUN.match(change.field)) and change.field.endswith("/steamAccess") == opens
    )
    key = _key(case, step, runs)
    if key not in words:
        return plain(step.sentence)
    named = ", ".join(case.run_name(run) for run in runs if run < len(case.design.pipe_runs))
    told = words(key, amount=say(step.amount), runs=named)
    return told if step.present is None else f"{told} {words('remedies.instead', present=say(step.present))}"


def _key(case: Case, step: RemedyStep, runs: Iterable[int]) -> str:
    """The words of a measure, told apart where one measure is two things to do."""
    if step.code == "stronger-glycol" and step.amount.unit in ("degC", "degF"):
        return "measure.stronger-glycol-protecting"
    branches = case.loop.branches
    if step.code == "open-run" and all(branches[run].access == "unknown" for run in runs):
        return "measure.open-run-unknown"
    return f"measure.{step.code}"


def _proofs(case: Case, found: Remedies) -> list[Text]:
    words, say = case.words, case.say
    return [
        Text(words(f"proof.{one.code}", amount=say(one.amount), present=say(one.present)))
        for one in found.to_be_proved
    ]


def _cautions(case: Case, found: Remedies) -> tuple[str, ...]:
    """What to mind, told once whichever measure it belongs to."""
    steps: list[RemedyStep] = [*found.single, *(found.pair.steps if found.pair else ())]
    cautions = {caution.code: caution.message for step in steps for caution in step.cautions}
    return tuple(
        case.words.or_else(f"mind.{code}", case.words.or_else(f"caution.{code}", plain(message)))
        for code, message in cautions.items()
    )
