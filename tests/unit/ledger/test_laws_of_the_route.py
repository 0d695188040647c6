"""Laws of the ledger: what cancels, what shares, what must not matter. On jobs drawn at random."""

from __future__ import annotations

import copy
from typing import Any

import pytest
from hypothesis import assume, given
from hypothesis import strategies as st

from setupcheck.jobfile.names import Ref
from setupcheck.ledger.account import Account
from setupcheck.ledger.causes import Cause
from setupcheck.ledger.combine import combine
from setupcheck.ledger.draws import Draws
from setupcheck.ledger.route import State
from setupcheck.quantities.book import Open
from setupcheck.quantities.shop import Floor
from setupcheck.quantities.stacks import build

from .drawn_jobs import (
    PITCH,
    Node,
    built,
    causes_of,
    changed,
    few,
    jobs,
    setup,
    stacks,
    walked,
)

SAME = {"rel": 1e-9, "abs": 1e-13}


def made(floor: Floor, surface: str, op: int | None = None, part: str = "wheel") -> State:
    state = floor.now(Ref(part, surface, op))
    assert state is not None
    return state


def names(account: Account) -> set[str]:
    return set(causes_of(account))


# -- accounts ----------------------------------------------------------------------------------------------------------

numbers = st.complex_numbers(max_magnitude=1e3, allow_nan=False, allow_infinity=False)
accounts = st.builds(
    lambda constant, terms: Account(constant, {Cause(f"cause {i}", "disc", high=0.01): ab for i, ab in terms.items()}),
    numbers,
    st.dictionaries(st.integers(0, 5), st.tuples(numbers, numbers), max_size=4),
)


def same(left: Account, right: Account) -> bool:
    rest = left - right
    return abs(rest.constant) < 1e-8 and all(abs(a) + abs(b) < 1e-8 for a, b in rest.terms.values())


@few
@given(accounts, accounts, accounts)
def test_differences_of_accounts_cancel(x: Account, y: Account, z: Account) -> None:
    assert not (x - x).terms
    assert same(x - z, (x - y) + (y - z))
    assert same(x, (x - y) + y)


@few
@given(accounts, accounts, numbers)
def test_mirroring_is_its_own_opposite_and_linear(x: Account, y: Account, factor: complex) -> None:
    assert same(x, x.mirrored().mirrored())
    assert same(x.mirrored() + y.mirrored(), (x + y).mirrored())
    assert same(x.mirrored() * factor.conjugate(), (x * factor).mirrored())


@few
@given(accounts, numbers)
def test_a_component_is_real_and_half_of_the_vector_and_its_mirror(x: Account, direction: complex) -> None:
    along = x.along(direction)
    assert all(b == pytest.approx(a.conjugate(), rel=1e-9, abs=1e-9) for a, b in along.terms.values())
    assert along.largest() <= x.largest() * abs(direction) * (1.0 + 1e-9) + 1e-12


# -- one holding -------------------------------------------------------------------------------------------------------


@few
@given(jobs())
def test_surfaces_cut_in_one_holding_share_everything_but_the_machine_and_the_dial(job: Node) -> None:
    floor = walked(job)
    rim, hub, seat, front = (made(floor, s, 10) for s in ("rim", "hub", "seat", "front"))
    axes = {"op 10, rim: axis of lathe-A", "op 10, hub: axis of lathe-A"}
    assert names(rim.axis_at(hub.z) - hub.offset) <= {a.replace("rim", "wheel.rim") for a in axes} | axes
    assert not names(rim.lean - hub.lean) | names(seat.lean - front.lean) | names(rim.lean - seat.lean)
    dials = names(seat.axial - front.axial)
    assert len(dials) == 2
    assert all("length by dial" in d for d in dials)


