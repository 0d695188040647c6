"""Varied legal routes with exact numbers, whose second-order terms are small.  Lengths mm, angles rad.

Sizes are log-uniform: run-outs, offsets and shifts 1 .. 100 um, leans 0.01 .. 0.4 mrad, machine errors up to 5 um,
division up to 15".  A route whose terms of second order exceed `limit` is thrown away: the rest may be compared with a
first-order account within `limit`, or within 1.2 times its own `second_order`.
"""

from __future__ import annotations

import cmath
import math
from dataclasses import dataclass, field

import numpy as np

from .machining import run
from .measure import answers
from .route import (
    BoreSquares,
    Centre,
    CentredAndSquared,
    Clock,
    Cut,
    CutTeeth,
    Drill,
    Existing,
    FaceDial,
    FaceSquares,
    Figure,
    Join,
    Lean,
    NoClock,
    NoStop,
    Offset,
    Part,
    PointStop,
    Pushed,
    Question,
    RadialDial,
    RingStop,
    Route,
    Seat,
    Setup,
    Square,
    Surface,
    Turn,
    TwoPlanes,
    bore,
    cylinder,
    face,
    holes,
    teeth,
)

Rng = np.random.Generator
SHARP = 0.05  # the small copy of a route, against which its second-order terms show
LEVER = {"lean": 100.0, "index ccw": 50.0, "index cw": 50.0}  # mm, makes angles comparable with lengths
TOOTH_FIGURES: tuple[Figure, ...] = (
    "offset",
    "lean",
    "gaps",
    "flank ccw",
    "flank cw",
    "index ccw",
    "index cw",
    "wobble",
)
STEEPEST = 0.4e-3  # rad, of a single hold


def second_order(route: Route) -> float:
    """Largest part of any answer that does not grow in proportion to the errors [mm]; leans count on 100 mm.

    [F(1) - F(s)/s]/(1 - s) with s = 0.05: terms of first order (also one-sided ones like radius * |lean|) drop out.
    """
    whole = answers(run(route), route)
    small = answers(run(route.scaled(SHARP)), route)
    return max(
        float(np.max(np.abs(whole[q] - small[q] / SHARP))) * LEVER.get(q.kind, 1.0) / (1.0 - SHARP)
        for q in route.questions
    )


def random_route(rng: Rng, *, limit: float = 3e-5, tries: int = 200) -> Route:
    """A route of 2 to 6 setups on one part, or on two that are joined, with questions; second order below `limit`."""
    for _ in range(tries):
        route = any_route(rng)
        if second_order(route) <= limit:
            return route
    raise RuntimeError(f"no route below {limit} mm in {tries} tries")


# ---------------------------------------------------------------- sizes


def _um(rng: Rng, low: float = 1.0, high: float = 100.0) -> float:
    return float(1e-3 * 10.0 ** rng.uniform(math.log10(low), math.log10(high)))


def _angle(rng: Rng) -> float:
    return float(rng.uniform(-math.pi, math.pi))


def _vector(rng: Rng, low: float = 1.0, high: float = 50.0) -> complex:
    return cmath.rect(_um(rng, low, high), _angle(rng))


def _slope(rng: Rng, high: float = STEEPEST) -> complex:
    return cmath.rect(float(10.0 ** rng.uniform(-5.0, math.log10(high))), _angle(rng))


def _either(rng: Rng, chance: float = 0.5) -> bool:
    return bool(rng.random() < chance)


def _signed(rng: Rng, high: float = 100.0) -> float:
    return _um(rng, 1.0, high) * (1.0 if _either(rng) else -1.0)


def _pick(rng: Rng, items: list[str]) -> str:
    return items[int(rng.integers(len(items)))]


# ---------------------------------------------------------------- parts


