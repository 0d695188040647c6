"""From a hold in the job file to the machine's axis, stop and clock seen from the part. mm, rad."""

from __future__ import annotations

import cmath
import math
import re

from setupcheck.jobfile.models import Deviation
from setupcheck.jobfile.names import Ref
from setupcheck.jobfile.setups import Centre, Clock, Hold, Setup, Square, Stop
from setupcheck.ledger import route
from setupcheck.ledger.account import Account
from setupcheck.ledger.causes import Cause
from setupcheck.ledger.route import Placing, State
from setupcheck.notation import NotationError, angle
from setupcheck.quantities.causes import Entry, Towards, Turned, face_lean, length_error, play, run_out, size_error
from setupcheck.quantities.devices import DEVICES, Device
from setupcheck.quantities.shop import Body, Datum, Floor
from setupcheck.record import record


@record(frozen=False)
class Held:
    """One setup being held: everything the pieces below need."""

    floor: Floor
    setup: Setup
    body: Body
    part: str

    @property
    def op(self) -> int:
        return self.setup.op

    @property
    def sg(self) -> int:
        return (self.setup.looks_at_tool or 1) * self.floor.sense(self.part)

    def path(self, step: str) -> str:
        return f"setups.{self.op}.hold.{step}"

    def turned(self, centre: Centre | None = None) -> Turned:
        """How the body lies in the machine; what `centre` (the first plane of the hold) says holds for the whole part."""
        first = self.setup.hold.centre if self.setup.hold is not None else None
        stated = next((c.turned for c in (centre, first) if c is not None and c.turned is not None), 0.0)
        return Turned(self.sg, stated - self.sg * (self.floor.mark(self.part) or 0.0))

    def of_part(self, angle: float) -> Towards:
        """A direction counted from the held part's own mark, in the frame of its body."""
        return self.floor.in_body(self.part, Towards(angle, why="known"))

    def ref(self, text: str) -> Ref:
        own = self.setup.part or (self.part if "." not in text and text.partition("@")[0] in self._own() else None)
        return self.floor.loaded.ref(text, own)

    def _own(self) -> tuple[str, ...]:
        return self.floor.loaded.surfaces()[self.part]

    def datum(self, text: str, step: str, at: float | None) -> State | None:
        """The surface a hold refers to, as it stands now; notes under `op/step` how it was found."""
        ref = self.ref(text)
        state = self.body.now(ref) if self.floor.body(ref.part) is self.body else None
        cut_here = ref.op is None and any(self.ref(name) == ref for name in self.setup.cut)
        if state is None:
            found = Datum("same-holding" if cut_here else "not-yet-made", None)
        elif cut_here and self._lies_on(step):
            found = Datum("same-holding", state.op)
        elif gone := self._gone(state, at):
            found = Datum("cut-away", gone)
        else:
            found = Datum(
                "stock" if state.op is None and self._is_stock(ref) else "rough" if state.rough else "made", state.op
            )
        self.floor.datums[f"{self.op}/{step}"] = found
        return state

    def _lies_on(self, step: str) -> bool:
        """True where the device covers the surface it holds, so that nothing can be cut there."""
        entry = getattr(self.setup.hold, step, None) if self.setup.hold is not None else None
        return isinstance(entry, Centre) and DEVICES[entry.by].covers

    def _is_stock(self, ref: Ref) -> bool:
        return self.floor.loaded.job.parts[ref.part].surfaces[ref.surface].made == "stock"

    def _gone(self, state: State, at: float | None) -> int | None:
        """Operation that took this surface (or the place `at` on it) away, None while it stands."""
        key = (state.part, state.name)
        if key in self.floor.removed:
            return self.floor.removed[key]
        if state.kind not in ("cylinder", "taper", "thread") or state.diameter is None:
            return None
        place = state.z if at is None else self.floor.z(state.part, at)
        for (part, name), states in self.body.states.items():
            for later in states:
                if (
                    part == state.part
                    and name != state.name
                    and later.op is not None
                    and later.op > (state.op or 0)
                    and later.kind in ("cylinder", "taper")
                    and later.diameter is not None
                    and later.low <= place <= later.high
                    and later.diameter < state.diameter
                ):
                    return later.op
        return None


