"""What a job states of the material of a part. MPa, 1/K, W/mK, degC."""

# Annotations are evaluated as they stand (no __future__ import): pydantic would have to compile each of them from its text.
from pydantic import Field

from setupcheck.jobfile.types import Conductivity, Expansion, Pressure, Shop, Temperature


class Properties(Shop):
    """What the certificate says of a part's material, in place of the list, or for a material that is not in it.

    modulus, poisson       elastic constants [MPa, -];  expansion  mean from 20 degC [1/K]
    yield_strength         R_e or R_p0.2 [MPa];  tensile_strength  R_m [MPa], which judges a brittle material
    brittle                it breaks before it yields
    density, specific_heat  [kg/m3], [J/kgK];  conductivity  of heat [W/mK]
    heat_cap, last_temper  highest temperature of one heating; temperature of the last temper [degC]
    porous                 pressed and sintered from powder: it has pores, which give way
    """

    modulus: Pressure | None = None
    poisson: float | None = Field(default=None, ge=0.0, lt=0.5)
    expansion: Expansion | None = None
    yield_strength: Pressure | None = None
    tensile_strength: Pressure | None = None
    brittle: bool = False
    density: float | None = Field(default=None, gt=500.0, lt=25_000.0)
    specific_heat: float | None = Field(default=None, gt=50.0, lt=5000.0)
    conductivity: Conductivity | None = None
    heat_cap: Temperature | None = None
    last_temper: Temperature | None = None
    porous: bool = False