@few
@given(jobs())
def test_a_setup_that_keeps_the_holding_cuts_as_that_holding_does(job: Node) -> None:
    job["setups"].insert(2, {"op": 25, "machine": "lathe-A", "keeps": 20, "cut": {"groove": {}}})  # type: ignore[attr-defined]
    floor = walked(job)
    groove, bore = made(floor, "groove"), made(floor, "bore", 20)
    assert not names(groove.lean - bore.lean)
    assert all("axis of lathe-A" in n for n in names(groove.offset - bore.axis_at(groove.z)))


@few
@given(jobs())
def test_what_a_chain_of_relations_adds_up_to_is_the_relation_of_its_ends(job: Node) -> None:
    floor = walked(job)
    bore, rim, hub = (made(floor, s) for s in ("bore", "rim", "hub"))
    chain = (bore.offset - rim.axis_at(bore.z)) + (rim.axis_at(bore.z) - hub.axis_at(bore.z))
    assert same(bore.offset - hub.axis_at(bore.z), chain)


# -- what must not matter ----------------------------------------------------------------------------------------------


@few
@given(jobs())
def test_an_unused_setup_changes_nothing_chance_included(job: Node) -> None:
    longer = copy.deepcopy(job)
    idle: Node = {
        "op": 15,
        "machine": "lathe-A",
        "looks_at_tool": "+z",
        "hold": {
            "centre": {"on": "rim", "by": "four-jaw", "at": 8, "runout": "80 um"},
            "square": {"on": "seat", "across": 90, "face_runout": "40 um"},
            "stop": {"on": "seat", "error": "50 um"},
        },
        "cut": {"groove": {}},
    }
    longer["setups"].insert(1, idle)  # type: ignore[attr-defined]
    before, after = walked(job), walked(longer)
    draws, draws_after = Draws(2000), Draws(2000)
    for stack in stacks(before):
        one, other = build(before, stack), build(after, stack)
        assert not isinstance(one, Open)
        assert not isinstance(other, Open)
        left = combine(one.figure, draws, low=stack.low, high=stack.high, confidence=0.95)
        right = combine(other.figure, draws_after, low=stack.low, high=stack.high, confidence=0.95)
        assert left == right, stack.name


def turned_by(job: Node, angle: float) -> Node:
    """The same job with the mark of the wheel elsewhere: every direction of the wheel stands `angle` degrees further."""
    looks = {str(s["op"]): s.get("looks_at_tool") for s in job["setups"]}  # type: ignore[attr-defined]
    ops = [str(s["op"]) for s in job["setups"]]  # type: ignore[attr-defined]

    def one(path: tuple[str, ...], value: object) -> object:
        in_wheel = path[:2] != ("parts", "spindle")
        if path[-1] == "high_at" and in_wheel and str(value).endswith("deg"):
            return f"{float(str(value).split()[0]) + angle} deg"
        if path[-1] == "angle":
            return f"{float(str(value).split()[0]) + angle} deg"
        if path[-1] == "turned":
            way = 1.0 if looks[ops[int(path[1])]] == "+z" else -1.0
            return f"{float(str(value).split()[0]) - way * angle} deg"
        if path[-1] == "mounted_at":  # the back of the wheel meets the shoulder: the same way round
            return f"{float(str(value).split()[0]) - angle} deg"
        return value

    found = changed(job, one)
    assert isinstance(found, dict)
    return found


def without_teeth_as_clock(job: Node) -> Node:
    """Gap 1 stands at the mark; a job whose directions are turned by a part of a pitch cannot clock on it."""
    job = copy.deepcopy(job)
    job["require"] = [r for r in job["require"] if "clock" not in r]  # type: ignore[attr-defined]
    return job


@few
@given(jobs(), st.integers(1, 359))
def test_turning_all_directions_by_one_angle_changes_no_worst_case_and_no_rss(job: Node, angle: int) -> None:
    job = without_teeth_as_clock(job)
    before, after = built(walked(job)), built(walked(turned_by(job, float(angle))))
    draws = Draws(10)
    for name, one in before.items():
        left, right = (combine(b.figure, draws, low=None, high=1.0, confidence=0.95) for b in (one, after[name]))
        for end in ("low", "high"):
            assert getattr(left.worst, end) == pytest.approx(getattr(right.worst, end), **SAME), name
            assert getattr(left.rss, end) == pytest.approx(getattr(right.rss, end), **SAME), name


