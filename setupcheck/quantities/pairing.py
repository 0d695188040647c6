"""Both parts of an interference joint with their materials, what their surfaces lose, and how they rub. mm, MPa."""

from __future__ import annotations

from setupcheck.jobfile.models import Part, Round
from setupcheck.jobfile.service import Warmth
from setupcheck.jobfile.setups import Join
from setupcheck.notation import Roughness
from setupcheck.physics import interference as fits
from setupcheck.physics.heating import interference_at
from setupcheck.physics.materials import Material, Question, expansion_for, modulus_for
from setupcheck.quantities.book import Open, in_range
from setupcheck.quantities.contents import material_family
from setupcheck.quantities.friction import Friction, friction
from setupcheck.quantities.joining import JointSizes
from setupcheck.quantities.joint_shape import Section, sections
from setupcheck.quantities.shop import Floor
from setupcheck.quantities.stuff import material_of, porous
from setupcheck.record import record

FITTED = ("shrink", "press")
"""Ways of joining that hold by interference."""
BENCH = Warmth(20.0, 20.0)
"""The temperature of all sizes. Source: ISO 1."""
RZ_PER_RA = 7.0
"""Rz over Ra where only Ra is stated. Source: 4 to 7 for machined surfaces (from memory); the end that loses more."""


@record
class Pair:
    """Both materials of a joint, and its sections."""

    hub: Material
    shaft: Material
    hub_part: str
    shaft_part: str
    diameter: float
    sections: tuple[Section, ...]

    def told(self) -> str:
        """Diameter, elastic constants, expansions and sections, from which every figure of the joint can be worked out."""
        both = ((self.hub, "hub"), (self.shaft, "shaft"))
        each = [f"D {self.diameter:g} mm"]
        for found, name in both:
            e, up, down = found.modulus, found.heating, found.cooling
            each.append(
                f"{name} {found.name}: E {e.low / 1e3:g} to {e.high / 1e3:g} GPa, nu {found.poisson.value:g}, expansion "
                f"{up.low * 1e6:.1f} to {up.high * 1e6:.1f}e-6/K warm, {down.low * 1e6:.1f} to {down.high * 1e6:.1f}e-6/K cold"
            )
        each += [
            f"{s.length:g} mm of outside {s.outside:g}{' (roots)' if s.toothed else ''}, hole {s.hole:g}"
            for s in self.sections
        ]
        return "; ".join(each)

    def joints(self, question: Question) -> tuple[fits.Joint, ...]:
        """Each section with the moduli that are safe for a question. Raises: OutOfRange for sizes that are no joint."""
        with in_range:
            return tuple(
                fits.Joint(
                    diameter=self.diameter,
                    hub_outside=s.outside,
                    shaft_hole=s.hole,
                    hub_modulus=modulus_for(question, "hub", self.hub).value,
                    hub_poisson=self.hub.poisson.value,
                    shaft_modulus=modulus_for(question, "shaft", self.shaft).value,
                    shaft_poisson=self.shaft.poisson.value,
                )
                for s in self.sections
            )

    def at(self, interference: float, question: Question, state: Warmth) -> float:
        """Interference when hub and shaft have their temperatures, expansions safe for the question [mm].

        Raises: OutOfRange for a temperature that no expansion is known for.
        """
        with in_range:
            return interference_at(
                interference,
                diameter=self.diameter,
                hub_expansion=expansion_for(question, "hub", self.hub, temperature=state.hub).value,
                hub_temperature=state.hub,
                shaft_expansion=expansion_for(question, "shaft", self.shaft, temperature=state.shaft).value,
                shaft_temperature=state.shaft,
            )


def pair(floor: Floor, join: Join, sizes: JointSizes) -> Pair | Open | None:
    """Materials and sections of a joint that holds by interference; None for any other. Source: job file, materials.yaml."""
    if join.by not in FITTED:
        return None
    shape = sections(floor, join)
    if shape is None:
        return None
    outer, inner = floor.loaded.ref(join.outer).part, floor.loaded.ref(join.inner).part
    if any(porous(floor.loaded.job.parts[name]) for name in (outer, inner)):
        return Open(because="sintered metal crushes into its pores, so no elastic figure holds for this joint")
    hub, shaft = material_of(floor, outer), material_of(floor, inner)
    opened = [x for x in (shape, hub, shaft) if isinstance(x, Open)]
    if isinstance(shape, Open) or isinstance(hub, Open) or isinstance(shaft, Open):
        return Open(tuple(m for x in opened for m in x.missing), "; ".join(x.because for x in opened if x.because))
    return Pair(hub, shaft, outer, inner, sizes.nominal, shape)


