"""Another datum for a setup still to come: any finished surface that stands when its turn comes. Lengths mm."""

from __future__ import annotations

from collections.abc import Iterator

from setupcheck.jobfile.changing import Change
from setupcheck.jobfile.editing import Edit
from setupcheck.jobfile.models import Deviation, Flat, Round
from setupcheck.jobfile.reading import LoadedJob
from setupcheck.jobfile.setups import Centre, Setup
from setupcheck.notation import plain
from setupcheck.quantities.devices import DIALLED
from setupcheck.quantities.finished import finished
from setupcheck.quantities.gates import origins, reaches
from setupcheck.quantities.holdable import Standing, faces, rounds, standing_before
from setupcheck.quantities.proposals import Editor, Idea, Proposal, dial, offered
from setupcheck.quantities.route import machine_of
from setupcheck.quantities.sharing import cut_in
from setupcheck.quantities.trials import Bench
from setupcheck.quantities.typical import typical
from setupcheck.record import record

JAWS = ("three-jaw", "soft-jaws", "shimmed-jaws", "collet", "pot-chuck")
"""Devices whose part can be trued in a four-jaw chuck instead."""
SHORT = 2.0
"""Length of a cylinder or bore below which no dial is set on it [mm]. Source: our screening choice."""
FROM_THE_END = 5.0
"""How far inside the end of a surface a dial is set beside a second plane [mm]. Source: our screening choice."""
EDGE = 2.0
"""How far inside its edge a face is read, on the diameter [mm]. Source: our screening choice."""


@record
class Move:
    """One hold entry put on another surface: what it is called, and its entry with a reading [mm].

    device  whose own figure in this shop the idea's reading is: the entry then names it, as a bare number would stand there
            with nothing behind it
    """

    idea: Idea
    path: str
    value: str
    reading_at: str = ""
    device: str = ""

    def edits(self, reading: float | None, *, inches: bool) -> tuple[Edit, ...]:
        """The edit, with its dial reading filled in."""
        if reading is None:
            return (Change(self.path, self.value),)
        own = self.device and reading == self.idea.reading
        said = f"{{device: {self.device}}}" if own else dial(reading, inches=inches)
        return (Change(self.path, self.value.replace(READING, said)),)


READING = "<reading>"


def chain_of(bench: Bench, key: str) -> frozenset[int]:
    """Operations whose errors are in any stack outside its limit, or in the one that is looked at."""
    found: set[int] = set()
    for name, result in bench.results.items():
        if name == key or (result.margin is not None and result.margin < 0.0):
            found |= {c.op for c in origins(reaches(result.figure)) if c.op is not None}
    return frozenset(found)


def reholds(bench: Bench, key: str) -> Iterator[Proposal]:
    """Every hold on the chain put on every other surface that stands, one entry at a time, then axis and face together."""
    inches = bench.loaded.job.units == "in"
    for setup in holds_on_the_chain(bench, key):
        centres, squares, stops = moves_of(bench, setup)
        for move in (*centres, *squares, *stops):
            found = offered(bench, key, move.idea, _editor((move,), inches=inches), move.reading_at)
            if found is not None:
                yield found
        for move in centres:
            for other in squares:
                if move.idea.other != other.idea.other:
                    continue
                idea = Idea(
                    move.idea.kind,
                    setup.op,
                    move.idea.other,
                    move.idea.on,
                    move.idea.was,
                    move.idea.by,
                    than=move.idea.than,
                    reading=move.idea.reading,
                    also=other.idea,
                )
                found = offered(bench, key, idea, _editor((move, other), inches=inches), move.reading_at)
                if found is not None:
                    yield found


def _editor(moves: tuple[Move, ...], *, inches: bool) -> Editor:
    def edits(reading: float | None) -> tuple[Edit, ...]:
        first, *rest = moves
        others = (edit for move in rest for edit in move.edits(move.idea.reading, inches=inches))
        return (*first.edits(reading, inches=inches), *others)

    return edits


def holds_on_the_chain(bench: Bench, key: str) -> list[Setup]:
    """Setups still to come that hold a part and are on the chain of what fails."""
    chain, gone = chain_of(bench, key), finished(bench.loaded.job)
    return [s for s in bench.loaded.job.setups if s.hold is not None and s.op in chain and s.op not in gone]


def moves_of(bench: Bench, setup: Setup) -> tuple[list[Move], list[Move], list[Move]]:
    """(other datums for the axis, for the lean, for the length)."""
    loaded, hold = bench.loaded, setup.hold
    assert hold is not None
    mine = cut_in(loaded, setup)
    there = [one for one in standing_before(loaded, setup) if (one.part, one.name) not in mine]
    part = loaded.ref(next(iter(setup.cut)), setup.part).part
    centres = (
        [
            move
            for one, node in rounds(there)
            if node.high - node.low >= SHORT and (move := centre_move(bench, setup, hold.centre, one, node, part))
        ]
        if hold.centre is not None and hold.centre.turned is None
        else []
    )
    away = [(one, node) for one, node in faces(there) if one.part == part and node.facing != setup.looks_at_tool]
    squares = [move for one, node in away if (move := square_move(loaded, setup, one, node, part))]
    stops = [move for one, node in away if (move := _stop_move(loaded, setup, one, node, part))]
    return centres, squares, stops


