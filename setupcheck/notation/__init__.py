"""Shop notation: reads lengths, sizes, angles and the rest as a planner writes them, and writes them back.

Base units come out: mm, rad, degC, N, N*mm, MPa, s, kg, rev/min, m3. Every refusal is a `NotationError`, a ValueError whose
text says what is wrong and what to write. Leaf package: standard library only.
"""

from setupcheck.notation.amounts import (
    Amount,
    Dimension,
    Roughness,
    amount,
    conductivity,
    duration,
    expansion,
    force,
    fraction,
    mass,
    number,
    pressure,
    roughness,
    speed,
    temperature,
    temperature_difference,
    torque,
    volume,
)
from setupcheck.notation.angles import angle, angle_bound
from setupcheck.notation.lengths import Units, bound, length, length_range, span
from setupcheck.notation.showing import FACTOR, fixed, show, show_angle, show_length
from setupcheck.notation.sizes import FIT_LETTERS, Size, size
from setupcheck.notation.wording import Given, NotationError, nearest, plain, quoted

__all__ = [
    "FACTOR",
    "FIT_LETTERS",
    "Amount",
    "Dimension",
    "Given",
    "NotationError",
    "Roughness",
    "Size",
    "Units",
    "amount",
    "angle",
    "angle_bound",
    "bound",
    "conductivity",
    "duration",
    "expansion",
    "fixed",
    "force",
    "fraction",
    "length",
    "length_range",
    "mass",
    "nearest",
    "number",
    "plain",
    "pressure",
    "quoted",
    "roughness",
    "show",
    "show_angle",
    "show_length",
    "size",
    "span",
    "speed",
    "temperature",
    "temperature_difference",
    "torque",
    "volume",
]
