"""`head-40`: which way a dividing head leans and by how much, seen from the cutter's side. Angles rad, paper in mm."""

from __future__ import annotations

import math
from collections.abc import Iterator, Sequence
from functools import partial

from setupcheck.flow import Review
from setupcheck.jobfile.setups import Head, Setup
from setupcheck.notation import show_angle
from setupcheck.quantities.book import Known, Scope
from setupcheck.quantities.route import machine_of
from setupcheck.quantities.tilting import cuts_the_wheel, direction_at_machine, way_needed
from setupcheck.record import record
from setupcheck.report.pictures import WIDEST, Picture
from setupcheck.report.pictures.labels import SIZE
from setupcheck.report.pictures.marks import AXIS_DASHES, short, wrapped
from setupcheck.report.pictures.sketch import sheet, told
from setupcheck.report.svg import Point, area, circle, line, lines, polygon, polyline, rectangle, words
from setupcheck.report.worked_out import worked_out

STEEP = math.radians(14.0)
"""A lean is drawn at least so steep: a few degrees would not be seen. Our choice."""

TOP, LINE = 11.0, 4.6
"""Room of the heading and of a line of text [mm of paper]. Our choice."""

BODY, NOSE, WHEEL, RADIUS, FACE = 26.0, 8.0, 22.0, 18.0, 5.5
"""Length of the head behind its pivot and of its nose; place, radius and half width of the wheel [mm of paper]. Our choice:
signs, not sizes."""

Vector = tuple[int, int, int]


def offered(found: Review) -> Iterator[Picture]:
    """The head of every setup that sets one."""
    for setup in found.loaded.job.setups:
        if setup.head is not None:
            yield Picture(f"head-{setup.op}", _title(setup), partial(draw, found, setup))


def _title(setup: Setup) -> str:
    return f"op {setup.op}: how the head leans"


@record
class Stand:
    """What is known of the place, and the directions of the view from the cutter's side.

    nose, cutter  where the nose looks, where the cutter stands;  right, up  of the view
    lean          where the nose goes, None where it is not stated
    """

    nose: Vector
    cutter: Vector
    right: Vector
    up: Vector
    lean: Vector | None

    def seen(self, v: Vector) -> Point:
        """A direction in the view: to the right, upwards."""
        return float(_dot(v, self.right)), float(_dot(v, self.up))


def draw(found: Review, setup: Setup) -> str:
    """The drawing of one head as SVG."""
    head = setup.head
    assert head is not None
    says = _says(found, setup, head)
    stand = _stand(found, setup, head)
    if isinstance(stand, str):
        return told(WIDEST, _title(setup), [stand, *says])
    hand = _hand(found, setup)
    needed = _needed(found, setup)
    angle = abs(head.tilt)
    steepest = max(angle, needed or 0.0)
    more = STEEP / steepest if 0.0 < steepest < STEEP else 1.0
    view = _View(stand, angle * more if _turns(stand) else 0.0)
    parts = [
        *_bench(stand, setup, found),
        *_head(view),
        *_gaps(view, hand, (needed if needed is not None else angle) * more),
        *_axes(view, head),
        *_plan(stand, (head.leans or "")),
    ]
    below = [*says, *_how_drawn(more, stand, hand)]
    y = TOP + 80.0
    parts += [words((5.0, y + LINE * i), text, size=SIZE) for i, text in enumerate(below)]
    return sheet(WIDEST, y + LINE * len(below) + 1.0, title=_title(setup), parts=parts)


# -- what is known ---------------------------------------------------------------------------------------------------


def _stand(found: Review, setup: Setup, head: Head) -> Stand | str:
    """The place, or one line why it cannot be drawn."""
    name, machine = machine_of(found.loaded, setup)
    nose = machine.nose_points if machine is not None else None
    cutter = machine.cutter_stands if machine is not None else None
    if nose is None or cutter is None:
        called = short(name or "its machine", SIZE, 50.0)
        missing = " and ".join(k for k, v in (("nose_points", nose), ("cutter_stands", cutter)) if v is None)
        return f"not drawn: {missing} of {called} not stated"
    n, c = direction_at_machine(nose), direction_at_machine(cutter)
    if not any(_cross(n, c)):
        return f"not drawn: with the nose pointing {nose} the cutter cannot stand {cutter}"
    up = (0, 1, 0) if cutter == "above" else (0, 0, 1)
    return Stand(n, c, _cross(up, c), up, direction_at_machine(head.leans) if head.leans is not None else None)