def centre_move(
    bench: Bench, setup: Setup, now: Centre, one: Standing, node: Round, part: str, *, shortly: bool = False
) -> Move | None:
    """The axis taken from another cylinder or bore, trued by a dial; or from the same one, where no dial trues it yet.

    The reading is that of the hold as it is where it is trued by a dial already, else what the device gives in this shop: the
    shop's own figure, or the typical one where it has none.
    shortly  only a narrow band, which no jaw holds
    """
    loaded, name = bench.loaded, one.called(part)
    if name == now.on and now.by in DIALLED:
        return None  # it is trued on it already
    _, machine = machine_of(loaded, setup)
    turned = machine is None or machine.kind in ("lathe", "grinder")
    jaws = now.by in JAWS or now.by == "four-jaw"
    by = "four-jaw" if jaws and turned and node.kind == "cylinder" and not shortly else "indicator"
    if now.by in DIALLED and now.by != "four-jaw":
        by = now.by
    path = f"setups.{setup.op}.hold.centre"
    reading = bound_of(now.runout) if now.by in DIALLED else None
    device = _own_device(loaded, now.runout, f"{path}.runout") if reading is not None else ""
    if reading is None:
        given = bench.gives(by, "runout")
        if given is None:
            return None
        reading, device = given[0], by if given[1] else ""
    height = _height(setup, now, node)
    at = f", at: {in_file(height, loaded)}" if height is not None else ""
    idea = Idea("re-hold", setup.op, one.made_at, name, now.on, by, than=now.by, reading=reading)
    return Move(idea, path, f"{{on: {name}, by: {by}{at}, runout: {READING}}}", f"{path}.runout", device)


def _height(setup: Setup, now: Centre, node: Round) -> float | None:
    """Where the dial stands [mm]: in the middle; beside a second plane as before where it is on the surface, else far away."""
    second = setup.hold.and_centre if setup.hold is not None else None
    if second is None:
        return (node.low + node.high) / 2.0
    if now.at is not None and node.low <= now.at <= node.high:
        return now.at
    inset = min(FROM_THE_END, (node.high - node.low) / 4.0)
    ends = (node.low + inset, node.high - inset)
    far = second.at
    return max(ends, key=lambda z: abs(z - far)) if far is not None else None


def square_move(loaded: LoadedJob, setup: Setup, one: Standing, node: Flat, part: str) -> Move | None:
    """The lean taken from another face that looks the same way, seated or read as before."""
    now = setup.hold.square if setup.hold is not None else None
    if now is None or one.called(part) == now.on or node.diameter is None or now.across is None:
        return None
    reading = bound_of(now.face_runout)
    old = loaded.job.parts[part].surfaces.get(now.on) if "." not in now.on else None
    if reading is None or now.chip is not None or not isinstance(old, Flat) or old.facing != node.facing:
        return None
    across = min(now.across, node.diameter - EDGE)
    if across <= (node.hole or 0.0):
        return None
    path, name = f"setups.{setup.op}.hold.square", one.called(part)
    by = f", by: {now.by}" if now.by else ""
    value = f"{{on: {name}{by}, face_runout: {READING}, across: {in_file(across, loaded)}}}"
    idea = Idea("square", setup.op, one.made_at, name, now.on, now.by or "", reading=reading)
    device = _own_device(loaded, now.face_runout, f"{path}.face_runout")
    return Move(idea, path, value, f"{path}.face_runout", device)


def _stop_move(loaded: LoadedJob, setup: Setup, one: Standing, node: Flat, part: str) -> Move | None:
    now = setup.hold.stop if setup.hold is not None else None
    if now is None or one.called(part) == now.on or now.spacers or now.against or now.touches:
        return None
    old = loaded.job.parts[part].surfaces.get(now.on) if "." not in now.on else None
    error = bound_of(now.error)
    if not isinstance(old, Flat) or old.facing != node.facing or error is None:
        return None
    path, name = f"setups.{setup.op}.hold.stop", one.called(part)
    inches = loaded.job.units == "in"
    value = f"{{on: {name}, error: {dial(error, inches=inches)}}}"
    return Move(Idea("stop", setup.op, one.made_at, name, now.on), path, value)


def bound_of(given: Deviation | None) -> float | None:
    """What is planned of an entry, else what was measured [mm]; None where neither is said, or the value is zero."""
    if given is None:
        return None
    value = given.at_most if given.at_most is not None else given.measured
    if value is None and given.device is not None:
        row = typical(given.device, "runout") or typical(given.device, "face_runout")
        value = row.value if row is not None else None
    return abs(value) if value else None


def _own_device(loaded: LoadedJob, given: Deviation | None, path: str) -> str:
    """The device an entry names, where the shop's own figure of it stands there; "" elsewhere."""
    return given.device if given is not None and given.device is not None and loaded.owned(path) else ""


def in_file(mm: float, loaded: LoadedJob) -> str:
    """A size as a bare number of the file."""
    return plain(round(mm / 25.4, 4) if loaded.job.units == "in" else round(mm, 3))
