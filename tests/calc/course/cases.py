"""The reference day of the project: the reference loop with a charged vessel of 80 L under a clear sky. Invented."""

from msgspec.structs import replace

from calc import reference
from loopslack.calc.charge import Charge
from loopslack.calc.course.assumptions import RESIDUAL_SHARE
from loopslack.calc.course.lumped import HOT_START, Emptying, LumpedLoop
from loopslack.calc.course.mapping import Mapped, mapped
from loopslack.calc.course.march import Accuracy, March, marching
from loopslack.calc.course.weather import ClearSky
from loopslack.kernel.work import finished

HOUR = 3600.0
LITRE = 1e-3
BAR = 1e5
ATMOSPHERE = reference.ATMOSPHERE
FILL = 288.15

FINE = Accuracy(cells=40, longest=20.0, most_steps=20_000)
NOON = HOT_START


def charge(nominal: float = 0.080, loop=None, room: float = FILL) -> Charge:
    """Precharge 1.62 bar, filled to 1.92 bar, both at 15 degC; the gas stays at ``room``."""
    loop = loop or reference.loop()
    precharge, fill = 1.62 * BAR + ATMOSPHERE, 1.92 * BAR + ATMOSPHERE
    filled = nominal * (1 - precharge / fill)
    return Charge(nominal, precharge, FILL, filled, filled * loop.fluid.density(FILL), room, 0.0)


def case(nominal: float = 0.080, loop=None, **changes) -> Mapped:
    loop = loop or reference.loop()
    return mapped(loop, charge(nominal, loop), **changes)


def lumped(nominal: float = 0.080, emptying: str = "fair", loop=None, **changes) -> LumpedLoop:
    """The reference loop, lumped; ``changes`` are fields of the emptying or of the lumped loop."""
    found = case(nominal, loop).loop
    how = Emptying(residual_share=RESIDUAL_SHARE[emptying])
    of_emptying = {key: changes.pop(key) for key in list(changes) if key in how.__struct_fields__}
    return replace(found, emptying=replace(how, **of_emptying), **changes)


def course(loop: LumpedLoop, weather=None, accuracy=None, interval: float = 60.0):
    return finished(marching(loop, weather or ClearSky(), accuracy, interval=interval))


def march(loop: LumpedLoop, weather=None, accuracy=None, each=None) -> March:
    """March to the end, showing every accepted step to ``each``."""
    going = March(loop, weather or ClearSky(), accuracy)
    while not going.done:
        if going.advance() and each is not None:
            each(going)
    return going
