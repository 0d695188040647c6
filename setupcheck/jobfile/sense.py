"""What the sizes of a job file say against each other: a bore larger than its cylinder, a limit in the wrong kind of unit.

Only what is certainly wrong; what an error budget may bear is for the rules. Works on the entries that could be read, so
that these mistakes are told beside all others of the file. Sizes mm.
"""

from __future__ import annotations

import math
from collections.abc import Callable, Iterator, Mapping
from dataclasses import dataclass

from setupcheck.jobfile.models import Flat, Pattern, Require, Round, Surface, Throat, Toothing
from setupcheck.jobfile.names import Miss, Uses
from setupcheck.notation import plain

TOUCH = 1e-6  # mm; two lengths that only touch do not overlap: far below every size, far above rounding; our choice
INCH = 25.4  # mm, exactly

LIMIT_KIND = {
    "index-range": "angle",
    "index-within": "angle",
    "torque": "torque",
    "contact-length": "fraction",
    "contact-area": "fraction",
}
"""Kind of unit that the limit of a figure has; all others have a length, `squareness` without `across` an angle."""

LIMIT_EXAMPLE = {"length": "40 um", "angle": '75"', "torque": "40 N m", "fraction": "25 %"}
MAY_BE_NEGATIVE = ("length", "allowance", "backlash", "pitch-circle")
"""Figures with a sign; all others are a full movement, a range or a share and never below zero."""

_FITS = {
    "square": (("face",), "Write a face that the part is squared on"),
    "stop": (("face", "centre"), "Write a face that the part is stopped on"),
    "clock": (("teeth", "holes", "slot"), "Write a slot, a hole pattern or a toothing"),
}


@dataclass(frozen=True, slots=True)
class _Outside:
    """An outside surface of revolution: its stretch and size, and whether it is stock or taken away by a cut."""

    name: str
    low: float
    high: float
    diameter: float
    stock: bool
    removed: bool


def contradictions(
    parts: Mapping[str, Mapping[str, Surface]], require: Mapping[int, Require], uses: Uses, *, units: str
) -> Iterator[Miss]:
    """All entries that contradict each other, with their places.

    parts    surfaces by part, those that could be read;  require  requirements by their number in the file
    uses     which surfaces are cut, taken away and held on;  units  of the file: messages show sizes in them
    """

    def shown(mm: float) -> str:
        return f"{plain(round(mm / INCH, 6))} in" if units == "in" else f"{plain(round(mm, 6))} mm"

    for part, surfaces in parts.items():
        for path, message in _part(part, surfaces, uses, shown):
            yield Miss(("parts", part, "surfaces", *path), message)
    yield from _holds(parts, uses)
    for i, asked in require.items():
        yield from _require(i, asked)


Found = Iterator[tuple[tuple[str, ...], str]]


def _part(part: str, surfaces: Mapping[str, Surface], uses: Uses, shown: Callable[[float], str]) -> Found:
    outsides = [
        _Outside(name, s.low, s.high, s.diameter.value, s.made == "stock", (part, name) in uses.removed)
        for name, s in surfaces.items()
        if isinstance(s, Round) and s.kind != "bore" and not (s.kind == "thread" and _inside(s, surfaces))
    ]
    kept = [s for name, s in surfaces.items() if s.made != "stock" and (part, name) not in uses.removed]
    ends = _ends(kept)
    for name, surface in surfaces.items():
        if isinstance(surface, Round) and surface.kind == "bore":
            yield from _bore(name, surface, outsides, ends, shown)
        elif isinstance(surface, Round) and surface.made is None and (part, name) in uses.cut:
            yield from _cylinder(name, surface, outsides, shown)
        elif isinstance(surface, Flat) and surface.diameter and surface.hole and surface.hole >= surface.diameter:
            yield (name, "hole"), (
                f"a hole of {shown(surface.hole)} leaves nothing of a face of {shown(surface.diameter)}. "
                "Write a smaller hole"
            )
        elif isinstance(surface, Throat):
            yield from _throat(name, surface, outsides, shown)
        elif isinstance(surface, Toothing):
            yield from _teeth(name, surface, outsides, shown)
        elif isinstance(surface, Pattern):
            yield from _holes(name, surface, shown)


def _inside(thread: Round, surfaces: Mapping[str, Surface]) -> bool:
    """A thread whose stretch is that of a bore it may be cut in; a job file does not say which side it is on."""
    return any(
        isinstance(s, Round) and s.kind == "bore" and _overlap(s, thread) > TOUCH for s in surfaces.values()
    )


def _ends(surfaces: list[Surface]) -> tuple[float, float]:
    """Lowest and highest place that finished surfaces of a part reach [mm]."""
    heights = [h for s in surfaces for h in ((s.low, s.high) if isinstance(s, Round) else (s.at,))]
    return (min(heights), max(heights)) if heights else (math.inf, -math.inf)


def _overlap(a: Round | _Outside, b: Round | _Outside) -> float:
    return min(a.high, b.high) - max(a.low, b.low)


def _bore(
    name: str, bore: Round, outsides: list[_Outside], ends: tuple[float, float], shown: Callable[[float], str]
) -> Found:
    """A bore as large as an outside surface that still stands over the same length.

    A bore that does not go through may be a recess round a spigot, if something larger stands over that length.
    """
    size = bore.diameter.value
    through = bore.low <= ends[0] + TOUCH and bore.high >= ends[1] - TOUCH
    for out in outsides:
        if _overlap(bore, out) <= TOUCH or size < out.diameter or (out.removed and not out.stock):
            continue
        larger = [o for o in outsides if o.diameter > size and _overlap(o, out) > TOUCH and (out.stock or not o.removed)]
        if larger and (out.stock or not through):
            continue
        yield (name, "diameter"), (
            f"a bore of {shown(size)} leaves nothing of {out.name}, which is {shown(out.diameter)} from "
            f"{shown(out.low)} to {shown(out.high)}. Write a smaller bore"
            + ("" if out.stock else f", or removes: [{out.name}] at the cut that takes it away")
        )
        return


