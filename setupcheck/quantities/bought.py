"""Bought and inspected parts: surfaces placed by what the planner was given about them. mm, rad."""

from __future__ import annotations

from dataclasses import replace

from setupcheck.jobfile.models import Part, Relation
from setupcheck.ledger.account import Account
from setupcheck.ledger.causes import Cause
from setupcheck.ledger.route import Pattern, Scatter, State, bought
from setupcheck.quantities.causes import Entry, Turned, face_lean, run_out, size_error, stated_direction
from setupcheck.quantities.shop import Outline, outline, unknown_surface


def surfaces_as_bought(name: str, part: Part, made_here: frozenset[str], pressure_angle: float | None) -> list[State]:
    """The surfaces a part brings along: its stock, everything `given` speaks of, and all of a part no setup cuts.

    made_here  surfaces of this part that some setup cuts; they appear when they are cut
    """
    about: dict[str, list[tuple[int, Relation]]] = {}
    for i, relation in enumerate(part.given):
        about.setdefault(_own(relation.of), []).append((i, relation))
    spoken_of = {*about, *(_own(r.about or r.from_ or "") for r in part.given)}
    brought = [
        s
        for s, node in part.surfaces.items()
        if node.made == "stock" or s in spoken_of or (s not in made_here and not made_here)
    ]
    done: dict[str, State] = {}
    while len(done) < len(brought):
        ready = [
            s
            for s in brought
            if s not in done and all(_own(r.about or r.from_ or "") in done for _, r in about.get(s, []))
        ]
        for surface in ready or [s for s in brought if s not in done][:1]:  # a ring of relations starts anywhere
            done[surface] = _placed(
                name,
                part,
                surface,
                [(i, r) for i, r in about.get(surface, []) if _own(r.about or r.from_ or "") in done],
                done,
                pressure_angle,
            )
    return [done[s] for s in brought]


def _own(text: str) -> str:
    return text.rpartition(".")[2].partition("@")[0]


def _placed(
    part_name: str,
    part: Part,
    name: str,
    relations: list[tuple[int, Relation]],
    done: dict[str, State],
    pressure_angle: float | None,
) -> State:
    """One surface: what its relations say, undetermined where they say nothing."""
    node = part.surfaces[name]
    unknown = unknown_surface(part_name, name, node, f"parts.{part_name}.given", pressure_angle)
    if not relations:
        return unknown
    shape = outline(node)
    state = unknown
    for i, relation in relations:
        path = f"parts.{part_name}.given[{i + 1}]"
        root = done[_own(relation.about or relation.from_ or "")]
        state = _related(state, root, relation, path, shape, part_name, name)
    return state


def _related(
    state: State, root: State, relation: Relation, path: str, shape: Outline, part_name: str, name: str
) -> State:
    label = f"{part_name}, {name} as bought"
    if relation.from_ is not None and relation.length is not None:
        way = 1.0 if state.z >= root.z else -1.0
        middle, error = size_error(relation.length, Entry(f"{label}: length", None, f"{path}.length", ""))
        off = Account(complex(way * middle - (state.z - root.z)))
        return replace(state, axial=root.axial + error * way + off)
    near, far = _ends(relation, path, shape, label)
    lean = None
    if relation.face_runout is not None:
        assert relation.across is not None
        lean = face_lean(
            relation.face_runout,
            Entry(f"{label}: face run-out", None, f"{path}.face_runout", "", "face_runout"),
            across=relation.across,
            facing=shape.facing or 1,
            towards=stated_direction(relation.face_runout.high_at),
            turned=Turned(),
        )
    placed = bought(
        root,
        name=name,
        facing=shape.facing,
        low=shape.low,
        high=shape.high,
        kind=shape.kind,
        diameter=shape.diameter,
        near=near,
        far=far,
        lean=lean,
        axial=state.axial - root.axial,
        clock=state.clock - root.clock,
    )
    keeps_offset = relation.runout is None
    return replace(
        placed,
        pattern=_divided(state.pattern, relation, path, label),
        offset=state.offset if keeps_offset else placed.offset,
        lean=placed.lean if lean is not None or shape.high > shape.low else state.lean,
    )


def _divided(pattern: Pattern | None, relation: Relation, path: str, label: str) -> Pattern | None:
    """The places of a bought part with what each may be out for itself: uniform within the stated bound; open where none is.

    Nothing is known of their order, so neighbours may stand at both ends of it.  Source: the job file.
    """
    if pattern is None or pattern.count < 2 or relation.runout is None:
        return pattern
    name, where = f"{label}: its division", f"{path}.division"
    bound = relation.division
    cause = Cause(name, "undetermined", missing=where)
    if bound is not None:
        cause = Cause(name, "length", high=bound, paths=(where,))
    return replace(pattern, scatter=(*pattern.scatter, Scatter(cause, "angle", bound or 0.0)))


def _ends(relation: Relation, path: str, shape: Outline, label: str) -> tuple[Account, Account]:
    """Offsets at both ends. A bound holds at each end by itself; a reading with a direction is the same at both."""
    if relation.runout is None:
        return Account(), Account()
    towards, inside = stated_direction(relation.runout.high_at), shape.kind == "bore"
    if (relation.runout.measured is not None and towards.angle is not None) or shape.high == shape.low:
        both = run_out(
            relation.runout,
            Entry(f"{label}: run-out", None, f"{path}.runout", ""),
            inside=inside,
            towards=towards,
            turned=Turned(),
        )
        return both, both
    ends = [
        run_out(
            relation.runout,
            Entry(f"{label}: run-out at its {end} end", None, f"{path}.runout", ""),
            inside=inside,
            towards=towards,
            turned=Turned(),
        )
        for end in ("low", "high")
    ]
    return ends[0], ends[1]