def direction(held: Held, given: Deviation | None, path: str, device: Device) -> Towards:
    """Which way a reading is high: a tooth, hole, mark, angle or slot of the part; a jaw only where a mark ties it."""
    if given is None or given.high_at is None:
        return Towards()
    text = given.high_at.strip()
    if text == "mark":
        return held.of_part(0.0)
    named = re.fullmatch(r"(tooth|gap|hole|jaw)\s+(\d+)", text)
    if named and named[1] == "jaw":
        if given.mark != "kept" or not device.jaws:
            return Towards(why="no-mark")
        return Towards(math.tau * (int(named[2]) - 1) / device.jaws, of_machine=True, why="known")
    if named:
        return Towards(_place_angle(held, named[1], int(named[2]), path), why="known")
    try:
        return held.of_part(angle(text))
    except NotationError:
        pass
    state = held.body.now(Ref(held.part, text)) if text in held.floor.loaded.surfaces()[held.part] else None
    if state is not None and state.pattern is not None:
        return Towards(state.pattern.angle(1), why="known")
    raise held.floor.problem(
        f"{path}.high_at",
        f"'{text}' names no direction",
        "Write a tooth or hole already cut (tooth 14), an angle from the mark (90 deg), mark, or jaw 2",
    )


def _place_angle(held: Held, thing: str, number: int, path: str) -> float:
    """Direction of tooth, gap or hole `number` [rad]; an error in the file while it is not cut, or where two rings have it.

    Gap n is the n-th cut; tooth n stands between gap n and the next one, half a pitch further.
    """
    kind = "holes" if thing == "hole" else "teeth"
    cut = [
        states[-1]
        for states in held.body.states.values()
        if states[-1].kind == kind and (states[-1].op is not None or states[-1].part != held.part)
    ]
    if len(cut) > 1:
        raise held.floor.problem(
            f"{path}.high_at",
            f"{' and '.join(s.ref for s in cut)} both have a {thing} {number}",
            "Write an angle from the part's mark, as in high_at: 90 deg",
        )
    for state in cut:
        if state.pattern is not None:
            if not 1 <= number <= state.pattern.count:
                raise held.floor.problem(
                    f"{path}.high_at",
                    f"{state.name} has {state.pattern.count} places, not {number}",
                    f"Write a number from 1 to {state.pattern.count}",
                )
            return state.pattern.angle(number + 0.5 if thing == "tooth" else number)
    raise held.floor.problem(
        f"{path}.high_at",
        f"{thing} {number} is not cut yet when operation {held.op} is set up",
        "Write an angle from the part's mark, as in high_at: 90 deg",
    )


def _entry(held: Held, centre: Centre, step: str, what: str, key: str) -> Entry:
    words = DEVICES[centre.by].words
    path = f"{held.path(step)}.{key}"
    return Entry(f"op {held.op}, {centre.on} {words}: {what}", held.op, path, centre.by, second=step == "and_centre")


def centring(held: Held, centre: Centre, step: str, state: State, *, pair: str) -> Account:
    """epsilon: datum minus machine axis in one plane, from run-out, play, readout axes and devices under devices."""
    device, path, plane = DEVICES[centre.by], held.path(step), "" if step == "centre" else ", second plane"
    total = Account()
    if device.xy or centre.x is not None or centre.y is not None:
        entry = _entry(held, centre, step, f"zero along x and y{plane}", "x")
        if centre.x is None or centre.y is None:
            missing = f"{path}.{'x' if centre.x is None else 'y'}"
            total += Account.of(Cause(entry.name, "undetermined", held.op, missing=missing))
        else:
            zero = Cause(
                entry.name, "rectangle", held.op, low=centre.x, high=centre.y, paths=(f"{path}.x", f"{path}.y")
            )
            total += held.turned(centre).to_part(Account.of(zero))
    if centre.runout is not None or (not device.xy and centre.x is None):
        towards = direction(held, centre.runout, f"{path}.runout", device)
        held.floor.directions[f"{held.op}/{step}"] = towards.why
        total += run_out(
            centre.runout,
            _entry(held, centre, step, f"run-out{plane}", "runout"),
            inside=state.kind == "bore",
            towards=towards,
            turned=held.turned(centre),
        )
    if device.clearance or centre.clearance is not None:
        total += play(
            centre.clearance,
            _entry(held, centre, step, f"clearance{plane}", "clearance"),
            rests=centre.rests or device.rests,
            pair=pair,
        )
    for i, below in enumerate(centre.through):
        entry = Entry(
            f"op {held.op}, {centre.on} through {below.by}: run-out{plane}",
            held.op,
            f"{path}.through[{i + 1}].runout",
            below.by,
        )
        total += run_out(below.runout, entry, inside=False, towards=Towards(), turned=held.turned(centre))
    return total