def _turns(stand: Stand) -> bool:
    """True where the lean turns the gaps in this view: square to the nose and to the cutter's direction."""
    return stand.lean is not None and _dot(stand.lean, stand.nose) == 0 and _dot(stand.lean, stand.cutter) == 0


def _hand(found: Review, setup: Setup) -> str | None:
    worm = found.loaded.job.worm
    return worm.hand if worm is not None and cuts_the_wheel(found.loaded, setup) else None


def _scope(found: Review, setup: Setup) -> Scope | None:
    return next((s for s in found.book.instances("setup") if s.op == setup.op), None)


def _known(found: Review, setup: Setup, name: str) -> object:
    scope = _scope(found, setup)
    answer = found.book.get(name, scope) if scope is not None else None
    return answer.value if isinstance(answer, Known) else None


def _needed(found: Review, setup: Setup) -> float | None:
    value = _known(found, setup, "tilt.needed")
    return value if isinstance(value, float) else None


def _says(found: Review, setup: Setup, head: Head) -> list[str]:
    """The angle as it is set, in three spellings, what the review worked out, and what is wrong."""
    angle = abs(head.tilt)
    leans = f"leans {head.leans}" if head.leans is not None else "which way it leans is not stated"
    spelt = [show_angle(angle, "dms", 0), show_angle(angle, "deg", 4), show_angle(angle, "gon", 4)]
    texts = [f"set: {spelt[0]} ({spelt[1]}, {spelt[2]}), {leans}"]
    texts += [_correction(found, setup, head)]
    begins = f"op {setup.op}, head: "
    texts += [text.removeprefix(begins) for text in worked_out(found) if text.startswith(begins)]
    return [each for text in texts if text for each in wrapped(text, SIZE, WIDEST - 10.0, most=6)]


def _correction(found: Review, setup: Setup, head: Head) -> str:
    """What is to be changed at the head, from the review's own verdicts."""
    needed, allowed = _needed(found, setup), _known(found, setup, "tilt.allowed")
    if _known(found, setup, "tilt.lean") == "wrong":
        return f"WRONG WAY: it must lean {way_needed(found.floor, setup)}"
    if needed is None:
        return ""
    off = abs(head.tilt) - needed
    if isinstance(allowed, float) and abs(off) > allowed:
        return f"CORRECT: lean it {show_angle(abs(off), 'dms', 0)} {'less' if off > 0.0 else 'more'}"
    return ""


def _how_drawn(more: float, stand: Stand, hand: str | None) -> list[str]:
    texts = []
    if more > 1.0:
        texts.append(f"angles drawn {more:.1f} times as steep as they are")
    if stand.lean is not None and not _turns(stand):
        texts.append("this lean turns no gap in this view, so it is not drawn")
    if hand is not None:
        texts.append("thick: the gaps, which must come to lie square to the cutter's spindle")
    texts.append("signs, not sizes")
    return wrapped("; ".join(texts), SIZE, WIDEST - 10.0, most=2)


# -- the view from the cutter's side ---------------------------------------------------------------------------------


class _View:
    """Places of the head on the paper: a along the nose, b the way it leans, turned by the angle that is drawn."""

    def __init__(self, stand: Stand, angle: float) -> None:
        self.stand = stand
        self.angle = angle
        self.n = stand.seen(stand.nose)
        side = _cross(stand.nose, stand.cutter)
        self.lean = stand.lean if stand.lean is not None and _turns(stand) else side
        self.across = stand.seen(self.lean)
        offset = 8.0
        self.pivot = (62.0 - self.n[0] * offset, TOP + 37.0 + (offset if self.n[1] > 0.0 else 0.0))

    def at(self, a: float, b: float, *, leaned: bool = True) -> Point:
        c, s = (math.cos(self.angle), math.sin(self.angle)) if leaned else (1.0, 0.0)
        along, aside = a * c - b * s, a * s + b * c
        x = along * self.n[0] + aside * self.across[0]
        y = along * self.n[1] + aside * self.across[1]
        return self.pivot[0] + x, self.pivot[1] - y


