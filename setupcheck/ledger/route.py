"""The route: how holding, cutting, stopping and joining hand errors from surface to surface. Lengths mm, angles rad.

Everything is kept in the part frame: z along the part, directions complex, counter-clockwise from the part's mark seen
from the +z end. `sg` is +1, or -1 when the part's +z points into the spindle. The axis of a surface is
axis(z) = offset + lean (z - z_mid); a face is the plane z = axial - Re(conj(lean) p).

Source: small rigid displacements (the first-order kinematics of any mechanics text), derived here; the tests hold an
exact rigid-body simulation that shares no code with this package.
"""

from __future__ import annotations

import cmath
from dataclasses import field, replace

from setupcheck.ledger.account import Account, real
from setupcheck.ledger.causes import Cause
from setupcheck.record import record


@record(eq=False)
class Scatter:
    """Errors that each tooth or hole draws for itself: uniform within +-`bound`.

    along    "angle" [rad about the index axis], "radial" or "tangential" [mm], "coordinate" [mm along one machine axis]
    around   share of the bound that a place has round the circle, in the sense of the numbering; empty: all of it
    outward  share that a place has outwards, of a coordinate only, drawn together with the share round the circle
    either   each place draws -`bound` or +`bound` and nothing between
    groups   number of the draw that a place shares with others, 0, 1, …; empty: each place has its own
    """

    cause: Cause
    along: str
    bound: float
    around: tuple[float, ...] = ()
    outward: tuple[float, ...] = ()
    either: bool = False
    groups: tuple[int, ...] = ()

    @property
    def goes_round(self) -> bool:
        return self.along != "radial"

    @property
    def goes_outward(self) -> bool:
        return self.along in ("radial", "coordinate")


@record(eq=False)
class Periodic:
    """An index error that comes `harmonic` times per turn of the work: Delta_j = Re(X exp(-i h theta_j)) [rad]."""

    cause: Cause
    harmonic: int


@record(eq=False)
class Shaped:
    """An index error of one real value and a known share for each place: Delta_j = X shape_j [rad]. A drift is one."""

    cause: Cause
    shape: tuple[float, ...]


@record(eq=False)
class Pattern:
    """Teeth or holes: `count` places on radius `radius`, the j-th cut at theta_j = turn 2 pi (j - 1)/count + start.

    pressure_angle  of the flanks [rad], None where it is not stated or where there are no flanks
    rounding        known index errors of the rounded settings [rad], one per place, or empty
    outwards        known radial errors of the single places [mm], one per place, or empty
    shaped          real causes [rad] with their share at each place
    radial          account of an error of the pattern radius itself [mm]
    aside           real account of how far every gap's middle stands beside the axis it is indexed about [mm]
    off_sideways    real account of the angle by which every gap runs off that axis sideways [rad]
    off_deep        the same towards its bottom: a gap that grows deeper to one end [rad]
    """

    count: int
    radius: float
    turn: int = 1
    start: float = 0.0
    pressure_angle: float | None = None
    periodic: tuple[Periodic, ...] = ()
    scatter: tuple[Scatter, ...] = ()
    rounding: tuple[float, ...] = ()
    outwards: tuple[float, ...] = ()
    shaped: tuple[Shaped, ...] = ()
    radial: Account = field(default_factory=Account)
    aside: Account = field(default_factory=Account)
    off_sideways: Account = field(default_factory=Account)
    off_deep: Account = field(default_factory=Account)

    def angle(self, number: float) -> float:
        """Direction of place `number` (1 = first cut) in the part frame [rad]."""
        return self.start + self.turn * cmath.tau * (number - 1) / self.count if self.count else self.start


@record(eq=False)
class State:
    """One surface as one operation left it.

    part, name, op  `wheel`, `rim`, 30 (None: bought or stock)
    kind            cylinder, bore, face, throat, teeth, holes, slot, centre, taper, thread
    low, high       axial extent in the frame of the body [mm]; z is its middle
    diameter        as this operation leaves it [mm], None where it has none
    facing          +1 or -1 for faces, 0 otherwise
    rough           the planner calls it rough
    offset, lean    of the axis at z (complex); of a face: lean of its normal
    axial, clock    deviation along z and about z (real)
    """

    part: str
    name: str
    op: int | None
    kind: str
    low: float
    high: float
    diameter: float | None
    facing: int
    offset: Account
    lean: Account
    axial: Account
    clock: Account
    rough: bool = False
    pattern: Pattern | None = None

    @property
    def z(self) -> float:
        return (self.low + self.high) / 2.0

    @property
    def ref(self) -> str:
        return f"{self.part}.{self.name}"

    def axis_at(self, z: float) -> Account:
        """Where the axis stands at height z, as a vector from the frame's axis."""
        return self.offset + self.lean * (z - self.z)


