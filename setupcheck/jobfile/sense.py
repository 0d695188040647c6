"""What the sizes of a job file say against each other: a bore larger than its cylinder, a limit in the wrong kind of unit.

Only what is certainly wrong; what an error budget may bear is for the rules. Works on the entries that could be read, so
that these mistakes are told beside all others of the file. Sizes mm.
"""

from __future__ import annotations

import math
from collections.abc import Callable, Iterator, Mapping

from setupcheck.jobfile.asked import Require
from setupcheck.jobfile.models import Flat, Pattern, Round, Surface, Throat, Toothing
from setupcheck.jobfile.names import Miss, Ref, Uses, find_surface
from setupcheck.jobfile.types import size_shown
from setupcheck.record import record

TOUCH = 1e-6  # mm; two lengths that only touch do not overlap: far below every size, far above rounding; our choice

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

_BETWEEN_GAPS = (
    "cumulative-pitch", "single-pitch", "gap-centre-pitch", "index-range", "index-within", "on-workpiece", "chord",
)  # fmt: skip
"""Figures that compare one tooth, gap or hole with another."""

_ONE = {"teeth": "tooth", "holes": "hole", "slot": "slot", "lines": "line"}

_DATUMS = {
    "centre": (
        "cylinder, bore, taper, thread, centre, throat, teeth, holes, lines",
        "centred on",
        "a cylinder or a bore",
    ),
    "square": ("face", "squared on", "a face"),
    "stop": ("face, centre", "stopped on", "a face"),
    "clock": ("teeth, holes, slot, lines", "clocked on", "a slot, a hole pattern or a toothing"),
}
"""For each step of a hold: kinds of surface it can be set on, what it does, what to write."""


@record
class _Outside:
    """An outside surface of revolution: its stretch and size, and whether it is stock or taken away by a cut.

    sure  it is outside beyond doubt: a taper or thread may as well be cut in a bore, the job file does not say
    """

    name: str
    sure: bool
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
        return size_shown(mm, units)

    for part, surfaces in parts.items():
        for key, message in _part(part, surfaces, uses, shown):
            yield Miss(("parts", part, "surfaces", *key), message)
    yield from _holds(parts, uses)
    for i, asked in require.items():
        yield from _require(i, asked)
        yield from _pitch(i, asked, parts)
        yield from _dial(i, asked, parts)


def _part(
    part: str, surfaces: Mapping[str, Surface], uses: Uses, shown: Callable[[float], str]
) -> Iterator[tuple[tuple[str, str], str]]:
    """((surface, key), message) of what is wrong in the sizes of one part."""
    outsides = [
        _Outside(
            name, s.kind == "cylinder", s.low, s.high, s.diameter.value, s.made == "stock", (part, name) in uses.removed
        )
        for name, s in surfaces.items()
        if isinstance(s, Round) and s.kind != "bore"
    ]
    ends = _ends([s for name, s in surfaces.items() if s.made != "stock" and (part, name) not in uses.removed])
    for name, surface in surfaces.items():
        key, message = "diameter", None
        match surface:
            case Round(kind="bore"):
                message = _bore(surface, outsides, ends, shown)
            case Round(made=None) if (part, name) in uses.cut:
                message = _cylinder(surface, outsides, shown)
            case Flat():
                key, message = "hole", _face(surface, shown)
            case Throat():
                message = _throat(surface, outsides, shown)
            case Toothing():
                key, message = "width", _teeth(surface, outsides, shown)
            case Pattern(kind="holes"):
                message = _holes(surface, shown)
        if message is not None:
            yield (name, key), message
        elif isinstance(surface, Round) and (wrong := _letter(surface)):
            yield (name, "diameter"), wrong


