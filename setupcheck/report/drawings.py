"""Drawing of an insert to a stated scale, to lay under a projector or over a print: outline, sizes, measured points. mm, rad.

It knows no worm: whoever asks for it hands over the profile and the sizes to be written.
"""

from __future__ import annotations

import math
from collections.abc import Sequence

from setupcheck.notation import show_angle
from setupcheck.notation.showing import fixed
from setupcheck.record import record
from setupcheck.report.svg import THIN, Point, line, picture, polygon, polyline, room, tag, words

MARGIN, AWAY, SIZE = 8.0, 8.0, 3.0
"""White edge, distance of a dimension from the outline, size of its text [mm of paper]. Our choice."""

ARROW, NARROW = 2.5, 8.0
"""Length of an arrow, and the span below which arrows stand outside and point inwards [mm of paper]. Our choice."""

ACROSS, UP = 50.0, 20.0
"""Check lines: what must be measured on the print [mm]. Our choice."""

SCALES = (100.0, 50.0, 20.0, 10.0, 5.0, 2.0, 1.0)
"""Enlargements offered in place of one that is too large. Source: ISO 5455 (from memory)."""

MARK = "#b3001b"
"""Colour of measured points; they are crosses as well."""


@record(kw_only=True)
class InsertDrawing:
    """What is drawn of an insert [mm, rad].

    title                       one line
    scale                       enlargement, 20 for 20:1
    heights, right, left        profile: heights above the tip, rising from 0; half widths of both flanks, (n,)
    pitch_height, pitch_width   where the width is written that cuts the gap, and that width
    right_angle, left_angle     of the flanks' tangents there, to the middle line
    measured                    points, (height above the tip, place across, positive on the right flank); may be empty
    note                        one line under the drawing, such as how far the points stand off; may be empty
    Raises: ValueError for fewer than five points, a profile out of order, a number missing, a pitch height outside it.
    """

    title: str
    scale: float
    heights: Sequence[float]
    right: Sequence[float]
    left: Sequence[float]
    pitch_height: float
    pitch_width: float
    right_angle: float
    left_angle: float
    measured: Sequence[Point] = ()
    note: str = ""

    def __post_init__(self) -> None:
        if len(self.heights) < 5 or not len(self.heights) == len(self.right) == len(self.left):
            raise ValueError("a profile is drawn from five points or more, each with a height and both half widths")
        every = [*self.heights, *self.right, *self.left, self.pitch_width, *(v for p in self.measured for v in p)]
        if not all(math.isfinite(v) for v in every):
            raise ValueError("a number of the profile or of a measured point is missing")
        if self.heights[0] != 0.0 or any(b <= a for a, b in zip(self.heights, self.heights[1:], strict=False)):
            raise ValueError("the heights of the profile must begin at the tip, 0, and rise from point to point")
        if not 0.0 < self.scale < math.inf:
            raise ValueError(f"a scale is a number above zero, such as 20 for 20:1, not {self.scale:g}")
        if not 0.0 < self.pitch_height < self.heights[-1]:
            raise ValueError(
                f"pitch height, {self.pitch_height:g} mm, must lie on the profile, which ends {self.heights[-1]:.4g} mm above "
                f"the tip"
            )
        if not all(0.0 <= a < math.pi / 3.0 for a in (self.right_angle, self.left_angle)):
            raise ValueError("the angles of the flanks must lie between 0 and 60 deg")

    def across(self, height: float, *, right: bool) -> float:
        """Half width at a height, straight between points [mm]."""
        widths = self.right if right else self.left
        at = next((i for i in range(1, len(self.heights)) if self.heights[i] >= height), len(self.heights) - 1)
        low, high = self.heights[at - 1], self.heights[at]
        return widths[at - 1] + (widths[at] - widths[at - 1]) * (height - low) / (high - low)


