"""SVG in millimetres of paper: a few tags, escaped in one place, with attributes of their own and no style sheet."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from html import escape
from unicodedata import east_asian_width

Point = tuple[float, float]

THICK, THIN = 0.25, 0.13
"""Line widths [mm]: outlines, dimensions. Source: ISO 128 has 0.25 and 0.13 as a pair (from memory)."""

FONT = "DejaVu Sans, Arial, sans-serif"
"""Said once, at the root: every text inherits it."""

CHARACTER = 0.62
"""Width of a character over the size of the text, for room: a little more than a sans-serif's mean. Measured on DejaVu Sans."""


def number(value: float) -> str:
    """A coordinate with at most three decimals: 1/1000 mm of paper.

    >>> number(2.0), number(-0.12345), number(-1e-9)
    ('2', '-0.123', '0')
    """
    text = f"{value:.3f}".rstrip("0").rstrip(".")
    return "0" if text == "-0" else text


def tag(name: str, content: str | None = None, /, **attributes: str | float) -> str:
    """One element; `stroke_width` becomes stroke-width. Content must be escaped or made of tags.

    >>> tag("line", x1=0.0, x2=1.25, stroke="black")
    '<line x1="0" x2="1.25" stroke="black"/>'
    """
    parts = [name]
    for key, value in attributes.items():
        shown = escape(value) if isinstance(value, str) else number(value)
        parts.append(f'{key.replace("_", "-")}="{shown}"')
    inside = " ".join(parts)
    return f"<{inside}/>" if content is None else f"<{inside}>{content}</{name}>"


def line(start: Point, end: Point, *, width: float = THIN, dashes: str = "", colour: str = "black") -> str:
    """A straight line."""
    more: dict[str, str | float] = {"stroke_dasharray": dashes} if dashes else {}
    return tag("line", x1=start[0], y1=start[1], x2=end[0], y2=end[1], stroke=colour, stroke_width=width, **more)


def polyline(points: Iterable[Point], *, width: float = THICK, dashes: str = "", colour: str = "black") -> str:
    """An open line through points."""
    path = " ".join(f"{number(x)},{number(y)}" for x, y in points)
    more: dict[str, str | float] = {"stroke_dasharray": dashes} if dashes else {}
    return tag("polyline", points=path, fill="none", stroke=colour, stroke_width=width, stroke_linejoin="round", **more)


def lines(
    pieces: Iterable[tuple[Point, Point]], *, width: float = THIN, dashes: str = "", colour: str = "black"
) -> str:
    """Many straight lines in one element, as in a hatch; nothing where there are none."""
    path = "".join(f"M{number(a[0])} {number(a[1])}L{number(b[0])} {number(b[1])}" for a, b in pieces)
    more: dict[str, str | float] = {"stroke_dasharray": dashes} if dashes else {}
    return tag("path", d=path, fill="none", stroke=colour, stroke_width=width, **more) if path else ""


def rectangle(
    at: Point, wide: float, high: float, *, fill: str = "none", width: float = THIN, colour: str = "black"
) -> str:
    """An outlined rectangle by its upper left corner."""
    return tag("rect", x=at[0], y=at[1], width=wide, height=high, fill=fill, stroke=colour, stroke_width=width)


def circle(at: Point, radius: float, *, fill: str = "none", width: float = THIN, colour: str = "black") -> str:
    """An outlined circle."""
    return tag("circle", cx=at[0], cy=at[1], r=radius, fill=fill, stroke=colour, stroke_width=width)


def area(points: Iterable[Point], *, fill: str = "white", width: float = THIN, colour: str = "black") -> str:
    """A filled area with its outline."""
    path = " ".join(f"{number(x)},{number(y)}" for x, y in points)
    return tag("polygon", points=path, fill=fill, stroke=colour, stroke_width=width, stroke_linejoin="round")


def polygon(points: Iterable[Point], *, fill: str = "black") -> str:
    """A filled area without outline."""
    return tag("polygon", points=" ".join(f"{number(x)},{number(y)}" for x, y in points), fill=fill)


def words(at: Point, text: str, *, size: float = 3.0, anchor: str = "start", bold: bool = False) -> str:
    """Text on a base line that begins, ends or has its middle at a point."""
    more: dict[str, str | float] = {"font_weight": "bold"} if bold else {}
    return tag(
        "text",
        escape(text),
        x=at[0],
        y=at[1],
        font_size=size,
        **({"text_anchor": anchor} if anchor != "start" else {}),
        **more,
    )


def room(text: str, size: float) -> float:
    """Width a text takes, rather more than less [mm].

    >>> round(room("12.345", 3.0), 2)
    11.16
    """
    wide = 0 if text.isascii() else sum(east_asian_width(c) in "WF" for c in text)
    return CHARACTER * size * (len(text) + 0.65 * wide)


def picture(width: float, height: float, *, title: str, parts: Sequence[str]) -> str:
    """The whole file: width and height in mm with a view box of the same numbers, so that it prints true to size."""
    shown = [tag("title", escape(title)), tag("rect", width=width, height=height, fill="white"), *parts]
    return tag(
        "svg",
        "\n" + "\n".join(shown) + "\n",
        xmlns="http://www.w3.org/2000/svg",
        role="img",
        width=f"{number(width)}mm",
        height=f"{number(height)}mm",
        viewBox=f"0 0 {number(width)} {number(height)}",
        font_family=FONT,
    )
