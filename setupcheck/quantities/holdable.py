"""What a later setup could be held on: surfaces that stand when its turn comes. Lengths mm."""

from __future__ import annotations

from setupcheck.jobfile.models import Flat, Round, Surface
from setupcheck.jobfile.reading import LoadedJob
from setupcheck.jobfile.setups import Setup
from setupcheck.quantities.sharing import bare, cut_in, part_of
from setupcheck.record import record


@record
class Standing:
    """One surface that stands before a setup.

    part, name  where it is;  made_at  the operation that cut it last, None of a bought part;  node  as drawn
    """

    part: str
    name: str
    made_at: int | None
    node: Surface

    def called(self, part: str) -> str:
        """As a hold of that part names it."""
        return self.name if part == self.part else f"{self.part}.{self.name}"


def standing_before(loaded: LoadedJob, setup: Setup) -> list[Standing]:
    """Finished surfaces of the body that a setup holds, cut before it or known of a bought part, and not taken away since."""
    job = loaded.job
    made: dict[tuple[str, str], int | None] = {}
    together: dict[str, frozenset[str]] = {name: frozenset({name}) for name in job.parts}
    ever = {ref for s in job.setups if s.cut for ref in cut_in(loaded, s)}
    for name, part in job.parts.items():
        known = {loaded.ref(text, name).surface for one in part.given for text in (one.of, one.about) if text}
        made.update({(name, surface): None for surface in known if (name, surface) not in ever})
    for before in job.setups:
        if before.op == setup.op:
            break
        if before.join is not None:
            both = [together[loaded.ref(text).part] for text in (before.join.outer, before.join.inner)]
            together.update(dict.fromkeys(both[0] | both[1], both[0] | both[1]))
            for text in (before.join.outer, before.join.inner):  # covered from now on
                covered = loaded.ref(text)
                made.pop((covered.part, covered.surface), None)
            continue
        for text, cut in before.cut.items():
            ref = bare(loaded, text, before)
            made.pop(ref, None)
            if cut.state != "rough":
                made[ref] = before.op
        for cut in before.cut.values():
            for gone in cut.removes:
                made.pop(bare(loaded, gone, before), None)
    mine = together[part_of(loaded, setup)]
    return [
        Standing(part, name, op, job.parts[part].surfaces[name]) for (part, name), op in made.items() if part in mine
    ]


def rounds(found: list[Standing]) -> list[tuple[Standing, Round]]:
    """Cylinders and bores among them."""
    return [(one, one.node) for one in found if isinstance(one.node, Round) and one.node.kind in ("cylinder", "bore")]


def faces(found: list[Standing]) -> list[tuple[Standing, Flat]]:
    """Faces among them."""
    return [(one, one.node) for one in found if isinstance(one.node, Flat) and one.node.kind == "face"]
