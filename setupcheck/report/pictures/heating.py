"""`heating-<op>`: the temperatures of hub and shaft over time, from oven and cold to where the joint has closed.

The curves are those of the review's own functions, so they pass through the numbers of its heating plan. degC, s, mm of paper.
"""

from __future__ import annotations

import math
from collections.abc import Iterator
from functools import partial
from typing import TYPE_CHECKING

from setupcheck.jobfile.setups import Join
from setupcheck.notation import show
from setupcheck.quantities.book import Answer, Known, Open, Scope
from setupcheck.quantities.joining import JointSizes
from setupcheck.quantities.joint_heat import unheated
from setupcheck.quantities.on_the_way import Body, hub_body, over_each_other, shaft_body
from setupcheck.quantities.pairing import Pair
from setupcheck.record import record
from setupcheck.report.joint import fitted, has_play
from setupcheck.report.pictures import Picture
from setupcheck.report.pictures.axes import (
    DASHES,
    DOT_DASH,
    DOTS,
    EDGE,
    HEAD,
    LINE,
    SHEET,
    SIZE,
    Scale,
    across,
    apart,
    area,
    shortened,
    told,
    upright,
)
from setupcheck.report.svg import THICK, Point, line, picture, polyline, words
from setupcheck.report.wording import clean

if TYPE_CHECKING:
    from setupcheck.flow import Review

TOP, BOTTOM = 22.0, 58.0
"""Upper and lower edge of both fields [mm]. Our choice."""
NEAR, FAR = (17.0, 58.0), (68.0, 116.0)
"""The field of the carry and the field of what lies beyond, from left to right [mm]. Our choice."""
SAID_AT = 120.0
"""Where the words of the levels begin [mm]. Our choice."""
THICKEST = 0.5
"""Line width of the coldest hub, the one that counts [mm]. Our choice."""
POINTS, FEW = 16, 6
"""Points of one curve in the far field and in the near one. Our choice: a curve that cools is smooth."""
UNKNOWN_CARRY, UNKNOWN_SPAN = 60.0, 600.0
"""Seconds drawn where the job states no carry, and where nothing ends within sight. Our choice."""
LEVELS = (
    ("heat.cap", "the hub stands, most"),
    ("heat.planned_high", "from the oven, most"),
    ("heat.planned_low", "from the oven, least"),
    ("heat.needed", "tightest pair needs"),
    ("heat.bites_at", "tightest pair bites"),
)
"""Lines across both fields, and their words."""
CAUTIONS = ("hot-part", "cold-part-and-frost")
"""Cautions that stand under the picture, in the review's words."""
FROM = {"hot-plate": "hot plate", "oil-bath": "oil bath", "induction": "heater", "flame": "flame"}
"""What stands for the oven where it is none."""


@record(eq=False)
class Course:
    """All that the picture shows of one joint, times from oven and cold [s], temperatures [degC].

    hub, hottest, shaft  None where nothing tells them;  carry, window, wanted, bite  None where there is none
    levels               name of quantity, temperature;  missing  what to fill
    """

    op: int
    title: str
    air: float
    hub: Body | None
    hottest: Body | None
    shaft: Body | None
    carry: float | None
    window: float | None
    wanted: float | None
    bite: float | None
    levels: tuple[tuple[str, float], ...]
    missing: tuple[str, ...]
    source: str
    chilled: bool


def offered(found: Review) -> Iterator[Picture]:
    """One picture for each joint with heat or cold."""
    for scope, join in fitted(found):
        room = found.loaded.job.room
        heated = join.by == "shrink" and join.heat is not None
        chilled = join.heat is not None and join.heat.chills(room)
        if scope.op is not None and (heated or chilled) and not has_play(found, scope) and not _porous(found, scope):
            title = f"Op {scope.op}: {'heat' if heated and not _cold_alone(found, join) else 'cold'} over time"
            yield Picture(f"heating-{scope.op}", title, partial(drawn, found, scope, join))


def _cold_alone(found: Review, join: Join) -> bool:
    return join.heat is not None and join.heat.by_cold_alone(found.loaded.job.room)


def _porous(found: Review, scope: Scope) -> bool:
    """As the heating plan has it: no plan of heat makes pores good."""
    kind = found.book.get("fit.elastic_kind", scope)
    return isinstance(kind, Known) and kind.value == "porous"


