"""Checks the syntax of Swift files with the tree-sitter grammar, since there is no Swift compiler to be had
everywhere.

python swift_syntax.py FOLDER_OR_FILE...

Only syntax: names and types are not checked. The empty tuple as a value, `()`, which compiles, is beyond the
grammar; it is written as `Void()` before parsing.
"""

import re
import sys
from collections.abc import Iterator
from pathlib import Path

import tree_sitter_swift
from tree_sitter import Language, Node, Parser

BEYOND_THE_GRAMMAR = re.compile(rb"(?<=let result = )\(\)|(?<=init\(nilLiteral: )\(\)(?=\) as)")


def faults(node: Node) -> Iterator[Node]:
    """The innermost nodes that are no Swift."""
    if node.type == "ERROR" or node.is_missing:
        yield node
    elif node.has_error:
        for child in node.children:
            yield from faults(child)


def main(places: list[str]) -> int:
    """Print every fault; 1 if there is one or nothing to check."""
    parser = Parser(Language(tree_sitter_swift.language()))
    files = [
        file
        for place in map(Path, places)
        for file in (place.rglob("*.swift") if place.is_dir() else [place])
    ]
    found = 0
    for file in files:
        source = BEYOND_THE_GRAMMAR.sub(b"Void()", file.read_bytes())
        for node in faults(parser.parse(source).root_node):
            row, column = node.start_point
            text = source[node.start_byte : node.end_byte][:60]
            sys.stdout.write(f"{file}:{row + 1}:{column + 1}: {text!r}\n")
            found += 1
    sys.stdout.write(f"swift: {len(files)} files, {found} syntax faults\n")
    return int(found > 0 or not files)


if __name__ == "__main__":
    sys.exit(main(sys.argv[1:]))
