"""What a fitted joint does to the sizes around it: teeth that ride out, outsides that grow, holes that close. Sizes mm."""

from __future__ import annotations

from collections.abc import Iterator

from setupcheck.jobfile.models import Round
from setupcheck.jobfile.names import Ref
from setupcheck.jobfile.setups import Join
from setupcheck.notation import show
from setupcheck.physics import interference as fits
from setupcheck.physics.materials import Question
from setupcheck.quantities.book import OutOfRange, Quantity
from setupcheck.quantities.joining import limits_of
from setupcheck.quantities.joint_shape import over_the_joint
from setupcheck.quantities.pairing import Pair
from setupcheck.quantities.shop import Floor
from setupcheck.record import record


def growth_most(pair: Pair, grip: float) -> float | None:
    """Largest growth of the hub on its tooth circle, on diameter [mm]; None where it bears no teeth cut before the joint.

    Source: Lamé's displacement at the root circle, which the teeth ride on.
    """
    return _growth(pair, grip, largest=True)


def growth_least(pair: Pair, grip: float) -> float | None:
    """Least growth of the hub on its tooth circle, on diameter [mm]; None as above. Source: Lamé's displacement."""
    return _growth(pair, max(grip, 0.0), largest=False)


def _growth(pair: Pair, grip: float, *, largest: bool) -> float | None:
    question: Question = "growth" if largest else "closing"  # least: the hub stiff, the shaft soft
    grown = [
        fits.hub_growth(j, pressure=fits.joint_pressure(j, interference=grip), at_diameter=s.outside)
        for j, s in zip(pair.joints(question), pair.sections, strict=True)
        if s.toothed
    ]
    return (max if largest else min)(grown, default=None)


def hole_closing(pair: Pair, grip: float) -> float | None:
    """How much the shaft's hole closes on diameter at the largest interference [mm]; None for a solid one. Source: Lamé."""
    closed = [fits.hole_closing(j, pressure=fits.joint_pressure(j, interference=grip)) for j in pair.joints("closing")]
    return max((c for c in closed if c is not None), default=None)


def growth_uncounted(floor: Floor, growth: float, join: Join, op: int) -> float | None:
    """Growth of finished teeth that no backlash requirement counts, on diameter [mm]; None where the teeth are cut later.

    Source: order of the route.
    """
    asked = any(r.what == "backlash" for r in floor.loaded.job.require)
    part = floor.loaded.ref(join.outer).part
    return None if not teeth_before(floor, part, op) else 0.0 if asked else growth


def teeth_before(floor: Floor, part: str, op: int, *, surface: str | None = None) -> bool:
    """Whether teeth of a part (all of them, or one surface) are finished when operation `op` joins it.

    Teeth that no setup cuts are finished if the part has them as bought; teeth that are cut again afterwards are not.
    """
    last: dict[str, int] = {}
    for setup in floor.loaded.job.setups:
        for key in setup.cut:
            ref = floor.loaded.ref(key, setup.part)
            if ref.part == part:
                last[ref.surface] = setup.op
    return any(
        last[name] < op if name in last else floor.now(Ref(part, name)) is not None
        for name, node in floor.loaded.job.parts[part].surfaces.items()
        if node.kind == "teeth" and surface in (None, name)
    )


def growth_as_distance(floor: Floor, join: Join, growth: float, op: int) -> float | None:
    """How much nearer the mating worm or gear stands to the grown tooth circle, largest [mm]: half the growth on diameter.

    The centre distance that a grown wheel wants is so much larger; None where its teeth are cut after the joint.
    Source: geometry.
    """
    return growth / 2.0 if teeth_before(floor, floor.loaded.ref(join.outer).part, op) else None