def course(found: Review, scope: Scope, join: Join) -> Course:
    """The numbers of the picture, all from the review's own quantities and functions."""
    missing: dict[str, None] = {}

    def value(name: str) -> float | None:
        answer = found.book.get(name, scope)
        if isinstance(answer, Open):
            missing.update(dict.fromkeys(answer.missing or ((answer.because,) if answer.because else ())))
        return float(answer.value) if isinstance(answer, Known) and isinstance(answer.value, int | float) else None

    op, heat = scope.op or 0, join.heat
    assert heat is not None, "only a joint with heat or cold is offered"
    chilled = heat.chills(found.loaded.job.room)
    levels = tuple((name, t) for name, _ in LEVELS if (t := value(name)) is not None)
    at = dict(levels)
    hub, hottest = _hubs(found, scope, join, at)
    shaft = shaft_body(found.floor, join, op)
    if isinstance(shaft, Open):
        missing.update(dict.fromkeys(shaft.missing))
    return Course(
        op=op,
        title=_title(found, join, op),
        air=found.loaded.job.room,
        hub=hub,
        hottest=hottest,
        shaft=shaft if isinstance(shaft, Body) else None,
        carry=value("heat.carry") if join.by == "shrink" else heat.carry,
        window=value("heat.window"),
        wanted=value("heat.carry_allowed"),
        bite=value("heat.carry_until_bite"),
        levels=levels,
        missing=tuple(missing),
        source=FROM.get(heat.by or "", "oven"),
        chilled=chilled,
    )


def _title(found: Review, join: Join, op: int) -> str:
    outer, inner = found.loaded.ref(join.outer).part, found.loaded.ref(join.inner).part
    return f"Op {op}: {outer} on {inner}, temperatures on the way"


def _hubs(found: Review, scope: Scope, join: Join, at: dict[str, float]) -> tuple[Body | None, Body | None]:
    """The coldest hub (least heat, dull) and the hottest (most heat, bright); one that nothing heats keeps its temperature."""
    if join.by != "shrink":
        return None, None
    if _cold_alone(found, join):
        return Body(unheated(join, found.loaded.job.room), None), None
    pair, even = _value(found.book.get("fit.pair", scope)), _value(found.book.get("heat.biot", scope))
    if not isinstance(pair, Pair) or even is None:
        return None, None
    low, high = at.get("heat.planned_low"), at.get("heat.planned_high")
    coldest = hub_body(pair, low, dull=True) if low is not None else None
    return coldest, hub_body(pair, high, dull=False) if high is not None else None


def _value(answer: Answer) -> object:
    return answer.value if isinstance(answer, Known) else None


def closing(found: Review, scope: Scope, join: Join, made: Course) -> list[tuple[float, float, float]]:
    """Seconds from leaving the oven, hub, shaft [degC] from arrival until it may bite, nothing touching; may be empty."""
    pair, sizes = (_value(found.book.get(name, scope)) for name in ("fit.pair", "fit.sizes"))
    at_shaft, shaft_at = (_value(found.book.get(f"heat.{name}", scope)) for name in ("at_shaft", "shaft_at"))
    if not (isinstance(pair, Pair) and isinstance(sizes, JointSizes)):
        return []
    if not (isinstance(at_shaft, int | float) and isinstance(shaft_at, int | float)):
        return []
    if made.carry is None or made.window is None or not math.isfinite(made.window):
        return []
    rows = over_each_other(
        found.floor,
        join,
        pair,
        sizes,
        at_shaft=float(at_shaft),
        shaft_at=float(shaft_at),
        window=made.window,
        op=made.op,
        steps=FEW,
    )
    return [(made.carry + seconds, *both) for seconds, *both in rows]  # type: ignore[misc]


def drawn(found: Review, scope: Scope, join: Join) -> str:
    """The SVG."""
    made = course(found, scope, join)
    touching = closing(found, scope, join, made)
    near, far = _spans(made)
    low, high = _temperatures(made, touching)
    up = Scale(low, high, BOTTOM, TOP)
    fields = [(Scale(0.0, near, *NEAR), near), (Scale(0.0, far, *FAR), far)]
    parts = [words((EDGE, 6.5), shortened(made.title, SHEET - 2.0 * EDGE, HEAD), size=HEAD, bold=True)]
    parts += told((EDGE, 11.5), _says(made), SHEET - 2.0 * EDGE, most=2)
    parts += _field_names(made)
    parts += upright(up, NEAR[0], 6)
    parts += [words((EDGE, TOP - 2.2), "degC", size=SIZE)]
    for scale, _ in fields:
        parts += _curves(made, scale, up)
        parts += across(scale, BOTTOM, 4, TOP)
    parts += _closing(touching, fields[0][0], up)
    parts += _levels(made, up)
    moments = _moments(found, scope, made)
    parts += _moment_lines(moments, fields)
    y = _key(parts, made, moments, touching)
    for text in _cautions(found, made):
        rows = told((EDGE, y), text, SHEET - 2.0 * EDGE, most=4)
        parts += rows
        y += LINE * len(rows)
    return picture(SHEET, y - LINE + 2.5, title=clean(f"{made.title}. {_says(made)}"), parts=parts) + "\n"


