"""How far each number of the book holds: the range that its formula states, beyond which it is open with the reason.

A limit is written once, at the quantities whose formula refuses; what is made of them has it too (`limits_of`). Numbers that
nothing of the kind stands behind are in WITHOUT: they hold for whatever the reader of the job file lets in.
"""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from functools import cache

from setupcheck.quantities.book import Quantity
from setupcheck.quantities.tables import TABLES
from setupcheck.record import record


@record
class Limit:
    """One bound of validity.

    name     short, by which its cases in tests/unit/quantities are found;  holds  what is inside, in trade words
    because  words of the reason that is given outside;  at  quantities whose formula refuses
    what     figures of a requirement that it belongs to, all where empty
    """

    name: str
    holds: str
    because: str
    at: tuple[str, ...]
    what: tuple[str, ...] = ()


def _names(text: str, family: str = "") -> tuple[str, ...]:
    return tuple(f"{family}{name}" for name in text.split())


_CARRIED = _names("allowed allowed_bright with_spare until_bite until_bite_bright", "heat.carry_")
_ON_THE_MESH = ("cutter.wheel_cut", "mesh.best_ball", "mesh.pair", "read.pair", "mark.cutting", "stack.built")
_OF_THE_MESH, _TORQUE = ("backlash", "contact-area", "contact-length"), ("torque",)
_MOST = _names("interference_most grip_most cold_most bench_most warm_most", "fit.")
_LEAST = _names("interference_least grip_least cold_least bench_least warm_least", "fit.")