def _plane_height(held: Held, centre: Centre, state: State, other: float | None) -> float:
    if centre.at is not None:
        return held.floor.z(state.part, centre.at)
    if centre.grip is not None:
        return held.floor.z(state.part, (centre.grip.low + centre.grip.high) / 2.0)
    if other is not None:  # a second plane on the same surface: its far end
        return state.low if abs(state.low - other) > abs(state.high - other) else state.high
    return state.z


def held_placing(held: Held, hold: Hold) -> Placing:
    """The machine seen from the part for one hold."""
    offset, lean = _axis(held, hold)
    axial = _stop(held, hold.stop, lean)
    clock = _clock(held, hold.clock, offset, lean)
    return Placing(offset, lean, axial, clock, held.sg)


def _axis(held: Held, hold: Hold) -> tuple[Account, Account]:
    op = held.op
    nothing = (
        Account.of(Cause(f"op {op}: where the part is centred", "undetermined", op, missing=held.path("centre"))),
        Account.of(Cause(f"op {op}: how the part leans", "undetermined", op, missing=held.path("square"))),
    )
    if hold.centre is None:
        held.floor.tilt_datums[op] = int(hold.square is not None)
        flat = held.datum(hold.square.on, "square", None) if hold.square is not None else None
        if hold.square is None or flat is None:
            return nothing
        return nothing[0], flat.lean - seating(held, hold.square, flat)  # squared, but nothing says where its axis is
    state = held.datum(hold.centre.on, "centre", hold.centre.at)
    second = held.datum(hold.and_centre.on, "and_centre", hold.and_centre.at) if hold.and_centre is not None else None
    face = held.datum(hold.square.on, "square", None) if hold.square is not None else None
    grip = (
        hold.centre.grip if hold.square is None and hold.and_centre is None and DEVICES[hold.centre.by].grips else None
    )
    held.floor.tilt_datums[op] = sum(x is not None for x in (hold.and_centre, hold.square, grip))
    if state is None:
        lost = Account.of(
            Cause(f"op {op}: where the part is centred", "undetermined", op, missing=held.path("centre.on"))
        )
        return lost, nothing[1]
    z1 = _plane_height(held, hold.centre, state, None)
    pair = (
        f"op {op}, {hold.centre.on}: play"
        if hold.and_centre is not None and hold.and_centre.on == hold.centre.on
        else ""
    )
    axis, error = state.axis_at(z1), centring(held, hold.centre, "centre", state, pair=pair)
    first = axis - error
    if hold.square is not None:
        if face is None:
            lean = Account.of(Cause(f"op {op}: how the part leans", "undetermined", op, missing=held.path("square.on")))
            return first - lean * z1, lean
        return route.axis_from_face(
            axis, z_datum=z1, centring=error, face_lean=face.lean, seating=seating(held, hold.square, face)
        )
    if hold.and_centre is not None:
        if second is None:
            lean = Account.of(
                Cause(f"op {op}: how the part leans", "undetermined", op, missing=held.path("and_centre.on"))
            )
            return first - lean * z1, lean
        z2 = _plane_height(held, hold.and_centre, second, z1 if second is state else None)
        if z1 == z2:
            raise held.floor.problem(
                held.path("and_centre"),
                f"both centring planes stand at {z1:g} mm",
                "Write at: for each of them, as far apart as the part allows",
            )
        held.floor.planes[op] = (z1, z2)
        far = second.axis_at(z2) - centring(held, hold.and_centre, "and_centre", second, pair=pair)
        return route.axis_from_planes(first, far, z_first=z1, z_second=z2)
    lean = nothing[1]
    return first - lean * z1, lean


def seating(held: Held, square: Square, face: State) -> Account:
    """eta: lean of the squared face against the machine, and a chip or shim under one side of it."""
    words = f" on {square.by}" if square.by else ""
    path = held.path("square")
    across = square.across if square.across is not None else face.diameter
    if across is None:
        return Account.of(
            Cause(f"op {held.op}, {square.on}{words}: face run-out", "undetermined", held.op, missing=f"{path}.across")
        )
    entry = Entry(
        f"op {held.op}, {square.on}{words}: face run-out",
        held.op,
        f"{path}.face_runout",
        square.by or "",
        "face_runout",
    )
    towards = direction(held, square.face_runout, f"{path}.face_runout", DEVICES["faceplate"])
    held.floor.directions[f"{held.op}/square"] = towards.why
    total = face_lean(
        square.face_runout, entry, across=across, facing=face.facing or 1, towards=towards, turned=held.turned()
    )
    chip = chip_under(held, square, across)
    if chip is not None:
        total += Account.of(chip)
    return total


