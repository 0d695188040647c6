"""Boxes for what is read at the machine, each row named by its key of the job file, so that it can be typed back.

Lengths mm, angles rad inside; on paper the units of the file.
"""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence

from setupcheck.flow import Review
from setupcheck.jobfile.models import Deviation, Dimension, Part, Round, Toothing
from setupcheck.jobfile.setups import Cut, Hold, Join, Setup, Spacer
from setupcheck.jobfile.travel import Travel
from setupcheck.quantities.devices import DEVICES
from setupcheck.record import record
from setupcheck.report.sheet.accept import accepted
from setupcheck.report.sheet.accepting import Accept
from setupcheck.report.sheet.showing import Showing
from setupcheck.report.sheet.tried import Tried
from setupcheck.report.wording import clean

PLACES = 8
"""Places round a wheel at which backlash is read. Source: common practice."""


@record
class Cell:
    """One box: what stands behind the row's key (`.measured`), its unit or a word for it; wide where two values go in."""

    end: str
    unit: str
    wide: bool = False


@record
class Row:
    """One reading: its key, what it is, what is planned and what may be accepted, its line in the job file, its boxes."""

    key: str
    says: str
    plan: str
    accept: Accept
    line: int
    cells: tuple[Cell, ...]


class Boxes:
    """The rows of one job."""

    def __init__(self, found: Review) -> None:
        self.found = found
        self.show = Showing(found)
        self.accept, self.tried = accepted(found), Tried(found)
        self.fine, self.long = ("thou", "in") if found.book.inches else ("um", "mm")

    # -- one kind of reading each --------------------------------------------------------------------------------------

    def reading(self, key: str, says: str, given: Deviation | None, *, signed: bool = False) -> Row:
        """An error entry: dial reading with its high spot, or a length with its sign."""
        unit = f"± {self.fine}" if signed else self.fine
        around = () if signed else (Cell(".high_at", "high at"),)
        cells = (Cell(".measured", unit), *around, Cell(".uncertainty", f"± {self.fine}"))
        return self._row(key, says, self.show.planned(given), cells)

    def size(self, key: str, says: str, given: Dimension) -> Row:
        """A size; a diameter with the temperature it was measured at, as it alone is brought back to 20 degC."""
        warm = (Cell(".at_temperature", "degC"),) if key.endswith(".diameter") else ()
        cells = (Cell(".measured", self.long), *warm, Cell(".uncertainty", f"± {self.fine}"))
        return self._row(key, says, self.show.size(given), cells)

    def plain(self, key: str, says: str, plan: str, unit: str) -> Row:
        """An entry that is one value, or a list of two."""
        return self._row(key, says, plan, (Cell("", unit, wide=unit.startswith("[")),))

    def _row(self, key: str, says: str, plan: str, cells: tuple[Cell, ...]) -> Row:
        accept = self.accept.get(key) or self.tried.accept(key)
        return Row(key, clean(says), plan, accept, self.found.loaded.line(key), cells)

    # -- one setup -----------------------------------------------------------------------------------------------------

    def of_setup(self, setup: Setup) -> list[Row]:
        """Everything that is read while this setup is made ready and run."""
        path = f"setups.{setup.op}"
        rows: list[Row] = []
        if setup.hold is not None:
            rows += self._hold(setup.hold, f"{path}.hold")
        if setup.head is not None:
            rows.append(
                self.plain(f"{path}.head.tilt", "tilt of the head as set", self.show.angle(setup.head.tilt), "as set")
            )
            middle = setup.head.mid_plane
            if middle is not None and middle.found != "no-tilt":
                rows.append(
                    self.reading(
                        f"{path}.head.mid_plane.error", "mid-plane, how far off it was found", middle.error, signed=True
                    )
                )
        if setup.travel is not None:
            rows += self._travel(setup.travel, f"{path}.travel")
        for name, cut in setup.cut.items():
            rows += self._cut(setup, name, cut, f"{path}.cut.{name}")
        if setup.join is not None:
            rows += self._join(setup.join, f"{path}.join")
        return rows

    def _hold(self, hold: Hold, path: str) -> Iterator[Row]:
        for step, entry, place in (
            ("centre", hold.centre, "run-out on {}"),
            ("and_centre", hold.and_centre, "run-out on {}, second plane"),
        ):
            if entry is None:
                continue
            for axis in ("x", "y") if DEVICES[entry.by].xy else ():
                zero = getattr(entry, axis)
                plan = f"± {self.show.fine(zero)}" if zero is not None else ""
                says = f"{entry.on} found along {axis.upper()}, known to"
                yield self.plain(f"{path}.{step}.{axis}", says, plan, f"± {self.fine}")
            if entry.runout is not None or (entry.clearance is None and not DEVICES[entry.by].xy):
                yield self.reading(f"{path}.{step}.runout", place.format(entry.on), entry.runout)
            if entry.clearance is not None:
                plan = f"{self.show.fine(entry.clearance[0])} to {self.show.fine(entry.clearance[1])}"
                yield self.plain(
                    f"{path}.{step}.clearance",
                    f"play of {entry.on}, [least, most]",
                    plan,
                    f"[{self.fine}, {self.fine}]",
                )
            for number, device in enumerate(entry.through, 1):
                key = f"{path}.{step}.through[{number}].runout"
                yield self.reading(key, f"run-out of {device.by} alone", device.runout)
        if hold.square is not None:
            at = f" on {self.show.length(hold.square.across)}" if hold.square.across is not None else ""
            yield self.reading(
                f"{path}.square.face_runout", f"face run-out of {hold.square.on}{at}", hold.square.face_runout
            )
        if hold.stop is not None:
            says = f"stop on {hold.stop.on}, + is nearer the tool"
            yield self.reading(f"{path}.stop.error", says, hold.stop.error, signed=True)
            yield from self._spacers(hold.stop.spacers, f"{path}.stop")
        if hold.clock is not None:
            says = f"angle on {hold.clock.on}"
            yield self.reading(f"{path}.clock.error", says, hold.clock.error, signed=True)

    def _spacers(self, spacers: Sequence[Spacer], path: str) -> Iterator[Row]:
        for number, spacer in enumerate(spacers, 1):
            yield self.size(f"{path}.spacers[{number}].length", f"thickness of {spacer.name}", spacer.length)

    def _travel(self, travel: Travel, path: str) -> Iterator[Row]:
        over = self.show.length(travel.over)
        for key, value, way in (("beside", travel.beside, "sideways"), ("nearer", travel.nearer, "towards the cutter")):
            if value is not None:
                says = f"bar in place of the work, {way}, over {over}"
                yield self.reading(f"{path}.{key}", says, value, signed=True)

    def _cut(self, setup: Setup, name: str, cut: Cut, path: str) -> Iterator[Row]:
        ref = self.found.loaded.ref(name, self.found.floor.part_of.get(setup.op))
        surface = self.found.loaded.job.parts[ref.part].surfaces[ref.surface]
        finished = not _leaves_stock(cut)
        if isinstance(surface, Round) and finished and _has_limits(surface.diameter):
            key = f"parts.{ref.part}.surfaces.{ref.surface}.diameter"
            yield self.size(key, f"diameter of {ref.surface}", surface.diameter)
        if cut.error is not None:
            yield self.reading(f"{path}.error", f"length of {name}, off its plan", cut.error, signed=True)
        if cut.off_centre is not None:
            yield self.reading(f"{path}.off_centre", f"cutter of {name}, off the axis", cut.off_centre, signed=True)
        for axis, at in (cut.spindle_to_axis or {}).items():
            yield self.size(f"{path}.spindle_to_axis.{axis}", f"spindle over the table's axis, {axis.upper()}", at)
        if cut.depth_from is not None:
            touched = cut.depth_from
            key = f"{path}.depth_from"
            cells = (Cell(".measured", self.long), Cell(".uncertainty", f"± {self.fine}"))
            plan = f"within {self.show.fine(touched.at_most)}" if touched.at_most is not None else ""
            yield self._row(key, f"diameter of {touched.surface}, from which the depth is counted", plan, cells)
        if cut.depth_error is not None:
            yield self.reading(f"{path}.depth_error", f"depth of {name}, off its plan", cut.depth_error, signed=True)
        if cut.prove_out is not None:
            yield from self._prove_out(cut.prove_out.readings, f"{path}.prove_out", surface)

    def _prove_out(self, readings: Mapping[str, float], path: str, surface: object) -> Iterator[Row]:
        count = surface.count if isinstance(surface, Toothing) else 0
        names = list(readings) or [f"gap {n}" for n in _round_the_wheel(count, 4)]
        cells = tuple(Cell(f".readings.{name}", self.fine) for name in names[:PLACES])
        yield self._row(
            path, "dial over the ball in each prove-out gap", "", (*cells, Cell(".uncertainty", f"± {self.fine}"))
        )

    def _join(self, join: Join, path: str) -> Iterator[Row]:
        for name in (join.outer, join.inner):
            ref = self.found.loaded.ref(name)
            surface = self.found.loaded.job.parts[ref.part].surfaces[ref.surface]
            if isinstance(surface, Round):
                key = f"parts.{ref.part}.surfaces.{ref.surface}.diameter"
                yield self.size(key, f"diameter of {name}, three heights, two ways", surface.diameter)
        if join.stop is not None:
            yield from self._spacers(join.stop.spacers, f"{path}.stop")
        if join.heat is not None and join.heat.hub is not None:
            yield self.plain(f"{path}.heat.hub", "heat of the hub as read", self.show.heat(join.heat.hub), "degC")
        if join.heat is not None and join.heat.shaft is not None:
            yield self.plain(f"{path}.heat.shaft", "shaft as read", self.show.heat(join.heat.shaft), "degC")
        if join.heat is not None and join.heat.carry is not None:
            yield self.plain(f"{path}.heat.carry", "seconds from there to the joint", f"{join.heat.carry:g} s", "s")
        if join.trued is None:
            yield self.reading(f"{path}.fit_error", f"run-out of {join.outer} on {join.inner}, cold", join.fit_error)
            return
        on, about = join.trued.on, join.trued.about
        yield self.reading(f"{path}.trued.runout", f"run-out of {on} about {about}, trued", join.trued.runout)
        yield self.reading(f"{path}.fit_error", f"what it has moved on {on} once the joint is fast", join.fit_error)

    # -- before the first and after the last setup -----------------------------------------------------------------------

    def incoming(self) -> list[Row]:
        """What is inspected before the first setup: bought parts, worm, housing, insert."""
        job, rows = self.found.loaded.job, list[Row]()
        cut = {self.found.floor.part_of.get(setup.op) for setup in job.setups}
        joined = {
            self.found.loaded.ref(n) for s in job.setups if s.join is not None for n in (s.join.outer, s.join.inner)
        }
        for name, part in job.parts.items():
            rows += self._bought(name, part, known={(ref.part, ref.surface) for ref in joined}, made=name in cut)
        worm = job.worm
        if worm is not None and worm.thread_thickness is not None:
            rows.append(self.size("worm.thread_thickness", "thickness of the worm's thread", worm.thread_thickness))
        if worm is not None and worm.over_wires is not None:
            rows.append(self.size("worm.over_wires", "worm over wires", worm.over_wires))
        if worm is not None and worm.end_float is not None:
            rows.append(
                self.plain("worm.end_float", "end float of the worm", self.show.fine(worm.end_float), self.fine)
            )
        if job.mesh is not None and job.mesh.centre_distance is not None:
            rows.append(self.size("mesh.centre_distance", "centre distance", job.mesh.centre_distance))
        if job.place is not None and job.place.worm_axis is not None:
            axis = job.place.worm_axis
            rows.append(self.size("place.worm_axis.length", f"worm's axis from {axis.from_}", axis.length))
        for name, machine in job.machines.items():
            if machine.axis_runout is not None:
                key = f"machines.{name}.axis_runout"
                rows.append(self.reading(key, f"run-out of the axis of {name}", machine.axis_runout))
        for name, cutter in job.cutters.items():
            if cutter.width is not None:
                rows.append(self.size(f"cutters.{name}.width", f"width of the insert of {name}", cutter.width))
        return rows

    def _bought(self, name: str, part: Part, *, known: set[tuple[str, str]], made: bool) -> Iterator[Row]:
        for number, given in enumerate(part.given, 1):
            key = f"parts.{name}.given[{number}]"
            if given.runout is not None:
                yield self.reading(f"{key}.runout", f"run-out of {name}.{given.of} about {given.about}", given.runout)
            if given.face_runout is not None:
                says = f"face run-out of {name}.{given.of} about {given.about}"
                yield self.reading(f"{key}.face_runout", says, given.face_runout)
            if given.length is not None:
                yield self.size(f"{key}.length", f"{name}.{given.of} from {given.from_}", given.length)
        for surface, round_ in part.surfaces.items():
            if not made and isinstance(round_, Round) and _has_limits(round_.diameter) and (name, surface) not in known:
                yield self.size(
                    f"parts.{name}.surfaces.{surface}.diameter", f"diameter of {name}.{surface}", round_.diameter
                )

    def finished(self) -> list[Row]:
        """What is read on the finished wheel: over balls, backlash round it, where blue marks."""
        job, rows = self.found.loaded.job, list[Row]()
        if job.mesh is None:
            return rows
        ref = self.found.loaded.ref(job.mesh.wheel)
        wheel = self.found.loaded.job.parts[ref.part].surfaces[ref.surface]
        ball = f"ball {self.show.length(job.mesh.ball_used)}" if job.mesh.ball_used else ""
        cells = (Cell(".measured", self.long), *(() if ball else (Cell(".ball", f"ball, {self.long}"),)))
        rows.append(
            self._row("mesh.over_balls", "wheel over two balls", ball, (*cells, Cell(".uncertainty", f"± {self.fine}")))
        )
        if isinstance(wheel, Toothing):
            gaps = _round_the_wheel(wheel.count, PLACES)
            places = tuple(Cell(f".readings.gap {n}", self.fine) for n in gaps)
            says = "backlash round the wheel, the number of the gap at the worm; end float included or taken-out"
            more = (
                Cell(".uncertainty", f"± {self.fine}"),
                Cell(".end_float", "said so"),
                Cell(".along", "circular, at …"),
            )
            rows.append(self._row("mesh.backlash_read", says, "", (*places, *more)))
        flanks = (
            Cell(f".{side}.{end}", word)
            for side in ("right", "left")
            for end, word in (("at", self.long), ("towards", "a face"), ("height", "tip, middle, root"), ("share", "%"))
        )
        says = "where blue marks: the face seen from, then each flank as sketched below"
        cells = (Cell(".seen_from", "a face"), Cell(".film", self.fine), *flanks)
        rows.append(self._row("mesh.mark", says, "", cells))
        return rows


def _leaves_stock(cut: Cut) -> bool:
    stated = (cut.to, cut.leave, cut.leave_on_diameter, cut.leave_on_radius)
    return cut.state == "rough" or any(value for value in stated)


def _has_limits(size: Dimension) -> bool:
    return size.fit is not None or size.lower is not None or size.upper is not None or size.measured is not None


def _round_the_wheel(count: int, places: int) -> list[int]:
    """Numbers of gaps as evenly round the wheel as its count allows.

    >>> _round_the_wheel(72, 8), _round_the_wheel(5, 8)
    ([1, 10, 19, 28, 37, 46, 55, 64], [1, 2, 3, 4, 5])
    """
    return list(dict.fromkeys(1 + round(i * count / places) % count for i in range(places))) if count else []