@few
@given(jobs(), st.integers(1, 23))
def test_turning_known_run_outs_by_whole_pitches_changes_no_tooth_figure(job: Node, pitches: int) -> None:
    # every reading with its direction, nothing to draw: the drawn value is the figure itself
    job = known(job)
    before, after = built(walked(job)), built(walked(turned_by(job, pitches * PITCH)))
    draws, draws_after = Draws(1), Draws(1)
    seen = 0
    for name, one in before.items():
        if "teeth" in name and "mid-plane" not in name and "position" not in name:
            left, right = one.figure.sample(draws)[0], after[name].figure.sample(draws_after)[0]
            assert left == pytest.approx(right, rel=1e-5)
            seen += left > 0.0
    assume(seen)


def known(job: Node) -> Node:
    """The job with every error measured and directed, no play, no scatter."""

    found: dict[str, Any] = copy.deepcopy(job)
    for step in found["setups"]:
        if "join" in step:
            # the shank is fitted without play and nothing is stacked on it
            join = step["join"]
            step["join"] = {k: v for k, v in join.items() if k not in ("clearance", "fit_error")} | {
                "by": "shrink",
                "grips_first": "shoulder-end",
            }
            step["join"]["mounted_at"] = join.get("mounted_at", "30 deg")
            continue
        if "divide" in step:
            step["divide"] = {"by": "direct", "setting": "0 arcsec"}
        for key, at in (("centre", 20), ("and_centre", 110)):
            if key in step["hold"]:
                old = step["hold"][key]
                reading = {"measured": "30 um", "high_at": f"{at} deg"}
                step["hold"][key] = {"on": old["on"], "at": old["at"], "by": "indicator", "runout": reading}
        if "square" in step["hold"]:
            square = step["hold"]["square"]
            reading = {"measured": "12 um", "high_at": "77 deg"}
            step["hold"]["square"] = {"on": square["on"], "across": 80, "face_runout": reading}
    found["parts"]["spindle"]["given"] = [
        {"of": "journal", "about": "bearings", "runout": {"measured": "3 um", "high_at": "40 deg"}},
        {"of": "shoulder", "about": "bearings", "across": 56, "face_runout": {"measured": "4 um", "high_at": "mark"}},
    ]
    for machine in found["machines"].values():
        machine["axis_runout"] = "0 um"
    return found


# -- a device whose mark is kept -----------------------------------------------------------------------------------------


def twice_in(turned: tuple[str, str], looks: tuple[str, str] = ("+z", "+z")) -> Node:
    """Bore and groove cut in two setups on the same rim and seat, in one device whose mark is kept."""

    def step(op: int, name: str, i: int) -> Node:
        kept = {"device": "chuck-A", "mark": "kept"}
        return {
            "op": op,
            "machine": "lathe-A",
            "looks_at_tool": looks[i],
            "hold": {
                "centre": {
                    "on": "rim",
                    "by": "soft-jaws",
                    "at": 10,
                    "turned": turned[i],
                    "runout": {"at_most": "20 um", **kept},
                },
                "square": {"on": "seat", "across": 80, "face_runout": {"at_most": "16 um", **kept}},
                "stop": {"on": "seat", "error": "5 um"},
            },
            "cut": {name: {}},
        }

    first: Node = {
        "op": 10,
        "machine": "lathe-A",
        "looks_at_tool": "+z",
        "hold": {
            "centre": {"on": "bar", "by": "three-jaw", "at": -30, "runout": "0.1 mm"},
            "and_centre": {"on": "bar", "by": "three-jaw", "at": 20, "runout": "0.1 mm"},
        },
        "cut": {"rim": {}, "seat": {}},
    }
    surfaces = {
        "bar": {"kind": "cylinder", "diameter": 120, "from": -40, "to": 30, "made": "stock"},
        "seat": {"kind": "face", "at": 20, "facing": "+z", "diameter": 110},
        "rim": {"kind": "cylinder", "diameter": 114, "from": 4, "to": 20},
        "groove": {"kind": "cylinder", "diameter": 100, "from": 12, "to": 14},
        "bore": {"kind": "bore", "diameter": 32, "from": 0, "to": 26},
    }
    return {
        "setupcheck": 1,
        "title": "Twice in one chuck",
        "units": "mm",
        "parts": {"wheel": {"surfaces": surfaces}},
        "machines": {"lathe-A": {"kind": "lathe", "axis_runout": "0 um"}},
        "setups": [first, step(20, "bore", 0), step(30, "groove", 1)],
        "require": [{"what": "run-out", "of": "wheel.groove", "about": "wheel.bore", "at_most": "9 um"}],
    }


