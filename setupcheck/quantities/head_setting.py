"""How well the tilt is set and what it carries along: error budget, sine bar, shift of the mid-plane. Lengths mm, angles rad."""

from __future__ import annotations

from setupcheck.jobfile.models import Dimension
from setupcheck.jobfile.setups import Setup
from setupcheck.ledger.route import State
from setupcheck.quantities.book import Open, Quantity, in_range
from setupcheck.quantities.cutter_shape import Shape
from setupcheck.quantities.drive import middle
from setupcheck.quantities.shop import Floor
from setupcheck.quantities.tilting import cuts_the_wheel
from setupcheck.worm.cutter import profile_error_of_tilt
from setupcheck.worm.tilt import Shift, is_an_error, shift_after_tilt, sine_bar_angle, sine_bar_stack, tilt_error


def worst_error(floor: Floor, set_angle: float, needed_angle: float, allowed: float) -> float | Open | None:
    """Largest error of the angle between gaps and thread [rad]: |set - lead angle| + head + shaft angle + wobble.

    Source: small angles in one plane add, worm.tilt.
    """
    job = floor.loaded.job
    if job.mesh is None:
        return None
    wobble = _wobble(floor)
    missing = () if job.mesh.shaft_angle_error is not None else ("mesh.shaft_angle_error",)
    if isinstance(wobble, Open):
        return Open((*missing, *wobble.missing), wobble.because)
    if job.mesh.shaft_angle_error is None:
        return Open(missing)
    with in_range:
        return tilt_error(
            set_angle=set_angle,
            needed_angle=needed_angle,
            head=allowed,
            shaft_angle=job.mesh.shaft_angle_error,
            wobble=wobble,
        ).worst


def where_it_works(floor: Floor) -> tuple[State, State] | Open:
    """The finished teeth and the axis they work on, both of one body. Source: the route, `place.axis`."""
    job = floor.loaded.job
    if job.mesh is None or job.place is None or job.place.axis is None:
        return Open(("place.axis",))
    teeth, axis = floor.now(floor.loaded.ref(job.mesh.wheel)), floor.now(floor.loaded.ref(job.place.axis))
    if teeth is None or axis is None or floor.body(teeth.part) is not floor.body(axis.part):
        return Open(("place.axis",), "wheel and axis are never one piece in this route")
    return teeth, axis


def _wobble(floor: Floor) -> float | Open:
    """Largest lean of the finished teeth to the axis they work on [rad]. Source: the ledger."""
    found = where_it_works(floor)
    if isinstance(found, Open):
        return found
    lean = found[0].lean - found[1].lean
    missing = lean.undetermined()
    return Open(missing) if missing else lean.largest()


def ridge_shift(shape: Shape, worst: float, exact: float | None) -> float | None:
    """How far the ridge of contact moves along the face for the worst error of the tilt [mm]: d tau/(2 A), closed form.

    The middle of a marking moves several times as far. None where the exact gap gives what the tilt may be off, which TILT-009
    judges.  Raises: OutOfRange for an error that is a wrong setting.  Source: worm.cutter.
    """
    if exact is not None or shape.crowning <= 0.0:
        return None
    with in_range:
        is_an_error(worst)
    return worst / (2.0 * shape.crowning)


def profile_error(shape: Shape, worst: float, exact: float | None) -> float | None:
    """What the worst error of the tilt does to the profile over two modules of height [mm]: 2 m d tau B/(2 A), closed form.

    None where the exact gap gives what the tilt may be off, which TILT-009 judges. Within a factor of two of the simulated
    transmission error.  Raises: OutOfRange for an error that is a wrong setting.  Source: worm.cutter.
    """
    if exact is not None or shape.crowning <= 0.0:
        return None
    with in_range:
        is_an_error(worst)
    return 2.0 * shape.cut.drive.module * profile_error_of_tilt(worst, crowning=shape.crowning, twist=shape.twist)