def _says(made: Course) -> str:
    if made.missing:
        shown = ", ".join(made.missing[:3]) + (" \u2026" if len(made.missing) > 3 else "")
        return f"open: fill {shown}"
    if made.hub is None or made.hub.ring is None:
        return "What the chilled shaft gains on its way in still air. Worked out, not measured: trust gauge and probe."
    return (
        "Still air, from the moment the hub leaves the heat; on the right the same, should it be kept waiting. Draught, "
        "tongs and a cold bench take more."
    )


def _field_names(made: Course) -> list[str]:
    return [
        words((NEAR[0], BOTTOM + 9.2), "s: the way to the shaft", size=SIZE),
        words((FAR[0], BOTTOM + 9.2), "s: kept in still air", size=SIZE),
    ]


def _spans(made: Course) -> tuple[float, float]:
    """Seconds of both fields."""
    there = (made.carry if made.carry is not None else UNKNOWN_CARRY) or 1.0
    after = made.window if made.window is not None and math.isfinite(made.window) else there / 2.0
    ends = [t for t in (made.wanted, made.bite) if t is not None]
    near = 1.15 * (there + after)
    return near, max(1.12 * max(ends, default=UNKNOWN_SPAN), 1.5 * near)


def _temperatures(made: Course, closing: list[tuple[float, float, float]]) -> tuple[float, float]:
    """From the coldest to the hottest thing drawn, with a little room."""
    seen = [t for _, t in made.levels] + [b.start for b in (made.hub, made.hottest, made.shaft) if b is not None]
    seen += [made.air, *(t for _, *both in closing for t in both)]
    room = 0.05 * max(max(seen) - min(seen), 20.0)
    return min(seen) - room, max(seen) + room


def _curves(made: Course, scale: Scale, up: Scale) -> list[str]:
    def curve(body: Body) -> list[Point]:
        count = (POINTS if scale.start == FAR[0] else FEW) if body.ring is not None else 1
        times = [scale.high * i / count for i in range(count + 1)]
        return [(round(scale.put(t), 2), round(up.put(body.at(t, made.air)), 2)) for t in times]

    parts = []
    if made.hub is not None and made.hottest is not None and made.hub.ring is not None:
        parts.append(area([*curve(made.hottest), *reversed(curve(made.hub))]))
    if made.hottest is not None:
        parts.append(polyline(curve(made.hottest), width=THICK))
    if made.hub is not None:
        parts.append(polyline(curve(made.hub), width=THICKEST))
    if made.shaft is not None:
        parts.append(polyline(curve(made.shaft), width=THICKEST, dashes=DOT_DASH))
    return parts


def _closing(rows: list[tuple[float, float, float]], scale: Scale, up: Scale) -> list[str]:
    if not rows:
        return []
    return [
        polyline(
            [(round(scale.put(t), 2), round(up.put(both[k]), 2)) for t, *both in rows], width=THICKEST, dashes=DASHES
        )
        for k in (0, 1)
    ]


def _levels(made: Course, up: Scale) -> list[str]:
    """A line across both fields for each level, its words to the right of them."""
    named = dict(LEVELS)
    rows = [(t, f"{show(t, 'degC', 0)} {named[name].replace('oven', made.source)}", False) for name, t in made.levels]
    if made.shaft is not None and made.shaft.ring is None:
        rows.append((made.shaft.start, f"{show(made.shaft.start, 'degC', 0)} shaft", True))
    elif made.shaft is not None:
        rows.append((made.shaft.start, f"{show(made.shaft.start, 'degC', 0)} shaft at first", True))
    heights = apart([up.put(t) for t, *_ in rows], TOP, BOTTOM)
    parts = []
    for (t, text, quiet), height in zip(rows, heights, strict=True):
        y = up.put(t)
        if not quiet:
            for left, right in (NEAR, FAR):
                parts.append(line((left, y), (right, y), dashes=DOTS if "from" in text else ""))
        parts.append(line((FAR[1], y), (SAID_AT - 0.8, height)))
        parts.append(words((SAID_AT, height + 1.05), shortened(text, SHEET - EDGE - SAID_AT), size=SIZE))
    return parts


