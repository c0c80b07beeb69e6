"""The verdict, the vessel with its settings, the loop as a drawing, and the tightest margin of every check."""

from loopslack.contract.answers.loop import StagnationState
from loopslack.contract.answers.shared import Check
from loopslack.sheet.case import Case
from loopslack.sheet.figures.schematic import loop_schematic
from loopslack.sheet.figures.verdicts import verdict_sign
from loopslack.sheet.lines import Banner, Beside, Column, Fact, Facts, Row, Section, Table, Text
from loopslack.sheet.numerals import NO_BREAK
from loopslack.sheet.sections.fluids import fluid_name
from loopslack.sheet.sections.names import check_name, mark_of, state_name, verdict_word
from loopslack.sheet.words import plain

_WEIGHT = {"fails": 0, "warns": 1, "open": 2, "holds": 3, "aside": 4, "": 5}


def banner(case: Case) -> Banner:
    """The verdict as nobody can miss it."""
    verdict, basis = case.result.verdict, case.result.basis
    return Banner(
        verdict=verdict,
        sign=verdict_sign(verdict),
        word=case.words(f"verdict.{verdict}.word"),
        sentence=case.words(f"verdict.{verdict}.sentence"),
        basis=case.words(f"basis.{basis}", number=len(case.result.to_confirm)),
    )


def result(case: Case) -> Section:
    """What to build and how close to its limits it runs."""
    words = case.words
    first: tuple[Text, ...] = ()
    if not case.chosen:
        first = (Text(words("result.none-chosen"), "stop"),)
    facts = Facts(tuple(_facts(case)))
    return Section(
        "result",
        words("section.result"),
        (*first, Beside((facts,), (loop_schematic(case),)), _margins(case)),
    )


def _facts(case: Case) -> list[Fact]:
    words, say = case.words, case.say
    found = [*_vessel(case)]
    settings = case.result.settings
    if settings is None:
        found.append(Fact(words("fact.fill"), words("result.no-window")))
    else:
        window = settings.window
        found += [
            Fact(
                words("fact.precharge"),
                say(settings.precharge),
                words("fact.precharge-more", temperature=say(settings.precharge_temperature)),
                large=True,
            ),
            Fact(
                words("fact.fill"),
                say(settings.fill_pressure),
                words(
                    "fact.fill-more",
                    window=say.between(window.lower, window.upper),
                    temperature=say(window.temperature),
                ),
                large=True,
            ),
        ]
    stamped = case.write.gauge(case.loop.relief.set_pressure)
    opening = case.check("relief-valve", "base")
    more = (
        ""
        if opening is None or opening.limit is None
        else words("fact.relief-more", final=say(opening.limit))
    )
    found.append(Fact(words("fact.relief"), say(stamped), more))
    found += _stagnation(case)
    found += [
        Fact(words("fact.content"), say(case.result.content.total), _range(case)),
        Fact(
            words("fact.fluid"),
            fluid_name(case),
            words("fact.fluid-more", freezing=say(case.result.order.freezing_point)),
        ),
    ]
    return found


def _vessel(case: Case) -> list[Fact]:
    words, say, vessel = case.words, case.say, case.vessel
    if vessel is None:
        return [Fact(words("part.vessel"), "\N{EN DASH}")]
    size = f"{vessel.pieces} \N{MULTIPLICATION SIGN} {say(vessel.nominal_volume)}"
    rating = (
        words("fact.unrated")
        if vessel.rated_pressure is None
        else words("fact.rated", pressure=say(vessel.rated_pressure))
    )
    name = "part.vessel" if case.chosen else "part.vessel-nearest"
    found = [Fact(words(name), size, f"{article(case, vessel.id)} · {rating}", large=True)]
    if vessel.cooling_vessel is not None:
        found.append(
            Fact(
                words("part.cooling-vessel"),
                say(vessel.cooling_vessel.content),
                words("fact.cooling-more"),
                large=True,
            )
        )
    return found


