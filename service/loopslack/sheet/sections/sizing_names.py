"""Names of sizing rules, of the steps between them and of the inputs that move the volume."""

from collections.abc import Iterable

from loopslack.contract.answers.shared import AnyQuantity
from loopslack.contract.answers.sizing import RuleComparison, SensitivityRow, WalkStep
from loopslack.sheet.case import Case
from loopslack.sheet.numerals import NO_BREAK, rounded
from loopslack.sheet.words import plain

# A collector's content per area is a length in the answer. The trade says litres per square metre, which is the
# millimetre, or gallons per square foot: a foot of it is 1728/231 gallons, since a gallon has 231 cubic inches.
_PER_AREA = {"m": (1000.0, "L/m²"), "ft": (1728.0 / 231.0, "gal/ft²")}

# Ratios that people say as so many times, not as so many percent.
_TIMES = frozenset({"insulation-thickness-per-diameter", "doubt-measured-steam-power"})


def rule_title(case: Case, rule: RuleComparison) -> str:
    """A rule's name, with the variant where there are two."""
    title = case.words.or_else(f"rule.{rule.rule}.title", plain(rule.title))
    if rule.variant is None:
        return title
    return f"{title}, {case.words.or_else(f'variant.{rule.variant}', plain(rule.variant))}"


def rule_short(case: Case, rule: RuleComparison) -> str:
    """A rule in a few words, for figures."""
    short = case.words.or_else(f"rule.{rule.rule}.short", plain(rule.title))
    if rule.variant is None:
        return short
    return f"{short}, {case.words.or_else(f'variant.{rule.variant}', plain(rule.variant))}"


def step_name(case: Case, step: WalkStep) -> str:
    """A step in a few words."""
    return " + ".join(case.words.or_else(f"walk.{code}", plain(code)) for code in step.codes)


def input_name(case: Case, moved: str) -> str:
    """An input that was moved."""
    words = case.words
    if f"input.{moved}" in words:
        return words(f"input.{moved}")
    for build in ("flat-plate", "evacuated-tube-direct", "evacuated-tube-heat-pipe"):
        if moved.endswith(f"-{build}"):
            name = words.or_else(f"input.{moved.removesuffix(f'-{build}')}", plain(moved))
            several = len({group.type for group in case.design.collectors}) > 1
            # the calculation tells tubes from plates by their numbers, but not tubes from tubes
            kind = "plates" if build == "flat-plate" else "tubes"
            return f"{name} ({words(f'input.{kind}')})" if several else name
    return plain(moved)


def by_weight(inputs: Iterable[SensitivityRow]) -> list[SensitivityRow]:
    """Inputs that decide first, then by the change they make as it is shown; alike ones in the order of their names.

    Beyond the digits shown the order of an answer is that of the solvers' rounding, which no sheet should hang on.
    """

    def weight(row: SensitivityRow) -> tuple[bool, float, str]:
        change = row.largest_change
        shown = 0.0 if change is None else float(rounded(change.value, change.unit))
        return not row.decides, -shown, row.input

    return sorted(inputs, key=weight)


def input_range(case: Case, moved: str, low: AnyQuantity, high: AnyQuantity) -> str:
    """The range of an input, its unit written once."""
    ends = input_number(case, moved, low), input_number(case, moved, high)
    bare, _, unit = ends[0].rpartition(NO_BREAK)
    if bare and ends[1].endswith(f"{NO_BREAK}{unit}"):
        ends = bare, ends[1]
    return case.words("figure.from-to", low=ends[0], high=ends[1])


def input_number(case: Case, moved: str, quantity: AnyQuantity) -> str:
    """The number of an input as the trade writes it."""
    say = case.say
    if quantity.unit == "1" and moved in _TIMES:
        return say.plain(rounded(quantity.value, "1"))
    if quantity.unit in _PER_AREA and moved.startswith(("collector-content", "station-content-per-area")):
        factor, unit = _PER_AREA[quantity.unit]
        return f"{say.plain(rounded(quantity.value * factor, unit))}{NO_BREAK}{unit}"
    return say(quantity)
