"""How the drawing was read for a joint, and where its friction comes from, can be looked up in words."""

from __future__ import annotations

from setupcheck.quantities.book import Known
from tests.unit.report.sample import WHEEL, changed, reviewed


def said(text: str, name: str) -> object:
    book = reviewed(text).book
    answer = book.get(name, book.instances("join")[0])
    return answer.value if isinstance(answer, Known) else answer


def test_the_lengths_of_constant_section_stand_in_their_order() -> None:
    # the shim holds the shoulder 1.5 mm off, so the 26 mm of bore and journal share 24.5; root circle 111 - 2 x 3.3
    assert "CuSn12-C on 42CrMo4, 32.000 mm: 4.00 mm in 100.00 mm on a hole of 12.00 mm; 0.50 mm in 114.00 mm" in str(
        said(WHEEL, "fit.shape")
    )
    assert "15.00 mm in 104.40 mm (root circle)" in str(said(WHEEL, "fit.shape"))
    assert str(said(WHEEL, "fit.shape")).endswith("4.50 mm in 48.00 mm on a hole of 12.00 mm")


def test_friction_says_how_good_it_is_and_the_job_s_own_figure_replaces_it() -> None:
    assert str(said(WHEEL, "fit.rubs")).startswith("0.17 to 0.25 (from memory; DIN 7190")
    own = changed(WHEEL, ("joint: degreased", "joint: degreased\n      friction: 0.14"))
    assert said(own, "fit.rubs") == "0.14 to 0.14 (shop record)"
