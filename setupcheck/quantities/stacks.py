"""From a requirement to its figure: which relation of which surfaces, and what is missing for it. mm, rad."""

from __future__ import annotations

import math
from collections.abc import Callable

from setupcheck.ledger import figures, route, teeth
from setupcheck.ledger.account import Account
from setupcheck.ledger.figures import Figure
from setupcheck.ledger.route import State
from setupcheck.quantities import backlash_read
from setupcheck.quantities.backlash import backlash
from setupcheck.quantities.book import Open, OutOfRange
from setupcheck.quantities.causes import BARE
from setupcheck.quantities.contact_share import contact
from setupcheck.quantities.gaps import figure as of_gaps
from setupcheck.quantities.mid_plane import mid_plane
from setupcheck.quantities.relations import Built, beside_its_axis, pair, second_order, state
from setupcheck.quantities.requirements import Stack
from setupcheck.quantities.running import as_it_runs
from setupcheck.quantities.shares import torque
from setupcheck.quantities.shop import Floor
from setupcheck.quantities.worm_sizes import settled


def build(floor: Floor, stack: Stack) -> Built | Open:
    """The figure of a stack, or Open with what is missing.

    Raises: JobError where the surfaces cannot have such a figure.
    """
    try:
        made = _FIGURES[stack.require.what](floor, stack)
    except OutOfRange as why:
        return Open(because=str(why))
    if isinstance(made, Open):
        return made
    missing = made.figure.undetermined()
    if not missing:
        return made
    bare = any(path.endswith(BARE) for path in missing)
    if all(path.endswith(".given") for path in missing):
        return Open(missing, "it says how true surfaces that no setup here cuts are to each other")
    return Open(missing, "a size without limits: write it as in 66 ±0.01" if bare else "")


def _vector(floor: Floor, stack: Stack) -> Built | Open:
    """run-out and coaxial: FIM = 2 |offset| at the worse end of the surface."""
    found = pair(floor, stack)
    if isinstance(found, Open):
        return found
    g, r = found
    at = stack.require.at
    heights = (
        (floor.z(g.part, at),)
        if at is not None
        else ((g.low, g.high) if g.pattern is None and g.high > g.low else (g.z,))
    )
    accounts = tuple(g.axis_at(z) - r.axis_at(z) for z in heights)
    if _scatters_outwards(g):
        assert g.pattern is not None
        return Built(
            figures.ToothRunOut(accounts[0], g.pattern, 1.0), second_order(lean=g.lean - r.lean, lever=abs(g.z - r.z))
        )
    lever = max(abs(z - r.z) for z in heights)
    return Built(figures.Vector(accounts, 2.0), second_order(lean=g.lean - r.lean, lever=max(lever, g.diameter or 0.0)))


def _scatters_outwards(state: State) -> bool:
    """True for gaps or holes with a radial scatter of their own."""
    pattern = state.pattern
    return pattern is not None and (bool(pattern.outwards) or any(s.goes_outward for s in pattern.scatter))


def _lean(floor: Floor, stack: Stack) -> Built | Open:
    """face-run-out: lean x across; squareness: lean itself, or over a stated diameter."""
    found = pair(floor, stack)
    if isinstance(found, Open):
        return found
    g, r = found
    across = stack.require.across
    if across is None and stack.require.what == "face-run-out":
        across = g.diameter
        if across is None:
            return Open((f"require[{stack.index + 1}].across",))
    account = g.lean - r.lean
    return Built(figures.Vector((account,), across or 1.0), second_order(lean=account, lever=across or 0.0))


def _teeth(floor: Floor, stack: Stack) -> Built | Open:
    """Pitch figures of teeth and holes, and the index figures of a wheel."""
    found = pair(floor, stack)
    if isinstance(found, Open):
        return found
    g, r = found
    what, pattern = stack.require.what, g.pattern
    if pattern is None:
        raise floor.problem(
            f"require[{stack.index + 1}].of", f"{g.ref} has no teeth or holes", "Write the name of a toothing"
        )
    flank = what not in ("gap-centre-pitch",) and g.kind == "teeth"
    if flank and pattern.pressure_angle is None:
        return Open((_angle_of(floor, g),))
    factor = {"index-range": 1.0 / pattern.radius, "index-within": 0.5 / pattern.radius}.get(what, 1.0)
    if what == "on-workpiece":
        if stack.require.on_diameter is None:
            return Open((f"require[{stack.index + 1}].on_diameter",))
        factor = stack.require.on_diameter / (2.0 * pattern.radius)
    oblique, seen = _oblique(floor, g, r), _seen_by_heads(floor, stack, flank=flank)
    if isinstance(oblique, Open):
        return oblique
    if isinstance(seen, Open):
        return seen
    figure = figures.Tooth(
        beside_its_axis(g.offset - r.axis_at(g.z), pattern.radius) * seen,
        pattern,
        flank=flank,
        stepwise=what == "single-pitch",
        factor=factor,
        driven=what in ("index-range", "index-within", "on-workpiece"),
        oblique=oblique,
    )
    running = as_it_runs(floor, figure, g) if figure.driven else figure
    if isinstance(running, Open):
        return running
    return Built(running, second_order(lean=g.lean - r.lean, lever=abs(g.z - r.z)))


