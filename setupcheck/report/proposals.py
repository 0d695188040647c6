"""Other datums, witness surfaces and orders as a machinist would say them."""

from __future__ import annotations

from collections.abc import Iterator

from setupcheck.flow import Review
from setupcheck.quantities.devices import DEVICES
from setupcheck.quantities.mending import Mended
from setupcheck.quantities.proposals import Idea, Proposal
from setupcheck.report.edits import as_typed, as_yaml
from setupcheck.report.stacks_in_words import Words
from setupcheck.report.wording import clean, on_the_dial, wrap

MET = "The most routes that are tried in one run were tried; there may be better ones."
STRAIN = (
    "Nothing here counts what heat and strain of the roughing move in the part: let it cool before its finishing cuts."
)


def proposals_as_text(found: Review, mended: Mended, words: Words) -> Iterator[str]:
    """The best few with what they gain and how they are typed in."""
    told = mended.proposals
    if mended.failing:
        yield "OTHER DATUMS AND ORDERS, the best first; each was walked on a copy of the job"
        if not told:
            yield from wrap("None of those tried brings a stack inside, or gains enough to be worth it.", first="  ")
    elif told:
        yield "FEWER HOLDINGS AT NO LOSS; each was walked on a copy of the job"
    else:
        yield "No two neighbouring setups can be cut in one holding at no loss."
    for number, one in enumerate(told, 1):
        yield from _one(found, one, number, words)
    if mended.met:
        yield from wrap(MET, first="  ", rest="  ")


def _one(found: Review, one: Proposal, number: int, words: Words) -> Iterator[str]:
    says = idea_in_words(one.idea, inches=found.book.inches)
    yield from wrap(f"{number}  {says[:1].upper()}{says[1:]}.", first="  ", rest="     ")
    yield from wrap(_gain(one, words), first="     ", rest="     ")
    if one.idea.kind == "merge":
        yield from wrap(STRAIN, first="     ", rest="     ")
    for op, caution in one.cautions:
        yield from wrap(f"It brings the caution {caution}{f' to op {op}' if op else ''}.", first="     ", rest="     ")
    yield from as_typed(one.edits, "     ")
    snippet = list(as_yaml(one.edits, "       "))
    if snippet:
        yield "     in the file, under"
        yield from snippet


def _gain(one: Proposal, words: Words) -> str:
    before = words.worst(one.key)
    after = words.worst(one.key, one.tried.figures[one.key])
    moved = f"{words.title(one.key)} {before} -> {after}, {words.limit(one.key)}"
    if one.saves and not one.cures:
        return f"No requirement loses by it ({words.title(one.key)} stays at {before})."
    if one.left:
        many = "requirement stays" if one.left == 1 else "requirements stay"
        return f"{moved}; it brings {len(one.cures)} inside, {one.left} {many} outside."
    return f"{moved}; no requirement stays outside."


def idea_in_words(idea: Idea, *, inches: bool) -> str:
    """An idea in the trade's words, without its full stop.

    >>> idea_in_words(Idea("re-hold", 50, 30, "hub", "rim", "four-jaw", reading=0.0077), inches=False)
    'hold op 50 on hub, finished in op 30, instead of rim, and true it in four-jaw chuck to 7.7 um'
    >>> idea_in_words(Idea("re-hold", 30, 10, "bore", "bore", "indicator", "edge-finder", reading=0.003), inches=False)
    'true bore in op 30 by indicator to 3.0 um; now it is found by edge finder'
    """
    on, was = clean(idea.on), clean(idea.was)
    reading = on_the_dial(idea.reading, inches=inches) if idea.reading is not None else ""
    made = f", finished in op {idea.other}," if idea.other is not None else ""
    match idea.kind:
        case "merge":
            return (
                f"op {idea.other} and op {idea.op} could be one holding: cut {_listed(idea.with_it)} in that of "
                f"op {idea.other}, which saves an opening"
            )
        case "swap":
            return f"do what is op {idea.op} now before what is op {idea.other}"
        case "witness":
            wide = f"{idea.wide / 25.4:.2f} in" if inches else f"{idea.wide:g} mm"
            what = f"a {wide} band on" if idea.by else f"a ring {wide} wide on"
            how = f"indicate it to {reading}" if idea.by else f"seat or read it to {reading}"
            return (
                f"leave {what} {clean(idea.parent)}, turned with {_listed(idea.with_it)} in op {idea.other}, and {how} "
                f"in op {idea.op} instead of {was}"
            )
        case "square":
            return f"square op {idea.op} on {on}{made} instead of {was}, to {reading}"
        case "stop":
            return f"stop op {idea.op} on {on}{made} instead of {was}"
    also = f"; {idea_in_words(idea.also, inches=inches)}" if idea.also is not None else ""
    how = (
        f"true it {DEVICES[idea.by].words} to {reading}"
        if idea.by != "indicator"
        else f"true it by indicator to {reading}"
    )
    if on == was:
        trued = how.replace("true it", f"true {on} in op {idea.op}", 1)
        return f"{trued}; now it is {DEVICES[idea.than].words}{also}"
    return f"hold op {idea.op} on {on}{made or ','} instead of {was}, and {how}{also}"


def _listed(names: tuple[str, ...]) -> str:
    shown = [clean(name) for name in names]
    return " and ".join((", ".join(shown[:-1]), shown[-1])) if len(shown) > 1 else "".join(shown)