LIMITS: tuple[Limit, ...] = (
    # -- joints -------------------------------------------------------------------------------------------------------
    Limit("class", "classes in the shipped tables of ISO 286, up to 500 mm, IT4 to IT11", "tables",
          ("fit.sizes", "measure.tolerance", "measure.share", "clamp.lobing_allowed", "stack.built"), _TORQUE),
    Limit("warm-size", "sizes measured at -20 to 120 degC", "where sizes are brought back",
          ("fit.sizes", "measure.warm_by", "stack.built"), _TORQUE),
    Limit("pores", "solid metal without pores", "crushes into its pores", ("fit.pair", "stack.built"),
          _TORQUE),
    Limit("service", "hub and shaft from -205 to 200 degC in service", "how much it has grown or shrunk is known",
          (*_names("grip_most grip_least warm_most warm_least cold_most cold_least loosest_reaches", "fit."),)),
    Limit("tight-elastic", "hub and shaft elastic, cold and warm, in the tightest pair", "of the tightest pair yields",
          tuple(f"{name}_elastic" for name in _MOST)),
    Limit("loose-elastic", "hub and shaft elastic, cold and warm, in the loosest pair", "of the loosest pair yields",
          tuple(f"{name}_elastic" for name in _LEAST)),
    Limit("loose-at-20", "a loosest pair that holds at 20 degC", "does not hold even at 20 degC",
          ("fit.holds_to", "fit.loosens_at")),
    Limit("lead-in", "a lead-in of half the seat at most", "leaves less than half of a seat", ("fit.lead_in",)),
    Limit("friction", "pairs of metals whose friction is listed, or a friction stated", "no friction is known for",
          ("fit.rubbing", "stack.built"), _TORQUE),
    # -- heat ---------------------------------------------------------------------------------------------------------
    Limit("shaft-means", "a shaft from -205 to 200 degC as it meets the hub", "how much it has grown or shrunk is known",
          ("heat.needed",)),
    Limit("hub-heated", "a hub heated to 400 degC at most", "how far it has grown is known up to", ("heat.planned_low",)),
    Limit("hub-chilled", "an unheated hub of -205 degC or more", "how far it has shrunk is known down to",
          ("heat.at_shaft",)),
    Limit("hub-throughout", "a hub of one temperature throughout, Biot number below 0.1", "the hub cools from the outside in",
          ("heat.biot", *_CARRIED)),
    Limit("shaft-throughout", "a shaft of one temperature throughout, Biot number below 0.1",
          "the shaft warms from the outside in", ("heat.shaft_gain",)),
    Limit("hub-size", "a hub of 5000 mm at most", "how fast still air cools it is known up to",
          ("heat.biot", "heat.beside", *_CARRIED)),
    Limit("shaft-size", "a shaft of 1500 mm at most", "how fast still air warms it is known up to",
          ("heat.shaft_gain", "heat.beside")),
    # -- worm, mesh, head -----------------------------------------------------------------------------------------------
    Limit("lead-angle", "a thread flatter than 45 deg", "lead angle must lie between 0 and 45 deg",
          ("worm.lead_angle", "worm.tip_angle", "tilt.needed", *_ON_THE_MESH), _OF_THE_MESH),
    Limit("pressure-angle", "a pressure angle below 45 deg", "pressure angle must lie between 0 and 45 deg",
          ("worm.normal_angle", "worm.best_wire", "mesh.reach", "mesh.fewest_teeth", *_ON_THE_MESH), _OF_THE_MESH),
    Limit("profile", "worms ZA, ZN and ZI", "is not computed, only ZA, ZN and ZI",
          ("worm.off_straight", "worm.thread", "worm.best_wire", *_ON_THE_MESH), _OF_THE_MESH),
    Limit("straight", "flanks within 5 um of a straight line in the axial section", "off a straight line",
          ("worm.thread", "worm.best_wire", *_ON_THE_MESH), _OF_THE_MESH),
    Limit("worm-root", "a worm thicker than 2.4 modules", "worm root diameter must be above zero", ("worm.usual_root",)),
    Limit("throat", "a worm thicker than 2 modules", "throat radius must be above zero",
          _names("throat root throat_radius outside older_length reach", "mesh.")),
    Limit("wires", "a thread over wires up to a lead angle of 25 deg", "up to which wires are computed",
          ("worm.thread", "worm.best_wire")),
    Limit("over-wires", "a size over wires that a thread of this pitch can have", "fits no thread of", ("worm.thread",)),
    Limit("proud", "a wire that stands proud of the tip", "does not stand proud of the tip diameter", ("worm.over_wires",)),
    Limit("seat-of-ball", "balls that touch both flanks", "touches beside the flanks",
          ("mesh.over_balls", "mesh.over_balls_tight")),
    Limit("gap", "a centre distance that leaves the thread a gap to run in", "gap must be above zero", ("mesh.best_ball",)),
    Limit("shift", "a profile shift above -1", "throat over reference circle must be above zero", ("mesh.older_length",)),
    Limit("gap-over-balls", "a size over balls that lets them touch the flanks between bottom and tips", "over balls of",
          ("mesh.measured",)),
    Limit("tilt-error", "an error of the tilt up to 10 deg", "check hand and direction first",
          ("tilt.twist", "tilt.ridge_shift", "tilt.profile_error")),
    Limit("tilt", "a head tilted by less than 45 deg", "must lie within 45 deg either way",
          ("tilt.worst_error", "tilt.shift_height", "tilt.shift_length", "cutter.width_needed", "cutter.tip_width")),
    Limit("sine-bar", "a sine bar up to 45 deg", "a sine bar sets 0 to 45 deg", ("tilt.blocks",)),
    Limit("sine-stack", "blocks that lean the bar by 45 deg at most", "beyond 45 deg", ("tilt.bar_miss",)),
    # -- cutter, contact, insert ----------------------------------------------------------------------------------------
    Limit("rolls", "a worm whose rolling diameter is above zero", "pitch diameter must be above zero",
          ("cutter.smallest_radius", "cutter.shape")),
    Limit("crowned", "a thread flat enough for a plunged cutter to crown its flank", "cutter of no radius crowns the flank",
          ("cutter.smallest_radius",)),
    Limit("wide-face", "teeth no wider than the worm's pitch diameter", "not at the ends of so wide a face",
          ("cutter.half_face",)),
    Limit("hob", "a hob large enough for its lead", "too small to have a thread of this lead", ("cutter.hob_lead_angle",)),
    Limit("clear-of-tip", "a gap that clears the worm's tip", "clearance must not be below zero",
          ("cutter.width_needed", "cutter.tip_width")),
    Limit("pointed", "an insert that does not close to a point", "closes to a point", ("cutter.tip_width",)),
    Limit("undercut", "a wheel that the worm's tip does not undercut", "the wheel is undercut",
          ("contact.pair", "mark.read", "cutter.width_needed", "cutter.tip_width")),
    Limit("reaches", "a worm whose tip reaches inside the rolling circle", "outside the rolling circle of",
          ("contact.pair", "mark.read")),
    Limit("runs-on-bottom", "a gap that clears the worm's tip", "run on the bottom of the gap: cut deeper",
          ("contact.made_for", "contact.setting", "mark.read")),
    Limit("cutter-size", "a cutter no smaller than the worm", "ride on the ends of the face",
          ("contact.maps", "contact.with_envelope", "contact.with_mid_plane", "insert.profile", "mark.read")),
    Limit("face-reached", "a face that throat and worm reach", "wider than throat and worm allow",
          ("contact.gap", "contact.maps", "contact.recommended", "mark.read")),
    Limit("clear-ends", "a face whose ends a cutter of up to three times the worm keeps clear",
          "keeps the ends of this face clear", ("contact.radius",)),
    Limit("points", "a form error that rounded readings leave room for", "cannot be held", ("insert.points",)),
    Limit("hollow", "a grinding wheel's edge that fits the hollow", "is too large for the hollow", ("insert.points",)),
    Limit("stop", "a stop out of square by less than 45 deg", "a stop is out of square by less than 45 deg",
          ("insert.off_stop",)),
    # -- the ledger -----------------------------------------------------------------------------------------------------
    Limit("lean", "surfaces that lean by 5.7 deg at most to each other", "angles are taken as small",
          ("stack.built", "allow.built", "contact.mid_plane_error")),
    Limit("ring", "a ring off its axis by a tenth of its radius at most", "eccentricities are taken as small",
          ("stack.built",),
          ("cumulative-pitch", "single-pitch", "gap-centre-pitch", "index-range", "index-within", "on-workpiece",
           "backlash-swing", "backlash")),
    Limit("ring-as-read", "a ring off its axis by a tenth of its radius at most", "eccentricities are taken as small",
          ("prove.ring", "prove.off_axis", "read.as_read", "read.plan")),
    Limit("drive", "housing, wheel and worm from -205 to 200 degC", "how much it has grown or shrunk is known",
          ("stack.built",), ("backlash",)),
    Limit("one-point", "a wheel cut by a single point", "for a wheel cut by a single point", ("stack.built",), ("backlash",)),
    Limit("one-point-blue", "a wheel cut by a single point", "for a worm wheel cut by a single point", ("stack.built",),
          ("contact-area", "contact-length")),
    Limit("torque-elastic", "hub and shaft elastic in the tightest pair", "of the tightest pair yields",
          ("stack.built",), _TORQUE),
    Limit("torque-means", "hub and shaft from -205 to 200 degC in service", "how much it has grown or shrunk is known",
          ("stack.built",), _TORQUE),
    Limit("directions", "gaps read round the turn, three at least", "too close together to tell a direction", ("prove.ring",)),
    Limit("places", "four places at least, none farther apart than a third of a turn", "is read",
          ("read.places", "read.as_read")),
    # -- the hold -------------------------------------------------------------------------------------------------------
    Limit("thin-ring", "a wall of 1/50 to 1/5 of the mean radius", "the thin ring is taken from", ("clamp.lobing",)),
    Limit("jaws", "a part held by jaws", "has no jaws whose grip is known", ("turn.throw_allowed",)),
)  # fmt: skip


