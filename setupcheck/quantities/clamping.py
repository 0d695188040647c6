"""Do the jaws hold enough of the part, and do they leave it round? Lengths mm, forces N."""

from __future__ import annotations

from setupcheck.jobfile.models import Round
from setupcheck.jobfile.names import Ref
from setupcheck.jobfile.setups import Centre, Cut, Setup
from setupcheck.ledger.route import State
from setupcheck.quantities.book import Open, OutOfRange, Quantity
from setupcheck.quantities.devices import DEVICES
from setupcheck.quantities.holding import Held
from setupcheck.quantities.requirements import read_stack
from setupcheck.quantities.scopes import CutEntry, HoldEntry
from setupcheck.quantities.shop import Floor
from setupcheck.quantities.sized import tolerance
from setupcheck.quantities.stuff import material_of
from setupcheck.record import record

CHUCKS = ("three-jaw", "four-jaw", "soft-jaws", "shimmed-jaws", "collet", "pot-chuck")
"""Devices from which a part stands out. Source: common practice."""
SUPPORTS = ("centres", "steady")
"""Devices that carry the far end. Source: common practice."""
THIN = 0.1
"""Wall over diameter from which a ring counts as stiff. Source: from memory of the trade."""
_ROUND = ("cylinder", "bore", "taper", "thread")
_KEPT_ROUND = ("cylinder", "bore", "taper", "throat", "teeth")
"""Surfaces that are to be round when the jaws are opened."""


@record
class Ring:
    """A ring between jaws as the holding leaves it: outside and inside diameter, length of the gripped surface [mm]."""

    outside: float
    inside: float
    width: float

    @property
    def wall(self) -> float:
        return (self.outside - self.inside) / 2.0

    @property
    def mean_radius(self) -> float:
        return (self.outside + self.inside) / 4.0


def _setup(floor: Floor, op: int) -> Setup:
    return next(s for s in floor.loaded.job.setups if s.op == op)


def _held_in(floor: Floor, op: int) -> list[Setup]:
    """The setups of one holding: the one that took the part, and those that keep it."""
    ops, found = {op}, []
    for setup in floor.loaded.job.setups:
        if setup.op == op or setup.keeps in ops:
            ops.add(setup.op)
            found.append(setup)
    return found


def taken_by(floor: Floor, setup: Setup) -> Setup:
    """The setup that took the part which this one cuts."""
    while setup.keeps is not None:
        setup = _setup(floor, setup.keeps)
    return setup


def _one_piece(floor: Floor, part: str, op: int) -> set[str]:
    """The parts that are one piece with a part when an operation holds it."""
    piece = {part}
    for _ in floor.loaded.job.parts:
        for setup in floor.loaded.job.setups:
            if setup.join is not None and setup.op < op:
                both = {floor.loaded.ref(setup.join.outer).part, floor.loaded.ref(setup.join.inner).part}
                piece |= both if both & piece else set()
    return piece


def _standing(floor: Floor, part: str, op: int, last: int) -> list[State]:
    """Every surface that is there when operation `last` is done, of the piece that operation `op` holds."""
    piece = _one_piece(floor, part, op)
    found = []
    for key, states in floor.body(part).states.items():
        before = [s for s in states if s.op is None or s.op <= last]
        if before and key[0] in piece and floor.removed.get(key, last + 1) > last:
            found.append(before[-1])
    return found


def gripped(floor: Floor, op: int, centre: Centre) -> State | None:
    """The round surface that jaws or a collet hold, as it is when they close."""
    setup = _setup(floor, op)
    part = floor.part_of[op]
    ref: Ref = Held(floor, setup, floor.body(part), part).ref(centre.on)
    states = floor.body(ref.part).states.get((ref.part, ref.surface), [])
    before = [s for s in states if (s.op is None or s.op < op) and (ref.op is None or s.op == ref.op)]
    state = before[-1] if before else None
    return state if state is not None and state.kind in _ROUND and state.diameter else None


def _centre(entry: HoldEntry, devices: tuple[str, ...]) -> Centre | None:
    """The centring of a hold, where one of these devices does it."""
    centre = entry.entry
    return centre if entry.step == "centre" and isinstance(centre, Centre) and centre.by in devices else None


JAWS = tuple(name for name, device in DEVICES.items() if device.jaws)


