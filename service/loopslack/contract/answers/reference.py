"""Reference data: fluids, tubes, rules, vessel sizes and sources, in metric units, the same for every caller."""

from typing import Annotated, Literal

from loopslack.calc.sizing.rules.rule import RuleId
from loopslack.contract import quantity as q
from loopslack.contract.answers.shared import AnswerPart, SourceNote
from loopslack.contract.questions.fields import text
from loopslack.kernel.citations import HowSeen

FluidId = Literal["water", "propylene-glycol", "ethylene-glycol"]


class PropertyUncertainty(AnswerPart, frozen=True, kw_only=True):
    """Uncertainty (k = 2) up to a temperature."""

    up_to: Annotated[q.Temperature, text("Highest temperature it holds to.")]
    relative: Annotated[q.Ratio | None, text("As a share of the value.")] = None
    kelvin: Annotated[q.TemperatureDifference | None, text("As a temperature, for temperatures.")] = None


class FluidProperty(AnswerPart, frozen=True, kw_only=True):
    """What is known of one property of a fluid."""

    name: Annotated[str, text("The property.", "liquid density")]
    form: Annotated[str, text("Form of its equation.", "specific volume as a polynomial")]
    lowest: Annotated[q.Temperature | None, text("Lowest temperature.")] = None
    highest: Annotated[q.Temperature | None, text("Highest temperature.")] = None
    highest_concentration: Annotated[q.MassPercent, text("Highest share of glycol by mass.")]
    uncertainty: Annotated[list[PropertyUncertainty], text("How far it may be off.")]
    source: Annotated[SourceNote, text("Where it comes from.")]
    note: Annotated[str | None, text("What else to know.", "No promise against bursting.")] = None


class FluidItem(AnswerPart, frozen=True, kw_only=True):
    """A fluid of the service."""

    id: Annotated[FluidId, text("The fluid.", "propylene-glycol")]
    title: Annotated[str, text("Name of the fluid.", "Propylene glycol and water")]
    highest_concentration: Annotated[q.MassPercent, text("Highest share of glycol by mass.")]
    properties: Annotated[list[FluidProperty], text("Its properties.")]


class FluidList(AnswerPart, frozen=True, kw_only=True):
    """The fluids a question may name."""

    items: Annotated[list[FluidItem], text("The fluids.")]


class TubeItem(AnswerPart, frozen=True, kw_only=True):
    """One size of tube."""

    size: Annotated[str, text("Nominal size, as a question names it.", "28x1.5")]
    outer_diameter: Annotated[q.Length, text("Outer diameter.")]
    bore: Annotated[q.Length, text("Clear diameter.")]
    content_per_length: Annotated[q.ContentPerLength, text("Content per length.")]
    highest_temperature: Annotated[q.Temperature | None, text("Limit of the material, where it matters.")] = (
        None
    )


class TubeStandardItem(AnswerPart, frozen=True, kw_only=True):
    """A standard with its sizes."""

    id: Annotated[str, text("The standard, as a question names it.", "en-1057")]
    title: Annotated[str, text("Its title.", "Copper tube EN 1057")]
    material: Annotated[str, text("Material.", "copper")]
    note: Annotated[str | None, text("What else to know.", "Check the wall of the tube bought.")] = None
    source: Annotated[SourceNote, text("Where the sizes come from.")]
    sizes: Annotated[list[TubeItem], text("Sizes, smallest first.")]


class TubeList(AnswerPart, frozen=True, kw_only=True):
    """The tubes a question may name."""

    items: Annotated[list[TubeStandardItem], text("The standards.")]


class RuleItem(AnswerPart, frozen=True, kw_only=True):
    """A sizing rule."""

    id: Annotated[RuleId, text("The rule.", "en-12977")]
    title: Annotated[str, text("Name of the rule.", "EN 12977")]
    counts: Annotated[str, text("What the rule counts.", "Liquid expansion and collector content.")]
    law: Annotated[str, text("Law of the rule.", "V_N = (n V_s + 1.1 V_c + V_wr) F")]
    range: Annotated[str, text("What the rule holds for.", "Any fluid.")]
    sources: Annotated[list[SourceNote], text("Where it was published, its own source first.")]


class RuleList(AnswerPart, frozen=True, kw_only=True):
    """Every sizing rule of the service."""

    items: Annotated[list[RuleItem], text("The rules.")]


class VesselSizeItem(AnswerPart, frozen=True, kw_only=True):
    """A preferred size: generic, not an offer."""

    id: Annotated[str, text("Name of the size in answers.", "preferred-80")]
    nominal_volume: Annotated[q.Volume, text("Nominal volume.")]
    source: Annotated[SourceNote, text("Where the series comes from.")]


class VesselSeries(AnswerPart, frozen=True, kw_only=True):
    """The built-in series of vessel sizes."""

    items: Annotated[list[VesselSizeItem], text("Sizes, smallest first.")]


class SourceItem(AnswerPart, frozen=True, kw_only=True):
    """A publication behind the service."""

    key: Annotated[str, text("Key under which answers name the source.", "en-12828")]
    title: Annotated[str, text("Title.", "Heating systems in buildings")]
    publisher: Annotated[str, text("Publisher or author.", "CEN")]
    year: Annotated[int | None, text("Year, where known.", 2012)] = None
    seen: Annotated[HowSeen, text("How the authors of this service saw it.", "from-memory")]
    used_for: Annotated[str, text("What it is used for.", "Reserve and pressure factor.")]


class SourceList(AnswerPart, frozen=True, kw_only=True):
    """Every publication the service cites."""

    items: Annotated[list[SourceItem], text("The sources.")]
