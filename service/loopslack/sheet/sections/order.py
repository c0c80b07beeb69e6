"""What to order, and what every part of the loop holds."""

from loopslack.calc.order_list import ROOM
from loopslack.sheet.case import Case
from loopslack.sheet.lines import Beside, Block, Column, Row, Section, Table, Text
from loopslack.sheet.sections.fluids import fluid_name
from loopslack.sheet.sections.names import valve_size
from loopslack.sheet.sections.result import article

MOST_PARTS = 60


def order(case: Case) -> Section:
    """The order list beside the contents; where no vessel is chosen, that nothing is to be ordered by it."""
    lists: tuple[Block, ...] = (Beside((_items(case),), (_contents(case),)),)
    if not case.chosen:
        lists = (Text(case.words("order.not-chosen"), "stop"), *lists)
    return Section("order", case.words("section.order"), lists)


def _items(case: Case) -> Table:
    words, say, found, vessel = case.words, case.say, case.result.order, case.vessel
    rows = []
    if vessel is not None:
        name = words("part.vessel" if case.chosen else "part.vessel-nearest")
        rated = vessel.rated_pressure
        strength = "" if rated is None else f", {words('fact.rated', pressure=say(rated))}"
        rows.append(
            (
                f"{name}, {article(case, vessel.id)}{strength}",
                f"{vessel.pieces} \N{MULTIPLICATION SIGN} {say(vessel.nominal_volume)}",
            )
        )
        if vessel.price is not None:
            amount = say.plain(f"{vessel.price.amount:.2f}")
            rows.append((words("order.price"), f"{amount} {vessel.price.currency}"))
        if vessel.cooling_vessel is not None:
            rows.append(
                (
                    words("part.cooling-vessel"),
                    words("order.at-least", content=say(vessel.cooling_vessel.content)),
                )
            )
    if found.glycol is not None and found.glycol.value > 0:
        rows.append((words("order.glycol"), say(found.glycol)))
    if found.water is not None and found.glycol is not None and found.glycol.value > 0:
        rows.append((words("order.water"), say(found.water)))
    instead = found.glycol is not None and found.glycol.value > 0
    fluid = words("order.ready-mix", fluid=fluid_name(case)) if instead else fluid_name(case)
    rows.append((fluid, say(found.ready_mix)))
    size = (
        words("order.beyond-table")
        if found.relief_nominal_size is None
        else valve_size(case, found.relief_nominal_size)
    )
    stamped = say(case.write.gauge(case.loop.relief.set_pressure))
    rows.append((words("order.relief", set=stamped), size))
    rows.append((words("order.container"), words("order.at-least", content=say(found.discharge_container))))
    category = found.pressure_equipment_category
    if category is not None:
        rows.append((words("order.category"), words(f"category.{category}")))
    rows.append((words("order.freezing"), say(found.freezing_point)))
    rows.append((words("order.freezing-margin"), say.signed(found.freezing_margin)))
    if found.ice_fraction is not None:
        rows.append((words("order.ice"), say(found.ice_fraction)))
    columns = (Column(words("column.item")), Column(words("column.quantity"), "number"))
    note = words(
        "table.order-note",
        loop=say(found.content),
        vessel=say(found.vessel_content),
        loss=say(found.filling_loss),
        temperature=say(case.write.temperature(ROOM)),
    )
    return Table(words("table.order"), columns, tuple(Row(row) for row in rows), note)


def _contents(case: Case) -> Table:
    words, say, content = case.words, case.say, case.result.content
    named = list(zip(case.part_names(), content.parts, strict=True))
    rows: list[tuple[str, str, str]] = []
    for name, part in named[:MOST_PARTS]:
        ranged = "" if part.low is None or part.high is None else say.between(part.low, part.high)
        rows.append((name, say(part.content), ranged))
    if len(named) > MOST_PARTS:
        rows.append((words("notices.more", number=len(named) - MOST_PARTS), "", ""))
    ranged = "" if content.low is None or content.high is None else say.between(content.low, content.high)
    rows.append((words("order.total"), say(content.total), ranged))
    columns = (
        Column(words("column.part")),
        Column(words("column.content"), "number"),
        Column(words("column.range"), "number"),
    )
    title = words("table.content")
    if any(last for _, _, last in rows):
        return Table(title, columns, tuple(Row(row) for row in rows), words("table.content-note"))
    return Table(title, columns[:2], tuple(Row(row[:2]) for row in rows))
