"""What a caller may demand of a design, and how the answer is to be given."""

from typing import Annotated, Literal

from msgspec import Meta

from loopslack.calc.sizing.rules.rule import RuleId
from loopslack.contract.quantity import (
    Length,
    Pressure,
    PressureDifference,
    Ratio,
    Temperature,
    TemperatureDifference,
    Volume,
)
from loopslack.contract.questions.collectors import QuestionPart
from loopslack.contract.questions.fields import quantity, trade

UnitSystem = Literal["metric", "us"]
Extra = Literal["rules", "remedies", "sensitivity", "course", "derivation"]
Rules = Annotated[list[RuleId], Meta(min_length=1, max_length=10)]
Include = Annotated[list[Extra], Meta(max_length=5)]


class Criteria(QuestionPart, frozen=True, kw_only=True):
    """What must hold. Each has a default of the trade, listed in the answer when it is used."""

    reserve: Annotated[
        Volume | None,
        quantity(
            "Liquid the vessel must still hold when cold. If absent, by EN 12828: 0.5 % of the content, at "
            "least 3 L; "
            "a fifth of the nominal volume for vessels up to 15 L.",
            3,
            "L",
            0,
            5000,
        ),
    ] = None
    top_pressure: Annotated[
        Pressure | None,
        quantity(
            f"Least pressure at the highest point when cold. If absent, {trade('minimum-top-pressure')}.",
            0.5,
            "barg",
            0,
            6,
        ),
    ] = None
    window_width: Annotated[
        PressureDifference | None,
        quantity(
            f"Least width of the fill window. If absent, {trade('fill-window-width')}.", 0.3, "bar", 0, 5
        ),
    ] = None
    fill_above_precharge: Annotated[
        PressureDifference | None,
        quantity(
            f"Least distance from precharge to fill pressure. If absent, {trade('fill-above-precharge')}.",
            0.3,
            "bar",
            0,
            3,
        ),
    ] = None
    window_edge_distance: Annotated[
        PressureDifference | None,
        quantity(
            "Least distance of the recommended fill from either edge of the window. "
            f"If absent, {trade('fill-above-lower-bound')}.",
            0.1,
            "bar",
            0,
            1,
        ),
    ] = None
    boiling_margin: Annotated[
        PressureDifference | None,
        quantity(
            "Least distance from boiling while the pump runs at its cut-off temperature. "
            f"If absent, {trade('boiling-margin')}.",
            0.3,
            "bar",
            0,
            5,
        ),
    ] = None
    membrane_limit: Annotated[
        Temperature | None,
        quantity(
            f"Highest lasting membrane temperature. If absent, {trade('membrane-limit')}.",
            70,
            "degC",
            30,
            150,
        ),
    ] = None
    freeze_margin: Annotated[
        TemperatureDifference | None,
        quantity(
            f"Least distance from site minimum to freezing point. If absent, {trade('freezing-margin')}.",
            5,
            "K",
            0,
            30,
        ),
    ] = None
    fluid_allowance: Annotated[
        Ratio | None,
        quantity(
            f"Doubt in fluid data as a share of the content. If absent, {trade('fluid-data-allowance')}.",
            0.5,
            "percent",
            0,
            5,
        ),
    ] = None
    degradation_limit: Annotated[
        Temperature | None,
        quantity(
            f"Temperature above which glycol degrades. If absent, {trade('degradation-temperature')}.",
            160,
            "degC",
            100,
            300,
        ),
    ] = None
    stagnation_doubt: Annotated[
        TemperatureDifference | None,
        quantity(
            "How much hotter than computed the collectors may stagnate. "
            f"If absent, {trade('doubt-stagnation-shift')}.",
            15,
            "K",
            5,
            60,
        ),
    ] = None


class Tolerances(QuestionPart, frozen=True, kw_only=True):
    """How far inputs may be off either way. The answer gives the band that follows."""

    pipe_length: Annotated[
        Ratio | None,
        quantity("How far all pipe lengths may be off either way; less than all.", 10, "percent", 0, 100),
    ] = None
    collector_content: Annotated[
        Ratio | None,
        quantity("How far the collectors' content may be off either way.", 10, "percent", 0, 100),
    ] = None
    insulation_conductivity: Annotated[
        Ratio | None,
        quantity(
            "How far the insulation's conductivity may be off either way; less than all.",
            25,
            "percent",
            0,
            100,
        ),
    ] = None
    steam_power: Annotated[
        Ratio | None, quantity("How far the steam power may be off either way.", 25, "percent", 0, 100)
    ] = None
    stagnation_temperature: Annotated[
        TemperatureDifference | None,
        quantity("How far the stagnation temperature may be off either way.", 10, "K", 0, 60),
    ] = None
    static_height: Annotated[
        Length | None, quantity("How far the static height may be off either way.", 1, "m", 0, 50)
    ] = None
    fill_pressure: Annotated[
        PressureDifference | None,
        quantity("How far the fill pressure may be off either way.", 0.1, "bar", 0, 2),
    ] = None
    precharge: Annotated[
        PressureDifference | None, quantity("How far the precharge may be off either way.", 0.1, "bar", 0, 2)
    ] = None