def growth_of(pair: Pair, grip: float, diameter: float) -> float:
    """Largest growth of the hub on one of its diameters [mm]; where its sections differ, of the one that grows most.

    Raises: OutOfRange for a diameter inside the bore or outside the whole hub.  Source: Lamé's displacement.
    """
    within = [(j, s) for j, s in zip(pair.joints("growth"), pair.sections, strict=True) if diameter <= s.outside + 1e-9]
    if diameter < pair.diameter or not within:
        most = max(s.outside for s in pair.sections)
        raise OutOfRange(
            f"a diameter of {diameter:g} mm is no place in a hub from {pair.diameter:g} to {most:g} mm over its joint"
        )
    return max(
        fits.hub_growth(j, pressure=fits.joint_pressure(j, interference=grip), at_diameter=diameter) for j, _ in within
    )


def growth_at_outside(pair: Pair, grip: float) -> float:
    """Largest growth at the outside of the hub's largest section, rim or root circle [mm]. Source: Lamé's displacement."""
    return growth_of(pair, grip, max(s.outside for s in pair.sections))


def growth_in_words(pair: Pair, grip: float, join: Join, floor: Floor) -> str:
    """Largest growth at each outside of the hub and at every diameter that `growth_at` asks for. Source: `growth_of`."""
    asked = sorted({*join.growth_at, *(s.outside for s in pair.sections)}, reverse=True)
    return ", ".join(f"{floor.size(d, 2)} by {floor.fine(growth_of(pair, grip, d))}" for d in asked)


@record
class Moved:
    """A finished size with limits that the joint moves at 20 degC [mm].

    surface  whose;  closes  a hole, else an outside that grows;  least, by  of the loosest and of the tightest pair
    width    of its limits
    """

    surface: str
    closes: bool
    least: float
    by: float
    width: float

    @property
    def share(self) -> float:
        """Movement over the width of the limits."""
        return self.by / self.width


def moved(floor: Floor, join: Join, pair: Pair, most: float, least: float, op: int) -> Moved | None:
    """The finished size that the joint moves most for its limits; None where none has limits, or all are cut afterwards.

    Outsides of the hub that are used afterwards grow, holes of the shaft close, over the length of the joint.
    Source: Lamé's displacement.
    """
    return max(_moved(floor, join, pair, (max(least, 0.0), most), op), key=lambda m: m.share, default=None)


def share_moved(moved: Moved) -> float:
    """Movement of that size over the width of its limits. Source: `moved`."""
    return moved.share


def moved_in_words(moved: Moved) -> str:
    """Which size moves by how much, and what would do. Source: `moved`."""
    does, before = ("closes", "larger") if moved.closes else ("grows", "smaller")
    spread, middle = moved.by - moved.least, (moved.by + moved.least) / 2.0
    said = (
        f"{moved.surface} {does} by {show(moved.least, 'um', 1)} to {show(moved.by, 'um', 1)} at 20 degC, its limits are "
        f"{show(moved.width, 'um', 1)} apart: finish it after the joint"
    )
    if spread >= moved.width:
        return f"{said}; no size before it comes out inside them for every pair."
    return f"{said}, or make it {show(middle, 'um', 0)} {before} before, with {show(moved.width - spread, 'um', 0)} of limits."


def _moved(floor: Floor, join: Join, pair: Pair, grips: tuple[float, float], op: int) -> Iterator[Moved]:
    for text, kind in ((join.outer, "cylinder"), (join.inner, "bore")):
        part = floor.loaded.ref(text).part
        for name, node in floor.loaded.job.parts[part].surfaces.items():
            if not isinstance(node, Round) or node.kind != kind or node.diameter.measured is not None:
                continue
            if node.diameter.fit is None and node.diameter.lower is None and node.diameter.upper is None:
                continue
            if kind == "cylinder" and not _used_after(floor, Ref(part, name), op):
                continue  # an outside that only the setups before the joint were held by may grow as it likes
            if _cut_after(floor, part, name, op) or not over_the_joint(floor, join, Ref(part, name)):
                continue
            limits = limits_of(node.diameter, f"parts.{part}.surfaces.{name}.diameter", floor)
            least, most = (
                growth_of(pair, grip, node.diameter.value) if kind == "cylinder" else hole_closing(pair, grip) or 0.0
                for grip in grips
            )
            if isinstance(limits, tuple) and limits[1] > limits[0]:
                yield Moved(f"{part}.{name}", kind == "bore", least, most, limits[1] - limits[0])


