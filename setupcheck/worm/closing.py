"""Worm and wheel from whatever is known of them: every size that the known ones settle, and which of them disagree.

Sizes by name, lengths mm, angles rad: starts, teeth, shift (of the wheel, in modules), axial_module, diametral_pitch
[1/in], axial_pitch, lead, normal_module, quotient, reference_diameter, lead_angle, wheel_diameter (reference circle of the
wheel), centre_distance.

    p_x = pi m;  P = 25.4/m;  p_z = z1 p_x;  q = d1/m;  tan g = p_z/(pi d1) = z1/q;  m_n = m cos g;  d2 = z2 m
    2 a = d1 + d2 + 2 x m
Source: ISO 1122-2 quantities (from memory); diametral pitch by its definition, 25.4 mm to the inch.
"""

from __future__ import annotations

import math
from collections.abc import Callable, Mapping, Sequence

from setupcheck.record import record

INCH = 25.4  # mm, exactly (international yard and pound agreement, 1959)
WHOLE = 0.02
"""How far from a whole number starts or teeth may come out, over themselves, where sizes are rounded. Our screening choice."""


@record
class Step:
    """One way to one size: what it gives, what it needs, the formula, and the same in words."""

    gives: str
    needs: tuple[str, ...]
    of: Callable[..., float]
    words: str


@record
class Disagreement:
    """A known size that others contradict.

    name, stated  the size and what is known of it;  others, value  those that contradict it, and what they make of it
    words         how they do
    """

    name: str
    stated: float
    others: tuple[str, ...]
    value: float
    words: str

    @property
    def about(self) -> frozenset[str]:
        """All the known sizes that cannot be true together."""
        return frozenset((self.name, *self.others))


@record
class Closed:
    """Every size that is settled, the known ones that each rests on, and what disagrees, fewest sizes first."""

    values: Mapping[str, float]
    origins: Mapping[str, frozenset[str]]
    disagreements: tuple[Disagreement, ...]


def _whole(value: float) -> float:
    near = round(value)
    if near < 1 or abs(value - near) > WHOLE * near:
        raise ValueError("not a whole number")
    return float(near)


def _module_of_normal(normal: float, starts: float, diameter: float) -> float:
    """m from m_n = m cos g at a given diameter: m = m_n/sqrt(1 - (z1 m_n/d1)^2)."""
    return normal / math.sqrt(1.0 - (starts * normal / diameter) ** 2)


STEPS: Sequence[Step] = (
    Step("axial_pitch", ("axial_module",), lambda m: math.pi * m, "pi x axial module"),
    Step("diametral_pitch", ("axial_module",), lambda m: INCH / m, "25.4 mm over the axial module"),
    Step("axial_module", ("diametral_pitch",), lambda p: INCH / p, "25.4 mm over the diametral pitch"),
    Step("axial_module", ("axial_pitch",), lambda px: px / math.pi, "axial pitch over pi"),
    Step("lead", ("starts", "axial_pitch"), lambda z, px: z * px, "starts x axial pitch"),
    Step("axial_pitch", ("lead", "starts"), lambda pz, z: pz / z, "lead over starts"),
    Step("starts", ("lead", "axial_pitch"), lambda pz, px: _whole(pz / px), "lead over axial pitch"),
    Step(
        "quotient", ("reference_diameter", "axial_module"), lambda d, m: d / m, "reference diameter over axial module"
    ),
    Step("reference_diameter", ("quotient", "axial_module"), lambda q, m: q * m, "quotient x axial module"),
    Step("axial_module", ("reference_diameter", "quotient"), lambda d, q: d / q, "reference diameter over quotient"),
    Step("lead_angle", ("starts", "quotient"), lambda z, q: math.atan(z / q), "tan g = starts over quotient"),
    Step(
        "lead_angle",
        ("lead", "reference_diameter"),
        lambda pz, d: math.atan(pz / (math.pi * d)),
        "tan g = lead over circumference",
    ),
    Step(
        "normal_module", ("axial_module", "lead_angle"), lambda m, g: m * math.cos(g), "axial module x cos(lead angle)"
    ),
    Step(
        "axial_module",
        ("normal_module", "lead_angle"),
        lambda n, g: n / math.cos(g),
        "normal module over cos(lead angle)",
    ),
    Step(
        "axial_module",
        ("normal_module", "starts", "reference_diameter"),
        _module_of_normal,
        "normal module over cos(lead angle)",
    ),
    Step(
        "reference_diameter",
        ("lead", "lead_angle"),
        lambda pz, g: pz / (math.pi * math.tan(g)),
        "lead over pi tan(lead angle)",
    ),
    Step("wheel_diameter", ("teeth", "axial_module"), lambda z, m: z * m, "teeth x axial module"),
    Step("axial_module", ("wheel_diameter", "teeth"), lambda d, z: d / z, "wheel's circle over its teeth"),
    Step("teeth", ("wheel_diameter", "axial_module"), lambda d, m: _whole(d / m), "wheel's circle over axial module"),
    Step(
        "centre_distance",
        ("reference_diameter", "wheel_diameter", "shift", "axial_module"),
        lambda d1, d2, x, m: (d1 + d2) / 2.0 + x * m,
        "half the sum of both circles + shift x module",
    ),
    Step(
        "reference_diameter",
        ("centre_distance", "wheel_diameter", "shift", "axial_module"),
        lambda a, d2, x, m: 2.0 * (a - x * m) - d2,
        "what the centre distance leaves of the worm",
    ),
    Step(
        "wheel_diameter",
        ("centre_distance", "reference_diameter", "shift", "axial_module"),
        lambda a, d1, x, m: 2.0 * (a - x * m) - d1,
        "what the centre distance leaves of the wheel",
    ),
    Step(
        "axial_module",
        ("centre_distance", "reference_diameter", "teeth", "shift"),
        lambda a, d1, z, x: (2.0 * a - d1) / (z + 2.0 * x),
        "what the centre distance leaves of the wheel, over its teeth",
    ),
    Step(
        "axial_module",
        ("centre_distance", "quotient", "teeth", "shift"),
        lambda a, q, z, x: 2.0 * a / (q + z + 2.0 * x),
        "centre distance over the mean of quotient and teeth",
    ),
    Step(
        "shift",
        ("centre_distance", "reference_diameter", "wheel_diameter", "axial_module"),
        lambda a, d1, d2, m: (a - (d1 + d2) / 2.0) / m,
        "what the centre distance is over half the sum of both circles, in modules",
    ),
)
"""All ways from some sizes to another; the first that can be gone is gone."""


