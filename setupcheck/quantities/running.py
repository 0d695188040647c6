"""What the wheel's index figures hear of the cutter's setting, where the job asks for the exact gap. mm, rad.

Built from the walked route like every figure, so that a remedy tried on another route hears of it too.
"""

from __future__ import annotations

from dataclasses import replace
from typing import TYPE_CHECKING

from setupcheck.ledger.account import Account
from setupcheck.ledger.causes import Cause
from setupcheck.ledger.figures import Figure, Tooth, Vector
from setupcheck.ledger.route import State
from setupcheck.ledger.running import AsItRuns
from setupcheck.quantities import contact, cutter_shape, exact_gap, insert_measured
from setupcheck.quantities.backlash import depth_of_cut
from setupcheck.quantities.book import Open, OutOfRange, all_missing
from setupcheck.quantities.contact import Drill, Made, Points, run
from setupcheck.quantities.drive import Drive, WheelCut, drive, wheel_cut
from setupcheck.quantities.head_setting import where_it_works
from setupcheck.quantities.inserts import WAYS, profile, wide_gap
from setupcheck.quantities.mid_plane import in_its_housing
from setupcheck.quantities.shop import Floor
from setupcheck.quantities.typical import head_uncertainty
from setupcheck.record import record

if TYPE_CHECKING:  # imported where they are used: no other review needs them
    from setupcheck.worm.plunge_gap import Cut

ASKED = "exact"


@record
class Planned:
    """The cut as planned: what its contact is worked out from."""

    cut: WheelCut
    drill: Drill
    made_for: Cut
    setting: Cut
    made: Made


def as_it_runs(floor: Floor, ring: Tooth, teeth: State) -> Tooth | AsItRuns | Open:
    """The index figure of a ring, with the transmission error of its gaps where it is the worm's wheel and exact is asked for.

    Source: exact gap at the plan and at the worst of each setting, worm.meshing; straight between them.
    """
    mesh = floor.loaded.job.mesh
    if mesh is None or exact_gap.asked(floor) != ASKED:
        return ring
    wheel = floor.loaded.ref(mesh.wheel)
    if (wheel.part, wheel.surface) != (teeth.part, teeth.name):
        return ring
    try:
        planned = _planned(floor)
        if planned is None or isinstance(planned, Open):
            return ring if planned is None else planned
        return _running(floor, ring, teeth, planned)
    except (OutOfRange, ValueError) as why:
        return Open(because=str(why))


def _planned(floor: Floor) -> Planned | Open | None:
    """None where no single point cuts the wheel: there is no setting then that could be off."""
    found = drive(floor)
    cut = wheel_cut(floor, found) if isinstance(found, Drive) else found
    if not isinstance(cut, WheelCut):
        return cut
    pair, blank, kind = exact_gap.pair(ASKED, cut, floor), exact_gap.blank(ASKED, cut, floor), cutter_shape.insert(cut)
    if isinstance(blank, Open) or isinstance(kind, Open):
        return all_missing(blank, kind)
    made_for, setting = exact_gap.made_for(pair, cut), exact_gap.setting(pair, cut, floor)
    drill = contact.drill(pair, blank, made_for, contact.film(ASKED, floor))
    made = insert_measured.made(cut, kind, drill, made_for, insert_measured.measured(ASKED, cut), floor)
    if isinstance(setting, Open) or isinstance(made, Open):
        return all_missing(setting, made)
    return Planned(cut, drill, made_for, setting, made)


def _running(floor: Floor, ring: Tooth, teeth: State, planned: Planned) -> AsItRuns | Open:
    cut = planned.cut
    tilt, plane, depth, turned = (
        _tilt(floor, cut),
        in_its_housing(floor),
        _depth(floor, cut, teeth),
        insert_turned(floor, cut),
    )
    if isinstance(tilt, Open) or isinstance(plane, Open) or isinstance(depth, Open) or isinstance(turned, Open):
        return all_missing(tilt, plane, depth, turned)
    settings: dict[str, list[Figure]] = {
        "tilt": tilt,
        "offset": [plane],
        "clearance": [Vector((depth,), 1.0)],
        "turned": [Vector((turned,), 1.0)],
    }
    off: list[Figure] = []
    rises: list[float] = []
    for name, figures in settings.items():
        worst = sum(one.base() + sum(push.up for push in one.pushes()) for one in figures)
        off += figures
        rises += [_rise(planned, name, worst)] * len(figures)
    error = max(
        run(planned.drill, planned.made_for.radius, planned.made, planned.setting, side).transmission_error
        for side in (1, -1)
    )
    as_cut = Cause(
        f"op {cut.op}, gaps that do not fit the thread even as planned",
        "length",
        cut.op,
        mean=complex(error),
        mode="derived",
        paths=(cut.path,),
    )
    return AsItRuns(ring, as_cut, tuple(off), tuple(rises))