def middle_found(floor: Floor, setup: Setup) -> str | Open | None:
    """after-tilt, before-tilt or no-tilt: when the mid-plane was found; None where no head is tilted for a worm wheel.

    Source: the job file.
    """
    if setup.head is None or setup.head.tilt == 0.0 or not cuts_the_wheel(floor.loaded, setup):
        return None
    if setup.head.mid_plane is None:
        return Open((f"setups.{setup.op}.head.mid_plane",))
    return setup.head.mid_plane.found


def _pivot(setup: Setup) -> Dimension | None:
    return setup.head.mid_plane.pivot if setup.head is not None and setup.head.mid_plane is not None else None


def _shift(tilt: float, distance: float) -> Shift:
    """Both shifts by tilting. Raises: OutOfRange for a tilt beyond 45 deg.  Source: worm.tilt."""
    with in_range:
        return shift_after_tilt(abs(tilt), pivot_distance=distance)


def shift_height(setup: Setup) -> float | None:
    """How far tilting about the pivot carries the mid-plane up or down [mm]: L sin tau; None where no pivot is stated.

    Source: worm.tilt.
    """
    pivot = _pivot(setup)
    if pivot is None or setup.head is None:
        return None
    return _shift(setup.head.tilt, middle(pivot)).height


def shift_length(setup: Setup) -> float | None:
    """How far tilting carries the mid-plane back along the axis [mm]: L (1 - cos tau); None where no pivot is stated.

    Source: worm.tilt.
    """
    pivot = _pivot(setup)
    if pivot is None or setup.head is None:
        return None
    return _shift(setup.head.tilt, middle(pivot)).length


def blocks(setup: Setup) -> float | None:
    """Gauge blocks that set the tilt on the sine bar [mm]: bar sin(tilt); None where none is used. Source: worm.tilt."""
    head = setup.head
    if head is None or head.sine_bar is None:
        return None
    with in_range:
        return sine_bar_stack(abs(head.tilt), bar=head.sine_bar)


def bar_miss(setup: Setup) -> float | Open | None:
    """Angle between the blocks as stated and the tilt as stated [rad]; None where no sine bar sets it. Source: worm.tilt."""
    head = setup.head
    if head is None or (head.by != "sine-bar" and head.sine_bar is None and head.blocks is None):
        return None
    missing = tuple(f"setups.{setup.op}.head.{key}" for key in ("sine_bar", "blocks") if getattr(head, key) is None)
    if head.sine_bar is None or head.blocks is None:
        return Open(missing)
    with in_range:
        return abs(sine_bar_angle(middle(head.blocks), bar=head.sine_bar) - abs(head.tilt))


_SETUP = {"setup": ":"}
_CUT = {"shape": "cutter.shape", "worst": "tilt.worst_error", "exact": "settled contact.tilt"}
_CLOSED: dict[str, object] = {"exact": None}

HEAD = (
    Quantity(
        "tilt.worst_error",
        "setup",
        "arcmin",
        1,
        worst_error,
        {"floor": "route.floor", "set_angle": "tilt.set", "needed_angle": "tilt.needed", "allowed": "tilt.allowed"},
        "largest error of the angle between gaps and thread",
    ),
    Quantity(
        "tilt.ridge_shift",
        "cut",
        "mm",
        2,
        ridge_shift,
        _CUT,
        "shift of the ridge of contact for the worst tilt",
        _CLOSED,
    ),
    Quantity("tilt.profile_error", "cut", "um", 1, profile_error, _CUT, "profile error for the worst tilt", _CLOSED),
    Quantity(
        "tilt.middle_found",
        "setup",
        "",
        0,
        middle_found,
        {"floor": "route.floor", **_SETUP},
        "when the middle was found",
    ),
    Quantity("tilt.shift_height", "setup", "mm", 3, shift_height, _SETUP, "rise of the mid-plane by tilting"),
    Quantity("tilt.shift_length", "setup", "mm", 3, shift_length, _SETUP, "retreat of the mid-plane by tilting"),
    Quantity("tilt.blocks", "setup", "mm", 4, blocks, _SETUP, "gauge blocks under the sine bar"),
    Quantity("tilt.bar_miss", "setup", "arcmin", 2, bar_miss, _SETUP, "blocks as stated against the tilt as stated"),
)
