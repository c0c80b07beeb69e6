"""Which figures there are, by the name a caller asks for them."""

from collections.abc import Callable, Mapping

from loopslack.sheet.case import Case
from loopslack.sheet.figures.bars import rules, sensitivity, walk
from loopslack.sheet.figures.day import day_course
from loopslack.sheet.figures.filling import fill_pressure_over_temperature
from loopslack.sheet.figures.heights import pressure_over_height
from loopslack.sheet.figures.liquid import pressure_over_liquid
from loopslack.sheet.figures.reach import steam_reach
from loopslack.sheet.figures.schematic import loop_schematic
from loopslack.sheet.lines import Drawing

Figure = Callable[[Case], Drawing | None]

FIGURES: Mapping[str, Figure] = {
    "loop-schematic": loop_schematic,
    "pressure-over-height": pressure_over_height,
    "pressure-over-liquid": pressure_over_liquid,
    "fill-pressure-over-temperature": fill_pressure_over_temperature,
    "rules": rules,
    "walk": walk,
    "steam-reach": steam_reach,
    "day-course": day_course,
    "sensitivity": sensitivity,
}