def _head(view: _View) -> list[str]:
    def box(a1: float, a2: float, half: float) -> list[Point]:
        return [view.at(a1, -half), view.at(a2, -half), view.at(a2, half), view.at(a1, half)]

    return [
        area(box(-BODY, 4.0, 11.0), fill="#d9d9d9", width=0.35),
        area(box(4.0, 4.0 + NOSE, 4.5), fill="#b8b8b8", width=0.35),
        area(box(WHEEL - FACE, WHEEL + FACE, RADIUS), fill="white", width=0.5),
        area(box(4.0 + NOSE, WHEEL - FACE, 2.5), fill="#b8b8b8", width=0.35),
        circle(view.at(0.0, 0.0), 1.0, fill="black"),
    ]


def _gaps(view: _View, hand: str | None, lead: float) -> list[str]:
    """Gaps on the wheel's near side, at the lead angle to its axis."""
    if hand is None:
        return []
    side = _cross(view.stand.nose, view.stand.cutter)
    sense = (1 if hand == "right" else -1) * _dot(side, view.lean)
    rise = sense * math.tan(lead) * (FACE - 0.6)
    pieces = [
        (view.at(WHEEL - FACE + 0.6, b - rise), view.at(WHEEL + FACE - 0.6, b + rise))
        for b in (-12.0, -8.0, -4.0, 0.0, 4.0, 8.0, 12.0)
    ]
    return [lines(pieces, width=0.9, colour="#1f5fa8")]


def _axes(view: _View, head: Head) -> list[str]:
    """Axis as it lies level and leaned, the cutter's spindle, the arc with its arrow and the true angle."""
    reach = WHEEL + FACE + 10.0
    parts = [
        line(view.at(-BODY - 2.0, 0.0, leaned=False), view.at(reach, 0.0, leaned=False), width=0.18, dashes="1.4 1"),
        line(view.at(-BODY - 2.0, 0.0), view.at(reach, 0.0), width=0.3, dashes=AXIS_DASHES),
    ]
    wheel = view.at(WHEEL, 0.0)
    ends = [(wheel[0] + s * 26.0 * view.across[0], wheel[1] - s * 26.0 * view.across[1]) for s in (-1.0, 1.0)]
    parts.append(line(ends[0], ends[1], width=0.25, dashes=AXIS_DASHES))
    low = max(ends, key=lambda end: (round(end[1], 3), end[0]))
    parts.append(words((low[0] + 1.5, low[1] + 1.0), "cutter's spindle", size=SIZE))
    if view.angle > 0.0:
        radius = WHEEL + FACE + 6.0
        turned = _View(view.stand, 0.0)
        arc = []
        for i in range(13):
            turned.angle = view.angle * i / 12.0
            arc.append(turned.at(radius, 0.0))
        parts.append(polyline(arc, width=0.3))
        parts.append(_arrow(arc[-3], arc[-1]))
        turned.angle = view.angle * 0.5
        x, y = turned.at(radius + 3.0, 0.0)
        side = view.n[0] or view.across[0]
        if not view.n[0]:  # an upright axis: beside both
            x, y = arc[-1][0] + 2.0 * side, arc[-1][1]
        anchor = "end" if side < 0.0 else "start"
        parts.append(words((x, y + 1.0), show_angle(abs(head.tilt), "dms", 0), size=SIZE, anchor=anchor))
    return parts


def _arrow(tail: Point, tip: Point) -> str:
    span = math.hypot(tip[0] - tail[0], tip[1] - tail[1]) or 1.0
    ux, uy = (tip[0] - tail[0]) / span, (tip[1] - tail[1]) / span
    back = (tip[0] - 2.6 * ux, tip[1] - 2.6 * uy)
    return polygon([tip, (back[0] - 0.9 * uy, back[1] + 0.9 * ux), (back[0] + 0.9 * uy, back[1] - 0.9 * ux)])


