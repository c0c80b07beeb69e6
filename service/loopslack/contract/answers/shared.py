"""What every answer is made of: quantities of any kind, assumptions, advisories, cautions, checks, provenance.

Answers have no defaults and no nulls: what is not known is absent. They are open, so that members can be added.
"""

from typing import Annotated, Literal

from msgspec import Meta, Struct

from loopslack.contract.questions.fields import text
from loopslack.kernel import kinds
from loopslack.kernel.citations import HowSeen

AnyUnit = Literal[
    kinds.LengthUnit,
    kinds.AreaUnit,
    kinds.VolumeUnit,
    kinds.ContentPerLengthUnit,
    kinds.PressureUnit,
    kinds.PressureDifferenceUnit,
    kinds.TemperatureUnit,
    kinds.TemperatureDifferenceUnit,
    kinds.IrradianceUnit,
    kinds.HeatLossCoefficientUnit,
    kinds.QuadraticHeatLossCoefficientUnit,
    kinds.ConductivityUnit,
    kinds.LinearHeatLossUnit,
    kinds.LinearConductanceUnit,
    kinds.PowerUnit,
    kinds.MassUnit,
    kinds.DensityUnit,
    kinds.SpecificEnthalpyUnit,
    kinds.SpecificHeatUnit,
    kinds.ViscosityUnit,
    kinds.MassPercentUnit,
    kinds.VolumePercentUnit,
    kinds.DurationUnit,
    kinds.RatioUnit,
]
Verdict = Literal["holds", "favourable-only", "does-not-hold", "not-assessed"]
CheckVerdict = Literal["holds", "does-not-hold", "not-assessed"]
Severity = Literal["stop", "warning", "note"]
Basis = Literal["firm", "provisional"]
CheckGroup = Literal["core", "confirm"]


class AnswerPart(Struct, frozen=True, kw_only=True, rename="camel", omit_defaults=True):
    """A part of an answer. Readers must ignore members they do not know."""


class AnyQuantity(AnswerPart, frozen=True, kw_only=True, gc=False):
    """A number and its unit, where the kind depends on what is reported."""

    value: Annotated[float, text("The number, in `unit`.", 80.0)]
    unit: Annotated[AnyUnit, text("The unit of `value`.", "L")]


class SourceNote(AnswerPart, frozen=True, kw_only=True, gc=False):
    """Where something was published and how far the authors of this service saw it."""

    key: Annotated[str, text("Key of the source; `GET /v1/sources` lists them.", "en-12828")]
    seen: Annotated[HowSeen, text("How the source was seen.", "from-memory")]
    place: Annotated[str | None, text("Place in the source, only where it was read.", "p. 88")] = None


class Assumption(AnswerPart, frozen=True, kw_only=True):
    """Something the question left open and what stood in for it."""

    field: Annotated[
        str, text("The member of the question, as JSON Pointer (RFC 6901).", "/temperatures/cutOff")
    ]
    value: Annotated[AnyQuantity | None, text("The number that stood in, where it is one.")] = None
    word: Annotated[str | None, text("The word that stood in, where it is one.", "poor")] = None
    low: Annotated[AnyQuantity | None, text("Lower end of the range common in the trade.")] = None
    high: Annotated[AnyQuantity | None, text("Upper end of the range common in the trade.")] = None
    why: Annotated[
        str, text("Why this number or word stands in.", "Temperature at which controllers stop the pump.")
    ]
    source: Annotated[SourceNote, text("Where it comes from.")]


class Advisory(AnswerPart, frozen=True, kw_only=True):
    """Something to know about this loop, with its numbers and what to do."""

    severity: Annotated[
        Severity, text("How grave it is. With a `stop` the design must not be built.", "stop")
    ]
    code: Annotated[str, text("Stable code, for programs and translation.", "relief-valve")]
    message: Annotated[
        str, text("The matter in a sentence, with its numbers.", "The relief valve would open.")
    ]
    remedy: Annotated[str, text("What to do about it.", "Take a larger vessel.")]
    parameters: Annotated[
        dict[str, AnyQuantity],
        text(
            "The numbers of the message by name, for translation.",
            {"temperature": {"value": 120, "unit": "degC"}},
        ),
    ]
    subject: Annotated[
        str | None, text("The part, the vessel or the member concerned.", "/station/ratedPressure")
    ] = None
    scenario: Annotated[
        str | None, text("The state or the doubt under which a check does not hold.", "hotter-stagnation")
    ] = None


class Caution(AnswerPart, frozen=True, kw_only=True, gc=False):
    """A danger that every loop of this kind has."""

    code: Annotated[str, text("Stable code.", "scalding")]
    message: Annotated[str, text("The caution.", "Liquid and steam of a collector loop scald.")]


class Provenance(AnswerPart, frozen=True, kw_only=True, gc=False):
    """What computed the answer; with it a calculation can be repeated to the byte."""

    service_version: Annotated[str, text("Version of the service.", "1.0.0")]
    contract_version: Annotated[str, text("Version of the contract.", "1.1.0")]
    equations: Annotated[
        str,
        Meta(description="Fingerprint of all equations, their laws and sources.", examples=["5f0c2c9d1a7e"]),
    ]


class Check(AnswerPart, frozen=True, kw_only=True):
    """One check: a value against its limit. A margin below zero means that it fails."""

    code: Annotated[
        str, text("What is checked: a stable code, shown with its meaning under /docs/codes.", "relief-valve")
    ]
    verdict: Annotated[CheckVerdict, text("What came of it.", "holds")]
    group: Annotated[
        CheckGroup,
        text("`core` checks decide the verdict, the others must be confirmed by somebody.", "core"),
    ]
    scenario: Annotated[str, text("State of the loop or doubt it was checked under.", "base")]
    value: Annotated[AnyQuantity | None, text("What the loop has or does.")] = None
    limit: Annotated[AnyQuantity | None, text("What it may or must be at the utmost.")] = None
    margin: Annotated[AnyQuantity | None, text("How far the value is on the safe side of the limit.")] = None
    subject: Annotated[str | None, text("The part concerned, where there are several.", "station")] = None
    reason: Annotated[
        str | None,
        text("Why it fails or is not assessed, where no number says so: a stable code.", "head-not-stated"),
    ] = None
    at_least: Annotated[
        bool | None, text("True where the value is only a lower bound of the truth.", True)
    ] = None