def _seen_by_heads(floor: Floor, stack: Stack, *, flank: bool) -> float | Open:
    """Share of the eccentricity that the mean of the read heads still shows; all of it with one head.

    Source: ledger.heads.
    """
    from setupcheck.ledger.heads import share_left

    heads, off, path = stack.require.heads or 1, stack.require.heads_off, f"require[{stack.index + 1}]"
    if heads > 1 and flank:
        raise floor.problem(
            f"{path}.heads", "heads read lines or holes, no teeth", "Drop heads, or ask it of the lines"
        )
    if heads > 1 and off is None:
        return Open((f"{path}.heads_off",))
    return share_left(heads, off or 0.0)


def _angle_of(floor: Floor, g: State) -> str:
    """Key of the pressure angle that is missing: the worm's where these are the teeth of its wheel, else their own."""
    mesh, worm = floor.loaded.job.mesh, floor.loaded.job.worm
    if mesh is not None and worm is not None:
        wheel = floor.loaded.ref(mesh.wheel)
        if (wheel.part, wheel.surface) == (g.part, g.name):
            return "worm.pressure_angle"
    return f"parts.{g.part}.surfaces.{g.name}.pressure_angle"


def _oblique(floor: Floor, g: State, r: State) -> Account | Open:
    """What the wobble of a wheel adds to its pitch where the gaps run at the worm's lead angle."""
    mesh, worm = floor.loaded.job.mesh, floor.loaded.job.worm
    if mesh is None or worm is None or g.pattern is None:
        return Account()
    wheel = floor.loaded.ref(mesh.wheel)
    if (wheel.part, wheel.surface) != (g.part, g.name):
        return Account()
    found = settled(floor, "starts", "axial_module", "reference_diameter")
    if isinstance(found, Open) or worm.hand is None:
        missing = found.missing if isinstance(found, Open) else ()
        return Open((*(("worm.hand",) if worm.hand is None else ()), *missing))
    starts, module, diameter = found
    lead_angle = math.atan(starts * module / diameter)
    return teeth.oblique(g.lean - r.lean, g.pattern, lead_angle=lead_angle, right_hand=worm.hand != "left")


def _backlash_swing(floor: Floor, stack: Stack) -> Built | Open:
    """Change of backlash over one turn: 4 e tan(alpha), or as it was read on the finished wheel."""
    read = backlash_read.ruling(floor, stack)
    if isinstance(read, Open):
        return read
    if read is not None:
        return Built(figures.Vector((backlash_read.swinging(read),), 2.0 * read.slope), 0.0)
    found = pair(floor, stack)
    if isinstance(found, Open):
        return found
    g, r = found
    if g.pattern is None or g.pattern.pressure_angle is None:
        return Open((_angle_of(floor, g),))
    offset = beside_its_axis(g.offset - r.axis_at(g.z), g.pattern.radius)
    swing = teeth.backlash_swing(1.0, g.pattern.pressure_angle)  # for each mm of eccentricity
    figure: Figure = figures.Vector((offset,), swing)
    if _scatters_outwards(g):
        figure = figures.ToothRunOut(offset, g.pattern, swing / 2.0)
    return Built(figure, second_order(lean=g.lean - r.lean, lever=abs(g.z - r.z)))


def _holes(floor: Floor, stack: Stack) -> Built | Open:
    """position, chord and pitch-circle of a hole pattern."""
    from setupcheck.ledger import holes

    what = stack.require.what
    g = state(floor, stack, stack.of, "of")
    if isinstance(g, Open):
        return g
    pattern = g.pattern
    if pattern is None or g.kind == "teeth":
        raise floor.problem(
            f"require[{stack.index + 1}].of", f"{g.ref} is no pattern of holes", "Write the name of a hole pattern"
        )
    if what == "chord":
        return Built(holes.HoleChord(pattern), 0.0)
    if what == "pitch-circle":
        return Built(holes.PitchCircle(pattern), 0.0)
    found = pair(floor, stack)
    if isinstance(found, Open):
        return found
    _, r = found
    turn = None
    if stack.require.clock is not None:
        key = state(floor, stack, stack.require.clock, "clock")
        if isinstance(key, Open):
            return key
        if key.pattern is None:
            raise floor.problem(
                f"require[{stack.index + 1}].clock",
                f"{key.ref} gives no angle",
                "Write a slot, hole pattern or toothing",
            )
        turn = g.clock - _angle_about(key, r)
    return Built(
        holes.HolePosition(g.offset - r.axis_at(g.z), pattern, turn),
        second_order(lean=g.lean - r.lean, lever=abs(g.z - r.z)),
    )


def _angle_about(key: State, axis: State) -> Account:
    """Angle of a clocking feature about another axis [rad]: its own, and its tangential shift over its radius."""
    assert key.pattern is not None
    return route.clocked(key, key.pattern, axis.axis_at(key.z), number=1)


