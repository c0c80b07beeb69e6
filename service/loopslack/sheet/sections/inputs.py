"""What was stated: the question as it was asked, in the units and with the digits of whoever asked it."""

from collections.abc import Iterator

from msgspec import Struct
from msgspec.structs import fields as fields_of

from loopslack.contract.quantity import Price, Quantity
from loopslack.contract.questions.collectors import CollectorGroup
from loopslack.contract.questions.fluid import BoilingLike, OwnFluid, ProtectTo, Water
from loopslack.contract.questions.vessels import FromSeries, FromStock
from loopslack.sheet.case import Case
from loopslack.sheet.lines import Beside, Block, Column, Fact, Facts, Row, Section, Table
from loopslack.sheet.sections.inputs_pipes import pipes
from loopslack.sheet.sections.names import word_name
from loopslack.sheet.words import plain

MOST_ROWS = 60
NESTED = (
    "site",
    "station",
    "vessel_line",
    "relief_valve",
    "pump",
    "gauge",
    "construction",
    "temperatures",
    "design_sun",
    "criteria",
    "tolerances",
)
ALONE = (
    "fluid",
    "static_height",
    "highest_point",
    "vessel",
    "vessels_in_parallel",
    "cooling_vessel",
    "precharge",
    "vessel_zone",
    "doubt_policy",
    "accept_without_boiling",
)
"""Members that are one value each; those of ``NESTED`` are told one by one."""


def inputs(case: Case) -> Section:
    """Single members as a list, collectors, pipes and rated parts as tables."""
    words = case.words
    single = tuple(_single(case))
    half = (len(single) + 1) // 2
    both = Beside((Facts(single[:half]),), (Facts(single[half:]),))
    blocks: list[Block] = [both, _collectors(case), pipes(case, MOST_ROWS)]
    parts = _parts(case)
    if parts is not None:
        blocks.append(parts)
    fluid = _own_fluid(case)
    if fluid is not None:
        blocks.append(fluid)
    return Section("inputs", words("section.inputs"), tuple(blocks))


def _single(case: Case) -> Iterator[Fact]:
    """Everything that is one value, in the order of the question."""
    words, design = case.words, case.design
    yield Fact(words("field.fluid"), _fluid(case))
    yield Fact(words("field.staticHeight"), case.say.stated(design.static_height))
    if design.highest_point is not None:
        yield Fact(words("field.highestPoint"), case.say.stated(design.highest_point))
    for name in NESTED:
        found = getattr(design, name)
        if found is not None:
            yield from _members(case, name, found)
    yield Fact(words("field.vessel"), _vessel(case))
    if design.vessels_in_parallel is not None:
        yield Fact(words("field.vesselsInParallel"), str(design.vessels_in_parallel))
    for name in ("cooling_vessel", "precharge"):
        found = getattr(design, name)
        if found is not None:
            yield Fact(words(f"field.{_camel(name)}"), _tagged(case, found))
    for name in ("vessel_zone", "doubt_policy"):
        word = getattr(design, name)
        if word is not None:
            yield Fact(words(f"field.{_camel(name)}"), word_name(case, word))
    if design.accept_without_boiling:
        yield Fact(words("field.acceptWithoutBoiling"), words("word.yes"))


def _members(case: Case, parent: str, found: Struct) -> Iterator[Fact]:
    for field in fields_of(found):
        value = getattr(found, field.name)
        if value is None:
            continue
        yield Fact(member_label(case, _camel(parent), field.encode_name), _shown(case, value))


def member_label(case: Case, parent: str, name: str) -> str:
    """What people call a member: by its place if the catalogue knows it there, else by its name."""
    other = case.words.or_else(f"field.{name}", plain(name))
    return case.words.or_else(f"field.{parent}-{name}", other)


def _shown(case: Case, value: object) -> str:
    if isinstance(value, Quantity):
        return case.say.stated(value)  # type: ignore[arg-type]  # every quantity has a value and a unit
    if isinstance(value, bool):
        return case.words("word.yes" if value else "word.no")
    if isinstance(value, str):
        return word_name(case, value)
    return _tagged(case, value) if isinstance(value, Struct) else str(value)


def _tagged(case: Case, found: Struct) -> str:
    """One of several ways to state something: which way, and its numbers."""
    tag = str(type(found).__struct_config__.tag)
    numbers = []
    for field in fields_of(type(found)):
        value = getattr(found, field.name)
        if isinstance(value, Quantity):
            numbers.append(case.say.stated(value))  # type: ignore[arg-type]  # as above
        elif isinstance(value, str):
            numbers.append(word_name(case, value))
    return " · ".join([word_name(case, tag), *numbers])


def _fluid(case: Case) -> str:
    words, say, fluid = case.words, case.say, case.design.fluid
    if isinstance(fluid, Water):
        return words("fluid.water")
    if isinstance(fluid, OwnFluid):
        return words("inputs.own-fluid", name=plain(fluid.name), freezing=say.stated(fluid.freezing_point))
    kind, share = words(f"fluid.{case.loop.fluid.kind}"), fluid.concentration
    if isinstance(share, ProtectTo):
        return words("inputs.protect-to", fluid=kind, temperature=say.stated(share.temperature))
    return f"{kind}, {say.stated(share.share)}"