def _letter(surface: Round) -> str | None:
    """A class of the other kind: capitals are for holes, small letters for shafts (ISO 286)."""
    fit = surface.diameter.fit
    if fit is None or surface.kind not in ("bore", "cylinder") or fit[0].isupper() == (surface.kind == "bore"):
        return None
    says = "capitals are for holes" if surface.kind == "cylinder" else "small letters are for shafts"
    return f"{fit} is no class of a {surface.kind}: {says}. Write {fit.swapcase()}, or the limits"


def _ends(surfaces: list[Surface]) -> tuple[float, float]:
    """Lowest and highest place that finished surfaces of a part reach [mm]."""
    heights = [h for s in surfaces for h in ((s.low, s.high) if isinstance(s, Round) else (s.at,))]
    return (min(heights), max(heights)) if heights else (math.inf, -math.inf)


def _overlap(a: Round | _Outside, b: Round | _Outside) -> float:
    return min(a.high, b.high) - max(a.low, b.low)


def _bore(
    bore: Round, outsides: list[_Outside], ends: tuple[float, float], shown: Callable[[float], str]
) -> str | None:
    """A bore as large as an outside surface that still stands over the same length.

    A bore that does not go through may be a recess round a spigot, if something larger stands over that length.
    """
    size = bore.diameter.value
    through = bore.low <= ends[0] + TOUCH and bore.high >= ends[1] - TOUCH
    for out in outsides:
        if not out.sure or _overlap(bore, out) <= TOUCH or size < out.diameter or (out.removed and not out.stock):
            continue
        around = [o for o in outsides if o.diameter > size and _overlap(o, out) > TOUCH]
        if around if out.stock else (not through and any(not o.removed for o in around)):
            continue
        taken = "" if out.stock else f", or removes: [{out.name}] at the cut that takes it away"
        return (
            f"a bore of {shown(size)} leaves nothing of {out.name}, which is {shown(out.diameter)} from "
            f"{shown(out.low)} to {shown(out.high)}. Write a smaller bore{taken}"
        )
    return None


def _cylinder(cylinder: Round, outsides: list[_Outside], shown: Callable[[float], str]) -> str | None:
    """An outside surface that is larger than the stock it is cut from."""
    stock = [o for o in outsides if o.stock and _overlap(o, cylinder) > TOUCH]
    if not stock or cylinder.diameter.value <= max(o.diameter for o in stock) + TOUCH:
        return None
    largest = max(stock, key=lambda o: o.diameter)
    return (
        f"{shown(cylinder.diameter.value)} cannot be cut from {largest.name}, which is {shown(largest.diameter)}. "
        "Write a larger stock, or a smaller diameter"
    )


def _face(face: Flat, shown: Callable[[float], str]) -> str | None:
    if face.diameter is None or face.hole is None or face.hole < face.diameter:
        return None
    return f"a hole of {shown(face.hole)} leaves nothing of a face of {shown(face.diameter)}. Write a smaller hole"


def _at(outsides: list[_Outside], z: float) -> list[_Outside]:
    """Outside surfaces at a place: the finished ones that stand there, the stock where there is none."""
    there = [o for o in outsides if o.low - TOUCH <= z <= o.high + TOUCH and not o.removed]
    return [o for o in there if not o.stock] or there


def _throat(throat: Throat, outsides: list[_Outside], shown: Callable[[float], str]) -> str | None:
    """A throat that lies outside the metal."""
    there = _at(outsides, throat.at)
    if not any(o.sure for o in there) or throat.diameter < max(o.diameter for o in there):
        return None
    rim = max(there, key=lambda o: o.diameter)
    return (
        f"a throat of {shown(throat.diameter)} takes nothing off {rim.name}, which is {shown(rim.diameter)} there. "
        "Write a smaller throat"
    )