def _mid_plane(floor: Floor, stack: Stack) -> Built | Open:
    """Distance of the worst tooth's middle from the worm's axis: axial stack and wobble."""
    place = floor.loaded.job.place
    if place is None or place.worm_axis is None:
        return Open(("place.worm_axis",))
    found = pair(floor, stack)
    if isinstance(found, Open):
        return found
    g, r = found
    if g.pattern is None:
        raise floor.problem(f"require[{stack.index + 1}].of", f"{g.ref} has no teeth", "Write the name of a toothing")
    face = state(floor, stack, place.worm_axis.from_, "of")
    if isinstance(face, Open):
        return Open(("place.worm_axis.from",), face.because)
    if not face.facing:
        raise floor.problem(
            "place.worm_axis.from", f"{face.ref} is no face", "Write the face the worm's axis is measured from"
        )
    if floor.body(face.part) is not floor.body(g.part):
        raise floor.problem(
            "place.worm_axis.from",
            f"{face.ref} and {g.ref} are never joined in this route",
            "Write the joining as a setup of its own",
        )
    return mid_plane(place.worm_axis, g, r, face)


def _length(floor: Floor, stack: Stack) -> Built | Open:
    """Axial distance of two faces, positive as drawn."""
    found = pair(floor, stack)
    if isinstance(found, Open):
        return found
    g, r = found
    way = 1.0 if g.z >= r.z else -1.0
    account = (g.axial - r.axial) * way
    lever = max((s.diameter or 0.0) for s in (g, r))
    return Built(figures.Length(account.plus_constant(abs(g.z - r.z))), second_order(lean=g.lean - r.lean, lever=lever))


def _allowance(floor: Floor, stack: Stack) -> Built | Open:
    """Radial stock left where the cut is thinnest."""
    if not stack.of:
        return Open((f"require[{stack.index + 1}].of",))
    ref = floor.loaded.ref(stack.of)
    ops = [
        int(key.partition("/")[0])
        for key, (_, after) in floor.stock.items()
        if (after.part, after.name) == (ref.part, ref.surface) and ref.op in (None, after.op)
    ]
    if not ops:
        return Open(
            (f"require[{stack.index + 1}].of",), f"{ref} is cut out of nothing that is known: no earlier state of it"
        )
    key = next(
        k
        for k, (_, after) in floor.stock.items()
        if after.op == ops[-1] and (after.part, after.name) == (ref.part, ref.surface)
    )
    return stock_left(floor, key)


def stock_left(floor: Floor, key: str) -> Built | Open:
    """Least radial (or axial, for a face) stock of one cut (`40/bore`) [mm].

    Raises: OutOfRange for surfaces that lean too far to each other.
    """
    before, after = floor.stock[key]
    if after.kind == "face":
        depth = after.facing * (before.z - after.z)
        axial = (before.axial - after.axial) * float(after.facing)
        lean = before.lean - after.lean
        sizes = [s.diameter for s in (before, after) if s.diameter]
        missing = axial.undetermined() + lean.undetermined()
        if lean.terms and not sizes:
            missing += (f"parts.{after.part}.surfaces.{after.name}.diameter",)
        if missing:
            return Open(tuple(dict.fromkeys(missing)))
        radius = max(sizes, default=0.0) / 2.0
        return Built(figures.FaceStock(axial.plus_constant(depth), lean, radius), second_order(lean=lean, lever=radius))
    if before.diameter is None or after.diameter is None:
        return Open((f"setups.{after.op}.cut.{after.name}.to",))
    depth = (before.diameter - after.diameter) / 2.0 * (-1.0 if after.kind == "bore" else 1.0)
    low, high = max(before.low, after.low), min(before.high, after.high)
    heights = (low, high) if high > low else (after.z,)
    offsets = tuple(after.axis_at(z) - before.axis_at(z) for z in heights)
    if missing := tuple(dict.fromkeys(m for o in offsets for m in o.undetermined())):
        return Open(missing)
    left_out = second_order(lean=after.lean - before.lean, lever=after.diameter / 2.0)
    return Built(figures.Stock(depth, offsets), left_out)


_FIGURES: dict[str, Callable[[Floor, Stack], Built | Open]] = {
    "run-out": _vector,
    "coaxial": _vector,
    "face-run-out": _lean,
    "squareness": _lean,
    "cumulative-pitch": _teeth,
    "single-pitch": _teeth,
    "gap-centre-pitch": _teeth,
    "index-range": _teeth,
    "index-within": _teeth,
    "on-workpiece": _teeth,
    "backlash-swing": _backlash_swing,
    "position": _holes,
    "chord": _holes,
    "pitch-circle": _holes,
    "mid-plane": _mid_plane,
    "length": _length,
    "allowance": _allowance,
    "backlash": backlash,
    "contact-area": contact,
    "contact-length": contact,
    "torque": torque,
    "symmetry": of_gaps,
    "flank-run-off": of_gaps,
    "depth-run-off": of_gaps,
}