def _blank(rng: Rng) -> Part:
    """A stepped wheel with a bore, faces, teeth, holes; a sawn bar at first."""
    total = float(rng.uniform(25.0, 150.0))
    ends = np.cumsum(rng.uniform(0.6, 1.4, size=4))
    ends = np.concatenate([[0.0], ends / ends[-1] * total])
    across = rng.uniform(45.0, 160.0, size=4)
    names = ("hub", "rim", "land", "tail")
    surfaces = [
        cylinder(n, float(d), float(a), float(b)) for n, d, a, b in zip(names, across, ends, ends[1:], strict=False)
    ]
    surfaces += [face("back", 0.0, -1, float(across[0])), face("front", total, +1, float(across[3]))]
    for k in (1, 2, 3):
        surfaces.append(
            face(f"step{k}", float(ends[k]), 1 if across[k - 1] > across[k] else -1, float(max(across[k - 1 : k + 1])))
        )
    parting = float(rng.uniform(0.3, 0.7)) * total
    surfaces += [bore("bore", 30.0, 0.0, parting), bore("recess", 30.3, parting, total)]
    seat = int(rng.integers(4))
    count = int(rng.integers(8, 100))
    pressure = math.radians(float(rng.choice([14.5, 20.0, 25.0])))
    surfaces.append(
        teeth("teeth", count, 0.5 * float(across[seat]), pressure_angle=pressure, z=float(ends[seat : seat + 2].mean()))
    )
    surfaces.append(holes("holes", int(rng.integers(3, 13)), float(rng.uniform(18.0, 40.0)), z=total))
    surfaces += [cylinder("bar", 170.0, -40.0, total + 5.0), face("sawn", -40.0, -1, 150.0)]
    stock = (
        Existing("bar", offset=_vector(rng, 5, 100), lean=_slope(rng)),
        Existing("sawn", lean=_slope(rng), axial=_signed(rng)),
    )
    return Part("wheel", tuple(surfaces), stock)


def _spindle(rng: Rng) -> Part:
    """A bought spindle: bearing seats, a journal and a shoulder that miss each other a little."""
    long = float(rng.uniform(40.0, 120.0))
    surfaces = (
        cylinder("bearings", 40.0, -long, -5.0),
        cylinder("journal", 30.0, -170.0, 230.0),  # long enough for every bore to sit on it with its whole length
        cylinder("end", 25.0, 60.0, 90.0),
        face("shoulder", 0.0, +1, 60.0),
        face("tip", 90.0, +1, 25.0),
        face("tail", -long - 5.0, -1, 40.0),
        holes("flange", int(rng.integers(3, 9)), float(rng.uniform(18.0, 26.0)), z=-2.0),
    )
    there = (
        Existing("bearings", offset=_vector(rng, 1, 20), lean=_slope(rng, 1e-4)),
        Existing("journal", offset=_vector(rng, 1, 20), lean=_slope(rng, 1e-4)),
        Existing("shoulder", lean=_slope(rng, 2e-4), axial=_signed(rng, 20)),
        Existing("tail", lean=_slope(rng, 2e-4), axial=_signed(rng, 20)),
    )
    return Part("spindle", surfaces, there)


# ---------------------------------------------------------------- setups


@dataclass
class _Shop:
    """What is made so far, and how heights of one part translate into another's (z of it = shift + way * z)."""

    rng: Rng
    surfaces: dict[str, Surface]
    made: list[str]
    into: dict[tuple[str, str], tuple[float, int]] = field(default_factory=dict)

    def kinds(self, *kinds: str, within: tuple[str, ...]) -> list[str]:
        return [n for n in self.made if self.surfaces[n].kind in kinds and n.partition(".")[0] in within]

    def height(self, part: str, frame: str, z: float) -> float:
        if part == frame:
            return z
        offset, way = self.into[part, frame]
        return offset + way * z

    def place_on(self, name: str, share: float) -> float:
        drawn = self.surfaces[name]
        return drawn.z_from + share * (drawn.z_to - drawn.z_from)


def _by(rng: Rng, high: float = 50.0) -> Offset | RadialDial | Pushed:
    kind = int(rng.integers(3))
    if kind == 0:
        return Offset(_vector(rng, 1, high))
    if kind == 1:
        return RadialDial(2.0 * _um(rng, 1, high), _angle(rng))
    return Pushed(2.0 * _um(rng, 1, high), _angle(rng))


def _two_planes(shop: _Shop, part: str, round_: list[str]) -> TwoPlanes | None:
    """Two planes at least 15 mm apart that do not lean the part by more than the steepest hold."""
    rng = shop.rng
    for _ in range(20):
        first, second = _pick(rng, round_), _pick(rng, round_)
        z1, z2 = shop.place_on(first, float(rng.uniform(0, 0.4))), shop.place_on(second, float(rng.uniform(0.6, 1.0)))
        z1 = shop.height(first.partition(".")[0], part, z1)
        z2 = shop.height(second.partition(".")[0], part, z2)
        apart = abs(z1 - z2)
        if apart < 15.0:
            continue
        largest = min(50.0, 0.5e3 * STEEPEST * apart)
        return TwoPlanes(Centre(first, z1, _by(rng, largest)), Centre(second, z2, _by(rng, largest)))
    return None