@record(eq=False)
class Placing:
    """One rigid small displacement, found from datums: the machine (or a mating part) seen from the part.

    axis at z = offset + lean z;  `axial` of its length zero;  `clock` of its angle zero;  `sg` as in the module text.
    """

    offset: Account
    lean: Account
    axial: Account
    clock: Account
    sg: int = 1

    def axis_at(self, z: float) -> Account:
        return self.offset + self.lean * z


def part_vector(vector: Account, *, sg: int, inserted_at: float) -> Account:
    """A vector given in the machine's frame, seen from the part: exp(-i psi) v, or exp(i psi) conj(v) when reversed.

    inserted_at  psi [rad], where the part's mark stands from the machine's mark
    """
    if sg > 0:
        return vector * cmath.exp(-1j * inserted_at)
    return vector.mirrored() * cmath.exp(1j * inserted_at)


def axis_from_face(
    datum: Account, *, z_datum: float, centring: Account, face_lean: Account, seating: Account
) -> tuple[Account, Account]:
    """Machine axis (offset at z = 0, lean) of a part centred in one plane and squared by a face.

    t = t_S - eta;  C(z) = axis_D(z_D) - epsilon + t (z - z_D)
    datum      axis of the centred surface at z_datum [mm]
    centring   epsilon: datum minus machine axis in that plane [mm]
    seating    eta: lean of the face minus the machine's [rad]
    Source: derived here (rigid body located by a plane and a centre).
    """
    lean = face_lean - seating
    return datum - centring - lean * z_datum, lean


def axis_from_planes(first: Account, second: Account, *, z_first: float, z_second: float) -> tuple[Account, Account]:
    """Machine axis (offset at z = 0, lean) of a part centred in two planes; each account is axis_D - epsilon there.

    C(z) = [(z2 - z) p1 + (z - z1) p2] / (z2 - z1);  raises ValueError where the planes fall together.
    Source: derived here (straight line through two points).
    """
    if z_first == z_second:
        raise ValueError("two centring planes at one height say nothing about the lean")
    lean = (second - first) * (1.0 / (z_second - z_first))
    return first - lean * z_first, lean


def touched_height(face: State, lean: Account, *, point: complex | None, ring: Cause | None) -> Account:
    """Axial position at which a stop meets a face, seen along the machine axis [mm].

    point  where a single stop touches, from the axis [mm]: a_F - Re(conj(t_F - t) q)
    ring   `high-point` cause for a ring or plate that meets the highest point of a face which does not square:
           a_F + facing rho |t_F - t|; None when the face itself squares and lies on its stop all round
    Source: derived here (plane against point or ring).
    """
    height = face.axial
    if point is not None:
        return height - (face.lean - lean).along(point)
    if ring is not None:
        return height + Account.of(ring) * float(face.facing)
    return height


def high_point(key: str, *, face: State, lean: Account, radius: float, op: int | None) -> Cause:
    """The cause rho |t_F - t|: how far a leaning face reaches over its own middle on a ring of radius rho [mm]."""
    return Cause(key, "high-point", op, mode="derived", of=(face.lean - lean) * radius)


def clocked(face: State, pattern: Pattern, placing_axis: Account, *, number: int) -> Account:
    """Angle of the machine's zero found by touching a feature (keyway, tooth gap, hole), place `number` of its pattern.

    k = k_F + Im((axis_F - C)(z_F) exp(-i theta_F)) / rho_F + Delta_F [rad], Delta_F the division error of that place.
    Source: derived here (tangential shift over radius).
    """
    shift = face.offset - placing_axis
    across = shift.along(1j * cmath.exp(1j * pattern.angle(number)))
    return face.clock + across * (1.0 / pattern.radius) + index_error(pattern, number)


def index_error(pattern: Pattern, number: int) -> Account:
    """Division error of one place, counter-clockwise in the part frame [rad]: what it hands on when it clocks a part.

    A scatter is drawn anew for that place, within the same bound.  Source: derived here.
    """
    j = number - 1
    total = real(pattern.rounding[j] if pattern.rounding else 0.0)
    for periodic in pattern.periodic:
        total += Account.of(periodic.cause).along(cmath.exp(1j * periodic.harmonic * cmath.tau * j / pattern.count))
    for scatter in pattern.scatter:
        if not scatter.goes_round:
            continue
        cause = scatter.cause
        if cause.law != "undetermined":
            cause = replace(cause, key=f"{cause.key}, place {number}", law="length", high=scatter.bound)
        share = scatter.around[j] if scatter.around else 1.0
        total += Account.of(cause).along(share if scatter.along == "angle" else share / pattern.radius)
    for shaped in pattern.shaped:
        total += Account.of(shaped.cause).along(shaped.shape[j])
    return total * float(pattern.turn)


