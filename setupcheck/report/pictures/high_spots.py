"""`high-spots-<n>`: known run-outs of one requirement as arrows, head to tail, their sum, what the others may add, the limit.

Seen from the part's +z end, its mark (0 deg) at the right, angles counter-clockwise from it: the frame of the ledger. mm, rad.
"""

from __future__ import annotations

import cmath
import math
from collections.abc import Callable, Iterator
from functools import partial
from typing import TYPE_CHECKING

from setupcheck.quantities.book import Scope
from setupcheck.quantities.scopes import stack_of
from setupcheck.report.pictures import Picture
from setupcheck.report.pictures.axes import DASHES, DOTS, EDGE, HEAD, LINE, SHEET, SIZE, circle, shortened, told
from setupcheck.report.pictures.known_vectors import NOTHING, Spots, has_directions, spots
from setupcheck.report.svg import THICK, THIN, Point, line, number, picture, polygon, polyline, words
from setupcheck.report.wording import clean, title_of

if TYPE_CHECKING:
    from setupcheck.flow import Review

CENTRE, RADIUS = (50.0, 59.0), 29.0
"""Middle and radius of the rim [mm]. Our choice."""
SAID_AT = 95.0
"""Where the words of the arrows begin [mm]. Our choice."""
KEY_FROM, UNDER = 25.0, 98.8
"""Base lines of the first arrow's words, and of the words under the rim [mm]. Our choice."""
LENS_RADIUS, SMALL, LOWEST = 24.0, 0.4, 107.5
"""Arrows that reach no farther than that share of the rim are drawn larger as well: the circle for it, and where it ends below
[mm]. Our choice."""
NUMBERS = 12
"""Numbers round the rim. Our choice."""
FAR_LIMIT = 4.0
"""A limit so many times beyond all else is named and not drawn: arrows would be dots. Our choice."""
ARROW, SUM, LIMIT = 0.35, 0.8, 0.6
"""Line widths of arrows, of their sum and of the limit [mm]. Our choice."""
CLEAR = 2.6
"""Kept clear between letters and between a letter and its arrow [mm]. Our choice."""


def offered(found: Review) -> Iterator[Picture]:
    """One picture for each requirement that hears of a run-out with a known direction; several read heads lose it."""
    for scope in found.book.instances("stack"):
        result = found.results.get(scope.key)
        one_head = (stack_of(scope).require.heads or 1) == 1
        if result is not None and one_head and has_directions(result):
            n = stack_of(scope).index + 1
            yield Picture(
                f"high-spots-{n}", f"High spots behind {clean(title_of(scope))}", partial(drawn, found, scope)
            )


def drawn(found: Review, scope: Scope) -> str:
    """The SVG."""
    made = spots(found, scope)
    reach = _reach(made)

    def put(vector: complex) -> Point:
        x, y = vector.real / reach * RADIUS, vector.imag / reach * RADIUS
        return round(CENTRE[0] + x, 2), round(CENTRE[1] - y, 2)

    says = _says(made)
    parts = [words((EDGE, 6.5), shortened(made.title, SHEET - 2.0 * EDGE, HEAD), size=HEAD, bold=True)]
    parts += told((EDGE, 11.5), says, SHEET - 2.0 * EDGE, most=3)
    parts += _rim(made)
    parts += _circles(made, put, reach)
    larger = _lens(made, reach) if _extent(made) < SMALL * reach else []
    parts += _chain(made, put, letters=not larger) + larger
    parts += _key(made)
    parts += _under(made, reach)
    return picture(SHEET, UNDER + 2.0 * LINE + 2.5, title=clean(f"{made.title}. {says}"), parts=parts) + "\n"


def _extent(made: Spots) -> float:
    """How far the arrows reach on their way from the middle."""
    way, far = 0j, 0.0
    for arrow in made.arrows:
        way += arrow.vector
        far = max(far, abs(way))
    return far


def _reach(made: Spots) -> float:
    """Length that the rim stands for: all that is drawn."""
    most = max(_extent(made), abs(made.sum) + made.rest)
    if made.limit is not None and made.limit <= FAR_LIMIT * most:
        most = max(most, made.limit)
    return 1.06 * max(most, NOTHING)


def _lens(made: Spots, reach: float) -> list[str]:
    """The arrows alone, larger; empty where there is no room for that."""
    radius = min(LENS_RADIUS, (LOWEST - _key_ends(made)) / 2.0)
    middle = (SHEET - EDGE - radius, LOWEST - radius)
    times = math.floor(2.0 * 0.85 * radius * reach / (max(_extent(made), NOTHING) * RADIUS)) / 2.0
    if times < 1.5:
        return []
    scale = times * RADIUS / reach

    def put(vector: complex) -> Point:
        return round(middle[0] + vector.real * scale, 2), round(middle[1] - vector.imag * scale, 2)

    parts = [circle(middle, round(radius, 2), width=THIN, dashes=DOTS)]
    parts += _chain(made, put, letters=True)
    wide = middle[0] - radius - SAID_AT - 2.0
    return parts + told((SAID_AT, middle[1] - LINE), f"the arrows {number(times)} times as large", wide)


