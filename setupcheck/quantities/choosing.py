"""Selective fitting: which interference suits this joint, what the measured half wants, which measured pair to take. mm."""

from __future__ import annotations

import math

from setupcheck.jobfile.names import Ref
from setupcheck.jobfile.setups import Join, MeasuredPair
from setupcheck.physics.materials import expansion_for
from setupcheck.quantities.book import Open, Quantity
from setupcheck.quantities.joining import JointSizes
from setupcheck.quantities.opening import hub_expansion
from setupcheck.quantities.pairing import Pair
from setupcheck.quantities.shop import Floor
from setupcheck.quantities.strength import force_held
from setupcheck.record import record

FITS = "one of them suits"
"""What `pairs_said` begins with where a measured pair suits."""


@record
class Window:
    """Interference on diameter at 20 degC [mm] that carries the load (low) and stays elastic and goes on hot (high)."""

    low: float
    high: float
    why: str

    def told(self) -> str:
        """`14.8 to 40.9 um`."""
        return f"{self.low * 1e3:.1f} to {self.high * 1e3:.1f} um"


def grip_needed(pair: Pair, asked: float, friction: float) -> float:
    """Interference in service, whatever the temperature, that carries the load with the slip factor [mm].

    Source: quantities.strength, straight in the interference.
    """
    return asked / force_held(pair, 1.0, friction)


def most_joined(
    pair: Pair,
    most: float,
    needed: float,
    cap: float,
    at_shaft: float,
    low: float | None,
    high: float | None,
    loss: float | None,
) -> float | None:
    """Largest interference that the highest setting of the heat still opens [mm]; None below zero.

    By cold alone nothing is set, and it is what a hub of the room's temperature still takes.

    U = U_max + alpha_A D (cap - error of the heat, both ways - loss in the carry - needed), hub expansion low
    low, high  least and most heat that the plan gives, so that high - low is the error both ways
    Source: physics.heating.joining_temperature, straight in the interference.
    """
    if low is None or high is None or loss is None:
        alone = most + hub_expansion(pair, needed) * pair.diameter * (at_shaft - needed)
        return alone if alone > 0.0 else None
    expansion = expansion_for("joining", "hub", pair.hub, temperature=100.0).value
    found = most + expansion * pair.diameter * (cap - (high - low) - loss - needed)
    return found if found > 0.0 else None


def window(needed: float, elastic: float, joined: float | None) -> Window | None:
    """Interference that suits the joint [mm]: from what carries the load to what stays elastic and can be heated on.

    None where nothing is left between them.  Source: `fit.least_needed`, `fit.most_allowed`, `fit.most_joined`.
    """
    high = min(elastic, joined if joined is not None else math.inf)
    low = max(needed, 0.0)
    return Window(low, high, "heat" if high < elastic else "yield") if low <= high else None


def window_low(window: Window) -> float:
    """Least interference that suits [mm]. Source: `window`."""
    return window.low


def window_high(window: Window) -> float:
    """Largest interference that suits [mm]. Source: `window`."""
    return window.high


def suits(floor: Floor, join: Join, sizes: JointSizes, window: Window) -> str:
    """What the half that is measured wants of the other, or which interference any pair may have.

    A measured bore takes journals from its largest + least interference to its smallest + largest; a journal the reverse.
    Source: `window`.
    """
    any_pair = f"any pair with {_inward(floor, window)} of interference"
    bore, journal = (_measured(floor, floor.loaded.ref(text)) for text in (join.outer, join.inner))
    if bore == journal:
        return f"{any_pair} on diameter at 20 degC"
    if bore:
        low, high, what = (
            sizes.bore_high + window.low,
            sizes.bore_low + window.high,
            "the bore as measured suits journals",
        )
    else:
        low, high, what = (
            sizes.journal_high - window.high,
            sizes.journal_low - window.low,
            "the journal as measured suits bores",
        )
    if low > high:
        return f"{any_pair}, which is less than the reading's own uncertainty leaves"
    low, high = _rounded_in(low, high, floor.fine_step())
    return f"{what} of {floor.size(low, 4)} to {floor.size(high, 4)}"


_SAME = 1e-6
"""Share of a shown step that is rounding alone. Source: our choice."""


def _rounded_in(low: float, high: float, step: float) -> tuple[float, float]:
    """Both ends rounded into the window by the step they are shown in, so that what is printed passes."""
    return math.ceil(low / step - _SAME) * step, math.floor(high / step + _SAME) * step


def _inward(floor: Floor, window: Window) -> str:
    low, high = _rounded_in(window.low, window.high, floor.fine_step())
    return f"{floor.fine(low)} to {floor.fine(high)}"


