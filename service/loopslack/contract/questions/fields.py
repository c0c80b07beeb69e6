"""What a member of a question may be: its description, its example and the range of its number.

One line per member serves the published document (description, example, range in prose) and the reading of a
question (range check on the SI number). No member is described here, only the means.
"""

from math import inf
from typing import Annotated, Any, get_args, get_origin, get_type_hints

from msgspec import Meta, Struct
from msgspec.structs import fields as fields_of

from loopslack.contract import quantity as q
from loopslack.kernel import kinds
from loopslack.kernel.kinds import Kind
from loopslack.kernel.units import ABSOLUTE_UNITS, from_si, scale_of
from loopslack.library.defaults import default

Lines = dict[str, tuple[float, float]]

_KIND_OF_STRUCT: dict[type[q.Quantity], Kind] = {
    q.STRUCT_OF[kind.name]: kind for kind in reversed(kinds.KINDS) if kind.units
}
_KIND_OF_STRUCT[q.Pressure] = kinds.GAUGE_PRESSURE  # a pressure is read as gauge unless its range is absolute
_KIND_OF_STRUCT[q.Volume] = kinds.VOLUME
_KIND_OF_STRUCT[q.Ratio] = kinds.RATIO


def trade(key: str) -> str:
    """Write a default of the trade as the trade does, so that no description can differ from what is done."""
    known = default(key)
    shown = from_si(known.si, known.unit, known.kind)
    return f"{shown:g}" if known.unit == "1" else f"{shown:.6g} {known.unit}"


def text(description: str, *examples: object) -> Meta:
    """Describe a member that is no quantity."""
    return Meta(description=description, examples=list(examples) or None)


def quantity(description: str, example: float, unit: str, low: float = -inf, high: float = inf) -> Meta:
    """Describe a quantity and its range, from ``low`` to ``high`` in the unit of its example."""
    allowed = _range(low, high, unit)
    return Meta(
        description=f"{description}{allowed}",
        examples=[{"value": example, "unit": unit}],
        extra={"unit": unit, "low": low, "high": high},
    )


def _range(low: float, high: float, unit: str) -> str:
    if low == -inf and high == inf:
        return ""
    if high == inf:
        return f" At least {low:g} {unit}."
    if low == -inf:
        return f" At most {high:g} {unit}."
    return f" From {low:g} to {high:g} {unit}."


class Field(Struct, frozen=True):
    """A quantity of a question as the reading needs it: JSON name, lines to SI and range in SI."""

    name: str
    title: str
    kind: Kind
    lines: Lines
    low: float
    high: float


def field_of(struct: type[Struct], attribute: str) -> Field:
    """Find the field behind an attribute of a question struct; KeyError or TypeError if there is none."""
    annotation = get_type_hints(struct, include_extras=True)[attribute]
    meta, kind = _quantity_of(annotation)
    if meta is None or kind is None:
        raise TypeError(f"{struct.__name__}.{attribute} is no described quantity")
    encoded = next(field.encode_name for field in fields_of(struct) if field.name == attribute)
    extra: dict[str, Any] = meta.extra or {}
    if extra["unit"] in ABSOLUTE_UNITS:
        kind = kinds.ABSOLUTE_PRESSURE
    scale, offset = scale_of(kind, extra["unit"])
    low, high = scale * extra["low"] + offset, scale * extra["high"] + offset
    # The end of a range stated in another unit may come out a few last digits beyond it.
    return Field(
        name=encoded,
        title=attribute.replace("_", " "),
        kind=kind,
        lines={unit: scale_of(kind, unit) for unit in kind.units},
        low=low - 1e-12 * abs(low),
        high=high + 1e-12 * abs(high),
    )


def _quantity_of(annotation: object) -> tuple[Meta | None, Kind | None]:
    """Find the description with limits and the kind of quantity inside an annotation, if any."""
    meta: Meta | None = None
    if get_origin(annotation) is Annotated:
        annotation, *extras = get_args(annotation)
        meta = next((extra for extra in extras if isinstance(extra, Meta) and extra.extra), None)
    for part in (annotation, *get_args(annotation)):
        if isinstance(part, type) and part in _KIND_OF_STRUCT:
            return meta, _KIND_OF_STRUCT[part]
    return meta, None
