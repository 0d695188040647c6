"""A drawing inside the page in fewer bytes: what the page says already is left out, and straight lines are joined to paths."""

from __future__ import annotations

import re

from setupcheck.report.svg import THIN, number

SIZE = 3.0
"""Height of most texts of a drawing [mm]: said once, at its root."""

_SAID = (' xmlns="http://www.w3.org/2000/svg"', f' font-size="{number(SIZE)}"', f' stroke-width="{number(THIN)}"')
_STRAIGHT = re.compile(r'<line x1="([^"]+)" y1="([^"]+)" x2="([^"]+)" y2="([^"]+)"((?: [a-z-]+="[^"]*")*)/>')
_BLANK = re.compile(r'<rect width="[^"]+" height="[^"]+" fill="white"/>\n')


def inline(drawing: str) -> str:
    """The same drawing for use inside an HTML page, whose parser knows what an `svg` is.

    Lines that follow each other in one style become one path; text height and line width that are used most go to the root.
    """
    for said in _SAID:
        drawing = drawing.replace(said, "")
    drawing = _BLANK.sub("", drawing, count=1)
    drawing = drawing.replace("<svg ", f'<svg font-size="{number(SIZE)}" stroke-width="{number(THIN)}" ', 1)
    return "\n".join(_joined(drawing.split("\n")))


def _joined(lines: list[str]) -> list[str]:
    found: list[str] = []
    way, style = "", ""
    for one in [*lines, ""]:
        straight = _STRAIGHT.fullmatch(one)
        if way and (straight is None or straight[5] != style):
            found.append(f'<path d="{way}"{style}/>')
            way = ""
        if straight is None:
            found += [one] if one else []
            continue
        x1, y1, x2, y2, style = straight.groups()
        way += f"M{x1} {y1}" + (f"H{x2}" if y1 == y2 else f"V{y2}" if x1 == x2 else f"L{x2} {y2}")
    return found
