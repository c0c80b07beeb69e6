"""JSON values as YAML text, deterministic and readable.

Lives here: a writer for the few shapes a JSON document has. Strings that YAML could read as something else
are quoted as JSON, which YAML 1.2 accepts unchanged; text of several lines becomes a literal block. Must not
live here: any knowledge of OpenAPI.
"""

from __future__ import annotations

import json
import re

PLAIN = re.compile(r"[A-Za-z/$_][A-Za-z0-9/$_.(){}+-]*( [A-Za-z0-9/$_.(){}+,;'-]+)*")
READ_AS_SOMETHING_ELSE = re.compile(r"(?i)(y|n|yes|no|on|off|true|false|null|nan|inf|~)")


def yaml_text(value: object) -> str:
    """The document as YAML 1.2, with a newline at its end."""
    return "\n".join(_lines(value, 0)) + "\n"


def _lines(value: object, depth: int) -> list[str]:
    pad = "  " * depth
    if isinstance(value, dict) and value:
        written = []
        for key, member in value.items():
            written += _entry(f"{pad}{_scalar(str(key))}:", member, depth)
        return written
    if isinstance(value, list) and value:
        written = []
        for item in value:
            if isinstance(item, (dict, list)) and item:
                first, *rest = _lines(item, depth + 1)
                written += [f"{pad}- {first.lstrip()}", *rest]
            else:
                written += _entry(f"{pad}-", item, depth)
        return written
    return [f"{pad}{_scalar(value)}"]


def _entry(head: str, value: object, depth: int) -> list[str]:
    if isinstance(value, (dict, list)) and value:
        return [head, *_lines(value, depth + 1)]
    if isinstance(value, str) and _fits_a_block(value):
        pad = "  " * (depth + 1)
        return [f"{head} |-", *(f"{pad}{line}" if line else "" for line in value.split("\n"))]
    return [f"{head} {_scalar(value)}"]


def _fits_a_block(text: str) -> bool:
    """Several lines, none of which YAML would trim, fold or take for an indentation mark."""
    lines = text.split("\n")
    return (
        len(lines) > 1
        and all(line.isprintable() and line == line.rstrip() for line in lines)
        and bool(lines[0])
        and bool(lines[-1])
        and lines[0] == lines[0].lstrip()
    )


def _scalar(value: object) -> str:
    if isinstance(value, str):
        if PLAIN.fullmatch(value) and not READ_AS_SOMETHING_ELSE.fullmatch(value):
            return value
        return "".join(_character(letter) for letter in json.dumps(value, ensure_ascii=False))
    written = json.dumps(value, ensure_ascii=False)
    if isinstance(value, float) and "e" in written and "." not in written:
        # Readers of YAML 1.1 take a power without a point for a string.
        written = written.replace("e", ".0e")
    return written


def _character(letter: str) -> str:
    """A character of a quoted string; YAML wants what cannot be printed escaped."""
    if letter.isprintable():
        return letter
    return f"\\U{ord(letter):08x}"
