"""All quantities of the foundation, one row each: family, instance, unit, formula, inputs. A new number is a new row."""

from __future__ import annotations

from setupcheck.quantities import holds, judged
from setupcheck.quantities.advice import ADVICE
from setupcheck.quantities.backlash_compared import AS_READ
from setupcheck.quantities.beside import BESIDE
from setupcheck.quantities.book import Quantity
from setupcheck.quantities.chilling import CHILLING
from setupcheck.quantities.choosing import CHOOSING
from setupcheck.quantities.clamping import CLAMP
from setupcheck.quantities.cones import CONES
from setupcheck.quantities.contact import CONTACT
from setupcheck.quantities.contact_advice import CONTACT_ADVICE
from setupcheck.quantities.contact_setting import CONTACT_SETTING
from setupcheck.quantities.cutter_shape import SHAPE
from setupcheck.quantities.cutting import CUTTING
from setupcheck.quantities.division import DIVIDE
from setupcheck.quantities.eccentric import ECCENTRIC
from setupcheck.quantities.exact_gap import EXACT
from setupcheck.quantities.fit_stated import FIT_STATED
from setupcheck.quantities.growing import GROWING
from setupcheck.quantities.head_setting import HEAD
from setupcheck.quantities.heat_checks import HEAT_CHECKS
from setupcheck.quantities.held_where import HELD_WHERE
from setupcheck.quantities.hobs import HOBS
from setupcheck.quantities.index_table import INDEX_TABLE
from setupcheck.quantities.insert_measured import MEASURED
from setupcheck.quantities.insert_shown import SHOWN
from setupcheck.quantities.inserts import INSERTS
from setupcheck.quantities.joining import JOINING
from setupcheck.quantities.joint_heat import HEAT
from setupcheck.quantities.joint_states import IN_STATES
from setupcheck.quantities.keyways import KEYWAYS
from setupcheck.quantities.leaning import LEAN
from setupcheck.quantities.left_out import LEFT_OUT
from setupcheck.quantities.loosening import LOOSENING
from setupcheck.quantities.marking import MARK
from setupcheck.quantities.measure_first import MEASURE_FIRST
from setupcheck.quantities.measuring import MEASURE
from setupcheck.quantities.meshing import MESHING
from setupcheck.quantities.opening import OPENING
from setupcheck.quantities.opposite import OPPOSITE
from setupcheck.quantities.placing import PLACE
from setupcheck.quantities.pressing import PRESSING
from setupcheck.quantities.progress import PROGRESS
from setupcheck.quantities.prove_out import PROVE
from setupcheck.quantities.sharing import SHARING
from setupcheck.quantities.stated import STATED
from setupcheck.quantities.strength import STRENGTH
from setupcheck.quantities.then_now import THEN_NOW
from setupcheck.quantities.thread import THREAD
from setupcheck.quantities.tilting import TILT
from setupcheck.quantities.truing import TRUING
from setupcheck.quantities.turning import TURNING
from setupcheck.quantities.usual import USUAL
from setupcheck.quantities.ways import WAYS
from setupcheck.quantities.wheel_over_balls import OVER_BALLS
from setupcheck.quantities.wheel_sizes import WHEEL
from setupcheck.quantities.within import WITHIN
from setupcheck.quantities.worm_sizes import WORM

ROUTE = (
    Quantity("route.floor", "job", "", 0, judged.floor, {"floor": ":"}, "every surface with what it inherits"),
    Quantity("route.draws", "job", "", 0, judged.draws, {}, "random values of all causes, drawn once"),
    Quantity(
        "job.requirements",
        "job",
        "1",
        0,
        judged.requirements,
        {"floor": ":"},
        "requirements the job states",
    ),
)

STACK = (
    Quantity(
        "stack.built", "stack", "", 0, judged.built, {"floor": "route.floor", "stack": ":"}, "figure of the relation"
    ),
    Quantity(
        "stack.combined",
        "stack",
        "",
        0,
        judged.combined,
        {"built": "stack.built", "stack": ":", "floor": "route.floor", "draws": "route.draws"},
        "worst case, rss, likely and chance of the figure",
    ),
    Quantity(
        "stack.worst",
        "stack",
        "stack",
        1,
        judged.worst,
        {"result": "stack.combined"},
        "worst case towards the upper limit",
    ),
    Quantity("stack.limit", "stack", "stack", 1, judged.limit, {"stack": ":"}, "upper limit"),
    Quantity(
        "stack.lowest",
        "stack",
        "stack",
        1,
        judged.lowest,
        {"result": "stack.combined"},
        "worst case towards the lower limit",
    ),
    Quantity(
        "stack.floor",
        "stack",
        "stack",
        1,
        judged.low_limit,
        {"stack": ":", "result": "settled stack.combined"},
        "lower limit",
        {"result": None},
    ),
    Quantity(
        "stack.rss",
        "stack",
        "stack",
        1,
        judged.rss,
        {"result": "stack.combined"},
        "root of the summed squares, never judged",
    ),
    Quantity(
        "stack.likely",
        "stack",
        "stack",
        1,
        judged.likely,
        {"result": "stack.combined"},
        "value not passed at the job's confidence",
    ),
    Quantity(
        "stack.chance", "stack", "%", 1, judged.chance, {"result": "stack.combined"}, "chance of meeting the limits"
    ),
    Quantity(
        "stack.confidence", "stack", "%", 1, judged.confidence, {"floor": "route.floor"}, "confidence asked by the job"
    ),
    Quantity(
        "stack.inside",
        "stack",
        "%",
        1,
        judged.margin_share,
        {"result": "stack.combined"},
        "margin left, as a share of the limit",
    ),
    Quantity(
        "stack.second_order",
        "stack",
        "%",
        2,
        judged.second_order,
        {"built": "settled stack.built", "stack": ":"},
        "what the first-order treatment leaves out, as a share of the limit",
    ),
)