def _vessel(case: Case) -> str:
    words, say, choice = case.words, case.say, case.design.vessel
    if choice is None or isinstance(choice, FromSeries):
        rating = None if choice is None else choice.rated_pressure
        shown = words("fact.unrated") if rating is None else words("fact.rated", pressure=say.stated(rating))
        return f"{words('word.series')} · {shown}"
    if isinstance(choice, FromStock):
        return words("inputs.stock", number=len(choice.items))
    told = [words("word.given")]
    for field in fields_of(choice):
        value = getattr(choice, field.name)
        if value is None or field.name == "id":
            continue
        if isinstance(value, Price):
            shown = f"{say.plain(f'{value.amount:.2f}')} {value.currency}"
        else:
            shown = _shown(case, value)
        told.append(f"{words(f'field.{field.encode_name}')} {shown}")
    return " · ".join(told if choice.id is None else [f"{told[0]}: {plain(choice.id)}", *told[1:]])


def _collectors(case: Case) -> Table:
    words = case.words
    rows = [Row(tuple(_collector(case, k, group))) for k, group in enumerate(case.design.collectors)]
    columns = (
        Column(words("column.group")),
        Column(words("column.number"), "number"),
        Column(words("column.build")),
        Column(words("column.area"), "number"),
        Column(words("field.content"), "number"),
        Column(words("column.curve")),
        Column(words("field.emptyingClass")),
        Column(words("column.height"), "number"),
        Column(words("field.ratedPressure"), "number"),
    )
    return Table(words("table.collectors"), columns, tuple(rows), words("table.inputs-note"), compact=True)


def _collector(case: Case, index: int, group: CollectorGroup) -> Iterator[str]:
    words, say = case.words, case.say
    yield case.group_name(index)
    yield str(group.count)
    yield word_name(case, group.type)
    yield f"{say.stated(group.area)} ({word_name(case, group.area_basis)})"
    yield say.stated(group.content)
    found, curve = group.coefficients, []
    if found is not None:
        numbers = f"η₀ {say.every_digit(found.eta0)}, a₁ {say.stated(found.a1)}, a₂ {say.stated(found.a2)}"
        curve.append(f"{numbers} ({word_name(case, found.basis)})")
    measured = group.measured_stagnation
    if measured is not None:
        curve.append(
            words(
                "inputs.measured",
                temperature=say.stated(measured.temperature),
                sun=say.stated(measured.irradiance),
                air=say.stated(measured.ambient),
            )
        )
    yield "; ".join(curve) or "\N{EN DASH}"
    if group.measured_steam_power is not None:
        yield words("inputs.steam-power", power=say.stated(group.measured_steam_power))
    else:
        yield "\N{EN DASH}" if group.emptying_class is None else word_name(case, group.emptying_class)
    yield say.stated(group.height)
    yield say.stated(group.rated_pressure)


def _parts(case: Case) -> Table | None:
    words, say, parts = case.words, case.say, case.design.parts
    if not parts:
        return None
    rows = [
        Row(
            (
                plain(part.name),
                say.stated(part.height),
                say.stated(part.rated_pressure),
                say.stated(part.highest_temperature),
            )
        )
        for part in parts[:MOST_ROWS]
    ]
    columns = (
        Column(words("column.part")),
        Column(words("column.height"), "number"),
        Column(words("field.ratedPressure"), "number"),
        Column(words("field.highestTemperature"), "number"),
    )
    more = len(parts) - len(rows)
    note = words("notices.more", number=more) if more else words("table.inputs-note")
    return Table(words("table.parts"), columns, tuple(rows), note, compact=True)


def _own_fluid(case: Case) -> Table | None:
    words, say, fluid = case.words, case.say, case.design.fluid
    if not isinstance(fluid, OwnFluid):
        return None
    rows = [
        Row((say.stated(point.temperature), say.stated(point.density))) for point in fluid.points[:MOST_ROWS]
    ]
    columns = (Column(words("column.temperature"), "number"), Column(words("column.density"), "number"))
    more = len(fluid.points) - len(rows)
    note = words("notices.more", number=more) if more else _boiling(case, fluid)
    return Table(words("table.own-fluid", name=plain(fluid.name)), columns, tuple(rows), note, compact=True)


def _boiling(case: Case, fluid: OwnFluid) -> str:
    words, say, boiling = case.words, case.say, fluid.boiling
    if isinstance(boiling, BoilingLike):
        kind = words(f"fluid.{boiling.glycol}")
        return words("inputs.boils-like", fluid=kind, share=say.stated(boiling.share))
    points = "; ".join(
        f"{say.stated(point.temperature)} {say.stated(point.pressure)}" for point in boiling.points[:12]
    )
    return words("inputs.boils-by", points=points)


def _camel(name: str) -> str:
    head, *rest = name.split("_")
    return head + "".join(word.capitalize() for word in rest)