def _used_after(floor: Floor, ref: Ref, op: int) -> bool:
    """Whether something is held by, fitted to, required of or placed on a surface after operation `op`."""
    job = floor.loaded.job
    named: list[tuple[str | None, str | None]] = [(job.place.axis, None)] if job.place is not None else []
    named += [(text, None) for asked in job.require for text in (asked.of, asked.about)]
    for setup in (s for s in job.setups if s.op > op):
        if setup.join is not None:
            named += [(setup.join.outer, None), (setup.join.inner, None)]
        for one in (setup.hold.centre, setup.hold.and_centre) if setup.hold is not None else ():
            named.append((one.on if one is not None else None, setup.part))
    names = job.parts
    surfaces = [(text, part) for text, part in named if text and ("." in text or part) and not text.isdigit()]
    found = (floor.loaded.ref(text, part) for text, part in surfaces if text.partition(".")[0] in names or part)
    return any((one.part, one.surface) == (ref.part, ref.surface) for one in found)


def _cut_after(floor: Floor, part: str, name: str, op: int) -> bool:
    cut = (floor.loaded.ref(key, s.part) for s in floor.loaded.job.setups if s.op > op for key in s.cut)
    return any((ref.part, ref.surface) == (part, name) for ref in cut)


_PAIR = {"pair": "fit.pair"}
_HERE = {"floor": "route.floor", "join": ":"}
_MOST = {**_PAIR, "grip": "fit.grip_most_elastic"}

GROWING = (
    Quantity(
        "fit.growth_most",
        "join",
        "um",
        1,
        growth_most,
        {**_PAIR, "grip": "fit.grip_most_elastic"},
        "largest growth of the tooth circle",
    ),
    Quantity(
        "fit.growth_least",
        "join",
        "um",
        1,
        growth_least,
        {**_PAIR, "grip": "fit.grip_least_elastic"},
        "least growth of the tooth circle",
    ),
    Quantity(
        "fit.growth_uncounted",
        "join",
        "um",
        1,
        growth_uncounted,
        {"floor": "route.floor", "growth": "fit.growth_most", "join": ":", "op": "@op"},
        "growth of finished teeth that no backlash counts",
    ),
    Quantity(
        "fit.hole_closing",
        "join",
        "um",
        1,
        hole_closing,
        {**_PAIR, "grip": "fit.grip_most_elastic"},
        "closing of the shaft's hole",
    ),
    Quantity(
        "fit.growth_as_distance",
        "join",
        "um",
        1,
        growth_as_distance,
        {**_HERE, "growth": "fit.growth_most", "op": "@op"},
        "how much nearer the mate stands to the grown tooth circle",
    ),
    Quantity(
        "fit.growth_outside",
        "join",
        "um",
        1,
        growth_at_outside,
        _MOST,
        "largest growth at the outside of the hub",
    ),
    Quantity(
        "fit.growth_told", "join", "", 0, growth_in_words, {**_MOST, **_HERE}, "growth at every diameter asked for"
    ),
    Quantity(
        "fit.moved",
        "join",
        "",
        0,
        moved,
        {**_HERE, **_PAIR, "most": "fit.bench_most_elastic", "least": "fit.bench_least_elastic", "op": "@op"},
        "the finished size that the joint moves most",
    ),
    Quantity("fit.share_moved", "join", "%", 0, share_moved, {"moved": "fit.moved"}, "its movement over its limits"),
    Quantity(
        "fit.advice_moved", "join", "", 0, moved_in_words, {"moved": "fit.moved"}, "which size moves, and what would do"
    ),
)