def _hold(shop: _Shop, part: str, within: tuple[str, ...]) -> CentredAndSquared | TwoPlanes | None:
    rng = shop.rng
    round_ = shop.kinds("cylinder", "bore", within=within)
    flat = shop.kinds("face", within=within)
    if not flat or _either(rng, 0.4):
        return _two_planes(shop, part, round_)
    on = _pick(rng, round_)
    z = shop.height(on.partition(".")[0], part, shop.place_on(on, float(rng.uniform(0, 1))))
    squared = _pick(rng, flat)
    across = float(rng.uniform(0.5, 0.95)) * shop.surfaces[squared].diameter
    by: Lean | FaceDial
    if _either(rng):
        by = Lean(_slope(rng))
    else:
        by = FaceDial(min(_um(rng, 1, 50), STEEPEST * across), across, _angle(rng))
    return CentredAndSquared(Centre(on, z, _by(rng)), Square(squared, by))


def _stop(shop: _Shop, within: tuple[str, ...], squares: str) -> PointStop | RingStop | NoStop:
    rng = shop.rng
    flat = shop.kinds("face", within=within)
    choice = float(rng.random())
    if not flat or choice < 0.15:
        return NoStop(_signed(rng))
    on = _pick(rng, flat)
    if on == squares:
        return PointStop(on, 0.0, 0.0, _signed(rng))
    if choice < 0.55:
        return PointStop(on, float(rng.uniform(5.0, 60.0)), _angle(rng), _signed(rng))
    return RingStop(on, float(rng.uniform(10.0, 60.0)), _signed(rng))


def _cut(shop: _Shop, name: str) -> Cut:
    rng, drawn = shop.rng, shop.surfaces[name]
    wander = _vector(rng, 0.2, 5.0) if _either(rng, 0.7) else 0j
    n = drawn.count
    if drawn.kind not in ("teeth", "holes"):
        return Turn(name, wander, _signed(rng))
    division = tuple(float(d) for d in rng.uniform(-7e-5, 7e-5, size=n))
    first = _angle(rng) if _either(rng) else 0.0
    if drawn.kind == "teeth":
        width = tuple(float(w) for w in rng.uniform(-5e-3, 5e-3, size=n)) if _either(rng) else ()
        return CutTeeth(name, division, wander, _signed(rng), width, first)
    scatter = tuple(_vector(rng, 0.5, 10.0) for _ in range(n))
    return Drill(name, division, scatter, _vector(rng, 1, 30), wander, first)


def _setup(shop: _Shop, op: int, part: str, cuttable: list[str], within: tuple[str, ...]) -> Setup | None:
    rng = shop.rng
    hold = _hold(shop, part, within)
    if hold is None:
        return None
    squares = hold.square.on if isinstance(hold, CentredAndSquared) else ""
    stop = _stop(shop, within, squares)
    patterns = shop.kinds("teeth", "holes", within=within)
    clock: Clock | NoClock = NoClock(float(rng.uniform(-2e-4, 2e-4)))
    if patterns and _either(rng, 0.7):
        on = _pick(rng, patterns)
        clock = Clock(on, int(rng.integers(1, shop.surfaces[on].count + 1)), float(rng.uniform(-2e-4, 2e-4)))
    held = {squares}
    held |= {hold.centre.on} if isinstance(hold, CentredAndSquared) else {hold.first.on, hold.second.on}
    held |= set() if isinstance(stop, NoStop) else {stop.on}
    held |= {clock.on} if isinstance(clock, Clock) else set()
    free = [name for name in cuttable if name not in held]
    fresh = [name for name in free if name not in shop.made]
    wanted = int(rng.integers(1, 5))
    order = [str(n) for n in rng.permutation(fresh)] + [str(n) for n in rng.permutation(free) if n not in fresh]
    if fresh and _either(rng, 0.2):
        order = [str(n) for n in rng.permutation(free)]  # now and then a surface is cut again
    chosen = order[:wanted]
    if not chosen:
        return None
    setup = Setup(
        op=op,
        part=part,
        looks_at_tool=1 if _either(rng) else -1,
        insertion=_angle(rng),
        hold=hold,
        stop=stop,
        clock=clock,
        cuts=tuple(_cut(shop, name) for name in chosen),
    )
    shop.made += [name for name in chosen if name not in shop.made]
    return setup


