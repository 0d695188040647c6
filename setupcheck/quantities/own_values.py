"""A shop's record of devices, and its house values, put into a job: they stand where typical values would. mm, rad, K."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from dataclasses import replace
from typing import TypeVar

from pydantic import BaseModel

from setupcheck.jobfile.dividing import WAYS_OF, Divide, Waves
from setupcheck.jobfile.models import Deviation, Machine
from setupcheck.jobfile.reading import LoadedJob
from setupcheck.jobfile.setups import Head, Job, Setup
from setupcheck.quantities.device_record import DeviceRecord, Series
from setupcheck.quantities.dividing import has_own_errors, typical_errors
from setupcheck.quantities.route import machine_of
from setupcheck.quantities.typical import house_name, own_name, typical
from setupcheck.record import record

OF_KEY: Mapping[str, tuple[str, ...]] = {
    "runout": ("runout",),
    "fit_error": ("runout",),
    "face_runout": ("face_runout",),
    "axis_runout": ("axis",),
    "error": ("position", "touch", "reading"),
    "depth_error": ("position", "touch", "reading"),
    "off_centre": ("position", "touch", "reading"),
    "beside": ("reading",),
    "nearer": ("reading",),
}
"""What an error entry that names a device may take from its record, first found. Source: as typical values are taken."""

TURNS_A_CRANK = ("hole-circle", "rotary-table")
"""Ways of dividing with the worm of the machine, whose record of the crank is theirs."""
BY_THE_MACHINE = (*TURNS_A_CRANK, "vernier", "readout")
"""Ways of dividing that go by the machine's own wheel or scale; a plate, a polygon or a theodolite has its own record."""
TILTED_BY_THE_MACHINE = (None, "scale", "vernier", "readout")
"""Ways of setting a tilt that go by the machine's own scale; a sine bar has its own record."""

M = TypeVar("M", bound=BaseModel)


@record
class Use:
    """A series of the record that the job names: the path it is for, and whether its limit was taken there."""

    path: str
    series: Series
    taken: bool


@record(eq=False)
class RecordUse:
    """The record a job was judged with, and where the job names what stands in it."""

    record: DeviceRecord
    uses: tuple[Use, ...]


@record
class HouseRow:
    """A house's own value of a device, or of a kind of device [mm, rad or K by `what`]."""

    device: str
    what: str
    value: float


@record(eq=False)
class HouseRows:
    """All of them, and the name of the house."""

    house: str
    rows: tuple[HouseRow, ...]

    def of(self, device: str | None, what: str) -> HouseRow | None:
        """The row of a device, or of the kind its name begins with, as typical values are found; the longest name wins."""
        if device is None:
            return None
        mine = [
            row
            for row in self.rows
            if row.what == what and (device == row.device or device.startswith(f"{row.device}-"))
        ]
        return max(mine, key=lambda row: len(row.device), default=None)


@record
class HouseUse:
    """A house value that was taken, and the path it stands at."""

    path: str
    row: HouseRow


def with_own(
    loaded: LoadedJob, found: DeviceRecord | None, values: HouseRows
) -> tuple[LoadedJob, RecordUse | None, tuple[HouseUse, ...]]:
    """The job with what a record says of its devices, and with house values where the record says nothing.

    A device's own record stands before the house's value of its kind. What is measured or stated in the job stays as it is.
    A device is looked up by its own name (`four-jaw-A`); the axis by the name of the machine; tilt and division by it as well
    where they go by the machine's own scale, wheel or worm, else by the way (`sine-bar`, `polygon`); heat and cold by what
    makes or reads them.  A thin record, or one all alike, gives nothing and the typical value stays.
    """
    filling = _Filling(loaded, found, values)
    job = filling.job()
    own = {**loaded.own, **filling.own}
    used = RecordUse(found, tuple(filling.uses)) if found is not None else None
    return replace(loaded, job=job, own=own), used, tuple(filling.of_house)


