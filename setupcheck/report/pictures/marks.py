"""How an operation is marked in every drawing: a colour, a line pattern and its number; and words of a job cut to fit."""

from __future__ import annotations

import math

from setupcheck.flow import Review
from setupcheck.jobfile.models import Pattern, Toothing
from setupcheck.notation import show
from setupcheck.record import record
from setupcheck.report.svg import room
from setupcheck.report.wording import clean

COLOURS = ("#1f5fa8", "#b5460f", "#2b7a2b", "#7a2f9e", "#a8123e", "#00707a", "#6b5200", "#3d4a8a")
"""Colours of lines, dark enough to stay apart from white paper. Our choice."""

PATTERNS = ("", "5 1.2", "2.2 1.2", "6 1 1.2 1", "1 1", "8 1 1 1 1 1", "3.6 0.8 0.8 0.8")
"""Line patterns [mm]; beside them every line bears a number, so that nothing hangs on telling them apart. Our choice."""

STOCK_DASHES, AXIS_DASHES, GUESSED_DASHES = "6 1 1 1 1 1", "6 1.2 0.8 1.2", "1.1 0.9"
"""Long dashed double-dotted, long dashed dotted, dashed. Source: ISO 128 has these three for such lines (from memory)."""

ELLIPSIS = "…"


@record
class Mark:
    """What stands for an operation: the words in its flag, colour, line pattern."""

    flag: str
    colour: str
    dashes: str


BOUGHT = Mark("bought", "#000000", "")
STOCK = Mark("stock", "#555555", STOCK_DASHES)
UNCUT = Mark("not cut", "#000000", GUESSED_DASHES)


def mark_of(found: Review, op: int) -> Mark:
    """The mark of an operation, the same in every drawing of a job."""
    ops = [setup.op for setup in found.loaded.job.setups]
    at = ops.index(op) if op in ops else 0
    return Mark(str(op), COLOURS[at % len(COLOURS)], PATTERNS[at % len(PATTERNS)])


def finished_by(found: Review, part: str, name: str) -> Mark:
    """Who finished a surface last, as the walk along the route found it."""
    body = found.floor.bodies[part]
    states = body.states.get((part, name), [])
    if states and states[-1].op is not None:
        return mark_of(found, states[-1].op)
    given = found.loaded.job.parts[part]
    if given.surfaces[name].made == "stock":
        return STOCK
    told = {n.partition(".")[2] or n for r in given.given for n in (r.of, r.about, r.from_) if n is not None}
    return BOUGHT if name in told else UNCUT


def short(text: str, size: float, wide: float) -> str:
    """Words of a job on one line, cut with an ellipsis where they take more than so much room [mm of paper].

    >>> short("a rather long name", 3.0, 20.0)
    'a rather …'
    """
    line = " ".join(clean(text).split())
    if room(line, size) <= wide:
        return line
    while line and room(line + ELLIPSIS, size) > wide:
        line = line[:-1]
    return line + ELLIPSIS


def wrapped(text: str, size: float, wide: float, *, most: int = 3) -> list[str]:
    """Words of a job on as many lines as they need, at most so many; the last then ends in an ellipsis."""
    lines = [""]
    for word in clean(text).split():
        longer = f"{lines[-1]} {word}".strip()
        if room(longer, size) <= wide or not lines[-1]:
            lines[-1] = longer
        else:
            lines.append(word)
    if len(lines) > most:
        lines = [*lines[: most - 1], " ".join(lines[most - 1 :])]
    return [short(line, size, wide) for line in lines]


def plain(found: Review, mm: float) -> str:
    """A length in the units of the file with no more decimals than it has, without the unit.

    A micrometre, or a ten-thousandth of an inch, is the last that is shown.
    """
    unit, digits = ("in", 4) if found.loaded.job.units == "in" else ("mm", 3)
    if not math.isfinite(mm):
        return ELLIPSIS
    text = show(mm, unit, digits).removesuffix(f" {unit}")
    return text.rstrip("0").rstrip(".") if "." in text else text


def stated_size(found: Review, part: str, name: str) -> str:
    """The diameter of a surface as the file writes it: `48 h6`, `32.030 ±0.003`, `50.011 measured`."""
    node: object = found.loaded.tree.data
    for key in ("parts", part, "surfaces", name, "diameter"):
        node = node.get(key) if isinstance(node, dict) else None
    surface = found.loaded.job.parts[part].surfaces[name]
    value = getattr(surface, "diameter", None)
    if isinstance(node, str) and value is not None:
        return clean(node)
    if value is None:
        return ""
    if isinstance(value, float):
        return plain(found, value)
    return f"{plain(found, value.value)}{' measured' if value.measured is not None else ''}"


def pattern_size(found: Review, part: str, name: str) -> str:
    """Count, size and circle of teeth, holes or a slot: `72 on Ø108`, `24 × Ø0.25 on Ø4.75`, `0.25 wide, on Ø5.5`."""
    surface = found.loaded.job.parts[part].surfaces[name]
    assert isinstance(surface, Toothing | Pattern)
    each = ""
    if isinstance(surface, Pattern) and surface.diameter:
        each = f" × Ø{plain(found, surface.diameter)}"
    if surface.kind == "slot":
        each = f"{plain(found, surface.width)} wide, " if surface.width else ""
        return f"{each}on Ø{plain(found, surface.on_circle)}"
    what = " lines" if surface.kind == "lines" else ""
    return f"{surface.count}{what}{each} on Ø{plain(found, surface.on_circle)}"


def spelled(found: Review, part: str, name: str, most: float, size: float) -> str:
    """Name and size of a surface in shop words, within so much room."""
    surface = found.loaded.job.parts[part].surfaces[name]
    match surface.kind:
        case "teeth" | "holes" | "slot" | "lines":
            told = pattern_size(found, part, name)
        case "throat":
            told = f"Ø{plain(found, surface.diameter)} R{plain(found, surface.radius)}"
        case "face" | "centre":
            told = f"at {plain(found, surface.at)}" if surface.kind == "face" else "centre"
        case kind:
            told = f"Ø{stated_size(found, part, name)}"
            if kind == "taper" and surface.to_diameter is not None:
                told += f" to {plain(found, surface.to_diameter)}"
            if kind in ("taper", "thread"):
                told = f"{kind} {told}"
    called = " ".join(clean(name).split())
    told = short(told, size, max(most - 12.0, 0.6 * most))
    return f"{short(called, size, most - room(told, size) - room(' ', size))} {told}"
