"""A day without flow: its phases by the clock, its largest values, and what it takes for granted."""

from loopslack.sheet.case import Case
from loopslack.sheet.figures.day import clock, day_course
from loopslack.sheet.lines import Beside, Block, Bullets, Column, Row, Section, Table, Text, Tone
from loopslack.sheet.words import plain

_PHASES = ("start", "emptying", "boiling", "receding", "refilling", "end")
_PEAKS = (
    "largest_steam_volume",
    "largest_reach",
    "highest_vessel_pressure",
    "largest_vessel_liquid",
    "highest_collector_temperature",
    "discharged",
)
_NEVER = (
    "above-lowest-opening",
    "discharge",
    "membrane-full",
    "vessel-empty",
    "liquid-freezes",
    "start-above-set",
)


def day(case: Case) -> Section | None:
    """The day beside its largest values, then what happened and what is taken for granted."""
    course = case.answer.course
    if course is None:
        return None
    words, say = case.words, case.say
    phases = Table(
        words("table.phases"),
        (Column(words("column.phase")), Column(words("column.begins"), "number")),
        tuple(Row((words(f"phase.{name}"), clock(getattr(course.phases, name)))) for name in _PHASES),
        compact=True,
    )
    peaks = Table(
        words("table.peaks"),
        (
            Column(words("column.peak")),
            Column(words("column.course"), "number"),
            Column(words("column.envelope"), "number"),
        ),
        tuple(
            Row((words(f"peak.{name.replace('_', '-')}"), say(span.course), say.between(span.low, span.high)))
            for name in _PEAKS
            for span in (getattr(course, name),)
        ),
        words("table.peaks-note"),
        compact=True,
    )
    drawn = day_course(case)
    left = (phases,) if drawn is None else (drawn, phases)
    blocks: list[Block] = [Text(words("day.lead")), Beside(left, (peaks,))]
    if not course.complete:
        blocks.insert(0, Text(words("day.incomplete"), "stop"))
    for flag in course.flags:
        tone: Tone = "stop" if flag in _NEVER else "plain"
        sure = words("day.in-all") if flag in course.certain_flags else words("day.in-some")
        blocks.append(Text(f"{words.or_else(f'flag.{flag}', plain(flag))} ({sure}).", tone))
    notes = tuple(case.phrase(plain(note.note)) for note in course.notes)
    blocks += [Text(words("day.granted"), "lead"), Bullets(notes)]
    return Section("day", words("section.day"), tuple(blocks))