def chip_under(held: Held, square: Square, across: float) -> Cause | None:
    """A chip or shim under one side of the squared face: it leans the part by up to its thickness over the circle [rad].

    Nobody knows where it lies, so the lean is anywhere in its disc; what it lifts the middle by follows from the lean.
    """
    if square.chip is None:
        return None
    words = f" on {square.by}" if square.by else ""
    key = f"op {held.op}, {square.on}{words}: chip under one side"
    return Cause(key, "disc", held.op, high=square.chip / across, paths=(held.path("square.chip"),))


def _stop(held: Held, stop: Stop | None, lean: Account) -> Account:
    """a_s: the machine's zero of length, seen from the part."""
    op = held.op
    if stop is None:
        return Account.of(
            Cause(f"op {op}: where the part is stopped", "undetermined", op, missing=held.path("stop"))
        ).along(1)
    face = held.datum(stop.on, "stop", None)
    if face is None:
        return Account.of(
            Cause(f"op {op}: where the part is stopped", "undetermined", op, missing=held.path("stop.on"))
        ).along(1)
    error = length_error(stop.error, Entry(f"op {op}, stop on {stop.on}", op, f"{held.path('stop')}.error", "stop"))
    away = -float(face.facing * held.sg)  # a spacer carries the part away from the stop, towards the tool or from it
    for i, spacer in enumerate(stop.spacers):
        entry = Entry(f"op {op}, {spacer.name} at the stop", op, f"{held.path('stop')}.spacers[{i + 1}].length", "")
        middle, one = size_error(spacer.length, entry)
        drawn = spacer.length.nominal if spacer.length.nominal is not None else middle
        error += one.plus_constant(middle - drawn) * away  # the stop was set for the size on paper
    return contact(held, stop, face, lean, held.path("stop")) - error * float(held.sg)


def contact(held: Held, stop: Stop, face: State, lean: Account, path: str) -> Account:
    """Height at which a stop meets its face: one point, the high point of a ring, or all round where the face squares."""
    square = held.setup.hold.square if held.setup.hold is not None else None
    if stop.touches == "point":
        if stop.radius is None or stop.direction is None:
            what = "radius" if stop.radius is None else "direction"
            return Account.of(
                Cause(
                    f"op {held.op}, stop on {stop.on}: where it touches",
                    "undetermined",
                    held.op,
                    missing=f"{path}.{what}",
                )
            ).along(1)
        where = Account(stop.radius * cmath.exp(1j * stop.direction))
        return route.touched_height(face, lean, point=held.turned().to_part(where).constant, ring=None)
    if square is not None and held.ref(square.on) == held.ref(stop.on):
        across = square.across if square.across is not None else face.diameter
        chip = chip_under(held, square, across) if across else None
        if chip is None or not across:
            return face.axial
        # it rests on the chip and on the far edge, so the middle stands off by half the chip: one way only
        lift = Cause(
            f"{chip.key}, lift of the middle",
            "high-point",
            held.op,
            mode="derived",
            paths=chip.paths,
            of=Account.of(chip) * (across / 2.0),
        )
        return route.touched_height(face, lean, point=None, ring=lift)
    radius = stop.radius if stop.radius is not None else (face.diameter or 0.0) / 2.0
    if radius == 0.0:
        return Account.of(
            Cause(
                f"op {held.op}, stop on {stop.on}: where it touches", "undetermined", held.op, missing=f"{path}.radius"
            )
        ).along(1)
    ring = route.high_point(
        f"op {held.op}, stop on {stop.on}: touches at the high point", face=face, lean=lean, radius=radius, op=held.op
    )
    return route.touched_height(face, lean, point=None, ring=ring)


def _clock(held: Held, clock: Clock | None, offset: Account, lean: Account) -> Account:
    """k_s: the machine's zero of angle, seen from the part [rad]."""
    op = held.op
    if clock is None:
        return Account.of(
            Cause(f"op {op}: where the part is clocked", "undetermined", op, missing=held.path("clock"))
        ).along(1)
    state = held.datum(clock.on, "clock", None)
    if state is None or state.pattern is None:
        return Account.of(
            Cause(f"op {op}: where the part is clocked", "undetermined", op, missing=held.path("clock.on"))
        ).along(1)
    error = length_error(
        clock.error, Entry(f"op {op}, clocked on {clock.on}", op, f"{held.path('clock')}.error", "clock")
    )
    number = min(clock.number, state.pattern.count)
    found = route.clocked(state, state.pattern, offset + lean * state.z, number=number)
    return found - error * (held.sg / state.pattern.radius)
