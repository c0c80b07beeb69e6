"""The pipe runs as they were stated, stretch by stretch."""

from loopslack.contract.questions.pipes import (
    BoreTube,
    Insulation,
    NoInsulation,
    PipeSegment,
    StandardTube,
    Tube,
    Weathered,
)
from loopslack.sheet.case import Case
from loopslack.sheet.lines import Column, Row, Table
from loopslack.sheet.numerals import NO_BREAK
from loopslack.sheet.sections.names import word_name
from loopslack.sheet.words import plain


def pipes(case: Case, most: int) -> Table:
    """A row a stretch, at most ``most``; those left out are counted."""
    words = case.words
    rows: list[Row] = []
    total = 0
    for index, run in enumerate(case.design.pipe_runs):
        for number, segment in enumerate(run.segments):
            total += 1
            if len(rows) < most:
                name = case.run_name(index)
                if number:
                    name = words("inputs.stretch", run=name, number=number + 1)
                access = word_name(case, run.steam_access or "unknown") if number == 0 else ""
                rows.append(Row((name, access, *_stretch(case, segment))))
    columns = (
        Column(words("column.run")),
        Column(words("field.steamAccess")),
        Column(words("column.length"), "number"),
        Column(words("column.tube")),
        Column(words("field.insulation")),
        Column(words("column.where")),
    )
    note = words("notices.more", number=total - len(rows)) if total > len(rows) else words("table.pipes-note")
    return Table(words("table.pipes"), columns, tuple(rows), note, compact=True)


def _stretch(case: Case, segment: PipeSegment) -> tuple[str, ...]:
    words, say = case.words, case.say
    where = ["\N{EN DASH}" if segment.zone is None else word_name(case, segment.zone)]
    if segment.ambient is not None:
        where.append(say.stated(segment.ambient))
    if segment.end_height is not None:
        where.append(words("inputs.ends-at", height=say.stated(segment.end_height)))
    if segment.soft_solder:
        where.append(words("inputs.soft-solder"))
    return (
        say.stated(segment.length),
        _tube(case, segment.tube),
        _insulation(case, segment.insulation),
        ", ".join(where),
    )


def _tube(case: Case, tube: Tube) -> str:
    words, say = case.words, case.say
    if isinstance(tube, StandardTube):
        return f"{plain(tube.standard).upper().replace('-', ' ', 1)}, {_size(tube)}"
    outer = (
        ""
        if tube.outer_diameter is None
        else f", {words('inputs.outer', diameter=say.stated(tube.outer_diameter))}"
    )
    if isinstance(tube, BoreTube):
        return words("inputs.bore", diameter=say.stated(tube.bore)) + outer
    return say.stated(tube.content_per_length) + outer


def _size(tube: StandardTube) -> str:
    """A nominal size with the unit its standard leaves out."""
    size = plain(tube.size)
    if tube.standard.startswith(("astm", "asme")):
        return f"{size}{NO_BREAK}in"
    if "x" not in size:
        return size.upper()
    return NO_BREAK.join([*size.replace("x", " \N{MULTIPLICATION SIGN} ").split(), "mm"])


def _insulation(case: Case, insulation: Insulation | None) -> str:
    words, say = case.words, case.say
    if insulation is None:
        return "\N{EN DASH}"
    if isinstance(insulation, NoInsulation):
        return words("word.bare")
    told = [words("word.weathered")] if isinstance(insulation, Weathered) else []
    told += [say.stated(one) for one in (insulation.thickness, insulation.conductivity) if one is not None]
    if isinstance(insulation, Weathered) and insulation.loss_factor is not None:
        told.append(f"\N{MULTIPLICATION SIGN} {say.every_digit(insulation.loss_factor)}")
    return ", ".join(told) or words("word.insulated")
