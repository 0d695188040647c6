"""The known run-outs behind a requirement as vectors: each cause, their sum, what is left of the others, the limit. mm, rad."""

from __future__ import annotations

from typing import TYPE_CHECKING

from setupcheck.notation import FACTOR, show
from setupcheck.quantities.book import INCH, Scope
from setupcheck.quantities.judged import Result
from setupcheck.quantities.scopes import stack_of
from setupcheck.record import record
from setupcheck.report.causes import cause_in_words
from setupcheck.report.wording import clean, title_of, unit_of

if TYPE_CHECKING:
    from setupcheck.flow import Review
    from setupcheck.ledger.account import Account
    from setupcheck.ledger.figures import Figure
    from setupcheck.ledger.route import Pattern, State

MOST_ARROWS = 5
"""Arrows with a name of their own, the largest; the rest go into one. Our choice."""
NOTHING = 1e-9
"""Lengths below this are none [mm]. Our choice: a picometre."""


@record
class Arrow:
    """One known cause: its vector [mm, or rad in a requirement of an angle], and its name."""

    vector: complex
    name: str


@record(eq=False)
class Spots:
    """A requirement's vectors, as they count for what was asked.

    arrows  known causes, the largest first;  rest  most that causes without direction add;  limit  the circle to stay within
    counts  value of the requirement for each unit of length;  unit, digits  as shown
    said    how an arrow counts, in the requirement's own unit;  place  what stands round the rim: tooth, hole, line
    what    what the arrows are;  high  word for where the sum points;  pattern  of the places numbered on the rim
    """

    title: str
    arrows: tuple[Arrow, ...]
    rest: float
    limit: float | None
    counts: float
    unit: str
    digits: int
    what: str
    high: str
    pattern: Pattern | None
    place: str
    said: str

    @property
    def sum(self) -> complex:
        return sum((arrow.vector for arrow in self.arrows), 0j)

    def size(self, value: float) -> str:
        return show(value, self.unit, self.digits)


def has_directions(result: Result) -> bool:
    """Whether a requirement hears of a run-out with a known direction."""
    made = _vector(result.figure)
    if made is None:
        return False
    account, _, _ = made
    return any(abs(a * c.mean + b * c.mean.conjugate()) > NOTHING for c, (a, b) in account.terms.items())


def _vector(figure: Figure) -> tuple[Account, float, str] | None:
    """(the vector behind a figure, the figure for each unit of it, what it is); None for a figure of no vector.

    Of teeth it is the eccentricity that the worse flank sees.  Source: the figures' own docstrings (ledger).
    """
    from setupcheck.ledger import figures as f
    from setupcheck.ledger import teeth
    from setupcheck.ledger.account import Account
    from setupcheck.ledger.holes import HolePosition
    from setupcheck.ledger.running import AsItRuns

    match figure:
        case AsItRuns():
            return _vector(figure.ring)
        case f.Vector():
            return max(figure.accounts, key=Account.largest), figure.factor, "eccentricity"
        case f.Tooth():
            side, wave = max(_sides(figure), key=lambda one: one[1].largest())
            turn = teeth.flank_turn(figure.pattern, side=side, driven=figure.driven)
            gain = teeth.gains(figure.pattern, stepwise=figure.stepwise, flank=False).offset
            return wave * (1.0 / turn), figure.factor * gain * abs(turn), "eccentricity"
        case f.ToothRunOut():
            return figure.offset, 2.0 * figure.factor, "eccentricity"
        case f.OverATurn():
            return figure.offset, figure.factor, "eccentricity"
        case HolePosition():
            return figure.offset, 2.0, "eccentricity"
        case f.Stock():
            return max(figure.offsets, key=Account.largest), 1.0, "eccentricity"
        case f.MidPlane():
            return figure.lean * figure.pattern.radius, 1.0, "lean on the circle"
        case f.FaceStock():
            return figure.lean * figure.radius, 1.0, "lean at the edge"
        case _:
            return None


def _sides(figure: object) -> list[tuple[int, Account]]:
    from setupcheck.ledger.figures import Tooth

    assert isinstance(figure, Tooth)
    sides = (1, -1) if figure.flank and figure.pattern.pressure_angle else (0,)
    return [(side, figure.wave(side)) for side in sides]


