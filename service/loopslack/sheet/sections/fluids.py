"""The fluid in words: what it is and how strong."""

from loopslack.contract.questions.fluid import OwnFluid, Water
from loopslack.sheet.case import Case
from loopslack.sheet.words import plain


def fluid_name(case: Case) -> str:
    """The fluid with its strength by volume and by mass."""
    words, say, fluid, order = case.words, case.say, case.design.fluid, case.result.order
    if isinstance(fluid, Water):
        return words("fluid.water")
    if isinstance(fluid, OwnFluid):
        return plain(fluid.name)
    kind = words(f"fluid.{case.loop.fluid.kind}")
    return words(
        "fluid.strength",
        fluid=kind,
        volume=say(order.volume_concentration),
        mass=say(order.mass_concentration),
    )
