"""Making mutants: every small change to one module's source, in a fixed order, each as a syntax tree of its own.

Left alone, as no figure hangs on it: docstrings, texts, annotations, decorators, and what an error says.
"""

from __future__ import annotations

import ast
import copy
from collections.abc import Iterator

COMPARED: dict[type[ast.cmpop], tuple[type[ast.cmpop], ...]] = {
    ast.Lt: (ast.LtE, ast.Gt),
    ast.LtE: (ast.Lt, ast.GtE),
    ast.Gt: (ast.GtE, ast.Lt),
    ast.GtE: (ast.Gt, ast.LtE),
    ast.Eq: (ast.NotEq,),
    ast.NotEq: (ast.Eq,),
    ast.Is: (ast.IsNot,),
    ast.IsNot: (ast.Is,),
    ast.In: (ast.NotIn,),
    ast.NotIn: (ast.In,),
}
COUNTED: dict[type[ast.operator], type[ast.operator]] = {
    ast.Add: ast.Sub,
    ast.Sub: ast.Add,
    ast.Mult: ast.Div,
    ast.Div: ast.Mult,
    ast.Pow: ast.Mult,
    ast.FloorDiv: ast.Mult,
    ast.Mod: ast.Add,
    ast.BitOr: ast.BitAnd,
    ast.BitAnd: ast.BitOr,
}
SYMMETRIC = {"max", "min", "hypot", "isinstance", "getattr", "union", "field", "maximum", "minimum"}
"""Calls whose first two arguments are not worth swapping: nothing changes, or nothing runs."""
BIGGER = 1.1
"""What a constant is multiplied by; a whole number grows by one."""

Change = tuple[str, ast.AST]


class Mutant:
    """One change: its number in the module, its line, what it says, and the whole changed tree."""

    def __init__(self, number: int, line: int, says: str, tree: ast.Module) -> None:
        self.number, self.line, self.says, self.tree = number, line, says, tree


class _Walk(ast.NodeTransformer):
    """Counts every possible change, and makes the one that is `wanted`."""

    def __init__(self, wanted: int = -1) -> None:
        self.wanted = wanted
        self.found: list[tuple[int, str]] = []

    def visit(self, node: ast.AST) -> ast.AST:
        for says, made in changes(node):
            self.found.append((getattr(node, "lineno", 0), says))
            if len(self.found) - 1 == self.wanted:
                return ast.copy_location(made, node)
        if isinstance(node, ast.Raise | ast.JoinedStr | ast.Import | ast.ImportFrom | ast.Assert):
            return node
        return super().visit(node)

    def visit_FunctionDef(self, node: ast.FunctionDef) -> ast.AST:
        node.body = self._each(node.body)
        node.args.defaults = self._each(node.args.defaults)
        node.args.kw_defaults = [None if d is None else self.visit(d) for d in node.args.kw_defaults]  # type: ignore[misc]
        return node

    def visit_AnnAssign(self, node: ast.AnnAssign) -> ast.AST:
        if node.value is not None:
            node.value = self.visit(node.value)  # type: ignore[assignment]
        return node

    def visit_ClassDef(self, node: ast.ClassDef) -> ast.AST:
        node.body = self._each(node.body)
        return node

    def _each(self, nodes: list) -> list:  # type: ignore[type-arg]
        return [self.visit(n) for n in nodes]


def changes(node: ast.AST) -> Iterator[Change]:
    """Every change to one node alone."""
    if isinstance(node, ast.Compare) and len(node.ops) == 1:
        for other in COMPARED[type(node.ops[0])]:
            yield _told(node, ast.Compare(node.left, [other()], node.comparators))
    elif isinstance(node, ast.Compare):
        for i, op in enumerate(node.ops):
            other = COMPARED[type(op)][0]
            yield _told(node, ast.Compare(node.left, [*node.ops[:i], other(), *node.ops[i + 1 :]], node.comparators))
    elif isinstance(node, ast.BinOp) and type(node.op) in COUNTED and not _is_text(node):
        yield _told(node, ast.BinOp(node.left, COUNTED[type(node.op)](), node.right))
    elif isinstance(node, ast.AugAssign) and type(node.op) in COUNTED:
        yield _told(node, ast.AugAssign(node.target, COUNTED[type(node.op)](), node.value))
        yield f"removed: {ast.unparse(node)}", ast.Pass()
    elif isinstance(node, ast.BoolOp):
        yield _told(node, ast.BoolOp(ast.Or() if isinstance(node.op, ast.And) else ast.And(), node.values))
    elif isinstance(node, ast.UnaryOp) and isinstance(node.op, ast.USub | ast.Not):
        yield _told(node, node.operand)
    elif isinstance(node, ast.Constant):
        yield from _constants(node)
    elif isinstance(node, ast.Return) and node.value is not None and not _is_none(node.value):
        yield f"{ast.unparse(node)} -> return None", ast.Return(ast.Constant(None))
    elif isinstance(node, ast.Raise | ast.Continue | ast.Break) or _is_effect(node):
        yield f"removed: {ast.unparse(node)}", ast.Pass()
    elif isinstance(node, ast.Call):
        yield from _swaps(node)


def _told(old: ast.AST, new: ast.AST) -> Change:
    return f"{ast.unparse(old)} -> {ast.unparse(ast.fix_missing_locations(copy.deepcopy(new)))}", new


def _constants(node: ast.Constant) -> Iterator[Change]:
    value = node.value
    if isinstance(value, bool):
        yield _told(node, ast.Constant(not value))
    elif isinstance(value, int):
        yield _told(node, ast.Constant(value + 1))
    elif isinstance(value, float | complex):
        yield _told(node, ast.Constant(value * BIGGER if value else type(value)(1)))


def _swaps(node: ast.Call) -> Iterator[Change]:
    name = node.func.attr if isinstance(node.func, ast.Attribute) else getattr(node.func, "id", "")
    plain = len(node.args) > 1 and not any(isinstance(a, ast.Starred) for a in node.args[:2])
    if plain and name not in SYMMETRIC and ast.dump(node.args[0]) != ast.dump(node.args[1]):
        yield _told(node, ast.Call(node.func, [node.args[1], node.args[0], *node.args[2:]], node.keywords))


def _is_effect(node: ast.AST) -> bool:
    """A statement that is there for what it does: a call, or a value put into something."""
    if isinstance(node, ast.Expr):
        return isinstance(node.value, ast.Call)
    return isinstance(node, ast.Assign) and isinstance(node.targets[0], ast.Attribute | ast.Subscript)


def _is_none(node: ast.expr) -> bool:
    return isinstance(node, ast.Constant) and node.value is None


def _is_text(node: ast.BinOp) -> bool:
    return any(
        isinstance(n, ast.JoinedStr) or (isinstance(n, ast.Constant) and isinstance(n.value, str))
        for n in ast.walk(node)
    )


def mutants(source: str) -> list[tuple[int, str]]:
    """(line, what it says) of every mutant of a module, in order."""
    walk = _Walk()
    walk.visit(ast.parse(source))
    return walk.found


def mutant(source: str, number: int) -> Mutant:
    """One of them, with its tree."""
    walk = _Walk(number)
    tree = walk.visit(ast.parse(source))
    assert isinstance(tree, ast.Module)
    line, says = walk.found[number]
    return Mutant(number, line, says, ast.fix_missing_locations(tree))
