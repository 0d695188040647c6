"""What a requirement asks: its limits in base units, the unit it is shown in, its name. mm, rad."""

from __future__ import annotations

from setupcheck.jobfile.asked import Require
from setupcheck.jobfile.sense import limit_kind
from setupcheck.quantities.shop import Floor
from setupcheck.record import record

OF_THE_WHEEL = ("mid-plane", "backlash", "contact-length", "contact-area")
"""Figures that speak of the mesh's wheel where nothing else is said."""


@record
class Stack:
    """One requirement with its instance name and how it is shown.

    unit   display unit (um, mm, arcsec);  kind "length" or "angle" of its limits
    low, high  limits in base units (mm or rad), None where there is none
    """

    name: str
    index: int
    require: Require
    unit: str
    digits: int
    low: float | None
    high: float | None
    of: str
    about: str


def read_stack(floor: Floor, index: int) -> Stack:
    """Limits, unit and name of requirement `index`.

    Raises: JobError where a grade cannot give the limit.
    """
    require, path = floor.loaded.job.require[index], f"require[{index + 1}]"
    kind = limit_kind(require)  # the reader has seen to it that the limits are of this kind
    if require.between is not None:
        low: float | None = require.between[0].value
        high: float | None = require.between[1].value
    else:
        low = require.at_least.value if require.at_least is not None else None
        high = require.at_most.value if require.at_most is not None else None
    if require.grade is not None:
        high = _grade(floor, require, path)
    unit, digits = {"angle": ("arcsec", 1), "torque": ("N*m", 1), "fraction": ("%", 0)}.get(kind, ("um", 1))
    if require.what in ("length", "backlash"):
        unit, digits = "mm", 4
    if require.what == "allowance":
        unit, digits = "mm", 3
    about = require.about or (floor.loaded.job.place.axis if floor.loaded.job.place is not None else None) or ""
    mesh = floor.loaded.job.mesh
    of = require.of or (mesh.wheel if mesh is not None and require.what in OF_THE_WHEEL else "")
    if require.what == "torque":
        of, about = of or _only_joint(floor), ""
    name = require.name or ".".join(x for x in (require.what, of.replace(".", "-"), _short(about)) if x)
    return Stack(name, index, require, unit, digits, low, high, of, about)


def _only_joint(floor: Floor) -> str:
    """Operation of the only joint of a job; empty where there are several or none."""
    joins = [str(s.op) for s in floor.loaded.job.setups if s.join is not None]
    return joins[0] if len(joins) == 1 else ""


def _short(text: str) -> str:
    return text.replace(".", "-")


def spoken(stack: Stack) -> str:
    """The surfaces of a requirement in words: `teeth about bearings`, with their parts where both have one name."""
    if stack.require.what == "torque":
        return f"op {stack.of}" if stack.of else "the joint"
    of, about = _surface(stack.of), _surface(stack.about)
    if of == about:
        of, about = _surface(stack.of, whole=True), _surface(stack.about, whole=True)
    alone = not about or stack.require.what in ("allowance", "chord", "pitch-circle", "contact-length", "contact-area")
    return of if alone else f"{of} about {about}"


def _surface(text: str, *, whole: bool = False) -> str:
    name, _, op = text.partition("@")
    return (name if whole else name.rpartition(".")[2]) + (f" after op {op}" if op else "")


def _grade(floor: Floor, require: Require, path: str) -> float:
    """Limit [mm] of ISO 1328-1:1995 or -2:1997 for a cylindrical gear of the stated grade."""
    from setupcheck.physics.gear_grades import LIMITS, grade_limit

    if require.what not in LIMITS:
        raise floor.problem(
            f"{path}.grade", f"a grade says nothing about {require.what}", f"Write it for one of: {', '.join(LIMITS)}"
        )
    ref = floor.loaded.ref(require.of or "")
    node = floor.loaded.job.parts[ref.part].surfaces[ref.surface]
    module = getattr(node, "module", None)
    if node.kind != "teeth" or module is None:
        raise floor.problem(
            f"{path}.grade", "a grade needs the module of the teeth it speaks of", "Write module: 1.5 at the teeth"
        )
    assert require.grade is not None
    try:
        return grade_limit(require.what, module=module, reference_diameter=node.on_circle, grade=require.grade)
    except ValueError as why:
        raise floor.problem(f"{path}.grade", str(why), "Write the limit itself: at_most: 40 um") from None