def _stretch(floor: Floor, centre: Centre, state: State) -> tuple[float, float]:
    """From where to where the jaws hold [mm in the frame of the body]: as stated, else at the place the hold names, else
    over the whole surface."""
    if centre.grip is None:
        place = floor.z(state.part, centre.at) if centre.at is not None else None
        return (state.low, state.high) if place is None else (place, place)
    low, high = sorted((floor.z(state.part, centre.grip.low), floor.z(state.part, centre.grip.high)))
    return low, high


def _meets(state: State, low: float, high: float) -> bool:
    return state.low <= low <= state.high if low == high else min(state.high, high) > max(state.low, low)


def _supported(setup: Setup) -> bool:
    hold = setup.hold
    planes = [c for c in (hold.centre, hold.and_centre) if c is not None] if hold is not None else []
    return any(name in SUPPORTS for c in planes for name in (c.by, *(t.by for t in c.through)))


def grip(entry: HoldEntry) -> float | None:
    """Length of the surface that the jaws hold [mm]; None where there are no jaws or the job does not say. Source: the job."""
    centre = _centre(entry, JAWS)
    return centre.grip.high - centre.grip.low if centre is not None and centre.grip is not None else None


def grip_wanted(floor: Floor, entry: HoldEntry, op: int) -> float | None:
    """Length that jaws should hold [mm]: a disc max(10, D/3), a bar D, neither more than half of the part's length.

    D of the gripped surface; the length over all of the part as the holding leaves it.
    Source: from memory of the trade; half of the length is our screening choice.
    """
    from setupcheck.physics import clamping

    centre = _centre(entry, JAWS)
    state = gripped(floor, op, centre) if centre is not None else None
    if state is None or state.diameter is None:
        return None
    there = _standing(floor, state.part, op, _held_in(floor, op)[-1].op)
    length = max((s.high for s in there), default=0.0) - min((s.low for s in there), default=0.0)
    if length <= 0.0:
        return None
    return clamping.grip_wanted(state.diameter, length, supported=_supported(_setup(floor, op)))


def overhang(floor: Floor, entry: CutEntry, op: int) -> float | None:
    """Farthest end of a cut from the jaws, over the diameter of the gripped surface.

    None where nothing is said of the grip, or a centre or steady carries the part.  Source: common practice.
    """
    setup = taken_by(floor, _setup(floor, op))
    centre = setup.hold.centre if setup.hold is not None else None
    if centre is None or centre.by not in CHUCKS or centre.grip is None or _supported(setup):
        return None
    state = gripped(floor, setup.op, centre)
    name = entry.name.rpartition(".")[2]
    cut = [s for states in floor.body(floor.part_of[op]).states.values() for s in states if s.op == op]
    cut = [s for s in cut if s.name == name]
    if state is None or not state.diameter or not cut:
        return None
    low, high = _stretch(floor, centre, state)
    return max(low - cut[0].low, cut[0].high - high, 0.0) / state.diameter


def _left(cut: Cut) -> bool:
    return cut.state == "rough" or bool(cut.leave or cut.leave_on_diameter or cut.leave_on_radius)


def _finished_round(floor: Floor, op: int) -> list[Ref]:
    """Surfaces that this holding finishes and that are to be round afterwards."""
    found = []
    for setup in _held_in(floor, op):
        for name, cut in setup.cut.items():
            ref = floor.loaded.ref(name, setup.part)
            kind = floor.loaded.job.parts[ref.part].surfaces[ref.surface].kind
            if kind in _KEPT_ROUND and not _left(cut):
                found.append(ref)
    return found


def ring(floor: Floor, entry: HoldEntry, op: int) -> Ring | None:
    """The ring that jaws squeeze while something round is finished: what stands round the bore at the grip.

    The smallest outside and the largest bore over the grip, as the last operation of the holding leaves them.
    None for a solid part, for a part on its shaft (the shaft carries it), and where nothing round is finished.
    Source: sizes of the job file.
    """
    centre = _centre(entry, JAWS)
    state = gripped(floor, op, centre) if centre is not None else None
    if centre is None or state is None or state.diameter is None or not _finished_round(floor, op):
        return None
    if len(_one_piece(floor, state.part, op)) > 1:
        return None
    low, high = _stretch(floor, centre, state)
    there = [
        s for s in _standing(floor, state.part, op, _held_in(floor, op)[-1].op) if s.diameter and _meets(s, low, high)
    ]
    bores = [s.diameter for s in there if s.kind == "bore" and s.diameter]
    outsides = [s.diameter for s in there if s.kind in ("cylinder", "taper") and s.diameter]
    node = floor.loaded.job.parts[state.part].surfaces[state.name]
    bores += [node.hole] if isinstance(node, Round) and node.hole else []
    if state.kind == "bore":
        bores = [max([*bores, state.diameter])]
    else:
        outsides = [state.diameter]
    if not bores or not outsides or max(bores) >= min(outsides):
        return None
    return Ring(min(outsides), max(bores), state.high - state.low)


