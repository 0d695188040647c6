"""How the axis of the work lies to the travel of the cutter: what gaps run off by over their length. Sizes mm."""

# Annotations are evaluated as they stand (no __future__ import): pydantic would have to compile each of them from its text.
from typing import Self

from pydantic import model_validator

from setupcheck.jobfile.models import Error
from setupcheck.jobfile.types import Shop, Size


class Travel(Shop):
    """How the axis of the work lies to the travel of the cutter, read along a bar; between centres that is the tail centre.

    beside  how far it runs sideways out of the plane in which the cutter's middle travels
    nearer  how far it comes nearer to the cutter or goes from it
    over    length along the axis that both are read over [mm]
    """

    beside: Error | None = None
    nearer: Error | None = None
    over: Size

    @model_validator(mode="after")
    def it_states_one(self) -> Self:
        if self.beside is None and self.nearer is None:
            raise ValueError("this travel states nothing. Write beside: 10 um, nearer: 10 um, or both")
        return self
