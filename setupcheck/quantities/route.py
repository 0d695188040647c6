"""The walk along the route: every setup held, cut or joined in order, so that each surface inherits its causes. mm, rad."""

from __future__ import annotations

from dataclasses import replace

from setupcheck.jobfile.models import Deviation, Machine, Toothing
from setupcheck.jobfile.names import MACHINE_KINDS, Ref
from setupcheck.jobfile.reading import LoadedJob
from setupcheck.jobfile.setups import Cut, Join, Setup
from setupcheck.ledger import route
from setupcheck.ledger.account import Account
from setupcheck.ledger.causes import Cause
from setupcheck.ledger.route import Placing, Seat, State
from setupcheck.quantities.bought import surfaces_as_bought
from setupcheck.quantities.carried_over import mid_plane_before_tilt
from setupcheck.quantities.causes import (
    Entry,
    Towards,
    Turned,
    length_error,
    play,
    run_out,
    size_error,
    stated_direction,
)
from setupcheck.quantities.dividing import divided, table_turn
from setupcheck.quantities.gaps import askew
from setupcheck.quantities.holding import Held, held_placing
from setupcheck.quantities.joining import gap_after_cooling
from setupcheck.quantities.shop import Body, Floor, outline, tooth_pattern, unknown_surface
from setupcheck.quantities.truing import not_stopped, offset_of_a_trued_part


def walk(loaded: LoadedJob) -> Floor:
    """Every surface of the job with everything it inherits.

    Raises: JobError for what can only be seen along the way (a direction that names a tooth not yet cut, …).
    """
    job, floor = loaded.job, Floor(loaded)
    for name, part in job.parts.items():
        body = floor.bodies[name] = Body(name)
        for state in surfaces_as_bought(name, part, _cut_here(loaded, name), _worm_angle(loaded, name)):
            body.add(state)
    for setup in job.setups:
        if setup.join is not None:
            _join(floor, setup, setup.join)
        else:
            _hold_and_cut(floor, setup)
    return floor


def _cut_here(loaded: LoadedJob, part: str) -> frozenset[str]:
    refs = (loaded.ref(name, setup.part) for setup in loaded.job.setups for name in setup.cut)
    return frozenset(ref.surface for ref in refs if ref.part == part)


def _worm_angle(loaded: LoadedJob, part: str) -> float | None:
    """Pressure angle that the worm gives to the wheel's teeth [rad], for the part the mesh names."""
    mesh, worm = loaded.job.mesh, loaded.job.worm
    if mesh is None or worm is None or loaded.ref(mesh.wheel).part != part:
        return None
    return worm.pressure_angle


def machine_of(loaded: LoadedJob, setup: Setup) -> tuple[str | None, Machine | None]:
    """(name, record) of a setup's machine; a machine called by its kind has a record without figures."""
    name = setup.machine
    if name is None:
        return None, None
    found = loaded.job.machines.get(name)
    if found is None and name in MACHINE_KINDS:
        found = Machine.model_validate({"kind": name})
    return name, found


def ratio_at(op: int, called: str | None, machine: Machine | None) -> str:
    """The key that states the ratio, or would: that of the machine, or first of all which machine it is."""
    return f"machines.{called}.worm_ratio" if machine is not None else f"setups.{op}.machine"


def _hold_and_cut(floor: Floor, setup: Setup) -> None:
    first = floor.loaded.ref(next(iter(setup.cut)), setup.part)
    part = setup.part if setup.part is not None else first.part
    held = Held(floor, setup, floor.body(part), part)
    if setup.keeps is not None:
        placing = floor.placings.get(setup.keeps)
        if placing is None:
            raise floor.problem(
                f"setups.{setup.op}.keeps",
                f"operation {setup.keeps} holds nothing",
                "Write the op whose holding was never opened",
            )
    else:
        assert setup.hold is not None
        placing = held_placing(held, setup.hold)
    floor.placings[setup.op] = placing
    floor.part_of[setup.op] = held.part
    for name, cut in setup.cut.items():
        _cut(floor, held, placing, name, cut)
    for cut in setup.cut.values():
        for gone in cut.removes:
            ref = held.ref(gone)
            floor.removed[ref.part, ref.surface] = setup.op