@record
class Taken:
    """Numbers that no formula refuses. says: how far they hold;  refused: words with which the reader of the job file refuses."""

    says: str
    names: tuple[str, ...]
    refused: str = ""


WITHOUT: tuple[Taken, ...] = (
    Taken("holds for every length that a job file may state, up to 10 m", (
        *_names("within_plan planned measured_u as_planned reading_u tenth_division", "hold."), "machine.as_planned",
        "allow.finishing_cut", "heat.gauge", "cutter.last_pass", "cutter.hob_diameter", "contact.film", "contact.budget",
        *_names("end_float film eccentric width", "mesh."), "read.end_float", "clamp.grip", "clamp.jaws_out",
        "turn.bar_behind", "measure.planned", "measure.half_division", "prove.reading_uncertainty", "truing.room",
    ), "is longer than 10 m"),
    Taken("holds for every angle that a job file may state, up to a hundred turns", (
        *_names("crank_error step setting_error single_error", "divide."), *_names("set allowed cone", "tilt."),
    ), "is more than a hundred turns"),
    Taken("holds for every temperature that a job file may state, -273.15 to 2000 degC", (
        *_names("planned_high shaft beside_stands flash_margin", "heat."),
    ), "is hotter than 2000 degC"),
    Taken("holds for a room of -40 to 60 degC, as a job file may state it", ("heat.room",), "is none to work in"),
    Taken("holds for every amount that a job file may state", (
        *_names("limit floor confidence", "stack."), "fit.press_allowed", "heat.carry", "turn.speed", "turn.chuck_speed",
    )),
    Taken("holds for every count of the job file: whole numbers, nothing rounded", (
        "job.requirements", *_names("count worm_ratio circle positions", "divide."), "mesh.teeth", "worm.starts",
        "progress.done", "prove.count", "hold.tilt_datums",
    )),
    Taken("holds for every row of the shipped tables", ("hold.best_usual", "machine.best_usual", "heat.cap")),
    Taken("holds for all counts and steps: exact fractions", _names(
        "left_over folded_harmonic step_error off_position drift_wave table_off table_range table_limit table_open table_shared",
        "divide.",
    )),
    Taken("holds for all sizes above zero: proportions and differences of what the job file states", (
        *_names("reach overhang size_off", "hold."), *_names("grip_wanted overhang wall_share", "clamp."), "tilt.cone_error",
        *_names("overhang passes_left hob_least hob_oversize", "cutter."), "turn.throw", "truing.need",
        *_names("offset nominal_gap", "place."),
        *_names(
            "axial_module diametral_pitch axial_pitch lead normal_module quotient reference_diameter usual_tip", "worm."
        ),
        *_names("circle_miss distance_miss reference_circle closing_distance usual_width us_width width_share", "mesh."),
    )),
    Taken("holds for gaps of the prove-out that are shallower than the cut", ("prove.stock",), "leave nothing of a depth"),
    Taken("holds for an instrument nearer to the axis than half the distance of its target", ("divide.parallax",),
          "the target is as near as the instrument is off the axis"),
    Taken("holds for a polygon or a plumb line that leans by 5 deg at most, and sights below 80 deg",
          ("divide.standard_lean", "divide.plumb_wave"), "is what is left after setting true"),
    Taken("holds for half a turn of the eccentric, from its dead centre", _names(
        "eccentric_at eccentric_closes eccentric_sideways eccentric_throws eccentric_left eccentric_left_share", "mesh."
    ), "is beyond half a turn"),
    Taken("holds for a closed room of any volume, all that boils off in it at once", _names(
        "oxygen carbon_dioxide carbon_dioxide_long", "heat."
    ), "a room of nothing holds nobody"),
    Taken("holds where what it is made of is known: it has no number where that is open", (
        "stack.second_order", "then.margin", "hold.clearance_share", "hold.beyond_at_an_end", "worm.thickness_share",
        "opposite.saves", "opposite.chain_saves",
        *_names("least_backlash arc_low arc_high wheel_low wheel_high worm_low worm_high", "mesh."),
    )),
)  # fmt: skip
"""What the reader lets in, arithmetic that holds for any number, and what is told only where others are known."""