def _teeth(teeth: Toothing, outsides: list[_Outside], shown: Callable[[float], str]) -> str | None:
    """Teeth that run out over a place where the part is smaller than their circle, though it is larger at their middle."""
    if teeth.width is None or not any(o.diameter > teeth.on_circle for o in _at(outsides, teeth.at)):
        return None
    for side in (-1.0, 1.0):
        end = teeth.at + side * teeth.width / 2.0
        there = _at(outsides, end - side * 10.0 * TOUCH)
        if any(o.sure for o in there) and all(o.diameter < teeth.on_circle for o in there):
            hub = max(there, key=lambda o: o.diameter)
            return (
                f"teeth of {shown(teeth.width)} run to {shown(end)}, where the part is {hub.name} with "
                f"{shown(hub.diameter)}, inside their circle of {shown(teeth.on_circle)}. Write a smaller width"
            )
    return None


def _holes(holes: Pattern, shown: Callable[[float], str]) -> str | None:
    """Holes that run into each other: the chord of neighbours, D sin(pi/n), is not above the hole's diameter."""
    if holes.count < 2 or holes.diameter is None or holes.on_circle * math.sin(math.pi / holes.count) > holes.diameter:
        return None
    return (
        f"{holes.count} holes of {shown(holes.diameter)} run into each other on a circle of {shown(holes.on_circle)}. "
        "Write a smaller diameter, fewer holes or a larger circle"
    )


def _holds(parts: Mapping[str, Mapping[str, Surface]], uses: Uses) -> Iterator[Miss]:
    for path, part, name in uses.held:
        surface = parts.get(part, {}).get(name)
        kinds, does, advice = _DATUMS[str(path[-2]).removeprefix("and_")]
        if surface is not None and surface.kind not in kinds.split(", "):
            yield Miss(path, f"the part cannot be {does} {name}, a {surface.kind}. Write {advice}")


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
    if asked.grade is not None and asked.of is None:
        yield Miss(("require", i, "grade"), "a grade needs the teeth it speaks of. Write of: wheel.teeth")
    if asked.of is not None and asked.of == asked.about:
        yield Miss(("require", i, "about"), f"{asked.of} about itself is always zero. Write the surface it refers to")


def _pitch(i: int, asked: Require, parts: Mapping[str, Mapping[str, Surface]]) -> Iterator[Miss]:
    """A figure from one gap or hole to the next, asked of a single one."""
    if asked.what not in _BETWEEN_GAPS or asked.of is None:
        return
    ref = find_surface(asked.of, {part: tuple(surfaces) for part, surfaces in parts.items()})
    surface = parts[ref.part][ref.surface] if isinstance(ref, Ref) else None
    if isinstance(surface, Toothing | Pattern) and surface.count == 1:
        yield Miss(
            ("require", i, "of"),
            f"{asked.of} is a single {_ONE[surface.kind]}, which has no {asked.what}. "
            "Write a toothing or a pattern of two or more",
        )


_OF_AXES, _OF_FACES = ("run-out", "coaxial"), ("face-run-out",)


def _dial(i: int, asked: Require, parts: Mapping[str, Mapping[str, Surface]]) -> Iterator[Miss]:
    """A run-out of a face, or a face run-out of something round: the dial stands the other way."""
    if asked.what not in (*_OF_AXES, *_OF_FACES) or asked.of is None:
        return
    ref = find_surface(asked.of, {part: tuple(surfaces) for part, surfaces in parts.items()})
    surface = parts[ref.part][ref.surface] if isinstance(ref, Ref) else None
    if surface is None:
        return
    if surface.kind == "face" and asked.what in _OF_AXES and asked.at is None:  # with `at`, its axis carried there
        yield Miss(("require", i, "what"), f"{asked.of} is a face, which has no {asked.what}. Write face-run-out")
    elif surface.kind != "face" and asked.what in _OF_FACES:
        yield Miss(
            ("require", i, "what"),
            f"{asked.of} is no face, and has no face run-out. Write run-out, or squareness for a lean",
        )


def _a(kind: str) -> str:
    spoken = {"number": "bare number", "fraction": "share"}.get(kind, kind.replace("_", " "))
    return f"{'an' if spoken[0] in 'aeiou' else 'a'} {spoken}"
