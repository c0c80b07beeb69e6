"""The strict decoder of one type of question, and what its type lets us know of a body beforehand.

A type of question must bound the depth of its bodies by itself. What to do with a body that the decoder refuses
is a matter of `decoding`.
"""

from collections.abc import Callable
from typing import Any

import msgspec
from msgspec import inspect

from loopslack.contract.strict.field_rules import Leaf

_encode = msgspec.json.Encoder().encode
_readers: dict[type, "Reader"] = {}


class Reader:
    """Reads one type of question from bodies that are as they should be, and is not sure of any other."""

    __slots__ = ("_decode", "_spares_defaults")

    def __init__(self, question: type) -> None:
        kind = inspect.type_info(question)
        _assure_closed(kind, ())
        self._decode: Callable[[bytes], Any] = msgspec.json.Decoder(question).decode
        self._spares_defaults = _spares_defaults(kind)

    def read(self, body: bytes) -> Any:  # noqa: ANN401 - of the type it was made for
        """The question in a body, by the strict decoder."""
        return self._decode(body)

    def is_surely_whole(self, asked: object, body: bytes) -> bool:
        """Whether no member of the body was stated twice, found without decoding it again.

        Possible where a question encoded again spares its defaults: if it then has all quotation marks of the
        body, each member of the body is in it. A default that was stated leaves the matter open.
        """
        return (
            self._spares_defaults
            and b"\\u0022" not in body
            and body.count(b'"') == _encode(asked).count(b'"')
        )


def reader_of(question: type) -> Reader:
    """The reader of a type of question, made once.

    Raises:
        TypeError: the type has a part of any shape, so that it would not bound the depth of a body.

    """
    reader = _readers.get(question)
    if reader is None:
        reader = _readers[question] = Reader(question)
    return reader


def _assure_closed(kind: inspect.Type, inside: tuple[Any, ...]) -> None:
    """Refuse a type of question through which a body of any depth could pass."""
    while isinstance(kind, inspect.Metadata):
        kind = kind.type
    if isinstance(kind, inspect.StructType):
        if kind.cls in inside or not kind.forbid_unknown_fields:
            raise TypeError(f"{kind.cls.__name__} must refuse unknown fields and not contain itself")
        for field in kind.fields:
            _assure_closed(field.type, (*inside, kind.cls))
    elif isinstance(kind, inspect.UnionType):
        for option in kind.types:
            _assure_closed(option, inside)
    elif isinstance(kind, inspect.ListType | inspect.VarTupleType):
        _assure_closed(kind.item_type, inside)
    elif isinstance(kind, inspect.DictType):
        _assure_closed(kind.value_type, inside)
    elif not isinstance(kind, Leaf):
        raise TypeError(f"a question may not have a part of {type(kind).__name__}")


def _spares_defaults(kind: inspect.Type) -> bool:
    """Whether a question of this type, encoded again, leaves out every member that has its default."""
    while isinstance(kind, inspect.Metadata):
        kind = kind.type
    if isinstance(kind, inspect.StructType):
        has_defaults = any(not field.required for field in kind.fields)
        spares = kind.cls.__struct_config__.omit_defaults or not has_defaults
        return spares and all(_spares_defaults(field.type) for field in kind.fields)
    if isinstance(kind, inspect.UnionType):
        return all(map(_spares_defaults, kind.types))
    if isinstance(kind, inspect.ListType | inspect.VarTupleType):
        return _spares_defaults(kind.item_type)
    return not isinstance(kind, inspect.DictType) or _spares_defaults(kind.value_type)
