"""What a shop's house file did to a review: its line in the head, every change that acted, JSON. Loaded with one alone."""

from __future__ import annotations

from collections.abc import Iterator
from typing import TYPE_CHECKING

from setupcheck.notation import FACTOR
from setupcheck.quantities.own_values import HouseUse
from setupcheck.report.wording import clean, wrap
from setupcheck.rulebook.house import House, HouseValue

if TYPE_CHECKING:
    from setupcheck.flow import Review
    from setupcheck.report.review_blocks import HouseData

SHOWN_SHA = 12
"""Characters of the sha256 that are printed; JSON has all of them. Source: our choice."""
LENGTHS = ("runout", "face_runout", "axis", "reading", "touch", "position")


def house_line(house: House) -> list[str]:
    """Which house file acts."""
    return wrap(f"house: {house.name}, {clean(house.file)}, sha256 {house.sha256[:SHOWN_SHA]}", rest="      ")


def house_used(found: Review) -> Iterator[str]:
    """Every change that acted on this job, also where the finding passes and is not printed. Nothing without a house."""
    if found.house is None:
        return
    yield from wrap(f"HOUSE, {clean(found.house.file)}")
    acts, values = acts_of(found), found.of_house
    if not acts and not values:
        yield from wrap("nothing in it reaches this job", first="  ")
    for (rule, said), places in acts.items():
        where = f"{places} {'place' if places == 1 else 'places'}"
        yield from wrap(f"- {rule}, {where}: {said}", first="  ", rest="    ")
    for use in values:
        row = _row(found.house, use)
        yield from wrap(
            f"- {use.path}: {row.name} {row.text} ({row.who}, {row.when}: {row.note})", first="  ", rest="    "
        )
    for note in found.house.notes:
        yield from wrap(f"Look at {note}.", first="  ", rest="    ")


def acts_of(found: Review) -> dict[tuple[str, str], int]:
    """(rule, what the house did) -> at how many places it was judged so."""
    counts: dict[tuple[str, str], int] = {}
    for one in found.evaluation.findings:
        if one.house:
            counts[one.rule, one.house] = counts.get((one.rule, one.house), 0) + 1
    return dict(sorted(counts.items()))


def _row(house: House, use: HouseUse) -> HouseValue:
    return next(row for row in house.values if (row.device, row.what) == (use.row.device, use.row.what))


def unit_of_value(what: str) -> str:
    """Metric unit in which a typical value is shown."""
    if what in LENGTHS:
        return "um"
    return "K" if what == "temperature_error" else "arcsec"


def house_as_data(found: Review) -> HouseData | None:
    """The same for JSON, metric; None without a house."""
    house = found.house
    if house is None:
        return None
    return {
        "name": clean(house.name),
        "file": clean(house.file),
        "sha256": house.sha256,
        "acts": [
            {"rule": rule, "places": places, "says": clean(said)} for (rule, said), places in acts_of(found).items()
        ],
        "values": [
            {
                "at": use.path,
                "device": clean(use.row.device),
                "what": use.row.what,
                "value": round(use.row.value * FACTOR[unit_of_value(use.row.what)], 6),
                "unit": unit_of_value(use.row.what),
            }
            for use in found.of_house
        ],
        "notes": [clean(note) for note in house.notes],
    }
