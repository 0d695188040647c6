"""One setup in words: what is held on what and how, how the head leans, how it divides, what is cut. Lengths mm, angles rad."""

from __future__ import annotations

from collections.abc import Iterator

from setupcheck.flow import Review
from setupcheck.jobfile.dividing import Divide
from setupcheck.jobfile.models import Cutter
from setupcheck.jobfile.prove_out import ProveOut
from setupcheck.jobfile.setups import Centre, Cut, Head, Hold, Join, Setup
from setupcheck.jobfile.travel import Travel
from setupcheck.jobfile.turning import Turning
from setupcheck.quantities.book import Known, Open, Scope
from setupcheck.quantities.devices import DEVICES
from setupcheck.record import record
from setupcheck.report.pictures.joins import GRIPS_FIRST, LEAN
from setupcheck.report.pictures.pieces import as_of, refs_cut, size_left
from setupcheck.report.sheet.showing import Showing, paper

ROLE = {"centre": "Axis", "and_centre": "Second plane", "square": "Lean", "stop": "Length", "clock": "Angle"}
"""What each step of a hold rules, as it heads a line."""

RESTS = {
    "hanging": "hangs on it",
    "pushed": "is pushed to one side",
    "free": "lies where it likes",
    "centred": "is centred in it",
}


@record
class Said:
    """One line of a table: what it is about, and what is said."""

    about: str
    text: str