def _rise(planned: Planned, name: str, worst: float) -> float:
    """Transmission error that a setting adds at its worst, over that worst [arc for each mm or rad].

    Either way, on both flanks: a left flank is a right one of an insert with its flanks exchanged (half a turn).
    """
    if worst <= 0.0:
        return 0.0
    drill, radius, made, at = planned.drill, planned.made_for.radius, planned.made, planned.setting
    inserts = [made, made.other_way] if isinstance(made, Points) and made.right != made.left else [made]
    most = 0.0
    for one in inserts:
        now = run(drill, radius, one, at, 1).transmission_error
        for size in (worst, -worst):
            there = run(drill, radius, one, replace(at, **{name: getattr(at, name) + size}), 1)
            most = max(most, there.transmission_error - now)
    return most / worst


def _tilt(floor: Floor, cut: WheelCut) -> list[Figure] | Open:
    """What the tilt may be off: head and shaft angle, and the wobble of the wheel. Source: as worm.tilt adds them."""
    mesh, works = floor.loaded.job.mesh, where_it_works(floor)
    assert mesh is not None
    setup = next(s for s in floor.loaded.job.setups if s.op == cut.op)
    path = f"setups.{cut.op}.head.uncertainty"
    head = head_uncertainty(setup.head) if setup.head is not None else None
    missing = (
        *(() if head is not None else (path,)),
        *(() if mesh.shaft_angle_error is not None else ("mesh.shaft_angle_error",)),
    )
    if isinstance(works, Open) or missing:
        return all_missing(Open(missing), works)
    assert head is not None and mesh.shaft_angle_error is not None
    setting = Cause(
        f"op {cut.op}, setting of the tilt",
        "length",
        cut.op,
        high=head[0],
        mode="typical" if head[1] else "planned",
        rests_on=head[1],
        paths=(path if not head[1] else f"setups.{cut.op}.head.by",),
    )
    housing = Cause(
        "housing, angle of worm and wheel", "length", high=mesh.shaft_angle_error, paths=("mesh.shaft_angle_error",)
    )
    ring, axis = works
    wobble = ring.lean - axis.lean
    gone = wobble.undetermined()
    if gone:
        return Open(gone)
    return [Vector((Account.of(setting) + Account.of(housing),), 1.0), Vector((wobble,), 1.0)]


def _depth(floor: Floor, cut: WheelCut, teeth: State) -> Account | Open:
    """What the depth may be off, an early touch of the throat's corners included. Source: quantities.backlash."""
    account, early = depth_of_cut(floor, cut, teeth), cutter_shape.early_touch(cut, floor)
    if isinstance(account, Open) or isinstance(early, Open):
        return all_missing(account, early)
    missing = account.undetermined()
    return Open(missing) if missing else account.plus_constant(-(early or 0.0))


def insert_turned(floor: Floor, cut: WheelCut) -> Account | Open:
    """What the insert may be turned in its face [rad]: as it sits in the bar, and as the stop left it that it was ground against.

    A measured profile holds what the stop did.  Source: the job file; worm.grinding_stop.
    """
    if cut.cutter.turned is None:
        return Open((f"{cut.cutter_path}.turned",))
    sits = Cause(
        f"op {cut.op}, insert turned as it sits in the bar",
        "length",
        cut.op,
        high=cut.cutter.turned,
        paths=(f"{cut.cutter_path}.turned",),
    )
    leans = _lean_of_stop(floor, cut) if cut.cutter.profile is None else 0.0
    if isinstance(leans, Open):
        return leans
    path = f"{cut.cutter_path}.grinding.stop_error"
    stop = Cause(
        f"op {cut.op}, insert leaning by the stop it was ground against",
        "length",
        cut.op,
        high=leans,
        mode="derived",
        paths=(path,),
    )
    return Account.of(sits) + Account.of(stop) if leans > 0.0 else Account.of(sits)


def _lean_of_stop(floor: Floor, cut: WheelCut) -> float | Open:
    """Lean of the insert that the stop leaves [rad]; 0 where the job tells nothing of a stop, or turns the insert over on it."""
    from setupcheck.worm.grinding_stop import ground_against_stop

    told = cut.cutter.grinding
    if told is None or (told.stop_error is None and told.way is None):
        return 0.0
    if told.way == "turned-over":
        return 0.0
    keys = ("stop_error", "way", "shank_side", "touched_at")
    missing = tuple(f"{cut.cutter_path}.grinding.{key}" for key in keys if getattr(told, key) is None)
    pair, blank, kind = exact_gap.pair(ASKED, cut, floor), exact_gap.blank(ASKED, cut, floor), cutter_shape.insert(cut)
    if isinstance(blank, Open) or isinstance(kind, Open) or missing:
        return all_missing(Open(missing), blank, kind)
    made_for = exact_gap.made_for(pair, cut)
    gap = wide_gap(exact_gap.gap(pair, blank), made_for, kind, cut)
    if isinstance(gap, Open):
        return gap
    assert told.stop_error is not None and told.way is not None
    assert told.shank_side is not None and told.touched_at is not None
    left = ground_against_stop(
        profile(gap, made_for, kind),
        angle=told.stop_error,
        way=WAYS[told.way],  # type: ignore[arg-type]
        side=told.shank_side,
        touched_at=told.touched_at,
    )
    return abs(left.lean)
