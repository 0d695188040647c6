"""Which cause takes most with it: what is read off a push is what the figure loses when the cause goes."""

from __future__ import annotations

from itertools import pairwise
from pathlib import Path

import pytest

from setupcheck.flow import review
from setupcheck.ledger.causes import Cause
from setupcheck.ledger.figures import Figure, Length, Vector
from setupcheck.quantities.gates import origins, reaches, scaled, worst_excess
from setupcheck.quantities.remedies import _by_weight

JOBS = sorted((Path(__file__).parents[3] / "jobs").glob("*.yaml"))
NOISE = 2e-12  # mm, twice the last decimal that weights are rounded to


def loses(figure: Figure, cause: Cause) -> float:
    """The long way: the figure once more with the cause at 0 [mm]."""
    low = 0.0 if figure.signed else None
    return worst_excess(figure, low, 0.0) - worst_excess(scaled(figure, cause, 0.0), low, 0.0)


@pytest.mark.parametrize("job", JOBS, ids=lambda p: p.stem)
def test_causes_go_by_what_the_figure_loses_without_them(job: Path) -> None:
    figures = [result.figure for result in review(job).results.values()]
    assert any(isinstance(figure, Vector | Length) for figure in figures)
    for figure in figures:
        order = _by_weight(figure)
        assert set(order) == set(origins(reaches(figure)))
        for heavier, lighter in pairwise(loses(figure, cause) for cause in order):
            assert lighter <= heavier + NOISE
