"""Sums on a page, line by line as a pocket calculator does them: `name = 2 × 20 / cos(20°) = 42.57 um`.

The name may be left out; a later line of the page's section may use it, with the rounded value that the page shows. Angles are
written `20°` or `30"`; `×`, `²` and `√(…)` are what they look like; `atan` and `asin` give radians, and `/ 1°` makes degrees of
them.
"""

from __future__ import annotations

import ast
import math
import operator
import re
from collections.abc import Callable, Iterator
from dataclasses import dataclass

TWO: dict[type, Callable[[float, float], float]] = {
    ast.Add: operator.add,
    ast.Sub: operator.sub,
    ast.Mult: operator.mul,
    ast.Div: operator.truediv,
    ast.Pow: operator.pow,
}
KEYS: dict[str, Callable[[float], float]] = {
    "sqrt": math.sqrt,
    "ln": math.log,
    "sin": math.sin,
    "cos": math.cos,
    "tan": math.tan,
    "asin": math.asin,
    "atan": math.atan,
    "floor": math.floor,
}
NUMBER = re.compile(r"-?\d+(?:\.(\d+))?")


@dataclass(frozen=True)
class Sum:
    """One line: what is worked out, what the page says it comes to, and by how much that may be rounded."""

    line: str
    comes_to: float
    said: str
    room: float


def spelt(text: str) -> str:
    """The spelling of the page as that of Python."""
    text = text.replace("×", "*").replace("²", "**2").replace("³", "**3").replace("√", "sqrt")
    text = re.sub(r"(\d+(?:\.\d+)?)°", rf"(\1*{math.pi / 180.0!r})", text)
    return re.sub(r'(\d+(?:\.\d+)?)"', rf"(\1*{math.pi / 180.0 / 3600.0!r})", text)


def value(node: ast.AST, names: dict[str, float]) -> float:
    """The value of an expression of numbers, names and calculator keys; nothing else is read."""
    if isinstance(node, ast.Constant) and isinstance(node.value, int | float):
        return float(node.value)
    if isinstance(node, ast.Name):
        return {"pi": math.pi, **names}[node.id]
    if isinstance(node, ast.UnaryOp) and isinstance(node.op, ast.USub):
        return -value(node.operand, names)
    if isinstance(node, ast.BinOp):
        return TWO[type(node.op)](value(node.left, names), value(node.right, names))
    if isinstance(node, ast.Call) and isinstance(node.func, ast.Name) and len(node.args) == 1:
        return KEYS[node.func.id](value(node.args[0], names))
    raise ValueError(f"not a sum: {ast.dump(node)}")


def sums(block: str, names: dict[str, float]) -> Iterator[Sum]:
    """The lines of a block; `names` grows by what they are called."""
    for line in filter(None, block.splitlines()):
        *called, sum_, result = line.split(" = ")
        found = NUMBER.match(result)
        assert found is not None and len(called) < 2, line
        said = float(found[0])
        yield Sum(
            line, value(ast.parse(spelt(sum_), mode="eval").body, names), found[0], 0.5 * 10.0 ** -len(found[1] or "")
        )
        names.update((name, said) for name in called)
