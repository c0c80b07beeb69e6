"""Every member that a question struct has, and the member a pointer into a question means. Types only."""

from types import NoneType, UnionType
from typing import Annotated, Any, Union, get_args, get_origin

from msgspec import Struct
from msgspec.structs import fields

from loopslack.contract.quantity import Price, Quantity


def bare(annotation: Any) -> Any:
    while get_origin(annotation) is Annotated:
        annotation = get_args(annotation)[0]
    return annotation


def options(annotation: Any) -> list[Any]:
    """The types a member may have, null and lists taken apart."""
    annotation = bare(annotation)
    if get_origin(annotation) in (Union, UnionType):
        return [found for part in get_args(annotation) for found in options(part) if found is not NoneType]
    if get_origin(annotation) is list:
        return options(get_args(annotation)[0])
    return [annotation]


def is_leaf(kind: Any) -> bool:
    return not (isinstance(kind, type) and issubclass(kind, Struct)) or issubclass(kind, Quantity | Price)


def members(struct: type[Struct], seen: set[str] | None = None) -> set[str]:
    """All leaf members below a struct as ``Struct.member``, and the tags of its unions."""
    found = set() if seen is None else seen
    for field in fields(struct):
        for kind in options(field.type):
            if is_leaf(kind):
                found.add(f"{struct.__name__}.{field.encode_name}")
            else:
                if kind.__struct_config__.tag_field:
                    found.add(f"{kind.__name__}.{kind.__struct_config__.tag_field}")
                members(kind, found)
    return found


def member_at(struct: type[Struct], data: Any, pointer: str) -> str:
    """The member a pointer into a question means; for a union, that of the variant the data has."""
    steps = pointer.strip("/").split("/")
    kind: Any = struct
    for k, step in enumerate(steps):
        if isinstance(data, list):
            data = data[int(step)]
            continue
        tag = kind.__struct_config__.tag_field
        if step == tag:
            return f"{kind.__name__}.{step}"
        field = next(field for field in fields(kind) if field.encode_name == step)
        data = data.get(step) if isinstance(data, dict) else None
        choices = options(field.type)
        if k == len(steps) - 1 and all(is_leaf(choice) for choice in choices):
            return f"{kind.__name__}.{step}"
        kind = variant(choices, data)
    tag = kind.__struct_config__.tag_field
    return f"{kind.__name__}.{tag}" if tag else kind.__name__


def variant(choices: list[Any], data: Any) -> Any:
    if len(choices) == 1:
        return choices[0]
    sample = data[0] if isinstance(data, list) else data
    for choice in choices:
        config = choice.__struct_config__
        if sample.get(config.tag_field) == config.tag:
            return choice
    raise KeyError(sample)