def wall_share(ring: Ring) -> float:
    """Wall of the ring over its outside diameter. Source: arithmetic on the drawing."""
    return ring.wall / ring.outside


def lobing(floor: Floor, entry: HoldEntry, path: str, ring: Ring, op: int) -> float | Open | None:
    """Lobes left on what was turned round between the jaws, when they are let go [mm]: thin ring, n equal radial forces.

    F R^3 / (E I) times a factor of the number of jaws: 0.0302 for three, 0.0115 for four.
    Lowest modulus of the material; the ring as long as the gripped surface; narrow jaws.
    None without `grip_force`, and for a ring with a wall of a tenth of its diameter or more.
    Source: thin ring as in Roark's formulas and Timoshenko (from memory), physics.clamping; modulus rules/data/materials.yaml.
    """
    from setupcheck.physics.clamping import lobing_left

    centre = entry.entry
    if not isinstance(centre, Centre) or centre.grip_force is None or wall_share(ring) >= THIN:
        return None
    found = material_of(floor, floor.part_of[op])
    if isinstance(found, Open):
        return found
    try:
        return lobing_left(
            centre.grip_force,
            jaws=DEVICES[centre.by].jaws,
            mean_radius=ring.mean_radius,
            wall=ring.wall,
            width=ring.width,
            modulus=found.modulus.low,
        )
    except ValueError as why:
        raise OutOfRange(f"{path}: {why}") from None


def lobing_allowed(floor: Floor, ring: Ring, op: int) -> float | None:
    """Tightest of what the surfaces finished in this holding may be out of round [mm].

    Of each its run-out limit, which the lobes are part of; without one the width of its size tolerance, which a gauge
    would find used up. None where nothing limits it.  Source: the job file; ISO 286 tables in rules/data.
    """
    found = [limit for ref in _finished_round(floor, op) if (limit := _round_limit(floor, ref)) is not None]
    return min(found, default=None)


def _round_limit(floor: Floor, ref: Ref) -> float | None:
    job = floor.loaded.job
    stacks = [read_stack(floor, i) for i, asked in enumerate(job.require) if asked.what == "run-out"]
    mine = (ref.part, ref.surface)
    limits = []
    for stack in stacks:
        of = floor.loaded.ref(stack.of) if stack.of else None
        if of is not None and (of.part, of.surface) == mine and stack.high is not None:
            limits.append(stack.high)
    if limits:
        return min(limits)
    node = job.parts[ref.part].surfaces[ref.surface]
    return tolerance(node.diameter) if isinstance(node, Round) else None


_HERE = {"floor": "route.floor", "entry": ":", "op": "@op"}

CLAMP = (
    Quantity("clamp.grip", "hold", "mm", 1, grip, {"entry": ":"}, "length that the jaws hold"),
    Quantity("clamp.grip_wanted", "hold", "mm", 1, grip_wanted, _HERE, "length that the jaws should hold"),
    Quantity("clamp.overhang", "cut", "1", 2, overhang, _HERE, "farthest cut from the jaws, over the gripped diameter"),
    Quantity("clamp.ring", "hold", "", 0, ring, _HERE, "ring between the jaws"),
    Quantity(
        "clamp.wall_share", "hold", "%", 1, wall_share, {"ring": "clamp.ring"}, "wall of the ring, of its diameter"
    ),
    Quantity(
        "clamp.lobing",
        "hold",
        "um",
        1,
        lobing,
        {**_HERE, "path": "@path", "ring": "clamp.ring"},
        "lobes left on the ring when the jaws are opened, highest to lowest radius",
    ),
    Quantity(
        "clamp.lobing_allowed",
        "hold",
        "um",
        1,
        lobing_allowed,
        {"floor": "route.floor", "op": "@op", "ring": "clamp.ring"},
        "tightest limit of what is finished in the holding",
    ),
)
