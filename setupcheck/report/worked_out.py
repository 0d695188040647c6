"""What the planner takes to the machine: angle and side of lean, cutter and insert, the shim."""

from __future__ import annotations

import re
from collections.abc import Iterator, Sequence

from setupcheck.flow import Review
from setupcheck.notation import show, show_angle
from setupcheck.quantities.book import Known, Scope
from setupcheck.report.wording import clean

_PIECE = re.compile(r"\{([a-z0-9_.]+)\}")

SENTENCES: Sequence[tuple[str, str, str]] = (
    ("setup", "head", "lead angle {tilt.needed}, worst error of the tilt {tilt.worst_error}"),
    ("setup", "head", "root cone {tilt.cone}"),
    ("setup", "head", "gauge blocks {tilt.blocks}"),
    ("setup", "head", "tilting carries the wheel's middle {tilt.shift_height} up or down and {tilt.shift_length} back"),
    ("setup", "head", "{tilt.picture}"),
    ("setup", "index", "{divide.table_step}; index table: setupcheck index JOB"),
    ("cut", "cutter", "tip radius {cutter.radius}, the worm needs more than {cutter.smallest_radius}"),
    ("cut", "cutter", "6 um of blue marks {cutter.contact} of a flank"),
    ("cut", "cutter", "clearance under the worm's tip {cutter.clearance}"),
    (
        "cut",
        "insert",
        "{cutter.width_needed} wide at pitch height and {cutter.tip_width} at its tip fit the thread without backlash",
    ),
    ("place", "place", "{place.shim}"),
    ("join", "mounting", "{opposite.says}"),
    ("hold", "devices", "{opposite.chain_says}"),
    (
        "worm",
        "worm",
        "axial module {worm.axial_module}, axial pitch {worm.axial_pitch}, lead {worm.lead}, normal module {worm.normal_module}",
    ),
    (
        "worm",
        "worm",
        "lead angle {worm.lead_angle} at the reference diameter {worm.reference_diameter}, {worm.tip_angle} at the tip",
    ),
    ("worm", "worm", "diametral pitch {worm.diametral_pitch}"),
    ("worm", "worm", "quotient {worm.quotient}, usual tip {worm.usual_tip} and root {worm.usual_root}"),
    ("worm", "worm", "its flank stands up to {worm.off_straight} off a straight axial line"),
    ("worm", "worm", "{worm.candidates}"),
    ("worm", "thread", "{worm.thickness} thick at the reference diameter"),
    ("worm", "thread", "over wires of {worm.wire} it measures {worm.over_wires}"),
    ("worm", "thread", "best wire {worm.best_wire}"),
    ("worm", "thread", "{worm.which_groove}"),
    (
        "mesh",
        "wheel",
        "reference circle {mesh.reference_circle}, usual throat {mesh.throat}, root {mesh.root}, hollow of {mesh.throat_radius} "
        "radius, up to {mesh.outside} over the corners",
    ),
    ("mesh", "wheel", "usual width {mesh.usual_width}; not undercut from {mesh.fewest_teeth} teeth on"),
    ("mesh", "wheel", "centre distance {mesh.closing_distance} as drawn"),
    (
        "mesh",
        "wheel",
        "the worm needs {mesh.thread_length} of thread to touch the whole face; {mesh.older_length} by the older rule",
    ),
    (
        "mesh",
        "wheel",
        "over balls {mesh.over_balls} as planned, {mesh.over_balls_tight} without backlash; best ball {mesh.best_ball}",
    ),
    (
        "mesh",
        "wheel",
        "measured over balls it has gaps of {mesh.measured_gap} at the reference circle, {mesh.planned_gap} by insert and depth",
    ),
    ("mesh", "mark", "{mark.says}"),
    ("mesh", "mark", "{mark.next}"),
    (
        "stack",
        "backlash",
        "{mesh.arc_low} to {mesh.arc_high} along the reference circle is {mesh.wheel_low} to {mesh.wheel_high} at the wheel and "
        "{mesh.worm_low} to {mesh.worm_high} of the worm",
    ),
    ("stack", "backlash", "{mesh.interference}"),
)
"""Kind of thing, what the line is about, and the sentence; it is said where every number in it is known and not zero."""


def worked_out(found: Review) -> list[str]:
    """One line for each thing and subject: `op 60, cutter: tip radius 38.5 mm, …; 6 um of blue marks …`."""
    told: dict[tuple[int, str, str], list[str]] = {}
    for scope, subject, sentence in _all(found):
        where = f"op {scope.op}, " if scope.op is not None else ""
        order = scope.op if scope.op is not None else 1_000_000
        told.setdefault((order, where, subject), []).append(sentence)
    return [f"{where}{subject}: {_joined(lines)}" for (_, where, subject), lines in sorted(told.items(), key=_order)]


def _order(item: tuple[tuple[int, str, str], list[str]]) -> int:
    return item[0][0]


def _joined(sentences: list[str]) -> str:
    """Half sentences with semicolons between, a whole one as it is."""
    text = sentences[0]
    for one in sentences[1:]:
        text += f" {one}" if text.endswith(".") else f"; {one}" if not one[0].isupper() else f". {one}"
    return text


def _all(found: Review) -> Iterator[tuple[Scope, str, str]]:
    for kind, subject, sentence in SENTENCES:
        for scope in found.book.instances(kind):
            said = filled(found, scope, sentence)
            if said:
                yield scope, subject, said


def filled(found: Review, scope: Scope, sentence: str) -> str:
    """The sentence with its numbers; empty where one of them is missing, or all of them are zero."""
    pieces: dict[str, str] = {}
    nothing = True
    for name in _PIECE.findall(sentence):
        answer = found.book.get(name, scope)
        if not isinstance(answer, Known):
            return ""
        if isinstance(answer.value, str):
            pieces[name], nothing = answer.value, False
        else:
            value = float(answer.value)  # type: ignore[arg-type]
            unit, digits = found.book.unit(name, scope), found.book.digits(name, scope)
            nothing = nothing and value == 0.0
            pieces[name] = _angle(value) if unit == "deg" and scope.kind == "setup" else show(value, unit, digits)
    return "" if nothing else clean(_PIECE.sub(lambda match: pieces[match[1]], sentence))


def _angle(value: float) -> str:
    """An angle that is set at a machine, in all three spellings, so that nobody converts at the machine."""
    shown = (show_angle(value, "dms", 0), show_angle(value, "deg", 4), show_angle(value, "gon", 4))
    return f"{shown[0]} ({shown[1]}, {shown[2]})"