def closed(*known: Mapping[str, float], within: float, bands: Mapping[str, float] | None = None) -> Closed:
    """Every size that the known ones settle, and where the known ones contradict each other.

    known   sizes by name, the groups that count first in front: a later group only fills what is not settled yet
    within  relative difference up to which two figures for one size are the same, rounded apart
    bands   what is known only within so much, relative, on top of that (a measured pitch)
    A shift of a contradicted pair is compared in modules, everything else relative to itself.
    Source: this module's equations.

    >>> found = closed({"quotient": 12.0, "axial_module": 2.5, "starts": 1, "teeth": 40, "shift": 0.0}, within=1e-3)
    >>> found.values["centre_distance"], found.values["reference_diameter"], round(found.values["lead"], 4)
    (65.0, 30.0, 7.854)
    >>> closed({"quotient": 12.0, "axial_module": 2.5, "reference_diameter": 28.0}, within=1e-3).disagreements[0].value
    11.2
    """
    stated: dict[str, float] = {}
    values: dict[str, float] = {}
    origins: dict[str, frozenset[str]] = {}
    for group in known:
        for name, value in group.items():
            stated.setdefault(name, value)
            if name not in values:
                values[name], origins[name] = value, frozenset((name,))
        _follow(values, origins)
    found = _disagreements(stated, values, origins, within=within, bands=bands or {})
    return Closed(values, origins, tuple(found))


def _follow(values: dict[str, float], origins: dict[str, frozenset[str]]) -> None:
    """Goes every step that can be gone, until none is left."""
    moved = True
    while moved:
        moved = False
        for step in STEPS:
            if step.gives in values or not all(need in values for need in step.needs):
                continue
            value = _made(step, values)
            if value is not None:
                values[step.gives] = value
                origins[step.gives] = frozenset().union(*(origins[need] for need in step.needs))
                moved = True


def _made(step: Step, values: Mapping[str, float]) -> float | None:
    """What a step gives; None where it gives nothing that exists."""
    try:
        value = step.of(*(values[need] for need in step.needs))
    except (ValueError, ZeroDivisionError, OverflowError):
        return None
    return value if math.isfinite(value) and (value > 0.0 or step.gives == "shift") else None


def _disagreements(
    stated: Mapping[str, float],
    values: Mapping[str, float],
    origins: Mapping[str, frozenset[str]],
    *,
    within: float,
    bands: Mapping[str, float],
) -> list[Disagreement]:
    """Known sizes that the others contradict: each set of sizes once, and no set that holds a smaller one of them."""
    found: list[Disagreement] = []
    told: dict[frozenset[str], Disagreement] = {}
    for name, value in stated.items():
        if value != values[name] and name not in origins[name]:  # a later group that others had settled already
            told.setdefault(origins[name] | {name}, _told(name, value, origins[name], values[name], "the others"))
    for step in STEPS:
        if step.gives not in stated or not all(need in values for need in step.needs):
            continue
        rests_on = frozenset().union(*(origins[need] for need in step.needs))
        if step.gives in rests_on:
            continue
        made = _made_exactly(step, values)
        if made is not None:
            one = _told(step.gives, stated[step.gives], rests_on, made, step.words)
            told.setdefault(one.about, one)  # the step that stands first is the one to tell
    for one in sorted(told.values(), key=lambda one: len(one.about)):
        size = 1.0 if one.name == "shift" else max(abs(one.stated), abs(one.value))
        allowed = within + sum(bands.get(name, 0.0) for name in one.about)
        if abs(one.value - one.stated) > allowed * size and not any(other.about <= one.about for other in found):
            found.append(one)
    return found


def _made_exactly(step: Step, values: Mapping[str, float]) -> float | None:
    """What a step gives, without rounding starts or teeth to the next whole number."""
    if step.gives in ("starts", "teeth"):
        above, below = (values[need] for need in step.needs)
        return above / below if below else None
    return _made(step, values)


def _told(name: str, stated: float, others: frozenset[str], value: float, words: str) -> Disagreement:
    return Disagreement(name, stated, tuple(sorted(others - {name})), value, words)
