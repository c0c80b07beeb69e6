"""The answer about what to order: vessel, liquid, relief valve and container."""

from typing import Annotated

from loopslack.calc.order_list import Category
from loopslack.contract import quantity as q
from loopslack.contract.answers.loop import VesselResult
from loopslack.contract.answers.shared import AnswerPart
from loopslack.contract.questions.fields import text


class OrderList(AnswerPart, frozen=True, kw_only=True):
    """What to order for the loop."""

    expansion_vessel: Annotated[
        VesselResult | None,
        text("The vessel, with the cooling vessel it needs. Absent where none is chosen."),
    ] = None
    content: Annotated[q.Volume, text("Content of the loop.")]
    vessel_content: Annotated[q.Volume, text("Liquid in the vessel when filled.")]
    filling_loss: Annotated[q.Ratio, text("Share added for losses while filling.")]
    glycol: Annotated[q.Volume | None, text("Glycol before mixing, at 20 degC. Absent for an own fluid.")] = (
        None
    )
    water: Annotated[q.Volume | None, text("Water before mixing, at 20 degC. Absent for an own fluid.")] = (
        None
    )
    ready_mix: Annotated[q.Volume, text("Ready mix instead of both, at 20 degC.")]
    mass_concentration: Annotated[q.MassPercent, text("Glycol by mass.")]
    volume_concentration: Annotated[q.VolumePercent, text("Glycol by volume before mixing.")]
    freezing_point: Annotated[q.Temperature, text("Where the first ice appears.")]
    freezing_margin: Annotated[q.TemperatureDifference, text("Site minimum less freezing point.")]
    ice_fraction: Annotated[
        q.Ratio | None,
        text("Ice by mass at the site minimum, where it freezes. No promise against bursting."),
    ] = None
    relief_nominal_size: Annotated[
        int | None, text("Nominal size of the relief valve, mm. Absent beyond the table.", 15)
    ] = None
    discharge_container: Annotated[q.Volume, text("Least content of the container under the relief valve.")]
    pressure_equipment_category: Annotated[
        Category | None,
        text("Category of one vessel by 2014/68/EU, group 2 gas. Absent without a rated pressure.", "i"),
    ] = None
