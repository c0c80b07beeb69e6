"""Changes one number of a module's text by a thousandth, to see whether any check notices."""

import ast
from pathlib import Path


class Nudge(ast.NodeTransformer):
    """Changes the n-th number of a module by a thousandth, a zero to a thousandth; indices stay."""

    def __init__(self, n: int) -> None:
        self.left, self.was, self.line = n, "", 0

    def visit_Subscript(self, node: ast.Subscript) -> ast.AST:
        node.value = self.visit(node.value)
        return node

    def visit_Constant(self, node: ast.Constant) -> ast.AST:
        if type(node.value) not in {int, float}:
            return node
        self.left -= 1
        if self.left != -1:
            return node
        self.was, self.line = repr(node.value), node.lineno
        return ast.copy_location(ast.Constant(node.value * 1.001 or 0.001), node)


def numbers(module: Path) -> list[int]:
    """The numbers of a module, counted."""
    counter = Nudge(-1)
    counter.visit(ast.parse(module.read_text(encoding="utf-8")))
    return list(range(-1 - counter.left))


def nudged(module: Path, n: int) -> tuple[ast.AST, str]:
    """The module's tree with its n-th number changed, and the place of that number in words."""
    text = module.read_text(encoding="utf-8")
    nudge = Nudge(n)
    tree = ast.fix_missing_locations(nudge.visit(ast.parse(text)))
    return tree, f"{nudge.was} in `{text.splitlines()[nudge.line - 1].strip()}`"
