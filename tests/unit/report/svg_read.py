"""A drawing read back by the tests: its texts with the room they take, its strokes, and that nothing lies on anything else."""

from __future__ import annotations

import itertools
import re
from xml.etree import ElementTree

from setupcheck.report.svg import room

SVG = "{http://www.w3.org/2000/svg}"
Box = tuple[float, float, float, float]
"""Left, top, right, bottom [mm of paper]."""
Stroke = tuple[tuple[float, float], tuple[float, float]]


def parsed(text: str) -> ElementTree.Element:
    return ElementTree.fromstring(text)


def paper(svg: ElementTree.Element) -> tuple[float, float]:
    """Width and height of the sheet [mm]."""
    width, height = (float(v) for v in svg.attrib["viewBox"].split()[2:])
    return width, height


def texts(svg: ElementTree.Element) -> list[tuple[str, Box]]:
    """Each text with the room it takes."""
    found = []
    for node in svg.iter(f"{SVG}text"):
        size, x, y = (float(node.attrib[key]) for key in ("font-size", "x", "y"))
        wide = room(node.text or "", size)
        start = x - wide * {"start": 0.0, "middle": 0.5, "end": 1.0}[node.attrib.get("text-anchor", "start")]
        found.append((node.text or "", (start, y - 0.76 * size, start + wide, y + 0.22 * size)))
    return found


def strokes(svg: ElementTree.Element) -> list[Stroke]:
    """Every straight stroke: lines, pieces of polylines and of paths."""
    found: list[Stroke] = []
    for node in svg.iter(f"{SVG}line"):
        x1, y1, x2, y2 = (float(node.attrib[key]) for key in ("x1", "y1", "x2", "y2"))
        found.append(((x1, y1), (x2, y2)))
    for node in svg.iter(f"{SVG}polyline"):
        pairs = [tuple(float(v) for v in pair.split(",")) for pair in node.attrib["points"].split()]
        found += [((a[0], a[1]), (b[0], b[1])) for a, b in itertools.pairwise(pairs)]
    for node in svg.iter(f"{SVG}path"):
        for move in re.findall(r"M(\S+) (\S+?)L(\S+) (\S+?)(?=M|$)", node.attrib["d"]):
            x1, y1, x2, y2 = (float(v) for v in move)
            found.append(((x1, y1), (x2, y2)))
    return found


def crosses(stroke: Stroke, box: Box) -> bool:
    (x1, y1), (x2, y2) = stroke
    if max(x1, x2) < box[0] or min(x1, x2) > box[2] or max(y1, y2) < box[1] or min(y1, y2) > box[3]:
        return False
    return any(
        box[0] < x1 + (x2 - x1) * k / 200.0 < box[2] and box[1] < y1 + (y2 - y1) * k / 200.0 < box[3]
        for k in range(201)
    )


def every_text_is_apart(svg: ElementTree.Element) -> None:
    """On the sheet, and on no other text."""
    width, height = paper(svg)
    boxes = texts(svg)
    for text, box in boxes:
        assert box[0] >= 0.0 and box[1] >= 0.0 and box[2] <= width and box[3] <= height, (text, box)
    for (one, first), (other, second) in itertools.combinations(boxes, 2):
        apart = first[2] <= second[0] or second[2] <= first[0] or first[3] <= second[1] or second[3] <= first[1]
        assert apart, f"{one} lies on {other}"


def every_text_is_free(svg: ElementTree.Element) -> None:
    """Apart, and struck through by no line, but for one under the white field of a text."""
    every_text_is_apart(svg)
    white = [
        tuple(float(n.attrib[k]) for k in ("x", "y", "height"))
        for n in svg.iter(f"{SVG}rect")
        if "x" in n.attrib and n.attrib.get("fill") == "white" and "stroke" not in n.attrib
    ]
    drawn = strokes(svg)
    for text, box in texts(svg):
        if any(abs(x - box[0]) < 0.01 and y < box[1] and box[3] < y + high for x, y, high in white):
            continue
        for stroke in drawn:
            assert not crosses(stroke, box), f"{text} is struck through by {stroke}"