@cache
def _behind() -> Mapping[str, frozenset[str]]:
    """Each quantity with all that it is made of and that is open where they are."""
    by_name = {quantity.name: quantity for quantity in TABLES}
    found: dict[str, frozenset[str]] = {}

    def of(name: str) -> frozenset[str]:
        if name not in found:
            inner = [each for each in _asked_for(by_name[name]) if each in by_name]
            found[name] = frozenset({name}).union(*map(of, inner))
        return found[name]

    for name in by_name:
        of(name)
    return found


def _asked_for(quantity: Quantity) -> Iterator[str]:
    """What makes a quantity open where it is open itself: not what is `settled` or only counted where it is `known`."""
    return (name.removeprefix("each ") for name in quantity.inputs.values())


def limits_of(name: str, what: str = "") -> tuple[Limit, ...]:
    """The limits that a quantity has by itself, then those of what it is made of. what: the figure of a requirement."""
    behind = _behind()[name]
    mine = [limit for limit in LIMITS if not (what and limit.what and what not in limit.what)]
    own = [limit for limit in mine if name in limit.at]
    return (*own, *(limit for limit in mine if limit not in own and behind & {*limit.at}))


def range_in_words(name: str, what: str = "") -> str:
    """How far a number holds, in one sentence.

    >>> range_in_words("fit.lead_in").startswith("holds for a lead-in of half the seat at most; classes in")
    True
    """
    holds = tuple(dict.fromkeys(limit.holds for limit in limits_of(name, what)))
    if holds:
        return f"holds for {'; '.join(holds)}: beyond that it is open"
    return next((taken.says for taken in WITHOUT if name in taken.names), "")