def _join(shop: _Shop, op: int) -> Join | None:
    rng = shop.rng
    bores = shop.kinds("bore", within=("wheel",))
    flat = [n for n in shop.kinds("face", within=("wheel",)) if n != "wheel.sawn"]
    if not bores or not flat:
        return None
    outer, on = _pick(rng, bores), _pick(rng, flat)
    way = -shop.surfaces[on].facing  # the face looks at the shoulder, which looks to +z
    against = "spindle.shoulder"
    square: BoreSquares | FaceSquares
    if _either(rng):
        square = BoreSquares(_slope(rng, 1e-4) if _either(rng) else 0j)
        radius = float(rng.uniform(15.0, 30.0))
        touch = Seat(on, against, 1.5, _signed(rng, 20), "ring", radius)
        if _either(rng):
            touch = Seat(on, against, 1.5, _signed(rng, 20), "point", radius, _angle(rng))
    else:
        square = FaceSquares(on, against, _slope(rng, 1e-4) if _either(rng) else 0j)
        touch = Seat(on, against, 1.5, _signed(rng, 20), "point", 0.0, 0.0)
    shift = shop.surfaces[against].mid + touch.spacer - way * shop.surfaces[on].mid
    shop.into["wheel", "spindle"] = (shift, way)
    shop.into["spindle", "wheel"] = (-way * shift, way)
    return Join(
        op=op,
        outer=outer,
        inner="spindle.journal",
        way=way,
        insertion=_angle(rng),
        square=square,
        seat=touch,
        offset=_vector(rng, 1, 15) if _either(rng) else 0j,
        turned=float(rng.uniform(-2e-4, 2e-4)),
    )


def any_route(rng: Rng) -> Route:
    """A legal route, its second-order terms not yet looked at."""
    while True:
        route = _attempt(rng)
        if route is not None:
            return route


def _attempt(rng: Rng) -> Route | None:
    two = _either(rng, 0.6)
    parts = (_blank(rng), _spindle(rng)) if two else (_blank(rng),)
    surfaces = {f"{p.name}.{s.name}": s for p in parts for s in p.surfaces}
    shop = _Shop(rng, surfaces, [f"{p.name}.{e.surface}" for p in parts for e in p.existing])
    of_wheel = [n for n in surfaces if n.startswith("wheel.") and n not in ("wheel.bar", "wheel.sawn")]
    of_spindle = ["spindle.journal", "spindle.end", "spindle.tip", "spindle.flange"]
    steps: list[Setup | Join] = []
    total = int(rng.integers(2, 7))
    after = int(rng.integers(0, min(3, total))) if two else 0
    for k in range(total - after):
        if two and k == 1 and _either(rng, 0.4):
            setup = _setup(shop, 10 * k + 10, "spindle", of_spindle, ("spindle",))
        else:
            setup = _setup(shop, 10 * k + 10, "wheel", of_wheel, ("wheel",))
        if setup is None:
            return None
        steps.append(setup)
    if two:
        join = _join(shop, 10 * len(steps) + 10)
        if join is None:
            return None
        steps.append(join)
        for _ in range(after):
            part = _pick(rng, ["wheel", "spindle"])
            setup = _setup(
                shop, 10 * len(steps) + 10, part, [*of_wheel, "spindle.tip", "spindle.flange"], ("wheel", "spindle")
            )
            if setup is None:
                return None
            steps.append(setup)
    return Route(parts, tuple(steps), _questions(shop))


def _questions(shop: _Shop) -> tuple[Question, ...]:
    rng = shop.rng
    within = ("wheel", "spindle")
    axes = shop.kinds("cylinder", "bore", within=within)
    flat = shop.kinds("face", within=within)
    asked: dict[Question, None] = {}
    for _ in range(6):
        of, about = _pick(rng, axes), _pick(rng, axes)
        if of != about:
            asked[Question("offset", of, about)] = None
            asked[Question("lean", of, about)] = None
            asked[Question("run-out", of, about)] = None
    for _ in range(4):
        of, about, against = _pick(rng, flat), _pick(rng, axes), _pick(rng, flat)
        asked[Question("lean", of, about)] = None
        asked[Question("face run-out", of, about)] = None
        if of != against:
            asked[Question("length", of, about, against)] = None
    for of in shop.kinds("teeth", within=within):
        for about in dict.fromkeys((_pick(rng, axes), _pick(rng, axes))):
            for kind in TOOTH_FIGURES:
                asked[Question(kind, of, about)] = None
    for of in shop.kinds("holes", within=within):
        asked[Question("gaps", of, _pick(rng, axes))] = None
    return tuple(asked)