def _measured(floor: Floor, ref: Ref) -> bool:
    node = floor.loaded.job.parts[ref.part].surfaces[ref.surface]
    size = getattr(node, "diameter", None)
    return getattr(size, "measured", None) is not None


def listed(join: Join) -> tuple[MeasuredPair, ...] | None:
    """Measured pairs that the job lists; None where it lists none. Source: the job file."""
    return join.pairs or None


def pairs_said(pairs: tuple[MeasuredPair, ...], window: Window, op: int) -> str | Open:
    """Which measured pair suits best.

    Each pair by its interference less and plus both uncertainties; the best stands nearest to the middle of the window.
    Source: `window`, the job file.
    """
    missing = tuple(f"setups.{op}.join.pairs[{i}].uncertainty" for i, p in enumerate(pairs, 1) if p.uncertainty is None)
    if missing:
        return Open(missing)
    good = [p for p in pairs if _inside(p, window)]
    if not good:
        return "none of the measured pairs suits"
    middle = (window.low + window.high) / 2.0
    best = min(good, key=lambda p: abs(p.journal - p.bore - middle))
    return f"{FITS}: {best.name}, whose sizes now belong under diameter as measured"


def pairs_told(pairs: tuple[MeasuredPair, ...], floor: Floor, window: Window) -> str:
    """Each measured pair with its interference, and what speaks against it. Source: `pairs_said`."""
    each = ", ".join(f"{p.name} {floor.fine(p.journal - p.bore)} ({_verdict(p, window)})" for p in pairs)
    return f"{each}; {_inward(floor, window)} suits"


def pairs_fit(said: str) -> str:
    """yes or no: whether one of the measured pairs suits. Source: `pairs_said`."""
    return "yes" if said.startswith(FITS) else "no"


def _inside(pair: MeasuredPair, window: Window) -> bool:
    return _verdict(pair, window) == "suits"


def _verdict(pair: MeasuredPair, window: Window) -> str:
    """Both sizes may be out by their uncertainty, each its own way."""
    grip, out = pair.journal - pair.bore, 2.0 * (pair.uncertainty or 0.0)
    if grip - out < window.low:
        return "too loose"
    if grip + out > window.high:
        return "too tight" if window.why == "yield" else "too tight to heat on"
    return "suits"


_HERE = {"floor": "route.floor", "join": ":"}
_PAIRS = {"pairs": "fit.listed"}  # first: without them nothing else is asked for
_WINDOW = {"window": "fit.window"}

CHOOSING = (
    Quantity("fit.listed", "join", "", 0, listed, {"join": ":"}, "measured pairs that the job lists"),
    Quantity(
        "fit.grip_needed",
        "join",
        "um",
        1,
        grip_needed,
        {"pair": "fit.pair", "asked": "fit.force_asked", "friction": "fit.friction"},
        "interference in service that carries the load",
    ),
    Quantity(
        "fit.most_joined",
        "join",
        "um",
        1,
        most_joined,
        {
            "pair": "fit.pair",
            "most": "fit.interference_most",
            "needed": "heat.needed",
            "cap": "heat.cap",
            "low": "heat.planned_low",
            "high": "heat.planned_high",
            "loss": "heat.carry_loss",
            "at_shaft": "heat.at_shaft",
        },
        "largest interference that heat still opens",
        {"low": None, "high": None, "loss": None},
    ),
    Quantity(
        "fit.window",
        "join",
        "",
        0,
        window,
        {"needed": "fit.least_needed", "elastic": "fit.most_allowed", "joined": "settled fit.most_joined"},
        "interference that suits the joint",
        {"joined": None},
    ),
    Quantity("fit.window_low", "join", "um", 1, window_low, _WINDOW, "least interference that suits"),
    Quantity("fit.window_high", "join", "um", 1, window_high, _WINDOW, "largest interference that suits"),
    Quantity(
        "fit.suits",
        "join",
        "",
        0,
        suits,
        {**_HERE, "sizes": "fit.sizes", **_WINDOW},
        "what the measured half wants of the other",
    ),
    Quantity(
        "fit.pairs", "join", "", 0, pairs_said, {**_PAIRS, **_WINDOW, "op": "@op"}, "which of the measured pairs suits"
    ),
    Quantity(
        "fit.pairs_told",
        "join",
        "",
        0,
        pairs_told,
        {**_PAIRS, "floor": "route.floor", **_WINDOW},
        "interference of each measured pair",
    ),
    Quantity("fit.pairs_fit", "join", "", 0, pairs_fit, {"said": "fit.pairs"}, "whether a measured pair suits"),
)