HOLD = (
    Quantity(
        "datum.state",
        "hold",
        "",
        0,
        holds.datum_state,
        {"floor": "route.floor", "key": "@key"},
        "how the datum is found when the hold takes it",
    ),
    Quantity(
        "datum.laid_on",
        "hold",
        "",
        0,
        holds.laid_on,
        {"floor": "route.floor", "key": "@key", "entry": ":"},
        "where the face looks with which the part is laid on something",
    ),
    Quantity(
        "hold.tilt_datums",
        "setup",
        "1",
        0,
        holds.tilt_datums,
        {"floor": "route.floor", "setup": ":"},
        "what rules the lean: exactly one face or second plane",
    ),
    Quantity(
        "hold.error_stated",
        "hold",
        "",
        0,
        holds.error_stated,
        {"entry": ":", "key": "@path", "floor": "route.floor"},
        "whether the hold's error is measured, stated, typical or missing",
    ),
    Quantity(
        "hold.direction_known",
        "hold",
        "",
        0,
        holds.direction_known,
        {"floor": "route.floor", "key": "@key", "entry": ":"},
        "whether a named direction could be used",
    ),
    Quantity("hold.within_plan", "hold", "um", 1, holds.measured, {"entry": ":"}, "measured error of the hold"),
    Quantity("hold.planned", "hold", "um", 1, holds.planned, {"entry": ":"}, "planned bound of the hold's error"),
    Quantity(
        "hold.measured_u",
        "hold",
        "um",
        2,
        holds.measured_u,
        {"entry": ":", "path": "@path"},
        "standard uncertainty of the measured error",
    ),
    Quantity(
        "hold.clearance_share",
        "hold",
        "%",
        0,
        holds.clearance_share,
        {"entry": ":", "path": "@path", "results": "known stack.combined"},
        "part of a requirement's limit that the clearance takes by itself",
    ),
    Quantity(
        "hold.reach",
        "cut",
        "1",
        2,
        holds.reach,
        {"floor": "route.floor", "key": "@key"},
        "farthest end of the cut from the nearer centring plane, over the distance of the planes",
    ),
    Quantity(
        "hold.overhang",
        "hold",
        "1",
        1,
        holds.overhang,
        {"floor": "route.floor", "key": "@key", "entry": ":"},
        "how far the part stands out from where it is held, in its diameters",
    ),
    Quantity(
        "machine.error_stated",
        "setup",
        "",
        0,
        holds.machine_error_stated,
        {"floor": "route.floor", "setup": ":"},
        "whether the machine's own error is stated, typical or missing",
    ),
    Quantity(
        "hold.error_kind",
        "hold",
        "",
        0,
        holds.kind_of_error,
        {"stated": "settled hold.error_stated"},
        "how good the hold's error is known, where it is known at all",
    ),
    Quantity(
        "machine.error_kind",
        "setup",
        "",
        0,
        holds.kind_of_error,
        {"stated": "settled machine.error_stated"},
        "how good the machine's own error is known, where it is known at all",
    ),
)

ALLOW = (
    Quantity(
        "allow.built", "cut", "", 0, judged.stock_built, {"floor": "route.floor", "key": "@key"}, "stock of one cut"
    ),
    Quantity(
        "allow.least_stock",
        "cut",
        "mm",
        3,
        judged.least_stock,
        {"built": "allow.built", "entry": ":"},
        "stock left where the cut is thinnest, worst case",
    ),
    Quantity(
        "allow.finishing_cut", "cut", "mm", 3, judged.finishing_cut, {"entry": ":"}, "thinnest cut the tool still takes"
    ),
)

TABLES: tuple[Quantity, ...] = (
    *ROUTE,
    *STACK,
    *HOLD,
    *USUAL,
    *SHARING,
    *LEAN,
    *ALLOW,
    *DIVIDE,
    *WAYS,
    *INDEX_TABLE,
    *TILT,
    *CONES,
    *HEAD,
    *JOINING,
    *KEYWAYS,
    *STRENGTH,
    *FIT_STATED,
    *IN_STATES,
    *LEFT_OUT,
    *LOOSENING,
    *WITHIN,
    *GROWING,
    *CHOOSING,
    *PRESSING,
    *CHILLING,
    *STATED,
    *HEAT,
    *OPENING,
    *HEAT_CHECKS,
    *BESIDE,
    *CUTTING,
    *SHAPE,
    *HOBS,
    *EXACT,
    *CONTACT,
    *CONTACT_SETTING,
    *CONTACT_ADVICE,
    *INSERTS,
    *SHOWN,
    *MEASURED,
    *MESHING,
    *ECCENTRIC,
    *MARK,
    *WORM,
    *THREAD,
    *WHEEL,
    *OVER_BALLS,
    *AS_READ,
    *PLACE,
    *ADVICE,
    *CLAMP,
    *TURNING,
    *MEASURE,
    *MEASURE_FIRST,
    *THEN_NOW,
    *PROGRESS,
    *PROVE,
    *OPPOSITE,
    *TRUING,
    *HELD_WHERE,
)
