"""How large the vessel must be, and how it was chosen from the candidates."""

from loopslack.contract.answers.loop import RefusalReason, SizedVolume
from loopslack.sheet.case import Case
from loopslack.sheet.lines import Block, Column, Row, Section, Table, Text
from loopslack.sheet.sections.result import article, generic_size

MOST_REFUSED = 12
_NAMED = 6  # of the vessels that would do as well


def sizing(case: Case) -> Section:
    """The volumes by how much they survive, then the choice."""
    words = case.words
    blocks: list[Block] = [_volumes(case), Text(_choice(case))]
    refused = _refused(case)
    if refused is not None:
        blocks.append(refused)
    return Section("sizing", words("section.sizing"), tuple(blocks))


def _volumes(case: Case) -> Table:
    words, say, found = case.words, case.say, case.result.volumes
    rows, raised = [], []
    named: tuple[tuple[str, SizedVolume | None], ...] = (
        ("base", found.base),
        ("recommended", found.recommended),
        ("robust", found.robust),
    )
    for name, sized in named:
        if sized is None:
            rows.append(
                Row(
                    (
                        words(f"volume.{name}"),
                        words("volume.none"),
                        "\N{EN DASH}",
                        "\N{EN DASH}",
                        "\N{EN DASH}",
                    ),
                    "aside",
                )
            )
            continue
        least = say(sized.smallest)
        if sized.floor is not None:
            raised.append(words("volume.floor", name=words(f"volume.{name}"), floor=say(sized.floor)))
        largest = words("volume.unbounded") if sized.largest is None else say(sized.largest)
        cooling = say(sized.cooling_content) if sized.cooling_content.value else words("word.none")
        rows.append(Row((words(f"volume.{name}"), least, largest, cooling, say(sized.precharge))))
    columns = (
        Column(words("column.survives")),
        Column(words("column.smallest"), "number"),
        Column(words("column.largest"), "number"),
        Column(words("column.cooling"), "number"),
        Column(words("column.precharge"), "number"),
    )
    return Table(
        words("table.volumes"), columns, tuple(rows), " ".join([words("table.volumes-note"), *raised])
    )


def _choice(case: Case) -> str:
    words, selection = case.words, case.result.selection
    told = words(
        "selection.sentence" if case.chosen else "selection.none",
        considered=selection.considered,
        ranked=words(f"selection.by-{selection.ranked_by}"),
    )
    if not case.chosen:  # what is large enough is no vessel to take while another check fails
        return told
    others = len(selection.alternatives) + selection.alternatives_omitted
    if others:
        names = ", ".join(
            f"{one.pieces} \N{MULTIPLICATION SIGN} {_short(case, one.id)}"
            if one.pieces > 1
            else _short(case, one.id)
            for one in selection.alternatives[:_NAMED]
        )
        if others > _NAMED:
            names = f"{names}, …"
        told = f"{told} {words('selection.alternatives', number=others, names=names)}"
    return told


def _short(case: Case, id: str) -> str:
    """A candidate's name; a generic size by its litres."""
    if id.startswith("preferred-"):
        return generic_size(case, id)
    return article(case, id)


def _refused(case: Case) -> Table | None:
    """The refused candidates, those nearest to fitting: the last before the choice in rank, alike ones together."""
    words, refused = case.words, case.result.selection.refused
    if not refused:
        return None
    shown = refused[-MOST_REFUSED:]
    alike: dict[str, list[str]] = {}
    for one in shown:
        reasons = "; ".join(_reason(case, reason) for reason in one.reasons)
        name = _short(case, one.id)
        named = f"{one.pieces} \N{MULTIPLICATION SIGN} {name}" if one.pieces > 1 else name
        alike.setdefault(reasons, []).append(named)
    rows = tuple(Row((", ".join(names), reasons)) for reasons, names in alike.items())
    columns = (Column(words("column.candidate")), Column(words("column.refused")))
    note = words("selection.more", number=len(refused) - len(shown)) if len(refused) > len(shown) else ""
    return Table(words("table.refused"), columns, rows, note, compact=True, whole=True)


def _reason(case: Case, reason: RefusalReason) -> str:
    """A reason with the number the vessel has, the one it needs and what is missing, as far as there are any."""
    words, say = case.words, case.say
    told = words(f"refusal.{reason.code}")
    if reason.value is None or reason.limit is None:
        return told
    if reason.limit.value == 0:
        return words("refusal.left", reason=told, value=say(reason.value))
    value, limit = say.apart(reason.value, reason.limit)
    told = words("refusal.numbers", reason=told, value=value, limit=limit)
    return told if reason.short_by is None else words("refusal.short", told=told, short=say(reason.short_by))