def in_force(found: DeviceRecord | None, values: HouseRows, device: str, what: str) -> tuple[float, bool] | None:
    """What a device that a job does not name yet gives [mm, rad or K by `what`]; whether that is the shop's own figure.

    None where nobody says.  Source: the shop's record, else its house file, else rules/data/typical.yaml.
    """
    series = found.of(device, what) if found is not None else None
    if series is not None and series.limit is not None:
        return series.limit, True
    own, usual = values.of(device, what), typical(device, what)
    return (own.value, True) if own is not None else (usual.value, False) if usual is not None else None


class _Filling:
    """One pass over a job; `own`, `uses` and `of_house` grow on the way."""

    def __init__(self, loaded: LoadedJob, found: DeviceRecord | None, values: HouseRows) -> None:
        self.loaded = loaded
        self.record = found
        self.values = values
        self.of_house: list[HouseUse] = []
        self.own: dict[str, str] = {}
        self.uses: list[Use] = []

    def job(self) -> Job:
        """The filled job."""
        job = self.loaded.job
        new = {name: self._within(getattr(job, name), name) for name in job.model_fields_set - {"setups", "machines"}}
        machines = {
            name: _changed(machine, dict(self._entries(machine, f"machines.{name}")))
            for name, machine in job.machines.items()
        }
        setups = tuple(self._setup(setup, machines) for setup in job.setups)
        return _changed(job, {**new, "machines": machines, "setups": setups})

    def take(
        self, path: str, names: tuple[str | None, ...], whats: tuple[str, ...], kind: str | None = None
    ) -> float | None:
        """The limit for an entry, by the first of the names and whats that the record keeps, else the house's value.

        kind  of the thing, which a house value may be of and a record never is
        """
        limit = self._recorded(path, names, whats)
        return limit if limit is not None else self._house(path, (*names, kind), whats)

    def _recorded(self, path: str, names: tuple[str | None, ...], whats: tuple[str, ...]) -> float | None:
        if self.record is None:
            return None
        series = next((s for name in names for what in whats if (s := self.record.of(name, what)) is not None), None)
        if series is None:
            return None
        limit = series.limit
        self.uses.append(Use(path, series, limit is not None))
        if limit is not None:
            self.own[path] = own_name(series.name, len(series.entries))
        return limit

    def _house(self, path: str, names: tuple[str | None, ...], whats: tuple[str, ...]) -> float | None:
        row = next((r for name in names for what in whats if (r := self.values.of(name, what)) is not None), None)
        if row is None:
            return None
        self.own[path] = house_name(f"{row.device} {row.what.replace('_', ' ')}", self.values.house)
        self.of_house.append(HouseUse(path, row))
        return row.value

    def _within(self, node: object, path: str) -> object:
        """The node with every error entry below it that names a device and no value."""
        if isinstance(node, Deviation):
            whats = OF_KEY.get(path.rpartition(".")[2], ())
            if node.device is None or node.measured is not None or node.at_most is not None or not whats:
                return node
            limit = self.take(path, (node.device,), whats)
            return node if limit is None else _changed(node, {"at_most": limit})
        if isinstance(node, BaseModel):
            return _changed(node, dict(self._entries(node, path)))
        if isinstance(node, Mapping):
            return {key: self._within(entry, f"{path}.{key}") for key, entry in node.items()}
        if isinstance(node, tuple):
            return tuple(self._within(entry, f"{path}[{number}]") for number, entry in enumerate(node, 1))
        return node

    def _entries(self, node: BaseModel, path: str) -> Iterator[tuple[str, object]]:
        for name, field in type(node).model_fields.items():
            if name in node.model_fields_set:
                before = getattr(node, name)
                after = self._within(before, f"{path}.{field.alias or name}")
                if after is not before:
                    yield name, after

    def _setup(self, setup: Setup, machines: dict[str, Machine]) -> Setup:
        path = f"setups.{setup.op}"
        filled = _changed(setup, dict(self._entries(setup, path)))
        self._axis(setup, machines)
        new: dict[str, object] = {}
        if filled.head is not None:
            new["head"] = self._head(filled.head, setup.machine, path)
        if filled.divide is not None:
            new["divide"] = self._divide(filled, path)
        if filled.join is not None and filled.join.heat is not None:
            heat, where = filled.join.heat, f"{path}.join.heat"
            errors = {
                key: self.take(f"{where}.{key}", (by,), ("temperature_error",))
                for key, by in (
                    ("oven_error", heat.read_by if heat.read_by is not None else heat.by),
                    ("cold_error", heat.cold_by),
                )
                if getattr(heat, key) is None
            }
            new["join"] = _changed(filled.join, {"heat": _changed(heat, _those(errors))})
        return _changed(filled, new)

    def _axis(self, setup: Setup, machines: dict[str, Machine]) -> None:
        """The axis of a machine that states none, once for all its setups; also of one that is called by its kind."""
        name, machine = machine_of(self.loaded, setup)
        if name is None or machine is None or machine.axis_runout is not None or setup.join is not None:
            return
        path = f"machines.{name}.axis_runout"
        if path in self.own or any(use.path == path for use in self.uses):
            return
        limit = self.take(path, (name,), ("axis",), machine.kind)
        if limit is not None:
            given = Deviation.model_construct(at_most=limit, device=name)
            machines[name] = _changed(machines.get(name, machine), {"axis_runout": given})

    def _head(self, head: Head, machine: str | None, path: str) -> Head:
        if head.uncertainty is not None:
            return head
        names = (machine if head.by in TILTED_BY_THE_MACHINE else None, head.by)
        return _changed(head, _those({"uncertainty": self.take(f"{path}.head.uncertainty", names, ("tilt",))}))

    def _divide(self, setup: Setup, path: str) -> Divide | None:
        """The division with what the record keeps of it; what it does not keep takes its typical value beside it."""
        divide = setup.divide
        if divide is None or has_own_errors(divide) or not _divides(self.loaded, setup):
            return divide
        keys = {"wheel.once_per_turn": "once_per_turn", "setting": "setting"}
        keys = {key: what for key, what in keys.items() if divide.by in WAYS_OF[key.partition(".")[0]]}
        if divide.worm is None and divide.by in TURNS_A_CRANK:
            keys["worm.once_per_crank"] = "once_per_crank"
        names = (setup.machine if divide.by in BY_THE_MACHINE else None, divide.by)
        errors = _those({key: self.take(f"{path}.divide.{key}", names, (what,)) for key, what in keys.items()})
        if not errors:
            return divide
        for key, row in typical_errors(divide).items():
            if key not in errors:
                errors[key] = row.value
                self.own[f"{path}.divide.{key}"] = row.name
        new: dict[str, object] = {}
        for key, value in errors.items():
            group, _, entry = key.rpartition(".")
            new[group or entry] = Waves.model_construct(**{entry: value}) if group else value  # type: ignore[arg-type]
        return _changed(divide, new)


def _divides(loaded: LoadedJob, setup: Setup) -> bool:
    """Whether a setup cuts more than one tooth or hole: a single place has no error of division."""
    refs = (loaded.ref(name, setup.part) for name in setup.cut)
    return any(getattr(loaded.job.parts[ref.part].surfaces[ref.surface], "count", 1) > 1 for ref in refs)


def _those(found: Mapping[str, float | None]) -> dict[str, object]:
    return {key: value for key, value in found.items() if value is not None}


def _changed(node: M, new: Mapping[str, object]) -> M:
    """The record with other entries; it still knows which ones the file wrote. The same one where nothing changes."""
    if all(getattr(node, key) is value for key, value in new.items()):
        return node
    copy = node.model_copy(update=dict(new))
    copy.model_fields_set.intersection_update(node.model_fields_set)
    return copy
