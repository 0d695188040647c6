"""What each figure is, as the trade writes it, and where the formula comes from. e, t: distance and lean of two axes."""

from __future__ import annotations

DIAL = "geometry of the dial indicator, derived here"
FLANK = "rigid shift of an involute, derived here; checked against an exact involute in the tests"
PITCH = "pitch deviations as ISO 1328-1:1995 defines them; " + FLANK
HOLES = "geometry, derived here"
MARKS = (
    "closed form: second-order theory of the plunged cutter, derived here; envelope insert, head at the lead angle; within 15 % "
    "of simulation where the ends of the face stay clear, far too high for a smaller cutter"
)
MAP = "exact gap, derived here: thread of the worm against the flank as the insert cuts it, run rigidly over one pitch"

FORMULAS: dict[str, tuple[str, str]] = {
    "run-out": (
        "FIM = 2 x distance of the axes at the worse end of the surface (teeth and holes: at the middle of their width)",
        DIAL,
    ),
    "face-run-out": ("FIM = lean of the face to the axis x diameter of the circle it is read on (across)", DIAL),
    "coaxial": ("zone = 2 x distance of the axes at the worse end of the surface", DIAL),
    "cumulative-pitch": (
        "F_p = 2 e / cos(pressure angle) + what dividing adds over the turn, worse flank; dividing adds 2 x amplitude of each "
        "wave, 2 x error of a setting, the whole drift, each as an arc on the pitch circle. On a worm wheel "
        "radius x lean x tan(lead angle) joins e",
        PITCH,
    ),
    "single-pitch": (
        "f_p = largest step from one tooth to the next, worse flank: 2 sin(180 deg / teeth) x e / cos(pressure angle) + what "
        "dividing adds from one tooth to the next (a wave of k round the wheel: 2 sin(k x 180 deg / teeth) x amplitude)",
        PITCH,
    ),
    "gap-centre-pitch": (
        "largest less smallest place of the gap centres round the turn = 2 e + what dividing adds over the turn",
        PITCH,
    ),
    "index-range": (
        "largest less smallest angle of the wheel over one turn, the worm driving one flank = (2 e / cos(pressure angle) + "
        "what dividing adds over the turn) / pitch radius; with the exact gap + its transmission error as planned and what "
        "tilt, mid-plane, depth and turn of the insert add to it at their worst",
        FLANK,
    ),
    "index-within": (
        "± half of the index range: (e / cos(pressure angle) + half of what dividing adds over the turn) / pitch radius; with "
        "the exact gap + half of its transmission error, and of what the setting of the cutter adds to it; of the mean of "
        "several heads e times 2 sin(heads_off / 2)",
        FLANK,
    ),
    "on-workpiece": (
        "the index range as an arc on the work: (2 e / cos(pressure angle) + what dividing adds over the turn) x "
        "diameter on the work / pitch diameter; with the exact gap its transmission error counts as well",
        FLANK,
    ),
    "position": (
        "2 x longest distance of a hole from where it belongs: e + radial error + arc of the dividing error (and of the "
        "clocking, where the requirement names a clock)",
        HOLES,
    ),
    "chord": (
        "largest error between neighbouring holes = arc errors of both x cos(180 deg / holes) + radial errors of both x "
        "sin(180 deg / holes); e cancels",
        HOLES,
    ),
    "pitch-circle": ("2 x mean of the radial errors of all holes; e and the dividing cancel", HOLES),
    "mid-plane": (
        "distance of the worst tooth's middle from the worm's axis = error of length along the axis + pitch radius x lean",
        "leaning ring of teeth, derived here",
    ),
    "backlash-swing": (
        "change of backlash over one turn = 4 e tan(pressure angle); where it was read on the finished wheel, twice the "
        "amplitude of the wave of one a turn, by least squares",
        FLANK,
    ),
    "length": (
        "distance of the two faces along the axis ± every error of length between them",
        "sum of the lengths, derived here",
    ),
    "squareness": (
        "lean between the two faces; with across: lean x diameter of the circle it is read on",
        DIAL,
    ),
    "allowance": (
        "stock left at the thinnest place = half the difference of old and new diameter - distance of old and new axis at "
        "the worse end; on a face: depth of the cut - radius x lean between old and new face",
        "a circle turned about another centre, derived here",
    ),
    "backlash": (
        "gap that the insert cuts - thread of the worm + 2 x (centre distance - both pitch radii + error of depth) x "
        "tan(pressure angle) - growth of the hub x (tan(pressure angle) - thread / pitch circle) + what the temperature of "
        "the drive does, less and plus 2 e tan(pressure angle) over a turn; less what flanks lose that no longer fit each "
        "other: 2 w (error of depth / pitch radius + error of pitch), w how far from the middle a gap is touched. A gap "
        "measured over balls takes the place of insert, depth and growth, but not of what they do to the flanks. "
        "Where it was read on the finished wheel at enough places, the least and largest of a turn take the place of all but "
        "the temperature",
        "a rack that rolls on the wheel's pitch circle, derived here",
    ),
    "contact-length": (
        "(B m / A + 2 w) / face width, from one end of the marking to the other; A crowning and B twist of the flank, m axial "
        "module, w half the marked width",
        MARKS,
    ),
    "contact-area": (
        "2 w / face width, w = root of (film / (A cos(pressure angle) cos(lead angle))), A crowning",
        MARKS,
    ),
    "symmetry": (
        "2 x farthest distance of a gap's middle plane from the axis, at either end = 2 (distance of the axes + how far the "
        "cutter stands beside + half the length x run-off sideways); dividing turns a gap about the axis and leaves it on it",
        HOLES,
    ),
    "flank-run-off": (
        "length of the teeth x (lean of their ring + how far the work lies beside the cutter's travel / length of the reading)",
        HOLES,
    ),
    "depth-run-off": (
        "length of the teeth x (lean of their ring + how far the work comes nearer to the cutter / length of the reading); on a "
        "bevel instead of the latter how far the head is off the root cone",
        HOLES,
    ),
    "torque": (
        "lowest friction x pressure x seat x half the diameter over 1.2, at the temperature that takes most of the grip; "
        "pressure straight in the interference less what the peaks lose",
        "Coulomb friction and Lamé's equations, DIN 7190 (from memory)",
    ),
}
"""what -> (formula in words, its source). e is the distance of the two axes; FIM the full movement of the dial."""

