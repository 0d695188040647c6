"""The mark of blue on a wheel that was run with its worm, as it was seen, and what of it cannot be. Lengths mm.

right and left are the walls of a gap that stands upright, open at the top, for one who looks at the face `seen_from`.
"""

# Annotations are evaluated as they stand (no __future__ import): pydantic would have to compile each of them from its text.
from collections.abc import Iterator, Mapping
from typing import Annotated, Literal

from pydantic import Field, ValidationInfo

from setupcheck import notation
from setupcheck.jobfile.drawing import Drawing, spoken
from setupcheck.jobfile.models import Flat, Toothing
from setupcheck.jobfile.names import Miss, Ref
from setupcheck.jobfile.nodes import map_of
from setupcheck.jobfile.types import Bound, Fraction, Read, Shop, scalar, units_of

SIDES = ("right", "left")
WORDS = ("middle", "ends")


def _place(given: object, info: ValidationInfo) -> float | str:
    told = scalar(given)
    if told in WORDS:
        return str(told)
    value = notation.length(told, units=units_of(info))
    if value < 0.0:
        raise ValueError(
            f"{notation.quoted(given)} is below zero. Write how far from the middle of the face, and under towards which way"
        )
    return value


Spotted = Annotated[float | str, Read(_place, words=WORDS)]
"""Distance from the middle of the face [mm], or one of WORDS."""


class Spot(Shop):
    """The mark on one flank.

    at       how far its middle is from the middle of the face [mm], or `middle`, or `ends` where both ends are marked
    towards  the face of the wheel that it lies nearer to;  height  where on the tooth;  share  of the flank that is marked
    """

    at: Spotted
    towards: str | None = None
    height: Literal["tip", "middle", "root"] | None = None
    share: Fraction | None = Field(default=None, ge=0.0, le=1.0)


class Mark(Shop):
    """What marking blue showed on the finished wheel, worm turned by hand under light load.

    seen_from  the face one looks at to call the walls of an upright gap right and left
    right, left  the mark on that wall, left away where it shows none
    on_teeth   `some`: in places round the wheel only;  film  thickness of the blue [mm]
    """

    seen_from: str
    right: Spot | None = None
    left: Spot | None = None
    on_teeth: Literal["all", "some"] = "all"
    film: Bound | None = Field(default=None, gt=0.0)


def unlikely(drawing: Drawing) -> Iterator[Miss]:
    """A mark seen from, or towards, what is no face of the wheel; one beyond the ends of the teeth; a place half said."""
    mesh = map_of(drawing.data.get("mesh"))
    mark, wheel = map_of(mesh.get("mark")), drawing.ref(mesh.get("wheel"))
    teeth = drawing.surface(wheel)
    if not mark or wheel is None or not isinstance(teeth, Toothing):
        return
    yield from _face(drawing, wheel, mark.get("seen_from"), ("mesh", "mark", "seen_from"))
    for side in SIDES:
        spot, path = map_of(mark.get(side)), ("mesh", "mark", side)
        if not spot:
            continue
        yield from _face(drawing, wheel, spot.get("towards"), (*path, "towards"), teeth=teeth)
        yield from _how_far(drawing, spot, path, teeth)


def _how_far(drawing: Drawing, spot: Mapping[str, object], path: tuple[str, ...], teeth: Toothing) -> Iterator[Miss]:
    at, towards = spot.get("at"), spot.get("towards")
    if at in WORDS:
        if towards is not None:
            says = f"a mark at the {at} lies towards no face"
            yield Miss((*path, "towards"), f"{says}. Leave towards away, or write how far from the middle: at: 2.5 mm")
        return
    distance = drawing.length(at)
    if distance is None:
        return
    if distance > 0.0 and towards is None:
        yield Miss(
            (*path, "at"), "a mark off the middle lies towards one end. Write towards: and that face of the wheel"
        )
    if teeth.width is not None and distance > teeth.width / 2.0:
        says = f"{drawing.shown(distance)} from the middle is beyond teeth {drawing.shown(teeth.width)} wide"
        yield Miss((*path, "at"), f"{says}. Write the middle of the mark, at most {drawing.shown(teeth.width / 2.0)}")


def _face(
    drawing: Drawing, wheel: Ref, text: object, path: tuple[str, ...], teeth: Toothing | None = None
) -> Iterator[Miss]:
    """An entry that names something else than a face of the wheel; names that mean nothing are told elsewhere."""
    ref = drawing.ref(text, wheel.part)
    if text is None or ref is None:
        return
    surface = drawing.surface(ref)
    if ref.part == wheel.part and isinstance(surface, Flat) and surface.kind == "face":
        if teeth is None or surface.at != teeth.at:
            return
        yield Miss(path, f"{ref.surface} stands in the middle of the teeth. Write the face at that end of them")
        return
    faces = [n for n, s in drawing.parts.get(wheel.part, {}).items() if isinstance(s, Flat) and s.kind == "face"]
    offer = f"Write one of {', '.join(f'{wheel.part}.{n}' for n in faces)}" if faces else "Draw its faces first"
    what = f"{spoken(surface)} of {ref.part}" if surface is not None else "no face"
    yield Miss(path, f"{ref.surface} is {what}, and the mark is told by a face of the wheel. {offer}")
