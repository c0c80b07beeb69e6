"""The questions about many designs at once, and about sheets to print.

A design of a batch states only what differs from the defaults. Its struct is made from that of a single
design, so that no member can exist in one and not in the other.
"""

from collections.abc import Mapping
from typing import TYPE_CHECKING, Annotated, Any, Literal, get_args

from msgspec import Meta, Struct, defstruct
from msgspec.structs import fields as fields_of

from loopslack.contract.questions.collectors import Label, QuestionPart
from loopslack.contract.questions.fields import text
from loopslack.contract.questions.operations import LoopDesignQuestion
from loopslack.contract.questions.vessels import MOST_STOCK_ITEMS, FromStock, StockVessel
from loopslack.kernel.errors import CalculationError, Missing

Language = Literal["en", "de"]
Paper = Literal["a4", "letter"]
FigureName = Literal[
    "loop-schematic",
    "pressure-over-height",
    "pressure-over-liquid",
    "fill-pressure-over-temperature",
    "rules",
    "walk",
    "steam-reach",
    "day-course",
    "sensitivity",
]
MOST_DESIGNS = 1000

_MEMBERS = fields_of(LoopDesignQuestion)


def _or_none(annotation: object) -> object:
    """Permit null and keep the description outside, where a schema shows it for every type."""
    base, *metas = get_args(annotation)
    meta: Meta = metas[-1]
    if meta.min_length is not None or meta.max_length is not None:
        base = Annotated[base, Meta(min_length=meta.min_length, max_length=meta.max_length)]
    return Annotated[
        base | None, Meta(description=meta.description, examples=meta.examples, extra=meta.extra)
    ]


def _all_optional(name: str, described: str, first: list[tuple[str, Any]]) -> type[Struct]:
    optional = [
        (field.name, _or_none(field.type) if field.required else field.type, None) for field in _MEMBERS
    ]
    return defstruct(
        name,
        [*first, *optional],
        module=__name__,
        frozen=True,
        kw_only=True,
        forbid_unknown_fields=True,
        rename="camel",
        namespace={"__doc__": described},
    )


if TYPE_CHECKING:

    class LoopDesignDefaults(LoopDesignQuestion, frozen=True, kw_only=True):
        """Members of a design, all optional."""

    class BatchDesign(LoopDesignQuestion, frozen=True, kw_only=True):
        """Members of a design, all optional, and its identifier."""

        id: str
else:
    LoopDesignDefaults = _all_optional(
        "LoopDesignDefaults", "What every design of a batch states unless it says otherwise.", []
    )
    BatchDesign = _all_optional(
        "BatchDesign",
        "A design of a batch. What it does not state is taken from the defaults; a member it states "
        "replaces the "
        "default as a whole.",
        [
            (
                "id",
                Annotated[
                    Label, text("The caller's name for the design, unique in the batch.", "quote-4711")
                ],
            )
        ],
    )


class LoopDesignBatchQuestion(QuestionPart, frozen=True, kw_only=True):
    """Many designs, each answered on its own."""

    stock: Annotated[
        Annotated[list[StockVessel], Meta(min_length=1, max_length=MOST_STOCK_ITEMS)] | None,
        text("The stock that designs without a `vessel` of their own choose from."),
    ] = None
    defaults: Annotated[
        LoopDesignDefaults | None, text("What every design states unless it says otherwise.")
    ] = None
    designs: Annotated[
        list[BatchDesign], Meta(min_length=1, max_length=MOST_DESIGNS, description="The designs.")
    ]


class StreamHead(QuestionPart, frozen=True, kw_only=True):
    """The first line of a stream of designs."""

    stock: Annotated[
        Annotated[list[StockVessel], Meta(min_length=1, max_length=MOST_STOCK_ITEMS)] | None,
        text("The stock that designs without a `vessel` of their own choose from."),
    ] = None
    defaults: Annotated[
        LoopDesignDefaults | None, text("What every design states unless it says otherwise.")
    ] = None


def merged(
    design: BatchDesign | LoopDesignDefaults,
    defaults: LoopDesignDefaults | None,
    stock: FromStock | None = None,
) -> dict[str, Any]:
    """The members of a design with the defaults filled in. Remedies are left out unless asked for."""
    members: dict[str, Any] = {}
    for field in _MEMBERS:
        stated = getattr(design, field.name)
        if stated is None and defaults is not None:
            stated = getattr(defaults, field.name)
        if stated is not None:
            members[field.name] = stated
    if stock is not None:
        members.setdefault("vessel", stock)
    members.setdefault("include", [])
    return members


def lacking(members: Mapping[str, Any]) -> list[CalculationError]:
    """What a design needs that is not among its members, as refusals."""
    return [
        Missing(
            f"{field.encode_name} is stated neither by the design nor by the defaults.",
            remedy="State it in one of the two.",
            pointer=f"/{field.encode_name}",
        )
        for field in _MEMBERS
        if field.required and field.name not in members
    ]


Line = Annotated[str, Meta(max_length=200)]


class SheetQuestion(QuestionPart, frozen=True, kw_only=True):
    """A design and what else stands on its calculation sheet.

    All texts are printed as they are, never interpreted.
    """

    design: Annotated[LoopDesignQuestion, text("The design.")]
    project: Annotated[Line | None, text("Project.", "Wash house of the rowing club")] = None
    customer: Annotated[Line | None, text("Customer.", "Rowing club")] = None
    author: Annotated[Line | None, text("Who made the design.", "A. Planner")] = None
    date: Annotated[
        Annotated[str, Meta(pattern=r"^\d{4}-\d{2}-\d{2}$")] | None,
        text(
            "Date to print, as YYYY-MM-DD. If absent, none, so that equal questions give equal sheets.",
            "2026-12-01",
        ),
    ] = None
    remark: Annotated[
        Annotated[str, Meta(max_length=2000)] | None, text("A remark of the author.", "Offer variant B.")
    ] = None
    language: Annotated[Language | None, text("Language. If absent, English.", "en")] = None
    paper: Annotated[Paper | None, text("Paper. If absent, A4, or Letter with US units.", "a4")] = None


class FigureQuestion(QuestionPart, frozen=True, kw_only=True):
    """A design and the figure of it that is asked for."""

    design: Annotated[LoopDesignQuestion, text("The design.")]
    figure: Annotated[FigureName, text("The figure.", "pressure-over-liquid")]
    language: Annotated[Language | None, text("Language. If absent, English.", "en")] = None