def _says(made: Spots) -> str:
    """One line that says what it shows and where the high spot of the sum lies."""
    first = "its mark (0 deg) at the right, angles counter-clockwise from it"
    total = made.sum
    if abs(total) <= NOTHING:
        return f"Seen from the +z end, {first}. The known ones cancel: their sum is nothing."
    where = f"{round(math.degrees(cmath.phase(total))) % 360} deg{_near(made, cmath.phase(total))}"
    return f"Seen from the +z end, {first}. The known ones add up to {made.size(abs(total))} of {made.what}: {made.high} {where}."


def _near(made: Spots, direction: float) -> str:
    """`, tooth 14`: the tooth or hole nearest to a direction."""
    pattern = made.pattern
    if pattern is None or pattern.count < 2:
        return ""
    back = 0.5 if made.place == "tooth" else 0.0  # tooth n stands half a pitch on from gap n
    pitches = pattern.turn * (direction - pattern.start) * pattern.count / math.tau - back
    return f", {made.place} {round(pitches) % pattern.count + 1}"


def _rim(made: Spots) -> list[str]:
    """The rim with numbers of teeth or holes, or degrees."""
    parts = [circle(CENTRE, RADIUS, width=THIN)]
    parts.append(line((CENTRE[0] - 1.5, CENTRE[1]), (CENTRE[0] + 1.5, CENTRE[1])))
    parts.append(line((CENTRE[0], CENTRE[1] - 1.5), (CENTRE[0], CENTRE[1] + 1.5)))
    for angle, text in _rim_numbers(made):
        out = cmath.rect(1.0, angle)
        start, end = (RADIUS + d for d in (0.0, 1.4))
        parts.append(
            line(
                (CENTRE[0] + start * out.real, CENTRE[1] - start * out.imag),
                (CENTRE[0] + end * out.real, CENTRE[1] - end * out.imag),
            )
        )
        far = RADIUS + 4.6
        at = (round(CENTRE[0] + far * out.real, 2), round(CENTRE[1] - far * out.imag + 1.05, 2))
        parts.append(words(at, text, size=SIZE, anchor="middle"))
    mark = CENTRE[0] + RADIUS
    parts.append(polygon([(mark, CENTRE[1]), (mark - 2.4, CENTRE[1] - 1.1), (mark - 2.4, CENTRE[1] + 1.1)]))
    return parts


def _rim_numbers(made: Spots) -> list[tuple[float, str]]:
    pattern = made.pattern
    if pattern is None or pattern.count < 2:
        return [(math.radians(30.0 * k), f"{30 * k}") for k in range(NUMBERS)]
    count, back = pattern.count, 0.5 if made.place == "tooth" else 0.0
    each = min(count, NUMBERS)
    places = [1 + round(k * count / each) for k in range(each)]
    return [(pattern.angle(n + back), str(n)) for n in places]


def _circles(made: Spots, put: Callable[[complex], Point], reach: float) -> list[str]:
    """The limit, and round the end of the sum what the causes without direction may add."""
    scale = RADIUS / reach
    parts = []
    if made.rest > NOTHING:
        parts.append(circle(put(made.sum), round(made.rest * scale, 2), width=THICK, dashes=DASHES))
    if made.limit is not None and made.limit <= reach:
        parts.append(circle(CENTRE, round(made.limit * scale, 2), width=LIMIT))
    return parts


def _chain(made: Spots, put: Callable[[complex], Point], *, letters: bool) -> list[str]:
    """Arrows head to tail, and the sum; with their letters where these have room."""
    parts: list[str] = []
    named: list[tuple[str, Point, complex]] = []
    lines: list[tuple[Point, Point]] = []
    tail = 0j
    for letter, arrow in zip("ABCDE", made.arrows, strict=False):
        head = tail + arrow.vector
        parts += _arrow(put(tail), put(head), ARROW)
        lines.append((put(tail), put(head)))
        named.append((letter, put((tail + head) / 2.0), arrow.vector))
        tail = head
    if len(made.arrows) > 1 and abs(made.sum) > NOTHING:
        parts += _arrow(put(0j), put(made.sum), SUM)
        lines.append((put(0j), put(made.sum)))
        named.append(("S", put(made.sum / 2.0), made.sum))
    return parts + (_letters(named, lines) if letters else [])