def _cut(floor: Floor, held: Held, placing: Placing, name: str, cut: Cut) -> None:
    loaded, setup, op = floor.loaded, held.setup, held.setup.op
    ref = held.ref(name)
    if floor.body(ref.part) is not held.body:
        raise floor.problem(
            f"setups.{op}.cut.{name}",
            f"{ref} is not on the part held here",
            "Write a setup of its own for it, or join the parts first",
        )
    node = loaded.job.parts[ref.part].surfaces[ref.surface]
    before = held.body.now(ref)
    drawn = (
        before
        if before is not None
        else unknown_surface(ref.part, ref.surface, node, f"setups.{op}", _worm_angle(loaded, ref.part))
    )
    if before is None:
        ends = sorted((floor.z(ref.part, drawn.low), floor.z(ref.part, drawn.high)))
        drawn = replace(drawn, low=ends[0], high=ends[1], facing=drawn.facing * floor.sense(ref.part))
    target = _as_cut(
        drawn,
        cut,
        outline(node).diameter,
        floor.z(ref.part, outline(node).low),
        floor.z(ref.part, cut.to) if cut.to is not None else None,
    )
    error, turn = _machine_error(floor, setup, ref), Account()
    if target.pattern is not None:
        fresh = tooth_pattern(node, _worm_angle(loaded, ref.part))
        assert fresh is not None
        start = floor.sense(ref.part) * fresh.start + (floor.mark(ref.part) or 0.0)
        fresh = replace(fresh, start=start)
        called, machine = machine_of(loaded, setup)
        on_table = node.kind in ("holes", "slot", "lines") and machine is not None and machine.kind == "rotary-table"
        pattern = divided(
            fresh,
            setup.divide,
            cut,
            op=op,
            name=name,
            turn=placing.sg,
            worm_ratio=machine.worm_ratio if machine is not None else None,
            ratio_at=ratio_at(op, called, machine),
            on_table=on_table,
            holes=node.kind in ("holes", "slot", "lines"),
        )
        turn = table_turn(cut, op=op, name=name, radius=fresh.radius, on_table=on_table)
        if node.kind in ("teeth", "slot"):
            at_table = turn * fresh.radius if on_table or cut.spindle_to_axis else None
            lies = askew(setup, cut, name, node, radius=fresh.radius, table_y=at_table)
            pattern = replace(pattern, aside=lies.aside, off_sideways=lies.off_sideways, off_deep=lies.off_deep)
            turn += lies.clock
        target = replace(target, pattern=pattern)
    state = route.cut(
        placing,
        replace(target, op=op),
        machine_offset=error,
        machine_lean=Account(),
        dial=_dial(setup, cut, name, isinstance(node, Toothing)),
        index=turn,
    )
    source = before if before is not None else held.body.now(held.ref(cut.from_surface)) if cut.from_surface else None
    if source is not None:
        floor.stock[f"{op}/{name}"] = (source, state)
    held.body.add(state)
    floor.removed.pop((ref.part, ref.surface), None)


def _as_cut(state: State, cut: Cut, drawn_diameter: float | None, drawn_low: float, to: float | None) -> State:
    """Shape that this cut leaves: its drawing size, `to` (a face: its position), or with the stock that is left on."""
    low, high, diameter = state.low, state.high, drawn_diameter
    if state.kind == "face":
        low = high = to if to is not None else drawn_low + state.facing * (cut.leave or 0.0)
    elif diameter is not None:
        outward = -1.0 if state.kind == "bore" else 1.0
        left = (
            cut.leave_on_diameter
            if cut.leave_on_diameter is not None
            else 2.0 * (cut.leave_on_radius or cut.leave or 0.0)
        )
        diameter = cut.to if cut.to is not None else diameter + outward * left
    return replace(state, low=low, high=high, diameter=diameter, rough=cut.state == "rough")


def _dial(setup: Setup, cut: Cut, name: str, teeth: bool) -> Account:
    """Length error of this cut; teeth may have it stated with the mid-plane of the head."""
    op, path, given = setup.op, f"setups.{setup.op}.cut.{name}.error", cut.error
    words = f"op {op}, {name}: length by dial"
    if teeth and given is None and setup.head is not None and setup.head.mid_plane is not None:
        given, path = setup.head.mid_plane.error, f"setups.{op}.head.mid_plane.error"
        words = f"op {op}, {name}: mid-plane found {setup.head.mid_plane.found.replace('-', ' ')}"
        if setup.head.mid_plane.found == "before-tilt":
            return mid_plane_before_tilt(setup.head, op, name)
    return length_error(given, Entry(words, op, path, "dial"))


def _machine_error(floor: Floor, setup: Setup, ref: Ref) -> Account:
    """Error motion of the machine's own axis, new for each cut [mm]."""
    called, machine = machine_of(floor.loaded, setup)
    twice = sum(ref.surface in part.surfaces for part in floor.loaded.job.parts.values()) > 1
    name = f"{ref.part}.{ref.surface}" if twice else ref.surface
    op = setup.op
    if machine is None:
        return Account.of(
            Cause(f"op {op}, {name}: axis of the machine", "undetermined", op, missing=f"setups.{op}.machine")
        )
    path = f"machines.{called}.axis_runout" if called in floor.loaded.job.machines else f"setups.{op}.machine"
    given = machine.axis_runout
    if given is None:
        given = Deviation(device=machine.kind)
    entry = Entry(f"op {op}, {name}: axis of {called}", op, path, machine.kind, "axis")
    return run_out(given, entry, inside=False, towards=Towards(), turned=Turned())


