"""Where the wheel's mid-plane stands to the worm's axis: the figure of the requirement and of the setting. mm, rad."""

from __future__ import annotations

from setupcheck.jobfile.models import Distance
from setupcheck.ledger.figures import MidPlane
from setupcheck.ledger.route import State
from setupcheck.quantities.book import Open
from setupcheck.quantities.causes import Entry, size_error
from setupcheck.quantities.head_setting import where_it_works
from setupcheck.quantities.relations import Built, second_order
from setupcheck.quantities.shop import Floor


def mid_plane(worm_axis: Distance, g: State, r: State, face: State) -> Built:
    """The figure of a mid-plane: teeth g about the axis r, the worm's axis at a distance from a face, all of one body.

    Source: geometry, as in ledger.figures.
    """
    assert g.pattern is not None
    middle, error = size_error(
        worm_axis.length, Entry("housing, face to worm axis", None, "place.worm_axis.length", "")
    )
    sign = float(face.facing)
    axial = g.axial - face.axial - error * sign
    axial = axial.plus_constant(g.z - face.z - sign * middle)
    lean = g.lean - r.lean
    return Built(MidPlane(axial, lean, g.pattern), second_order(lean=lean, lever=g.pattern.radius))


def in_its_housing(floor: Floor) -> MidPlane | Open:
    """The same for the finished wheel on the axis it works on, whether a requirement asks for it or not. Source: as above."""
    place, found = floor.loaded.job.place, where_it_works(floor)
    if isinstance(found, Open):
        return found
    if place is None or place.worm_axis is None:
        return Open(("place.worm_axis",))
    teeth, axis = found
    face = floor.now(floor.loaded.ref(place.worm_axis.from_))
    if face is None or not face.facing or floor.body(face.part) is not floor.body(teeth.part):
        return Open(("place.worm_axis.from",), "the worm's axis is measured from no face of the wheel or its shaft")
    figure = mid_plane(place.worm_axis, teeth, axis, face).figure
    assert isinstance(figure, MidPlane)
    missing = figure.undetermined()
    return Open(missing) if missing else figure
