"""A drawing inside the page in fewer bytes, looking the same: what most of its elements say is said once at the root, lines in
one style become one path, coordinates are relative and counted in hundredths of a millimetre of paper."""

from __future__ import annotations

import re
from collections.abc import Iterator

from setupcheck.report.svg import THIN, number

ROOT = {"font-size": "3", "stroke-width": number(THIN), "stroke-linejoin": "round"}
"""What most elements of a drawing say, mm of paper."""
STYLES = {
    "k": {"stroke": "black", "stroke-width": "0.25"},
    "l": {"stroke": "black"},
    "n": {"fill": "none", "stroke": "black"},
    "o": {"fill": "none", "stroke": "black", "stroke-width": "0.35"},
    "p": {"fill": "none", "stroke": "black", "stroke-width": "0.245"},
    "h": {"fill": "none", "stroke": "#555555", "stroke-width": "0.1"},
    "w": {"fill": "white", "stroke": "black", "stroke-width": "0.2"},
    "m": {"text-anchor": "middle"},
    "e": {"text-anchor": "end"},
}
"""Classes for what many elements say alike. The page's own style sheet spells them out."""
STEPS = 100
"""Steps of a coordinate in a millimetre of paper: finer than any printer. Source: our choice."""

_STRAIGHT = re.compile(r'<line x1="([^"]+)" y1="([^"]+)" x2="([^"]+)" y2="([^"]+)"((?: [a-z-]+="[^"]*")*)/>')
_POINTS = re.compile(r'<(polyline|polygon) points="([^"]+)"((?: [a-z-]+="[^"]*")*)/>')
_PATH = re.compile(r'<path d="([MLHV0-9. -]+)"((?: [a-z-]+="[^"]*")*)/>')
_STEP = re.compile(r"([MLHV])([^MLHV]*)")
_GROUND = re.compile(r'<rect width="[^"]+" height="[^"]+" fill="white"/>\n')
_ELEMENT = re.compile(r"<[a-z]+ [^>]*>")
_PLACE = re.compile(r'(?<= )(x|y|cx|cy|width|height)="(-?\d+\.\d{3})"')

Way = list[tuple[int, int]]


def inline(drawing: str) -> str:
    """The same drawing for use inside an HTML page, whose parser knows what an `svg` is."""
    head, _, rest = drawing.partition(">")
    rest = _GROUND.sub("", rest, count=1)
    for key, value in ROOT.items():
        rest = rest.replace(f' {key}="{value}"', "")
    head = head.replace(' xmlns="http://www.w3.org/2000/svg"', "") + "".join(f' {k}="{v}"' for k, v in ROOT.items())
    return f"{head}>" + _ELEMENT.sub(_classed, "\n".join(_joined(_PLACE.sub(_rounded, rest).split("\n"))))


def style_sheet() -> str:
    """The classes as CSS, one rule a class: `.e{text-anchor:end}`."""
    rules = (f".{name}{{{';'.join(f'{k}:{v}' for k, v in style.items())}}}" for name, style in STYLES.items())
    return " ".join(f"svg {rule}" for rule in rules)


def _spelled(style: dict[str, str]) -> str:
    return "".join(f' {key}="{value}"' for key, value in style.items())


_SPELLED = {_spelled(style): f' class="{name}"' for name, style in STYLES.items()}
_SAID = re.compile("|".join(sorted(_SPELLED, key=len, reverse=True)))


def _classed(found: re.Match[str]) -> str:
    """One element with the longest style it says as a class: one class at most, what else it says stays."""
    return _SAID.sub(lambda said: _SPELLED[said[0]], found[0], count=1)


def _rounded(found: re.Match[str]) -> str:
    return f'{found[1]}="{_shown(_steps(found[2]))}"'


def _joined(lines: list[str]) -> Iterator[str]:
    """Elements that are lines, those after each other in one style as one."""
    ways: list[str] = []
    style = ""
    for one in [*lines, None]:
        read = _read(one) if one is not None else None
        if ways and (read is None or read[1] != style):
            yield f'<path d="{"".join(ways)}"{style}/>'
            ways = []
        if read is None:
            if one is not None:
                yield one
            continue
        style = read[1]
        ways += [_relative(way, closed=closed) for way, closed in read[0]]


def _read(one: str) -> tuple[list[tuple[Way, bool]], str] | None:
    """The ways an element draws, each open or closed, and its style; None where it is none of lines alone."""
    if found := _STRAIGHT.fullmatch(one):
        x1, y1, x2, y2, style = found.groups()
        return [([(_steps(x1), _steps(y1)), (_steps(x2), _steps(y2))], False)], style
    if found := _POINTS.fullmatch(one):
        kind, points, style = found.groups()
        way = [(_steps(x), _steps(y)) for x, y in (point.split(",") for point in points.split())]
        return [(way, kind == "polygon")], style
    if found := _PATH.fullmatch(one):
        return [(way, False) for way in _ways(found[1])], found[2]
    return None


def _ways(path: str) -> list[Way]:
    """Absolute moves and straight lines of a path, one way for each move."""
    ways: list[Way] = []
    for letter, numbers in _STEP.findall(path):
        values = [_steps(v) for v in numbers.split()]
        x, y = ways[-1][-1] if ways else (0, 0)
        if letter in "HV":
            ways[-1] += [(v, y) if letter == "H" else (x, v) for v in values]
            continue
        points = list(zip(values[::2], values[1::2], strict=True))
        if letter == "M":
            ways.append(points)
        else:
            ways[-1] += points
    return ways


def _relative(way: Way, *, closed: bool) -> str:
    """`M91.54 30.8l.36.19.36.15z`: a move to the start, then each step from the point before it."""
    (x, y), *rest = way
    told = f"M{_pair(x, y)}"
    letter, last = "", ""
    for to_x, to_y in rest:
        dx, dy = to_x - x, to_y - y
        if dx and dy:
            told += ("" if letter == "l" else "l") + _pair(dx, dy, after=last if letter == "l" else "")
            letter, last = "l", _shown(dy)
        elif dx or dy:
            letter = "h" if dx else "v"
            told += f"{letter}{_shown(dx or dy)}"
        x, y = to_x, to_y
    return told + ("z" if closed else "")


def _pair(x: int, y: int, *, after: str = "") -> str:
    """Two numbers, with a blank only where a sign or a point does not keep them apart from what stands before."""
    first, second = _shown(x), _shown(y)
    return _gap(after, first) + first + _gap(first, second) + second


def _gap(before: str, number: str) -> str:
    apart = not before or number.startswith("-") or (number.startswith(".") and "." in before)
    return "" if apart else " "


def _steps(text: str) -> int:
    return round(float(text) * STEPS)


def _shown(steps: int) -> str:
    """`0.3`, `-12.25`, without what SVG does not need: `.3`, `-.5`."""
    text = f"{steps / STEPS:.2f}".rstrip("0").rstrip(".") or "0"
    return text.replace("0.", ".", 1) if text.startswith(("0.", "-0.")) else text