def article(case: Case, id: str) -> str:
    """A vessel's article: the caller's own name, or that it is a generic size."""
    if not id.startswith("preferred-"):
        return plain(id)
    return case.words("result.generic", size=generic_size(case, id))


def generic_size(case: Case, id: str) -> str:
    """A generic size by its litres, which are its name in any units."""
    litres = id.removeprefix("preferred-").replace("-", ".")
    named = f"{case.say.plain(litres)}{NO_BREAK}L"
    if case.write.system == "metric":
        return named
    return f"{case.say(case.write.volume(float(litres) / 1000))} ({named})"


def _range(case: Case) -> str:
    content = case.result.content
    if content.low is None or content.high is None:
        return ""
    return case.words("fact.content-more", range=case.say.between(content.low, content.high))


def _stagnation(case: Case) -> list[Fact]:
    """What the vessel reaches, and at worst would reach, with a valve that stayed shut."""
    words, base, worst = case.words, case.stagnation("base"), case.worst_stagnation
    if base is None:
        return []
    more = [words(f"regime.{base.regime}")]
    if worst is not None:
        more.append(
            words(
                "fact.stagnation-more", pressure=_reached(case, worst), doubt=state_name(case, worst.scenario)
            )
        )
    return [Fact(words("fact.stagnation"), _reached(case, base), " · ".join(more))]


def _reached(case: Case, state: StagnationState) -> str:
    check = case.pressure_reached(state.scenario)
    if check is None:
        return case.say(state.vessel_pressure)
    return f"≥ {case.say(check.value)}" if check.at_least else case.say(check.value)


def _margins(case: Case) -> Table:
    """Of every check the state that counts in which it is tightest, failing ones first; of what is open every part.

    What fails only where it does not count comes last, beside the row that counts and not in its place.
    """
    words, say = case.words, case.say
    tightest: dict[tuple[str, bool], Check] = {}
    unsettled: dict[tuple[str, str | None], Check] = {}
    for check in case.result.checks:
        aside = mark_of(case, check) == "aside"
        if not aside and check.scenario not in case.counted:
            continue
        if mark_of(case, check) == "open":
            unsettled.setdefault((check.code, check.subject), check)
        known = tightest.get((check.code, aside))
        if known is None or _tightness(case, check) < _tightness(case, known):
            tightest[check.code, aside] = check
    listed = [*tightest.values()]
    told = {(check.code, check.subject) for (_, aside), check in tightest.items() if not aside}
    listed += [check for place, check in unsettled.items() if place not in told]
    rows = []
    for check in sorted(listed, key=lambda check: _tightness(case, check)):
        mark = mark_of(case, check)
        at_least = "≥ " if check.at_least else ""
        cells = (
            check_name(case, check),
            state_name(case, check.scenario),
            f"{at_least}{say(check.value)}",
            say(check.limit),
            say.signed(check.margin),
            verdict_word(case, mark),
        )
        rows.append(Row(cells, mark))
    columns = (
        Column(words("column.check")),
        Column(words("column.tightest")),
        Column(words("column.value"), "number"),
        Column(words("column.limit"), "number"),
        Column(words("column.margin"), "number"),
        Column(words("column.verdict")),
    )
    return Table(words("table.margins"), columns, tuple(rows), words("table.margins-note"))


def _tightness(case: Case, check: Check) -> tuple[int, float]:
    """Order by weight of the mark, then by the margin as a share of its limit.

    Where none is allowed and there is none, as with steam at the station, nothing is tight: such a row comes last.
    """
    weight = _WEIGHT[mark_of(case, check)]
    if check.margin is None:
        return weight, float("-inf")
    if check.verdict == "holds" and check.limit is not None and check.limit.value == check.margin.value == 0:
        return weight, float("inf")
    limit = abs(check.limit.value) if check.limit is not None else 0.0
    return weight, check.margin.value / limit if limit else check.margin.value