def _bench(stand: Stand, setup: Setup, found: Review) -> list[str]:
    """The table where it is seen from the side, and what the view is."""
    _name, machine = machine_of(found.loaded, setup)
    cutter = machine.cutter_stands if machine is not None else ""
    leans = setup.head.leans if setup.head is not None else None
    texts = [f"you stand on the cutter's side ({cutter})" if cutter != "above" else "you look down, as the cutter does"]
    if leans:
        texts[0] += f", the head leans {leans}"
    parts = [words((5.0, TOP + 3.0), texts[0], size=SIZE)]
    if stand.up == (0, 0, 1):
        y = TOP + 74.0
        parts += [line((12.0, y), (112.0, y), width=0.5), words((112.0, y - 1.2), "table", size=SIZE, anchor="end")]
    return parts


# -- the place from above --------------------------------------------------------------------------------------------


def _plan(stand: Stand, leans: str) -> list[str]:
    """Head, wheel, cutter and operator from above."""
    middle = (150.0, TOP + 27.0)
    parts = [
        rectangle((126.0, middle[1] - 20.0), 48.0, 40.0, width=0.25),
        words((150.0, middle[1] - 21.5), "from above: back", size=SIZE, anchor="middle"),
        words((150.0, middle[1] + 24.0), "front", size=SIZE, anchor="middle"),
    ]
    n = (stand.nose[0], stand.nose[1])
    head = (middle[0] - 8.0 * n[0], middle[1] + 8.0 * n[1])
    wheel = (head[0] + 13.0 * n[0], head[1] - 13.0 * n[1])
    parts.append(rectangle((head[0] - 4.0, head[1] - 4.0), 8.0, 8.0, fill="#d9d9d9", width=0.35))
    if n != (0, 0):
        parts += [line(head, wheel, width=0.5), _arrow(head, (wheel[0] - 1.5 * n[0], wheel[1] + 1.5 * n[1]))]
        half = (4.5 * abs(n[1]) + 1.2 * abs(n[0]), 4.5 * abs(n[0]) + 1.2 * abs(n[1]))
        parts.append(
            rectangle((wheel[0] - half[0], wheel[1] - half[1]), 2.0 * half[0], 2.0 * half[1], fill="white", width=0.35)
        )
    else:
        parts += [circle(wheel, 4.5, width=0.35)]
    c = (stand.cutter[0], stand.cutter[1])
    cutter = (wheel[0] + 9.0 * c[0], wheel[1] - 9.0 * c[1])
    parts.append(circle(cutter, 2.0, fill="#555555"))
    if c != (0, 0):
        you = (wheel[0] + 15.5 * c[0], wheel[1] - 15.5 * c[1])
        parts.append(_arrow((you[0] + c[0], you[1] - c[1]), (you[0] - 2.0 * c[0], you[1] + 2.0 * c[1])))
    y = middle[1] + 30.0
    parts += [
        rectangle((126.0, y - 2.6), 3.0, 3.0, fill="#d9d9d9", width=0.35),
        words((131.0, y), "head, line to its nose", size=SIZE),
        rectangle((126.8, y + 2.2), 1.4, 3.4, fill="white", width=0.35),
        words((131.0, y + 5.0), "wheel", size=SIZE),
        circle((127.5, y + 9.0), 1.5, fill="#555555"),
        words((131.0, y + 10.0), "cutter", size=SIZE),
        polygon([(126.0, y + 12.9), (126.0, y + 15.1), (129.0, y + 14.0)]),
        words((131.0, y + 15.0), "you look this way", size=SIZE),
    ]
    return parts


def _dot(a: Sequence[int], b: Sequence[int]) -> int:
    return sum(x * y for x, y in zip(a, b, strict=True))


def _cross(a: Vector, b: Vector) -> Vector:
    return (a[1] * b[2] - a[2] * b[1], a[2] * b[0] - a[0] * b[2], a[0] * b[1] - a[1] * b[0])