class Words:
    """The setups of one job in words."""

    def __init__(self, found: Review) -> None:
        self.found = found
        self.show = Showing(found)

    def hold(self, hold: Hold) -> list[Said]:
        """What rules the axis, the lean, the length and the angle."""
        lines = []
        if hold.centre is not None:
            lines.append(Said(ROLE["centre"], self._centre(hold.centre)))
        if hold.and_centre is not None:
            lines.append(Said(ROLE["and_centre"], self._centre(hold.and_centre)))
        if hold.square is not None:
            s = hold.square
            by = f" against {paper(s.by, 40)}" if s.by else ""
            read = f", face run-out {self.show.planned(s.face_runout)}" if s.face_runout is not None else ""
            across = f" on {self.show.length(s.across)}" if s.across is not None else ""
            chip = f"; a chip of {self.show.fine(s.chip)} is reckoned with" if s.chip else ""
            lines.append(Said(ROLE["square"], f"{paper(s.on, 40)}{by}{read}{across}{chip}"))
        if hold.stop is not None:
            t = hold.stop
            error = f", {self.show.planned(t.error)}" if t.error is not None else ""
            point = " (a single point)" if t.touches == "point" else ""
            lines.append(Said(ROLE["stop"], f"{paper(t.on, 40)} on the stop{point}{error}"))
        if hold.clock is not None:
            c = hold.clock
            error = f", {self.show.planned(c.error)}" if c.error is not None else ""
            lines.append(Said(ROLE["clock"], f"number {c.number} of {paper(c.on, 40)}{error}"))
        return lines

    def _centre(self, centre: Centre) -> str:
        parts = [f"{paper(centre.on, 40)} {DEVICES[centre.by].words}"]
        if centre.grip is not None:
            ends = f"{self.show.length(centre.grip.low)} to {self.show.length(centre.grip.high)}"
            parts.append(f"gripped from {ends}")
        if centre.at is not None:
            parts.append(f"read at {self.show.length(centre.at)} along the part")
        if centre.grip_force is not None:
            parts.append(f"{centre.grip_force / 1000.0:g} kN at each jaw")
        if centre.jaws_stand_out:
            parts.append(f"jaws stand out by {self.show.length(centre.jaws_stand_out)}")
        if centre.clearance is not None:
            low, high = centre.clearance
            rests = RESTS[centre.rests or DEVICES[centre.by].rests]
            parts.append(f"play {self.show.fine(low)} to {self.show.fine(high)}, the part {rests}")
        if centre.runout is not None:
            parts.append(f"run-out {self.show.planned(centre.runout)}")
        if centre.x is not None or centre.y is not None:
            both = [f"{axis} ± {self.show.fine(v)}" for axis, v in (("X", centre.x), ("Y", centre.y)) if v is not None]
            parts.append(", ".join(both))
        for device in centre.through:
            parts.append(f"on {paper(device.by, 40)}, run-out {self.show.planned(device.runout) or 'not stated'}")
        return "; ".join(parts)

    def turning(self, turning: Turning) -> Said:
        """What turns with the spindle, and how fast."""
        parts = []
        if turning.speed is not None:
            parts.append(f"at {turning.speed:g} rev/min")
        if turning.chuck_speed is not None:
            parts.append(f"the chuck is marked {turning.chuck_speed:g} rev/min at the most")
        if turning.off_centre is not None and turning.off_by is not None:
            parts.append(f"{turning.off_centre:g} kg stand {self.show.length(turning.off_by)} off the axis")
        if turning.bar_behind is not None:
            parts.append(f"the bar sticks out {self.show.length(turning.bar_behind)} behind the spindle")
        return Said("Turns", "; ".join(parts))

    def head(self, head: Head) -> list[Said]:
        """Tilt, side and middle of the head."""
        known = f", within ± {self.show.small_angle(head.uncertainty)}" if head.uncertainty is not None else ""
        by = f", set by {head.by}" if head.by else ""
        lines = [Said("Tilt", f"{self.show.angle(head.tilt)}{known}{by}")]
        if head.leans:
            lines.append(Said("Leans", f"{head.leans}, as drawn below"))
        middle = head.mid_plane
        if middle is not None:
            when = {
                "after-tilt": "found with the head tilted",
                "before-tilt": "found before the head was tilted: set the cutter's height again afterwards",
                "no-tilt": "the head is not tilted",
            }[middle.found]
            error = f", {self.show.planned(middle.error)}" if middle.error is not None else ""
            lines.append(Said("Mid-plane", f"{when}{error}"))
        return lines

    def travel(self, travel: Travel) -> list[Said]:
        """How the axis of the work lies to the cutter's travel."""
        ways = ((travel.beside, "sideways"), (travel.nearer, "towards the cutter"))
        off = ", ".join(f"{way} {self.show.planned(v)}" for v, way in ways if v is not None)
        return [Said("Travel", f"work off the cutter's travel over {self.show.length(travel.over)}: {off}")]

    def divide(self, divide: Divide, scope: Scope) -> list[Said]:
        """How the circle is divided."""
        circle = f", circle of {divide.circle} holes" if divide.circle else ""
        lines = [Said("Divided by", f"{divide.by}{circle}")]
        step = self.found.book.get("divide.table_step", scope)
        if isinstance(step, Known):
            table = "the table of coordinates" if divide.by == "x-y" else "the index table"
            lines.append(Said("From place to place", f"{step.value}; each place in {table}, behind the operations"))
        if divide.order == "spread":
            lines.append(Said("Order", "spread: follow the index table place by place"))
        return lines

    def cuts(self, setup: Setup) -> list[Said]:
        """Each surface with the size it is cut to, what it leaves, what stock it meets, and how its teeth are cut."""
        sizes = self._sizes(setup)
        return [
            Said(paper(name, 40), "; ".join([self._target(cut, sizes.get(name, "")), *self._cut(setup, name, cut)]))
            for name, cut in setup.cut.items()
        ]

    def goals(self, setup: Setup) -> list[Said]:
        """Each surface with the size it is cut to alone, for the route."""
        sizes = self._sizes(setup)
        return [Said(paper(name, 40), self._target(cut, sizes.get(name, ""))) for name, cut in setup.cut.items()]

    def _sizes(self, setup: Setup) -> dict[str, str]:
        """Size or place of each surface as this setup leaves it, by its name in the file."""
        if setup.op not in self.found.floor.part_of:  # a joining holds no part of its own
            return {}
        sizes = {}
        for name, ref in zip(setup.cut, refs_cut(self.found, setup), strict=True):
            pieces = as_of(self.found, ref.part, setup.op)
            sizes[name] = next((size_left(self.found, p) for p in pieces if p.name == ref.surface), "")
        return sizes

    def _cut(self, setup: Setup, name: str, cut: Cut) -> Iterator[str]:
        """What more there is to say of a cut, one thing at a time."""
        scope = next(s for s in self.found.book.instances("cut") if s.key == f"{setup.op}/{name}")
        stock = self.found.book.get("allow.least_stock", scope)
        if isinstance(stock, Known):
            left = float(stock.value)  # type: ignore[arg-type]
            if left < 0.0:
                yield f"meets no metal at its worst place: up to {self.show.missing(-left)} are missing"
            else:
                yield f"meets at least {self.show.stock(left)} of stock"
        elif isinstance(stock, Open) and stock.missing:
            yield f"stock it meets: fill {paper(stock.missing[0], 80)}"
        if cut.removes:
            yield f"takes away {', '.join(paper(one, 40) for one in cut.removes)}"
        if cut.from_surface:
            yield f"cut out of {paper(cut.from_surface, 40)}"
        if cut.cutter is not None:
            yield self.cutter(cut.cutter, self.found.loaded.job.cutters.get(cut.cutter))
        if cut.off_centre is not None:
            yield f"its middle off the axis {self.show.planned(cut.off_centre)}"
        if cut.depth is not None:
            touched = (
                f" from {paper(cut.depth_from.surface, 40)}, the surface that is touched" if cut.depth_from else ""
            )
            tool = f" with the tool {cut.depth_from.tool}" if cut.depth_from and cut.depth_from.tool else ""
            yield f"depth {self.show.length(cut.depth)}{touched}{tool}"
        if cut.spindle_to_axis:
            both = (f"{axis.upper()} {self.show.size(at)}" for axis, at in cut.spindle_to_axis.items())
            yield f"spindle set over from the table's axis by {', '.join(both)}"
        if cut.prove_out is not None:
            yield self._prove_out(cut.prove_out)
        if cut.tool_change_after is not None:
            yield f"tool changed after {cut.tool_change_after} gaps"

    def _prove_out(self, proved: ProveOut) -> str:
        """The shallow gaps that are cut and read first."""
        ball = f" of {self.show.length(proved.ball)}" if proved.ball is not None else ""
        about = f", the part turned about {paper(proved.about, 40)}" if proved.about else ""
        return f"first prove-out gaps {self.show.length(proved.depth)} deep, read over a ball{ball}{about}"

    def _target(self, cut: Cut, size: str) -> str:
        """`Ø48 h6, finished`, `at 20.4, leaves 0.40 mm on the face`; sizes and places in the units of the file."""
        size = f"at z {size.removeprefix('at ')}" if size.startswith("at ") else size
        return paper(", ".join(one for one in (size, self._leaves(cut)) if one), 80)

    def _leaves(self, cut: Cut) -> str:
        if cut.to is not None:  # the place itself, which stands before it
            return "rough" if cut.state == "rough" else ""
        for value, word in (
            (cut.leave_on_diameter, "on the diameter"),
            (cut.leave_on_radius, "on the radius"),
            (cut.leave, "on the face"),
        ):
            if value:
                return f"leaves {self.show.length(value)} {word}{', rough' if cut.state == 'rough' else ''}"
        return "rough" if cut.state == "rough" else "finished"

    def cutter(self, name: str, cutter: Cutter | None) -> str:
        """A cutter by its name with what is stated of it."""
        if cutter is None:
            return f"cutter {paper(name, 40)}"
        parts = [f"cutter {paper(name, 40)}: {cutter.kind}"]
        if cutter.tip_radius is not None:
            parts.append(f"tip radius {self.show.length(cutter.tip_radius)}")
        if cutter.diameter is not None:
            parts.append(f"diameter {self.show.length(cutter.diameter)}")
        if cutter.width is not None:
            parts.append(f"insert {self.show.size(cutter.width)} wide")
        if cutter.speed is not None:
            parts.append(f"{cutter.speed:g} rev/min")
        return ", ".join(parts)

    def passes(self, setup: Setup) -> list[tuple[str, list[tuple[str, str]]]]:
        """For each cut with passes: its name, and of each pass its depth and the depth reached."""
        found = []
        for name, cut in setup.cut.items():
            reached, rows = 0.0, []
            for one in cut.passes:
                reached += one
                rows.append((self.show.length(one), self.show.length(reached)))
            if rows:
                found.append((paper(name, 40), rows))
        return found

    def join(self, join: Join) -> list[Said]:
        """Two parts put together."""
        lines = [Said("Joined", f"{paper(join.outer, 60)} on {paper(join.inner, 60)}, by {join.by}")]
        if join.square:
            lines.append(Said(ROLE["square"], LEAN[join.square]))
        if join.stop is not None:
            between = "".join(f", {paper(s.name, 40)} of {self.show.size(s.length)} between" for s in join.stop.spacers)
            against = f" against {paper(join.stop.against, 60)}" if join.stop.against else ""
            lines.append(Said(ROLE["stop"], f"{paper(join.stop.on, 60)}{against}{between}"))
        if join.joint:
            lines.append(Said("Surfaces", join.joint))
        if join.grips_first:
            lines.append(Said("Grips first", GRIPS_FIRST[join.grips_first]))
        if join.heat is not None:
            lines += self._heat(join)
        if join.mounted_at is not None:
            lines.append(Said("Mounted", f"its mark at {self.show.small_angle(join.mounted_at)} of the other's mark"))
        if join.trued is not None:
            turns = f"{paper(join.trued.on, 60)} runs true about {paper(join.trued.about, 60)}"
            lines.append(Said("Trued", f"moved until {turns}, then made fast"))
        if join.clearance is not None:
            low, high = join.clearance
            lines.append(Said("Play", f"{self.show.fine(low)} to {self.show.fine(high)}"))
        return lines

    def _heat(self, join: Join) -> Iterator[Said]:
        heat = join.heat
        assert heat is not None
        if heat.hub is not None:
            off = f" ± {heat.oven_error:g} K" if heat.oven_error is not None else ""
            yield Said("Hub", f"{heat.hub:g} degC{off}{f' by {heat.by}' if heat.by else ''}")
        if heat.shaft is not None:
            off = f" ± {heat.cold_error:g} K" if heat.cold_error is not None else ""
            yield Said("Shaft", f"{heat.shaft:g} degC{off}{f' by {heat.cold_by}' if heat.cold_by else ''}")
        if heat.carry is not None:
            yield Said("Carried", f"{heat.carry:g} s to the joint")
        if heat.gauge is not None:
            yield Said("Gauge", f"{self.show.length(heat.gauge)}, tried in the hot bore")
        if heat.near is not None:
            stands = f", {heat.near.stands:g} degC at most" if heat.near.stands is not None else ""
            yield Said("Beside it", f"{paper(heat.near.what, 40)} in place{stands}")
