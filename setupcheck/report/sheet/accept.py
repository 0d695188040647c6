"""What may be accepted of a reading, beside its box: the gate of its entry. Lengths mm."""

from __future__ import annotations

from setupcheck.flow import Review
from setupcheck.quantities.gates import Gate
from setupcheck.quantities.length_gates import LengthGate
from setupcheck.report.gates import bands_of, ends_of, is_enough, is_far, is_idle, lengths_of, near_in_words
from setupcheck.report.sheet.accepting import FREE, LOST, Accept, span
from setupcheck.report.sheet.showing import paper
from setupcheck.report.wording import on_the_dial, title_of


def accepted(found: Review) -> dict[str, Accept]:
    """What to accept by the path of the entry: `up to 5.2 um`, because of `backlash-swing at teeth about bearings`.

    An entry that no requirement looks at closely is not critical; one that no requirement hears of is not among them.
    """
    inches = found.book.inches
    titles = {scope.key: paper(title_of(scope), 80) for scope in found.book.instances("stack")}
    told = {path: _dial(found, gate, titles, inches=inches) for gate in found.gates for path in gate.paths}
    for gate in lengths_of(found, everything=True):
        told[gate.key.removesuffix(".measured")] = _length(gate, titles, inches=inches)
    return told


def _dial(found: Review, gate: Gate, titles: dict[str, str], *, inches: bool) -> Accept:
    by = titles.get(gate.by, gate.by)
    if gate.reading is not None and gate.reading <= 0.0:
        return Accept(LOST.format(by))
    if gate.reading is not None and is_enough(gate):
        return Accept(f"up to {on_the_dial(gate.reading, inches=inches, step=gate.indicator)}: indicate no finer", by)
    if is_idle(gate) or gate.reading is None:
        return FREE
    least = (
        f"at least {on_the_dial(gate.least, inches=inches, up=True, step=gate.indicator)}, " if gate.least > 0.0 else ""
    )
    high = f", high at {paper(gate.high_at, 30)}" if gate.high_at else ""
    most = on_the_dial(gate.reading, inches=inches, step=gate.indicator)
    near = near_in_words(bands_of(found, gate), gate, inches=inches)
    return Accept(f"{least}up to {most}{high}{near}", by)


def _length(gate: LengthGate, titles: dict[str, str], *, inches: bool) -> Accept:
    if gate.lost:
        return Accept(LOST.format(titles.get(gate.by_low, gate.by_low)))
    if is_far(gate):
        return FREE
    low, high = ends_of(gate, inches=inches)
    told = span(low, high) if low and high else f"at least {low}" if low else f"at most {high}"
    by = [titles.get(key, key) for key, end in ((gate.by_low, low), (gate.by_high, high)) if end]
    return Accept(told, " and ".join(dict.fromkeys(by)))
