"""Checks Swift files as far as that goes without a Swift compiler, which cannot be had everywhere.

    python swift_syntax.py GENERATED_FOLDER FILE...

Everything must parse by the tree-sitter grammar, and every type, case and member that a file names after a point or as
a capitalised word must occur in the generated client or be Swift's own. Types are not checked. The empty tuple as a
value, `()`, which compiles, is beyond the grammar; it is written as `Void()` before parsing.
"""

import re
import sys
from collections.abc import Iterator
from pathlib import Path

import tree_sitter_swift
from tree_sitter import Language, Node, Parser

BEYOND_THE_GRAMMAR = re.compile(rb"(?<=let result = )\(\)|(?<=init\(nilLiteral: )\(\)(?=\) as)")

SWIFT = {"String", "Void", "map", "print", "main"}


def faults(node: Node) -> Iterator[Node]:
    """The innermost nodes that are no Swift."""
    if node.type == "ERROR" or node.is_missing:
        yield node
    elif node.has_error:
        for child in node.children:
            yield from faults(child)


def unknown_names(file: Path, generated: bytes) -> list[str]:
    """Names a file takes from the client that the client does not have."""
    lines = [line.partition("//")[0] for line in file.read_text(encoding="utf-8").splitlines()]
    text = re.sub(r'"[^"]*"', '""', "\n".join(lines))
    defined = set(re.findall(r"(?:struct|func|let|var|class|enum) (\w+)", text))
    named = set(re.findall(r"\.([A-Za-z_]\w*)", text)) | set(re.findall(r"(?<![.\w])([A-Z]\w*)", text))
    known = set(re.findall(r"\w+", generated.decode()))
    return sorted(named - defined - known - SWIFT)


def main(places: list[str]) -> int:
    """Print every fault; 1 if there is one or nothing to check."""
    parser = Parser(Language(tree_sitter_swift.language()))
    generated, *own = map(Path, places)
    files = [*generated.rglob("*.swift"), *own]
    found = 0
    for file in files:
        source = BEYOND_THE_GRAMMAR.sub(b"Void()", file.read_bytes())
        for node in faults(parser.parse(source).root_node):
            row, column = node.start_point
            text = source[node.start_byte : node.end_byte][:60]
            sys.stdout.write(f"{file}:{row + 1}:{column + 1}: {text!r}\n")
            found += 1
    client = b"".join(file.read_bytes() for file in generated.rglob("*.swift"))
    for file in own:
        for name in unknown_names(file, client):
            sys.stdout.write(f"{file}: the generated client has no {name}\n")
            found += 1
    sys.stdout.write(f"swift: {len(files)} files, {found} faults\n")
    return int(found > 0 or not client)


if __name__ == "__main__":
    sys.exit(main(sys.argv[1:]))