def _cylinder(name: str, cylinder: Round, outsides: list[_Outside], shown: Callable[[float], str]) -> Found:
    """An outside surface that is larger than the stock it is cut from."""
    stock = [o for o in outsides if o.stock and _overlap(o, cylinder) > TOUCH]
    if stock and cylinder.diameter.value > max(o.diameter for o in stock) + TOUCH:
        largest = max(stock, key=lambda o: o.diameter)
        yield (name, "diameter"), (
            f"{shown(cylinder.diameter.value)} cannot be cut from {largest.name}, which is {shown(largest.diameter)}. "
            "Write a larger stock, or a smaller diameter"
        )


def _at(outsides: list[_Outside], z: float) -> list[_Outside]:
    """Outside surfaces at a place: the finished ones that stand there, the stock where there is none."""
    there = [o for o in outsides if o.low - TOUCH <= z <= o.high + TOUCH and not o.removed]
    return [o for o in there if not o.stock] or there


def _throat(name: str, throat: Throat, outsides: list[_Outside], shown: Callable[[float], str]) -> Found:
    there = _at(outsides, throat.at)
    if there and throat.diameter >= max(o.diameter for o in there):
        rim = max(there, key=lambda o: o.diameter)
        yield (name, "diameter"), (
            f"a throat of {shown(throat.diameter)} takes nothing off {rim.name}, which is {shown(rim.diameter)} there. "
            "Write a smaller throat"
        )


def _teeth(name: str, teeth: Toothing, outsides: list[_Outside], shown: Callable[[float], str]) -> Found:
    """Teeth that run out over a place where the part is smaller than their circle, though it is larger at their middle."""
    if teeth.width is None or not any(o.diameter > teeth.on_circle for o in _at(outsides, teeth.at)):
        return
    for side in (-1.0, 1.0):
        end = teeth.at + side * teeth.width / 2.0
        there = _at(outsides, end - side * 10.0 * TOUCH)
        if there and all(o.diameter < teeth.on_circle for o in there):
            hub = max(there, key=lambda o: o.diameter)
            yield (name, "width"), (
                f"teeth of {shown(teeth.width)} run to {shown(end)}, where the part is {hub.name} with "
                f"{shown(hub.diameter)}, inside their circle of {shown(teeth.on_circle)}. Write a smaller width"
            )
            return


def _holes(name: str, holes: Pattern, shown: Callable[[float], str]) -> Found:
    """Holes that run into each other: the chord of neighbours, D sin(pi/n), is below the hole's diameter."""
    if holes.kind == "holes" and holes.count > 1 and holes.diameter is not None:
        chord = holes.on_circle * math.sin(math.pi / holes.count)
        if chord <= holes.diameter:
            yield (name, "diameter"), (
                f"{holes.count} holes of {shown(holes.diameter)} run into each other on a circle of "
                f"{shown(holes.on_circle)}. Write a smaller diameter, fewer holes or a larger circle"
            )


def _holds(parts: Mapping[str, Mapping[str, Surface]], uses: Uses) -> Iterator[Miss]:
    for path, part, name in uses.held:
        step = str(path[-2])
        surface = parts.get(part, {}).get(name)
        if surface is None:
            continue
        if step in _FITS:
            kinds, advice = _FITS[step]
            if surface.kind not in kinds:
                yield Miss(path, f"{name} is a {surface.kind}, which is no {step} datum. {advice}")
        elif surface.kind in ("face", "slot"):
            yield Miss(path, f"{name} is a {surface.kind}, which has no axis to centre on. Write a cylinder or a bore")


def limit_kind(asked: Require) -> str:
    """Kind of unit the limits of a requirement have: length, angle, torque or fraction."""
    if asked.what == "squareness":
        return "angle" if asked.across is None else "length"
    return LIMIT_KIND.get(asked.what, "length")


def _require(i: int, asked: Require) -> Iterator[Miss]:
    kind = limit_kind(asked)
    limits: list[tuple[tuple[str | int, ...], str, float]] = []
    for key, amount in (("at_most", asked.at_most), ("at_least", asked.at_least)):
        if amount is not None:
            limits.append((("require", i, key), amount.dimension, amount.value))
    for n, amount in enumerate(asked.between or ()):
        limits.append((("require", i, "between", n), amount.dimension, amount.value))
    for path, given, value in limits:
        if given != kind and not (kind == "fraction" and given == "number"):
            yield Miss(
                path, f"a limit of {asked.what} is {_a(kind)}, not {_a(given)}. Write it as in {LIMIT_EXAMPLE[kind]}"
            )
        elif value < 0.0 and asked.what not in MAY_BE_NEGATIVE:
            yield Miss(path, f"{asked.what} is never below zero. Write a limit above zero")
        elif kind == "fraction" and value > 1.0:
            yield Miss(path, f"{asked.what} is a share of the whole. Write 100 % or less")
    if asked.at_most is not None and asked.at_least is not None and asked.at_least.value > asked.at_most.value:
        yield Miss(("require", i, "at_least"), "at_least is above at_most. Write between: [low, high]")
    if asked.of is not None and asked.of == asked.about:
        yield Miss(("require", i, "about"), f"{asked.of} about itself is always zero. Write the surface it refers to")


def _a(kind: str) -> str:
    spoken = {"number": "bare number", "fraction": "share"}.get(kind, kind.replace("_", " "))
    return f"{'an' if spoken[0] in 'aeiou' else 'a'} {spoken}"
