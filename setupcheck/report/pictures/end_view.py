"""A part with holes or a slot seen along its axis, from its +z end: circles, and where each hole stands. Paper in mm."""

from __future__ import annotations

import math
from collections.abc import Sequence

from setupcheck.flow import Review
from setupcheck.jobfile.models import Pattern
from setupcheck.report.pictures.marks import AXIS_DASHES, finished_by
from setupcheck.report.pictures.shape import Piece, Point, Solid
from setupcheck.report.svg import Point as Place
from setupcheck.report.svg import area, circle, line, tag

MOST = 72
"""So many holes are drawn; of more, their circle alone. Our choice: they would run into one another on paper."""

AWAY = 24.0
"""From the section's right end to the circle, the arrow of +z between [mm of paper]. Our choice."""

LEAST = 0.5
"""A hole's smallest radius on paper [mm]. Our choice."""


def has_places(pieces: Sequence[Piece]) -> bool:
    """True for a part whose holes or slots an end view would show."""
    return any(p.kind in ("holes", "slot") and p.radius for p in pieces)


def end_view(found: Review, pieces: Sequence[Piece], body: Solid, *, middle: Place, scale: float) -> list[str]:
    """The part from its +z end, its mark to the right; the first place of each pattern filled black."""
    outside = max((r for _, r in body.outer), default=0.0)
    inside = sorted({round(p.radius, 6) for p in pieces if p.kind == "bore" and p.radius and p.radius < outside})
    parts = [circle(middle, r * scale, width=0.35) for r in [*inside, *([outside] if outside else [])]]
    reach = max([outside, *(p.radius for p in pieces if p.radius)]) * scale
    parts += [
        line(
            (middle[0] - reach - 3.0, middle[1]), (middle[0] + reach + 3.0, middle[1]), width=0.18, dashes=AXIS_DASHES
        ),
        line(
            (middle[0], middle[1] - reach - 1.0), (middle[0], middle[1] + reach + 1.0), width=0.18, dashes=AXIS_DASHES
        ),
    ]
    for piece in pieces:
        surface = found.loaded.job.parts[piece.part].surfaces[piece.name]
        if isinstance(surface, Pattern) and piece.radius:
            colour = finished_by(found, piece.part, piece.name).colour
            radius = piece.radius * scale
            parts.append(
                tag("circle", cx=middle[0], cy=middle[1], r=radius, fill="none", stroke=colour, stroke_width=0.18,
                    stroke_dasharray=AXIS_DASHES)
            )  # fmt: skip
            for i in range(surface.count if surface.count <= MOST else 1):
                angle = surface.angle + math.tau * i / surface.count
                parts.append(
                    _place(middle, radius, angle, surface, scale, fill="black" if i == 0 else "white", colour=colour)
                )
    return parts


def _place(
    middle: Place, radius: float, angle: float, surface: Pattern, scale: float, *, fill: str, colour: str
) -> str:
    """One hole, or one slot across its circle, counter-clockwise from the mark."""
    c, s = math.cos(angle), math.sin(angle)
    at = (middle[0] + radius * c, middle[1] - radius * s)
    half = max((surface.diameter or surface.width or 0.0) / 2.0 * scale, LEAST)
    if surface.kind == "holes":
        return circle(at, half, fill=fill, width=0.35, colour=colour)
    corners: list[Point] = [(-half, -half), (half, -half), (half, half), (-half, half)]
    return area(
        [(at[0] + a * c - b * s, at[1] - a * s - b * c) for a, b in corners], fill=fill, width=0.35, colour=colour
    )