FROM_THE_EXACT_GAP: dict[str, tuple[str, str]] = {
    "contact-length": (
        "share of the face's width over which the film is thicker than the distance from flank to thread, at any height and any "
        "travel, head as set, insert as planned or measured; the smaller of both flanks",
        MAP,
    ),
    "contact-area": (
        "share of the flank's area in which the film is thicker than the distance from flank to thread at any travel, head as "
        "set, insert as planned or measured; the smaller of both flanks",
        MAP,
    ),
}
"""The same figures where the job asks for the exact gap (`mesh: {contact: exact}`)."""

OF_A_STACK: dict[str, tuple[str, str]] = {
    "stack.worst": (
        "worst case: high spots of known direction added as vectors, then every other error at its bound straight on top",
        "arithmetic stacking, common practice",
    ),
    "stack.lowest": (
        "worst case, lower end: known value less every error at its bound",
        "arithmetic stacking, common practice",
    ),
    "stack.rss": (
        "root of the summed squares of what each cause gives; shown, never judged",
        "root-sum-square stacking, common practice",
    ),
    "stack.likely": (
        "value that the drawn jobs do not pass at the confidence asked",
        "drawing every cause, JCGM 101:2008",
    ),
    "stack.chance": ("share of the drawn jobs that meet the limits", "drawing every cause, JCGM 101:2008"),
}
"""How a stack's numbers are made of what each cause gives."""


def formula_of(what: str, *, exact: bool) -> tuple[str, str]:
    """Formula and source of a figure; exact: the job asks for the exact gap.

    >>> formula_of("contact-area", exact=True)[1].startswith("exact gap"), formula_of("run-out", exact=True)[1] == DIAL
    (True, True)
    """
    return FROM_THE_EXACT_GAP.get(what, FORMULAS[what]) if exact else FORMULAS[what]