def draw_insert(drawing: InsertDrawing, *, paper: Point | None = None) -> str:
    """The drawing as SVG text; printed at 100 % a length on paper is that of the insert times the scale.

    paper  width and height of the sheet [mm], (210, 297) for A4; None: as large as the drawing asks for
    Raises: ValueError for a scale at which it does not go on the paper, naming the largest that does.
    """
    sheet = _Sheet(drawing)
    if paper is not None and not sheet.goes_on(paper):
        smaller = [s for s in SCALES if s < drawing.scale and _Sheet(_at_scale(drawing, s)).goes_on(paper)]
        better = f"{smaller[0]:g}:1 would fit" if smaller else "no scale fits"
        raise ValueError(
            f"at {drawing.scale:g}:1 the drawing needs {sheet.width:.0f} x {sheet.height:.0f} mm, the paper has "
            f"{paper[0]:g} x {paper[1]:g} mm: {better}"
        )
    parts = [
        *_heading(sheet),
        *_outline(sheet),
        *_widths(sheet),
        *_heights(sheet),
        *_angle(sheet),
        *_points(sheet),
        *_check_lines(sheet),
    ]
    return picture(sheet.width, sheet.height, title=f"{drawing.title}, {drawing.scale:g}:1", parts=parts)


class _Sheet:
    """Places on the paper: where the middle of the tip stands, and how large the sheet is [mm of paper]."""

    def __init__(self, drawing: InsertDrawing) -> None:
        self.drawing = drawing
        self.k = drawing.scale
        self.tall = drawing.heights[-1] * self.k
        farthest = [abs(x) * self.k for _, x in drawing.measured]
        self.right = max(drawing.right[-1] * self.k, *farthest, 0.0)
        self.left = max(drawing.left[-1] * self.k, *farthest, 0.0)
        self.angle_text = show_angle(drawing.right_angle + drawing.left_angle, "dms", 0).replace("deg", "°")
        figure = room(fixed(drawing.heights[-1], 3), SIZE) + 3.0
        left = self.left + AWAY + max(figure, room(self.angle_text, SIZE) + 2.0)
        right = self.right + AWAY + figure
        self.lines = [
            f"scale {drawing.scale:g}:1, sizes in mm; print at 100 %, not fitted to the page",
            *([f"+ measured points ({len(drawing.measured)})"] if drawing.measured else []),
            *([drawing.note] if drawing.note else []),
        ]
        self.check_text = f"must measure {ACROSS:g} mm across and {UP:g} mm up on the print"
        widest = max(
            room(drawing.title, 4.5), *(room(text, SIZE) for text in self.lines), room(self.check_text, SIZE), ACROSS
        )
        self.width = 2.0 * MARGIN + max(left + right, widest)
        self.x = MARGIN + left + (self.width - 2.0 * MARGIN - left - right) / 2.0
        self.heading = MARGIN + 4.5 + 5.0 * len(self.lines)
        self.top = self.heading + AWAY + 2.0 * SIZE + 5.0
        self.tip = self.top + self.tall
        self.check = self.tip + AWAY + 3.0 * SIZE + UP
        self.height = self.check + SIZE + 3.0 + MARGIN

    def goes_on(self, paper: Point) -> bool:
        return self.width <= paper[0] and self.height <= paper[1]

    def at(self, height: float, across: float) -> Point:
        """Place on the paper of a point of the insert."""
        return self.x + across * self.k, self.tip - height * self.k


def _at_scale(drawing: InsertDrawing, scale: float) -> InsertDrawing:
    names = (
        "title",
        "heights",
        "right",
        "left",
        "pitch_height",
        "pitch_width",
        "right_angle",
        "left_angle",
        "measured",
        "note",
    )
    return InsertDrawing(scale=scale, **{name: getattr(drawing, name) for name in names})


def _heading(sheet: _Sheet) -> list[str]:
    first = MARGIN + 4.5
    below = [words((MARGIN, first + 6.0 + 5.0 * i), text, size=SIZE) for i, text in enumerate(sheet.lines)]
    return [words((MARGIN, first), sheet.drawing.title, size=4.5, bold=True), *below]