def _join(floor: Floor, setup: Setup, join: Join) -> None:
    """The inner part and all that hangs on it come into the frame of the outer one."""
    loaded, op = floor.loaded, setup.op
    outer, inner = loaded.ref(join.outer), loaded.ref(join.inner)
    body, other = floor.body(outer.part), floor.body(inner.part)
    if body is other:
        raise floor.problem(
            f"setups.{op}.join",
            f"{outer.part} and {inner.part} are one piece already",
            "Write another outer or inner surface, or drop this step",
        )
    bore, journal = body.now(outer), other.now(inner)
    for ref, state, key in ((outer, bore, "outer"), (inner, journal, "inner")):
        if state is None:
            raise floor.problem(
                f"setups.{op}.join.{key}",
                f"{ref} is not made yet when operation {op} joins it",
                "Cut it in an earlier operation, or say what is `given` of the bought part",
            )
    assert bore is not None and journal is not None
    face, shoulder, middle, spacer = _contact_faces(floor, setup, join, body, other)
    sense, shift = 1, bore.z - journal.z
    if face is not None and shoulder is not None:
        sense = 1 if face.facing == -shoulder.facing else -1
        shift = face.z + face.facing * middle - sense * shoulder.z
    turn = _mounting(floor, join, outer.part, inner.part, sense)
    seat = Seat(sense, shift, turn)
    turned = Cause(
        f"op {op}, angle at which {outer.part} was put on {inner.part}", "ring", op, high=1.0, mode="derived"
    )

    clock = Account()
    if turn is None:
        missing = f"setups.{op}.join.mounted_at"
        clock = Account.of(Cause(f"op {op}: where the parts are clocked", "undetermined", op, missing=missing)).along(1)

    def moved(state: State, offset: Account, lean: Account, axial: Account) -> State:
        return route.joined(state, seat, offset=offset, lean=lean, axial=axial, clock=clock, unknown=turned)

    still = Account()
    seated = moved(journal, still, still, still)
    low, high = max(bore.low, seated.low), min(bore.high, seated.high)
    if high <= low:
        raise floor.problem(
            f"setups.{op}.join",
            f"{outer} from {bore.low:g} to {bore.high:g} mm and {inner} from {seated.low:g} to {seated.high:g} mm "
            "do not meet where the stop brings them",
            "Check the sizes along the axis and the faces of the stop",
        )
    near, far = _fit_errors(floor, op, join, bore)
    lean = _joint_lean(
        op,
        join,
        bore.lean - (far - near) * (1.0 / (high - low)) - seated.lean,
        face,
        moved(shoulder, still, still, still) if shoulder is not None else None,
    )
    middle_z = (low + high) / 2.0  # the parts touch where bore and journal overlap, so the joint turns about its middle
    level = moved(journal, still, lean, still)
    offset = bore.axis_at(middle_z) - (near + far) * 0.5 - level.axis_at(middle_z)
    if join.trued is not None:
        offset = offset_of_a_trued_part(
            floor, op, join, body, other, leaned=lambda state: moved(state, still, lean, still)
        )
        floor.truings[op] = bore.axis_at(middle_z) - level.axis_at(middle_z) - offset
    axial = not_stopped(op)
    if face is not None and shoulder is not None:
        met = moved(shoulder, offset, lean, still)
        radius = (
            min(d / 2.0 for d in (face.diameter, shoulder.diameter) if d) if face.diameter or shoulder.diameter else 0.0
        )
        lift = Account()
        if join.square != "shoulder":
            if radius:
                lift = Account.of(
                    route.high_point(
                        f"op {op}, {outer.part} on {inner.part}: faces meet at the high point",
                        face=face,
                        lean=met.lean,
                        radius=radius,
                        op=op,
                    )
                )
            else:
                lift = Account.of(
                    Cause(
                        f"op {op}, {outer.part} on {inner.part}: where the faces touch",
                        "undetermined",
                        op,
                        missing=f"parts.{inner.part}.surfaces.{shoulder.name}.diameter",
                    )
                ).along(1)
        gap = gap_after_cooling(floor, join, op=op, length=high - low)
        axial = face.axial + (spacer + lift + gap) * float(face.facing) - met.axial
    for states in other.states.values():
        for state in states:
            body.add(moved(state, offset, lean, axial))
    for op_before, placing in floor.placings.items():
        if floor.bodies[floor.part_of[op_before]] is other:
            floor.placings[op_before] = route.joined_placing(
                placing, seat, offset=offset, lean=lean, axial=axial, clock=clock, unknown=turned
            )
    for name in (name for name, old in floor.bodies.items() if old is other):
        own, way = floor.frames.get(name, (1, 0.0))
        floor.frames[name] = (sense * own, sense * way + shift)
        mark = floor.mark(name)
        floor.marks[name] = sense * mark + turn if mark is not None and turn is not None else None
    for name, old in floor.bodies.items():
        if old is other:
            floor.bodies[name] = body