def cut(
    placing: Placing,
    surface: State,
    *,
    machine_offset: Account,
    machine_lean: Account,
    dial: Account,
    index: Account | None = None,
) -> State:
    """The surface as this holding cuts it: axis = machine axis + machine error, length = stop + sg dial.

    machine_lean  zero for everything cut while the work turns or is indexed about the axis
    Source: derived here.
    """
    return replace(
        surface,
        offset=placing.axis_at(surface.z) + machine_offset,
        lean=placing.lean + machine_lean,
        axial=placing.axial + dial * float(placing.sg),
        clock=placing.clock + (index or Account()) * float(placing.sg),
    )


@record(eq=False)
class Seat:
    """How the inner part's frame lies in the outer part's: z_outer = sense z_inner + shift, turned by `turned` [rad]."""

    sense: int
    shift: float
    turned: float | None

    def turn(self, vector: Account, unknown: Cause) -> Account:
        """A vector of the inner part in the outer's frame; `unknown` stands for a mounting angle nobody recorded."""
        if self.turned is None:
            seen = vector if self.sense > 0 else vector.mirrored()
            return seen.turned_by_an_unknown_angle(unknown)
        return part_vector(vector, sg=self.sense, inserted_at=-self.sense * self.turned)


def joined(
    state: State, seat: Seat, *, offset: Account, lean: Account, axial: Account, clock: Account, unknown: Cause
) -> State:
    """A surface of the inner part in the frame of the outer one, after the small displacement (offset, lean, axial).

    offset, lean, axial, clock  displacement of the inner frame: axis' = R(axis) + offset + lean z, a' = s a + axial
    unknown                     ring cause of radius 1 for a mounting angle that nobody recorded (seat.turned is None)
    Source: derived here (change of frame; a reversed part mirrors its directions).
    """

    def turn(vector: Account) -> Account:
        return seat.turn(vector, unknown)

    ends = sorted((seat.sense * state.low + seat.shift, seat.sense * state.high + seat.shift))
    z = (ends[0] + ends[1]) / 2.0
    pattern = state.pattern
    if pattern is not None:
        pattern = replace(
            pattern, turn=pattern.turn * seat.sense, start=seat.sense * pattern.start + (seat.turned or 0.0)
        )
    return replace(
        state,
        low=ends[0],
        high=ends[1],
        facing=state.facing * seat.sense,
        pattern=pattern,
        offset=turn(state.offset) + offset + lean * z,
        lean=turn(state.lean) * float(seat.sense) + lean,
        axial=state.axial * float(seat.sense) + axial,
        clock=state.clock * float(seat.sense) + clock,
    )


def joined_placing(
    placing: Placing, seat: Seat, *, offset: Account, lean: Account, axial: Account, clock: Account, unknown: Cause
) -> Placing:
    """The machine that holds the inner part, in the frame of the outer one: the same change of frame as `joined`."""

    def turn(vector: Account) -> Account:
        return seat.turn(vector, unknown)

    at_zero = placing.axis_at(-seat.sense * seat.shift)  # the inner frame's height of the outer frame's zero
    return Placing(
        turn(at_zero) + offset,
        turn(placing.lean) * float(seat.sense) + lean,
        placing.axial * float(seat.sense) + axial,
        placing.clock * float(seat.sense) + clock,
        placing.sg * seat.sense,
    )


def bought(
    root: State,
    *,
    name: str,
    facing: int,
    low: float,
    high: float,
    kind: str,
    diameter: float | None,
    near: Account,
    far: Account,
    lean: Account | None,
    axial: Account,
    clock: Account,
) -> State:
    """A surface of a bought part, stated relative to another one (`root`).

    near, far  offset from the root's axis at the low and at the high end [mm]
    lean       stated lean relative to the root (faces), None to take it from near and far
    Source: derived here.
    """
    relative = lean if lean is not None else ((far - near) * (1.0 / (high - low)) if high > low else Account())
    z = (low + high) / 2.0
    return State(
        root.part,
        name,
        None,
        kind,
        low,
        high,
        diameter,
        facing,
        offset=root.axis_at(z) + (near + far) * 0.5,
        lean=root.lean + relative,
        axial=root.axial + axial,
        clock=root.clock + clock,
    )


def untouched(
    part: str,
    name: str,
    *,
    kind: str,
    low: float,
    high: float,
    diameter: float | None,
    facing: int,
    causes: tuple[Cause, Cause, Cause, Cause],
    pattern: Pattern | None = None,
) -> State:
    """A surface about which nothing is stated yet: offset, lean, length and angle are undetermined causes of its own."""
    offset, lean, axial, clock = (Account.of(c) for c in causes)
    return State(
        part,
        name,
        None,
        kind,
        low,
        high,
        diameter,
        facing,
        offset,
        lean,
        axial.along(1 + 0j),
        clock.along(1 + 0j),
        pattern=pattern,
    )
