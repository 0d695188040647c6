"""What a job must say of an interference joint before anything of it can be judged."""

from __future__ import annotations

from setupcheck.jobfile.setups import Join
from setupcheck.quantities.book import Open, Quantity
from setupcheck.quantities.pairing import Pair


def load_stated(join: Join, pair: Pair, op: int) -> str | Open:
    """stated, or the key to fill: whether the job says what a joint that holds by interference must carry, 0 N m included.

    Source: the job file.
    """
    return "stated" if join.must_carry else Open((f"setups.{op}.join.must_carry",))


def errors_stated(join: Join, pair: Pair, op: int) -> str | Open:
    """stated, or the keys to fill: whether the job says how true an interference joint sets its parts, 0 um included.

    fit_error is what form of bore and journal lets them run out; stop.error what is left between the faces that meet.
    Source: the job file.
    """
    path = f"setups.{op}.join"
    left_out = [f"{path}.fit_error"] if join.fit_error is None else []
    if join.stop is not None and join.stop.error is None:
        left_out.append(f"{path}.stop.error")
    return Open(tuple(left_out)) if left_out else "stated"


_OF_A_FIT = {"join": ":", "pair": "fit.pair", "op": "@op"}

FIT_STATED = (
    Quantity(
        "fit.load_stated", "join", "", 0, load_stated, _OF_A_FIT, "whether the job says what the joint must carry"
    ),
    Quantity(
        "fit.errors_stated",
        "join",
        "",
        0,
        errors_stated,
        _OF_A_FIT,
        "whether the job says how true the joint sets its parts",
    ),
)
