"""A requirement's worst case and limit in its own unit, also of a figure that was only tried. Base units come in."""

from __future__ import annotations

from setupcheck.flow import Review
from setupcheck.ledger.figures import Figure
from setupcheck.notation import show
from setupcheck.quantities.book import Scope
from setupcheck.quantities.gates import reaches
from setupcheck.report.wording import in_unit, title_of, unit_of


class Words:
    """The requirements of one review, by their key."""

    def __init__(self, found: Review) -> None:
        self.found = found
        self.scopes: dict[str, Scope] = {scope.key: scope for scope in found.book.instances("stack")}

    def title(self, key: str) -> str:
        """`run-out at teeth about bearings`."""
        return title_of(self.scopes[key])

    def unit(self, key: str) -> tuple[str, int]:
        """Unit and decimals it is shown in."""
        return unit_of(self.found.book, self.scopes[key])

    def size(self, key: str, value: float) -> str:
        """A distance in the unit of the requirement; in micrometres where that counts in mm."""
        unit, digits = self.unit(key)
        finer = {"mm": ("um", 1), "in": ("thou", 2)}.get(unit)
        return show(value, *finer) if finer is not None else show(value, unit, digits)

    def worst(self, key: str, figure: Figure | None = None) -> str:
        """The worst case: its upper end, its lower one, or both where both are limited."""
        result, (unit, digits) = self.found.results[key], self.unit(key)
        low, high = result.combined.worst.low, result.combined.worst.high
        if figure is not None:
            places = reaches(figure)
            low = min(one.base - sum(p.down for p in one.pushes) for one in places)
            high = max(one.base + sum(p.up for p in one.pushes) for one in places)
        if result.stack.low is not None and result.stack.high is not None:
            return f"{in_unit(low, unit, digits)} to {show(high, unit, digits)}"
        return show(high if result.stack.low is None else low, unit, digits)

    def limit(self, key: str) -> str:
        """`at most 40.0 um`, `at least 12 %`, `within 5 to 125 um`."""
        stack, (unit, digits) = self.found.results[key].stack, self.unit(key)
        if stack.low is not None and stack.high is not None:
            return f"within {in_unit(stack.low, unit, digits)} to {show(stack.high, unit, digits)}"
        if stack.high is not None:
            return f"at most {show(stack.high, unit, digits)}"
        return f"at least {show(stack.low or 0.0, unit, digits)}"