def _mounting(floor: Floor, join: Join, outer: str, inner: str, sense: int) -> float | None:
    """Angle by which the inner body's directions are turned into the outer's, after `sense` [rad]; None if not known.

    The outer part's mark stands at `mounted_at` of the inner part.  Source: geometry, derived here.
    """
    theirs, ours = floor.mark(inner), floor.mark(outer)
    if join.mounted_at is None or theirs is None or ours is None:
        return None
    return ours - sense * (floor.sense(inner) * join.mounted_at + theirs)


def _contact_faces(
    floor: Floor, setup: Setup, join: Join, body: Body, other: Body
) -> tuple[State | None, State | None, float, Account]:
    """(outer's face, inner's face, length of the spacers between them, its error); None where no stop is stated."""
    if join.stop is None:
        return None, None, 0.0, Account()
    path = f"setups.{setup.op}.join.stop"
    if join.stop.against is None:
        raise floor.problem(path, "this joint does not say what it stops against", "Write against: spindle.shoulder")
    on, against = floor.loaded.ref(join.stop.on), floor.loaded.ref(join.stop.against)
    face, shoulder = body.now(on), other.now(against)
    for ref, state, key in ((on, face, "on"), (against, shoulder, "against")):
        if state is None or not state.facing:
            raise floor.problem(
                f"{path}.{key}",
                f"{ref} is no face that is there when operation {setup.op} joins",
                f"Write a finished face of the {'outer' if key == 'on' else 'inner'} part",
            )
    middle, error = 0.0, Account()
    for i, spacer in enumerate(join.stop.spacers):
        length, one = size_error(
            spacer.length, Entry(f"op {setup.op}, {spacer.name}", setup.op, f"{path}.spacers[{i + 1}].length", "")
        )
        middle, error = middle + length, error + one
    if join.stop.error is not None:
        error += length_error(
            join.stop.error, Entry(f"op {setup.op}, seating of {on.surface}", setup.op, f"{path}.error", "")
        )
    return face, shoulder, middle, error


def _joint_lean(op: int, join: Join, of_fit: Account, face: State | None, shoulder: State | None) -> Account:
    """tau: the lean the inner frame takes on, from the long fit (`bore`) or from the faces (`shoulder`)."""
    if join.square == "bore":
        return of_fit
    if join.square == "shoulder" and face is not None and shoulder is not None:
        return face.lean - shoulder.lean
    missing = f"setups.{op}.join.{'stop' if join.square == 'shoulder' else 'square'}"
    return Account.of(Cause(f"op {op}: how the joint leans", "undetermined", op, missing=missing))


def _fit_errors(floor: Floor, op: int, join: Join, bore: State) -> tuple[Account, Account]:
    """epsilon of a joint at the low and the high end of the fit: none for an interference fit, play, or what is stated.

    A long fit that rules the lean has its error at both ends, each for itself (one play, two directions); a short one that
    the shoulder squares has one error for the whole of it, and so has a reading with a direction.
    """
    path, long = f"setups.{op}.join", join.square == "bore"
    name = f"op {op}, {bore.name} on its seat"
    towards = floor.in_body(bore.part, stated_direction(join.fit_error.high_at if join.fit_error else None))
    ends = []
    for end in (" at its low end", " at its high end"):
        total = Account()
        if join.clearance is not None or join.by == "slide":
            entry = Entry(f"{name}: clearance{end if long else ''}", op, f"{path}.clearance", join.by)
            total += play(join.clearance, entry, rests=join.rests or "free", pair=f"{name}: play" if long else "")
        if join.fit_error is not None or join.by in ("taper", "screw", "bond"):
            one = long and towards.angle is None
            entry = Entry(f"{name}: run-out{end if one else ''}", op, f"{path}.fit_error", join.by)
            total += run_out(join.fit_error, entry, inside=True, towards=towards, turned=Turned())
        ends.append(total)
    return ends[0], ends[1]