def _moments(found: Review, scope: Scope, made: Course) -> list[tuple[int, float, str]]:
    """Field, time, and words of each moment, in their order."""

    def says(name: str) -> str:
        answer = found.book.get(name, scope)
        if not isinstance(answer, Known):
            return ""
        return show(float(answer.value), found.book.unit(name, scope), found.book.digits(name, scope))  # type: ignore[arg-type]

    rows: list[tuple[int, float, str]] = []
    if made.carry is not None:
        hot = says("heat.at_shaft")
        has = f", the hub still has {hot}" if hot and made.hub is not None and made.hub.ring is not None else ""
        at_shaft, needed = (_value(found.book.get(f"heat.{name}", scope)) for name in ("at_shaft", "needed"))
        if isinstance(at_shaft, float) and isinstance(needed, float) and at_shaft < needed:
            has = f", the hub has {hot}: TOO COLD"
        rows.append((0, made.carry, f"{show(made.carry, 's', 0)}: at the shaft{has}"))
    if made.carry is not None and made.window is not None and math.isfinite(made.window):
        rows.append((0, made.carry + made.window, f"{says('heat.window')} later: over the shaft it may bite"))
    if made.wanted is not None:
        rows.append((1, made.wanted, f"{says('heat.carry_allowed')}: the wanted play ends"))
    if made.bite is not None:
        rows.append((1, made.bite, f"{says('heat.carry_until_bite')}: the tightest pair has no play"))
    return rows


def _moment_lines(moments: list[tuple[int, float, str]], fields: list[tuple[Scale, float]]) -> list[str]:
    """A line down each field with a letter on top."""
    parts = []
    for field, (scale, _) in enumerate(fields):
        mine = [(letter, t) for letter, (where, t, _) in zip("ABCD", moments, strict=False) if where == field]
        places = apart([scale.put(t) for _, t in mine], scale.start, scale.end, 3.6)
        for (letter, t), at in zip(mine, places, strict=True):
            x = scale.put(t)
            parts.append(line((x, TOP - 0.5), (x, BOTTOM), dashes=DASHES))
            parts.append(line((at, TOP - 1.4), (x, TOP - 0.5)))
            parts.append(words((at, TOP - 2.0), letter, size=SIZE, anchor="middle", bold=True))
    return parts


def _key(
    parts: list[str], made: Course, moments: list[tuple[int, float, str]], closing: list[tuple[float, float, float]]
) -> float:
    """Under the fields: what the lines are, and the moments by their letters; where the next line may stand."""
    kinds: list[tuple[float, str, str]] = []
    if made.hub is not None:
        heated = made.hub.ring is not None
        kinds.append((THICKEST, "", "coldest hub: least heat, dull" if heated else "hub, not heated"))
    if made.hottest is not None:
        kinds.append((THICK, "", "hottest hub: most heat, bright"))
    if closing:
        kinds.append(
            (THICKEST, DASHES, "over it, shaft at its coldest" if made.chilled else "over each other, not touching")
        )
    if made.shaft is not None:
        kinds.append((THICKEST, DOT_DASH, "shaft, chilled, at its warmest" if made.chilled else "shaft"))
    y = BOTTOM + 14.5
    for i, (width, dashes, text) in enumerate(kinds):
        at = y + i * LINE
        parts.append(polyline([(EDGE, at - 1.0), (EDGE + 11.0, at - 1.0)], width=width, dashes=dashes))
        parts.append(words((EDGE + 13.0, at), text, size=SIZE))
    for i, (letter, (_, _, text)) in enumerate(zip("ABCD", moments, strict=False)):
        at = y + i * LINE
        parts.append(words((80.0, at), letter, size=SIZE, bold=True))
        parts.append(words((84.0, at), shortened(text, SHEET - EDGE - 84.0), size=SIZE))
    return y + max(len(kinds), len(moments)) * LINE + 1.0


def _cautions(found: Review, made: Course) -> list[str]:
    """The review's own cautions of the hot part and of the cold one."""
    mine = {c.id: c.text for c in found.evaluation.cautions if c.op == made.op}
    return [f"Caution: {mine[name]}" for name in CAUTIONS if name in mine]
