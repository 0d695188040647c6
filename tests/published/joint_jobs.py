"""A joint of two plain cylinders written as a job file, for examples that state sizes, interference and elastic constants.

The sizes go in as measured without uncertainty, so that the interference is the one the source states; the joint serves at
20 degC and nothing is smoothed away, unless an example says otherwise. What no example states (strength, density, heat cap)
is filled with figures of no weight: they enter nothing that is compared.
"""

from __future__ import annotations

from dataclasses import dataclass

from setupcheck.jobfile.types import INCH
from setupcheck.quantities.book import Answer, Known

from .bench import reviewed

PSI = 4.4482216152605 / INCH**2
"""MPa in a pound-force per square inch. Source: definition of the pound-force and the inch."""


@dataclass(frozen=True, kw_only=True)
class Metal:
    """Elastic constants [GPa, -] and mean expansion [um/m/K] as a source states them."""

    gpa: float
    poisson: float = 0.3
    expansion: float = 11.5
    yield_mpa: float = 500.0

    def written(self) -> str:
        return (
            f"{{modulus: {self.gpa!r} GPa, poisson: {self.poisson!r}, expansion: {self.expansion!r} um/m/K, "
            f"yield_strength: {self.yield_mpa!r} MPa, density: 7850, specific_heat: 460, heat_cap: 500 degC}}"
        )


@dataclass(frozen=True, kw_only=True)
class FitJob:
    """One joint. Sizes in the file's units; interference on diameter, or bore and journal as a drawing writes them.

    toothed  the outside carries teeth whose roots stand on it, so that its growth is the growth of the tooth circle
    """

    diameter: float
    outside: float
    hub: Metal
    shaft: Metal
    interference: float = 0.0
    bore: str = ""
    journal: str = ""
    hole: float = 0.0
    length: float = 20.0
    units: str = "mm"
    by: str = "press"
    extra: str = "friction: 0.12, smoothing: 0.0"
    serves_at: str = "[20 degC, 20 degC]"
    roughness: tuple[str, str] = ("Rz 6.3 um", "Rz 4 um")
    toothed: bool = False

    def text(self) -> str:
        bore = self.bore or f"{{measured: {self.diameter!r}, uncertainty: 0 um}}"
        journal = self.journal or f"{{measured: {self.diameter + self.interference!r}, uncertainty: 0 um}}"
        hole = f"hole: {self.hole!r}, " if self.hole else ""
        module = 1.0  # of a full depth 2.25 m below, so the roots lie 2.5 m inside the pitch circle, on diameter
        teeth = f"on_circle: {self.outside + 2.5 * module!r}, module: {module!r}, at: {self.length / 2.0!r}"
        outside = (
            f"{{kind: teeth, count: 60, {teeth}, width: {self.length!r}}}"
            if self.toothed
            else f"{{kind: cylinder, diameter: {self.outside!r}, from: 0, to: {self.length!r}}}"
        )
        return f"""
setupcheck: 1
title: A joint of two cylinders
units: {self.units}
parts:
  hub:
    properties: {self.hub.written()}
    surfaces:
      bore: {{kind: bore, diameter: {bore}, from: 0, to: {self.length!r}, roughness: {self.roughness[0]}}}
      rim: {outside}
  shaft:
    properties: {self.shaft.written()}
    surfaces:
      seat: {{kind: cylinder, diameter: {journal}, from: 0, to: {self.length!r}, {hole}roughness: {self.roughness[1]}}}
setups:
  - op: 10
    join: {{outer: hub.bore, inner: shaft.seat, by: {self.by}, square: bore, serves_at: {self.serves_at}, {self.extra}}}
"""

    def answer(self, name: str) -> Answer:
        book = reviewed(self.text()).book
        return book.get(name, book.instances("join")[0])

    def get(self, name: str) -> float:
        """One number of the joint [mm, MPa, N, degC]; open or absent fails the test with what is said."""
        found = self.answer(name)
        assert isinstance(found, Known), (name, found)
        assert isinstance(found.value, float), (name, found)
        return found.value