def kept_causes(floor: Floor) -> tuple[Account, Account]:
    bore, groove = made(floor, "bore"), made(floor, "groove")
    return groove.offset - bore.axis_at(groove.z), groove.lean - bore.lean


def test_a_part_that_goes_back_the_same_way_loses_the_error_of_its_chuck() -> None:
    offset, lean = kept_causes(walked(twice_in(("30 deg", "30 deg"))))
    assert 0.0 == pytest.approx(offset.largest())
    assert 0.0 == pytest.approx(lean.largest())


def test_a_part_put_back_half_a_turn_round_has_twice_the_error_of_its_chuck() -> None:
    # run-out 20 um: eccentricity 10 um in both; 16 um over 80 mm: 0.2 mrad, at 3 mm from the centring plane
    offset, lean = kept_causes(walked(twice_in(("30 deg", "210 deg"))))
    assert 2 * 0.2e-3 == pytest.approx(lean.largest())
    assert 2 * (10e-3 + 0.2e-3 * 3.0) == pytest.approx(offset.largest())


def test_a_part_put_back_turned_by_sixty_degrees_has_once_the_error_of_its_chuck() -> None:
    # |1 - exp(i 60 deg)| = 1
    _, lean = kept_causes(walked(twice_in(("0 deg", "60 deg"))))
    assert 0.2e-3 == pytest.approx(lean.largest())


@pytest.mark.parametrize("turned", ["0 deg", "75 deg"])
def test_a_part_turned_end_for_end_in_its_chuck_may_have_twice_the_error(turned: str) -> None:
    # mirrored: some direction of the chuck's error always adds up
    offset, lean = kept_causes(walked(twice_in(("0 deg", turned), ("+z", "-z"))))
    assert 2 * 0.2e-3 == pytest.approx(lean.largest())
    assert 2 * (10e-3 + 0.2e-3 * 3.0) == pytest.approx(offset.largest())


# -- what is missing -----------------------------------------------------------------------------------------------------


def removable(job: Node) -> list[tuple[int, tuple[str, ...]]]:
    """(op, way) of every entry of a hold or a cut that may be left out."""
    found: list[tuple[int, tuple[str, ...]]] = []
    for step in job["setups"]:  # type: ignore[attr-defined]
        for name, entry in step.get("hold", {}).items():
            found += [(step["op"], ("hold", name, k)) for k in entry if k in ("runout", "face_runout", "error")]
        for name, entry in step.get("cut", {}).items():
            found += [(step["op"], ("cut", name, k)) for k in entry if k == "error"]
    return found


@few
@given(jobs(), st.integers(0, 10_000))
def test_a_missing_error_opens_exactly_the_stacks_it_reaches(job: Node, which: int) -> None:
    entries = removable(job)
    op, way = entries[which % len(entries)]
    path = ".".join((f"setups.{op}", *way))
    # a bound that belongs to this entry alone, so that it can be found in the accounts
    full, holey = copy.deepcopy(job), copy.deepcopy(job)
    _parent(full, op, way)[way[-1]] = "7 um"
    del _parent(holey, op, way)[way[-1]]
    reached = {name for name, b in built(walked(full)).items() if path in _paths(b.figure)}
    floor = walked(holey)
    opened = {
        f"{stack.index} {stack.name}": made_
        for stack in stacks(floor)
        if isinstance(made_ := build(floor, stack), Open)
    }
    assert reached == set(opened), path
    assert all(o.missing == (path,) for o in opened.values())