def _outline(sheet: _Sheet) -> list[str]:
    """Both flanks and the tip in one line, open towards the shank; the middle line."""
    d = sheet.drawing
    left = [sheet.at(h, -w) for h, w in zip(d.heights, d.left, strict=True)]
    right = [sheet.at(h, w) for h, w in zip(d.heights, d.right, strict=True)]
    return [
        line(left[-1], right[-1], dashes="3 1"),
        line((sheet.x, sheet.top - 4.0), (sheet.x, sheet.tip + 4.0), dashes="4 1 0.5 1"),
        polyline([*reversed(left), *right]),
    ]


def _widths(sheet: _Sheet) -> list[str]:
    """Tip width under the tip; width at pitch height over the top."""
    d = sheet.drawing
    tip = [sheet.at(0.0, -d.left[0]), sheet.at(0.0, d.right[0])]
    pitch = [
        sheet.at(d.pitch_height, x)
        for x in (-d.across(d.pitch_height, right=False), d.across(d.pitch_height, right=True))
    ]
    under, over = sheet.tip + AWAY, sheet.top - AWAY
    parts = [line((x, y + 1.0), (x, under + 1.5)) for x, y in tip]
    parts += [line((x, y - 1.0), (x, over - 1.5)) for x, y in pitch]
    parts += _dimension((tip[0][0], under), (tip[1][0], under))
    parts += _dimension((pitch[0][0], over), (pitch[1][0], over))
    parts.append(
        words((0.5 * (tip[0][0] + tip[1][0]), under + SIZE + 2.0), fixed(d.right[0] + d.left[0], 3), anchor="middle")
    )
    parts.append(words((0.5 * (pitch[0][0] + pitch[1][0]), over - 2.2), fixed(d.pitch_width, 3), anchor="middle"))
    return parts


def _heights(sheet: _Sheet) -> list[str]:
    """Height of the profile at its right, pitch height at its left."""
    d = sheet.drawing
    right, left = sheet.x + sheet.right + AWAY, sheet.x - sheet.left - AWAY
    corner, top = sheet.at(0.0, d.right[0]), sheet.at(d.heights[-1], d.right[-1])
    left_corner = sheet.at(0.0, -d.left[0])
    pitch = sheet.at(d.pitch_height, -d.across(d.pitch_height, right=False))
    parts = [line((x + 1.0, y), (right + 1.5, y)) for x, y in (corner, top)]
    parts += [line((x - 1.0, y), (left - 1.5, y)) for x, y in (left_corner, pitch)]
    parts += _dimension((right, corner[1]), (right, top[1]))
    parts += _dimension((left, left_corner[1]), (left, pitch[1]))
    parts.append(words((right + 2.5, 0.5 * (corner[1] + top[1]) + 0.35 * SIZE), fixed(d.heights[-1], 3)))
    middle = 0.5 * (left_corner[1] + pitch[1]) + 0.35 * SIZE
    parts.append(words((left - 2.5, middle), fixed(d.pitch_height, 3), anchor="end"))
    return parts


