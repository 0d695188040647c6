"""What an entry of the job file says, found by its path: one number, its unit, its guard. Lengths mm, angles rad."""

from __future__ import annotations

from setupcheck.jobfile.models import Deviation, Dimension
from setupcheck.jobfile.reading import LoadedJob
from setupcheck.ledger.causes import Cause
from setupcheck.quantities.gates import guard_of
from setupcheck.quantities.typical import Typical, table, typical
from setupcheck.record import record

LENGTHS_OF_A_DIVISION = ("centring", "blocks", "x", "y")
"""Keys under `divide` that state a length; all others state an angle."""

ANGLES = (".divide.", ".tilt", "shaft_angle", ".head.uncertainty", ".turned")
"""What stands in the path of an entry that states an angle."""


@record
class Stated:
    """What an entry of the job file says: its value now, the guard its uncertainty adds, and the least it can be."""

    now: float
    unit: str
    guard: float = 0.0
    least: float = 0.0


def node_at(loaded: LoadedJob, path: str) -> object:
    """What stands at a path of the typed job."""
    node: object = loaded.job
    for step in loaded.loc(path):
        if isinstance(node, dict):
            node = node.get(step)
        elif isinstance(node, tuple) and isinstance(step, int):
            node = node[step] if step < len(node) else None
        else:
            node = getattr(node, {"from": "low", "to": "high"}.get(str(step), str(step)), None)
    return node


def deviation(loaded: LoadedJob, path: str) -> Deviation | None:
    node = node_at(loaded, path)
    return node if isinstance(node, Deviation) else None


def row_of(cause: Cause) -> Typical | None:
    """The typical value a cause was made with, if it was."""
    return next((row for row in table().values() if row.name == cause.rests_on), None) if cause.rests_on else None


def stated(loaded: LoadedJob, path: str, cause: Cause | None = None) -> Stated | None:
    """The entry a cause rests on, a device alone by its typical value; None where it is not one number."""
    row = row_of(cause) if cause is not None else None
    if row is not None and ".divide." not in path:  # those of a division come together, as `_recorded` has them
        return Stated(row.value, "um")
    node = node_at(loaded, path)
    if isinstance(node, Deviation):
        value = node.measured if node.measured is not None else node.at_most
        if value is None:
            row = typical(node.device or "", path.rpartition(".")[2])
            return Stated(row.value, "um") if row is not None else None
        return Stated(abs(value), "um", guard_of(node))
    if isinstance(node, Dimension):
        half = node.uncertainty if node.uncertainty is not None else ((node.upper or 0.0) - (node.lower or 0.0)) / 2.0
        return Stated(half, "um")
    if isinstance(node, tuple) and len(node) == 2:
        return Stated(float(node[1]), "um", least=float(node[0]))
    if isinstance(node, float):
        if path.endswith(".polygon_tilt"):  # it counts by its square
            return None
        length = path.rpartition(".")[2] in LENGTHS_OF_A_DIVISION
        angular = not length and any(word in path for word in ANGLES)
        return Stated(node, "arcsec" if angular else "um")
    return None