def _parent(job: Node, op: int, way: tuple[str, ...]) -> Node:
    node: object = setup(job, op)
    for key in way[:-1]:
        assert isinstance(node, dict)
        node = node[key]
    assert isinstance(node, dict)
    return node


def _paths(figure: object) -> set[str]:
    """Paths of all causes that can move a figure, those under its high points included."""
    found: set[str] = set()
    for push in figure.pushes():  # type: ignore[attr-defined]
        inner = causes_of(push.cause.of) if push.cause.of is not None else {}
        found |= {p for c in (push.cause, *inner.values()) for p in c.paths}
    return found


# -- a joint in between --------------------------------------------------------------------------------------------------


def joined_while_held(facing: str, mounted: Node) -> Node:
    """A collar shrunk on a spindle that stays in its chuck; both are then cut as they run. Invented."""
    dial: Node = {"measured": "30 um", "high_at": "20 deg"}
    surfaces: Node = {
        "bearings": {"kind": "cylinder", "diameter": 40, "from": -80, "to": -10, "made": "stock"},
        "journal": {"kind": "cylinder", "diameter": 30, "from": 0, "to": 40},
        "shoulder": {"kind": "face", "at": 0, "facing": "+z", "diameter": 60},
        "nose": {"kind": "cylinder", "diameter": 25, "from": 40, "to": 60},
    }
    collar: Node = {
        "hole": {"kind": "bore", "diameter": 30, "from": 0, "to": 20},
        "flat": {"kind": "face", "at": 0 if facing == "-z" else 20, "facing": facing, "diameter": 60},
        "rim": {"kind": "cylinder", "diameter": 90, "from": 0, "to": 20},
    }
    join: Node = {"outer": "collar.hole", "inner": "spindle.journal", "by": "press", "square": "bore", **mounted}
    join["stop"] = {"on": "collar.flat", "against": "spindle.shoulder"}
    return {
        "setupcheck": 1,
        "title": "Collar put on in the chuck",
        "units": "mm",
        "parts": {
            "spindle": {"surfaces": surfaces},
            "collar": {
                "surfaces": collar,
                "given": [{"of": "flat", "about": "hole", "face_runout": "5 um", "across": 50}],
            },
        },
        "machines": {"lathe-A": {"kind": "lathe", "axis_runout": "2 um"}},
        "setups": [
            {
                "op": 10,
                "machine": "lathe-A",
                "looks_at_tool": "+z",
                "hold": {
                    "centre": {"on": "bearings", "by": "four-jaw", "at": -70, "runout": dial},
                    "and_centre": {"on": "bearings", "by": "four-jaw", "at": -20, "runout": "12 um"},
                },
                "cut": {"journal": {}, "shoulder": {"error": "5 um"}},
            },
            {"op": 20, "join": join},
            {"op": 30, "machine": "lathe-A", "keeps": 10, "cut": {"collar.rim": {}, "spindle.nose": {}}},
        ],
    }


@pytest.mark.parametrize("facing", ["-z", "+z"])
@pytest.mark.parametrize("mounted", [{}, {"mounted_at": "40 deg"}], ids=["mounting not said", "mounted at 40 deg"])
def test_what_is_cut_before_and_after_a_joint_in_one_holding_shares_that_holding(facing: str, mounted: Node) -> None:
    floor = walked(joined_while_held(facing, mounted))
    journal, nose = (made(floor, s, part="spindle") for s in ("journal", "nose"))
    rim = made(floor, "rim", part="collar")
    for other in (nose, rim):
        assert all(abs(a) + abs(b) < 1e-12 for a, b in (other.lean - journal.lean).terms.values())
        assert all("axis of lathe-A" in n for n in names(other.offset - journal.axis_at(other.z)))