def _angle(sheet: _Sheet) -> list[str]:
    """Tangents at pitch height and the arc of the angle between them; its text on the arc, or aside where that is too small."""
    d = sheet.drawing
    right, left = d.across(d.pitch_height, right=True), d.across(d.pitch_height, right=False)
    opening = math.tan(d.right_angle) + math.tan(d.left_angle)
    if opening <= 1e-6:
        return []
    below = (right + left) / opening
    apex_height, apex_across = d.pitch_height - below, right - below * math.tan(d.right_angle)
    radius = below + 0.55 * (d.heights[-1] - d.pitch_height)
    ends = [
        (apex_height + radius * math.cos(a), apex_across + sign * radius * math.sin(a))
        for sign, a in ((-1.0, d.left_angle), (1.0, d.right_angle))
    ]
    (x1, y1), (x2, y2) = (sheet.at(*end) for end in ends)
    r = radius * sheet.k
    arc = f"M {x1:.3f} {y1:.3f} A {r:.3f} {r:.3f} 0 0 1 {x2:.3f} {y2:.3f}"
    parts = [tag("path", d=arc, fill="none", stroke="black", stroke_width=THIN)]
    for flank, end in ((-left, ends[0]), (right, ends[1])):
        start, stop = sheet.at(d.pitch_height, flank), sheet.at(*end)
        parts.append(line(start, _beyond(start, stop, 2.0), dashes="1.5 0.8"))
    if x2 - x1 > 2.0 * NARROW:
        parts += [
            _arrow((x - ARROW * sign * math.cos(a), y - ARROW * math.sin(a)), (x, y))
            for sign, a, x, y in ((-1.0, d.left_angle, x1, y1), (1.0, d.right_angle, x2, y2))
        ]
    wide = room(sheet.angle_text, SIZE)
    if x2 - x1 > wide + 12.0 and min(y1, y2) - sheet.top > -1.0 and sheet.k * radius > SIZE * 4.0:
        centre = sheet.at(apex_height + radius, apex_across)
        box = {"x": centre[0] - wide / 2.0, "y": centre[1] - 0.7 * SIZE, "width": wide, "height": 1.4 * SIZE}
        parts.append(tag("rect", fill="white", **box))
        parts.append(words((centre[0], centre[1] + 0.35 * SIZE), sheet.angle_text, anchor="middle"))
    else:
        clear = max(sheet.left, room(fixed(d.pitch_width, 3), SIZE) / 2.0) + AWAY
        label = (sheet.x - clear, sheet.top - 4.0)
        parts.append(line((label[0] + 1.5, label[1] - 0.35 * SIZE), (x1, y1)))
        parts.append(words(label, sheet.angle_text, anchor="end"))
    return parts


def _points(sheet: _Sheet) -> list[str]:
    """Measured points as upright crosses of 2 mm."""
    parts = []
    for height, across in sheet.drawing.measured:
        x, y = sheet.at(height, across)
        cross = f"M {x - 1.0:.3f} {y:.3f} h 2 M {x:.3f} {y - 1.0:.3f} v 2"
        parts.append(tag("path", d=cross, fill="none", stroke=MARK, stroke_width=THIN))
    return parts


def _check_lines(sheet: _Sheet) -> list[str]:
    """An L of known lengths: printers stretch both directions differently."""
    corner = (MARGIN, sheet.check)
    up, across = (MARGIN, sheet.check - UP), (MARGIN + ACROSS, sheet.check)
    return [
        polyline([up, corner, across]),
        line((up[0] - 1.5, up[1]), (up[0] + 1.5, up[1])),
        line((across[0], across[1] - 1.5), (across[0], across[1] + 1.5)),
        words((MARGIN, sheet.check + SIZE + 2.5), sheet.check_text),
    ]


def _dimension(start: Point, end: Point) -> list[str]:
    """Dimension line with arrows, from inside, or from outside where the span is too short for them."""
    span = math.hypot(end[0] - start[0], end[1] - start[1])
    if span >= NARROW:
        return [line(start, end), _arrow(end, start), _arrow(start, end)]
    outer_start, outer_end = _beyond(end, start, 5.0), _beyond(start, end, 5.0)
    return [line(outer_start, outer_end), _arrow(outer_start, start), _arrow(outer_end, end)]


def _arrow(tail: Point, tip: Point) -> str:
    """Arrow head whose tip stands at a point, coming from another."""
    span = math.hypot(tip[0] - tail[0], tip[1] - tail[1])
    ux, uy = (tip[0] - tail[0]) / span, (tip[1] - tail[1]) / span
    back = (tip[0] - ARROW * ux, tip[1] - ARROW * uy)
    half = ARROW / 6.0
    return polygon([tip, (back[0] - half * uy, back[1] + half * ux), (back[0] + half * uy, back[1] - half * ux)])


def _beyond(start: Point, end: Point, more: float) -> Point:
    """The point so far beyond the end of a line."""
    span = math.hypot(end[0] - start[0], end[1] - start[1])
    return end[0] + more * (end[0] - start[0]) / span, end[1] + more * (end[1] - start[1]) / span