def smoothing(join: Join, peaks: float) -> float:
    """Interference lost where the peaks of both surfaces flatten, on diameter [mm]: 0.8 (Rz hub + Rz shaft).

    Source: DIN 7190 (from memory); the factor is not settled, `smoothing` in the join changes it.
    """
    return (join.smoothing if join.smoothing is not None else fits.SMOOTHING_FACTOR) * peaks


def smoothing_1988(peaks: float) -> float:
    """Interference lost by the older published factor, on diameter [mm]: 0.8 (Rz hub + Rz shaft).

    Source: DIN 7190:1988 and 2001 (from memory).
    """
    return fits.smoothing_loss(hub_roughness=peaks, shaft_roughness=0.0, factor=fits.SMOOTHING_FACTOR)


def smoothing_2017(peaks: float) -> float:
    """Interference lost by the factor said of the newer edition, on diameter [mm]: 0.4 (Rz hub + Rz shaft).

    Source: a secondary text on DIN 7190:2017, not checked.
    """
    return fits.smoothing_loss(hub_roughness=peaks, shaft_roughness=0.0, factor=fits.LOWER_SMOOTHING_FACTOR)


def peaks(floor: Floor, join: Join, pair: Pair) -> float | Open:
    """Rz of bore and journal together [mm]; an Ra counts as seven times as high.

    Source: the job file; Rz over Ra from memory.
    """
    heights, missing = [], []
    for text in (join.outer, join.inner):
        ref = floor.loaded.ref(text)
        node = floor.loaded.job.parts[ref.part].surfaces[ref.surface]
        given = node.roughness if isinstance(node, Round) else None
        if given is None:
            missing.append(f"parts.{ref.part}.surfaces.{ref.surface}.roughness")
        else:
            heights.append(_rz(given))
    if missing:
        return Open(tuple(missing))
    return heights[0] + heights[1]


def smoothed(floor: Floor, join: Join, pair: Pair) -> float | Open:
    """What `smoothing` takes, straight from the job [mm]. Source: as there."""
    found = peaks(floor, join, pair)
    return found if isinstance(found, Open) else smoothing(join, found)


def _rz(given: Roughness) -> float:
    return given.height * (RZ_PER_RA if given.kind == "Ra" else 1.0)


def service(join: Join, op: int) -> tuple[Warmth, Warmth] | Open | None:
    """Coldest and warmest state the joint works in, hub and shaft [degC]; None of a joint that no interference holds.

    Source: the job file.
    """
    if join.by not in FITTED and join.serves_at is None:
        return None
    return join.serves_at if join.serves_at is not None else Open((f"setups.{op}.join.serves_at",))


def rubbing(floor: Floor, join: Join, pair: Pair, op: int) -> Friction | Open:
    """Friction of the joint: as stated, else by materials, way of joining and state of the joint.

    Source: the job file, else rules/data/friction.yaml (from memory).
    """
    if join.friction is not None:
        return Friction(join.friction, join.friction, "shop record")
    path = f"setups.{op}.join"
    if join.joint is None:
        return Open((f"{path}.joint",))
    hub, shaft = (_family(floor.loaded.job.parts[name], found) for name, found in _both(pair))
    found = friction(hub=hub, shaft=shaft, by=join.by, joint=join.joint)
    if found is None:
        because = f"no friction is known for {hub} on {shaft}, {join.by}, {join.joint}"
        return Open((f"{path}.friction",), because)
    return found


def _both(pair: Pair) -> tuple[tuple[str, Material], tuple[str, Material]]:
    return (pair.hub_part, pair.hub), (pair.shaft_part, pair.shaft)


def _family(part: Part, found: Material) -> str:
    return found.family if found.family != "other" else material_family(part.material or "")