def _arrow(start: Point, end: Point, width: float) -> list[str]:
    """A line with a head; one too short for a head is a line alone."""
    across, down = end[0] - start[0], end[1] - start[1]
    long = math.hypot(across, down)
    if long < 0.2:
        return []
    head = min(1.2 + 2.2 * width, 0.6 * long)
    ux, uy = across / long, down / long
    neck = (end[0] - head * ux, end[1] - head * uy)
    side = 0.36 * head
    tip = [end, (neck[0] - side * uy, neck[1] + side * ux), (neck[0] + side * uy, neck[1] - side * ux)]
    return [line(start, neck, width=width), polygon(tip)]


def _letters(wanted: list[tuple[str, Point, complex]], lines: list[tuple[Point, Point]]) -> list[str]:
    """A letter beside each arrow, clear of the others and of all arrows where that can be."""
    parts: list[str] = []
    taken: list[Point] = []
    for letter, (x, y), vector in wanted:
        turn = vector / abs(vector) if abs(vector) > 0.0 else 1 + 0j
        places: list[Point] = []
        for ring in range(12):
            for side in (1j, -1j, cmath.rect(1.0, 0.8), cmath.rect(1.0, -0.8)):
                beside = turn * side * (CLEAR + 0.8 * ring)
                places.append((x + beside.real, y - beside.imag))
        apart = [p for p in places if all(math.dist(p, q) > 3.8 for q in taken)]
        clear = [p for p in apart if all(_off(p, one) > 2.3 for one in lines)]
        at = (clear or apart or places)[0]
        taken.append(at)
        parts.append(words((round(at[0], 2), round(at[1] + 1.05, 2)), letter, size=SIZE, anchor="middle", bold=True))
    return parts


def _off(at: Point, stroke: tuple[Point, Point]) -> float:
    """Distance of a point from a stroke [mm of paper]. Source: geometry."""
    start, end, here = (complex(*p) for p in (*stroke, at))
    along = end - start
    if abs(along) == 0.0:
        return abs(here - start)
    share = ((here - start) * along.conjugate()).real / abs(along) ** 2
    return abs(here - start - min(max(share, 0.0), 1.0) * along)


def _key(made: Spots) -> list[str]:
    """To the right: each arrow with size, direction and name; the sum."""
    parts, y, wide = [], KEY_FROM, SHEET - EDGE - SAID_AT
    for letter, arrow in zip("ABCDE", made.arrows, strict=False):
        angle = cmath.phase(arrow.vector)
        where = f"{made.size(abs(arrow.vector))} at {round(math.degrees(angle)) % 360} deg{_near(made, angle)}"
        parts.append(words((SAID_AT, y), letter, size=SIZE, bold=True))
        parts.append(words((SAID_AT + 5.0, y), shortened(where, wide - 5.0), size=SIZE))
        parts.append(words((SAID_AT + 5.0, y + LINE), shortened(arrow.name, wide - 5.0), size=SIZE))
        y += 2.0 * LINE + 0.8
    if len(made.arrows) > 1:
        parts.append(words((SAID_AT, y), "S", size=SIZE, bold=True))
        parts.append(words((SAID_AT + 5.0, y), f"{made.size(abs(made.sum))}, the sum of these", size=SIZE))
    return parts


def _key_ends(made: Spots) -> float:
    """Where the words of the arrows have ended."""
    return KEY_FROM + len(made.arrows) * (2.0 * LINE + 0.8) + (2.0 if len(made.arrows) > 1 else -3.0)


def _under(made: Spots, reach: float) -> list[str]:
    """Under the rim: what both circles are, and what the rim stands for."""
    wide, y, parts = SAID_AT - EDGE - 13.0, UNDER, []
    if made.rest > NOTHING:
        parts.append(polyline([(EDGE, y - 1.0), (EDGE + 8.0, y - 1.0)], width=THICK, dashes=DASHES))
        text = f"{made.size(made.rest)} more, any way, at worst"
        parts.append(words((EDGE + 10.0, y), shortened(text, wide), size=SIZE))
        y += LINE
    if made.limit is not None:
        far = ", within the rim" if made.limit <= reach else ", beyond the rim"
        parts.append(polyline([(EDGE, y - 1.0), (EDGE + 8.0, y - 1.0)], width=LIMIT))
        parts.append(words((EDGE + 10.0, y), f"limit {made.size(made.limit)}{far} of {made.size(reach)}", size=SIZE))
        y += LINE
    if made.said:
        parts.append(words((EDGE, y), shortened(made.said, SAID_AT - EDGE - 1.0), size=SIZE))
    return parts