def spots(found: Review, scope: Scope) -> Spots:
    """The vectors of one requirement, in the sense that the requirement's surface is read in."""
    stack, result = stack_of(scope), found.results[scope.key]
    made = _vector(result.figure)
    assert made is not None, "only requirements with a vector are offered"
    account, counts, what = made
    state = found.floor.now(found.loaded.ref(stack.of)) if stack.of else None
    sense, high = _sense(stack.require.what, state)
    angle = stack.unit == "arcsec" and counts == 1.0 and what == "eccentricity"
    if stack.require.what in ("squareness", "face-run-out"):
        what = "lean"
        if not angle:
            account, counts, what = account * counts, 1.0, "face run-out"
    arrows = arrows_of(account * sense)
    known, rest, limit = abs(account.known()), _rest(account), _limit(result, counts)
    if not result.figure.signed:
        rest = max(result.combined.worst.high / counts - known, 0.0)
    unit, digits = ("arcsec", 1) if angle else ((INCH["um"], 2) if found.book.inches else ("um", 1))
    pattern = state.pattern if state is not None else None
    title = f"High spots behind {title_of(scope)}"
    place = {"teeth": "tooth", "lines": "line"}.get(state.kind if state is not None else "", "hole")
    said = ""
    if what == "eccentricity" and not angle:
        base, places = unit_of(found.book, scope)
        one = 10.0 / FACTOR[unit] if unit == "um" else 1.0 / FACTOR[unit]
        said = f"{show(one, unit, 0)} off axis count {show(one * counts, base, places)} in {stack.require.what}"
    return Spots(title, arrows, rest, limit, counts, unit, digits, what, high, pattern, place, said)


def _sense(asked: str, state: State | None) -> tuple[float, str]:
    """(+1, or -1 where the vector points away from the high spot, what it points at).

    An axis off towards the high spot of an outside and away from that of a bore; a face's normal leans away from the high spot
    where it looks to +z (as quantities.causes has it).
    """
    if state is not None and asked in ("face-run-out", "squareness") and state.facing:
        return -float(state.facing), "the face is high at"
    if state is not None and asked in ("run-out", "coaxial") and state.kind == "bore":
        return -1.0, "the wall of the bore is high at"
    if asked == "allowance":
        return 1.0, "the cut lies off its old surface towards"
    if asked == "mid-plane":
        return 1.0, "the ring leans towards"
    if state is not None and state.pattern is not None:
        circle = "the circle of lines" if state.kind == "lines" else "the circle of holes"
        return 1.0, "the teeth are high at" if state.kind == "teeth" else f"{circle} is off towards"
    return 1.0, "it is high at"


def arrows_of(account: Account) -> tuple[Arrow, ...]:
    """Known causes, the largest first; many small ones in one."""
    found = [
        Arrow(a * c.mean + b * c.mean.conjugate(), clean(cause_in_words(c.key))) for c, (a, b) in account.terms.items()
    ]
    if abs(account.constant) > NOTHING:
        found.append(Arrow(account.constant, "what the settings are known to be off"))
    found = sorted(
        (one for one in found if abs(one.vector) > NOTHING), key=lambda one: (-round(abs(one.vector), 12), one.name)
    )
    if len(found) > MOST_ARROWS:
        rest = found[MOST_ARROWS - 1 :]
        found = [
            *found[: MOST_ARROWS - 1],
            Arrow(sum((o.vector for o in rest), 0j), f"{len(rest)} smaller ones together"),
        ]
    return tuple(found)


def _rest(account: Account) -> float:
    """What is left of the causes round their known values, all the same way."""
    return sum(account.reach(c) * c.bound for c in account.terms)


def _limit(result: Result, counts: float) -> float | None:
    """The circle that the vector's end has to stay within; None where the limit is none of a vector alone."""
    from setupcheck.ledger.figures import Stock

    stack = result.stack
    if isinstance(result.figure, Stock):
        return result.figure.depth - stack.low if stack.low is not None and result.figure.depth > stack.low else None
    if result.figure.signed or stack.high is None:
        return None
    return stack.high / counts
