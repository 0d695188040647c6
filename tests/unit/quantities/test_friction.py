"""The shipped table of friction: every row sound, every family known, the stated value before the table."""

from __future__ import annotations

from typing import get_args

import pytest

from setupcheck.errors import SetupcheckError
from setupcheck.jobfile.setups import Join
from setupcheck.physics.materials import EVIDENCE, FAMILIES
from setupcheck.quantities import friction as table_of
from setupcheck.quantities.friction import Friction, friction, table
from setupcheck.quantities.pairing import FITTED

from .joint_text import changed, number, value

STATES = [s for a in get_args(Join.model_fields["joint"].annotation) for s in get_args(a)]


@pytest.mark.parametrize("key", table(), ids=" ".join)
def test_each_row_is_sound(key: tuple[str, str, str, str]) -> None:
    hub, shaft, by, joint = key
    row = table()[key]
    assert hub in FAMILIES
    assert shaft in FAMILIES
    assert by in FITTED
    assert joint in STATES
    assert 0.0 < row.low <= row.high < 1.0
    assert row.kind in EVIDENCE
    assert row.note


def test_a_shrunk_joint_never_holds_less_than_a_pressed_one_and_a_dry_one_than_an_oiled_one() -> None:
    for (hub, shaft, by, joint), row in table().items():
        pressed = friction(hub=hub, shaft=shaft, by="press", joint=joint)
        oiled = friction(hub=hub, shaft=shaft, by=by, joint="oiled")
        assert pressed is None or by == "press" or row.low >= pressed.low
        assert oiled is None or joint == "oiled" or row.low >= oiled.low


def test_a_pair_without_a_row_has_no_friction() -> None:
    assert friction(hub="copper-alloy", shaft="aluminium", by="shrink", joint="degreased") is None


def test_the_table_is_used_for_holding_low_and_for_pressing_in_high() -> None:
    row = friction(hub="copper-alloy", shaft="steel", by="press", joint="degreased")
    assert row is not None
    pressed = changed(
        ("by: shrink", "by: press"), ("      heat: {hub: 190 degC, oven_error: 5 degC, carry: 10 s}\n", "")
    )
    own = changed(("joint: degreased", "friction: 0.1"), text=pressed)
    assert Friction(0.1, 0.1, "shop record") == value(own, "fit.rubbing")
    assert row.low / 0.1 == pytest.approx(number(pressed, "fit.force_held") / number(own, "fit.force_held"))
    assert row.high / 0.1 == pytest.approx(number(pressed, "fit.press_force") / number(own, "fit.press_force"))


def test_a_stated_friction_needs_no_state_of_the_joint() -> None:
    assert 0.21 == number(changed(("joint: degreased", "friction: 0.21")), "fit.friction")
    assert 0.17 == number(changed(), "fit.friction")


@pytest.mark.parametrize(
    ("text", "says"),
    [
        ("format: 2\nvalues: []\n", "no values in format 1"),
        ("format: 1\nvalues: []\n", "no values in format 1"),
        ("format: 1\nvalues: [5]\n", "cannot be used"),
        ("format: 1\nvalues: [{hub: steel}]\n", "cannot be used"),
        (
            "format: 1\nvalues: [{hub: a, shaft: b, by: c, joint: d, low: 0.3, high: 0.2, kind: from memory, note: x}]\n",
            "0.3 to 0.2",
        ),
        (
            "format: 1\nvalues: [{hub: a, shaft: b, by: c, joint: d, low: 0, high: 0.2, kind: from memory, note: x}]\n",
            "0.0 to 0.2",
        ),
    ],
)
def test_a_damaged_table_is_one_clear_message(monkeypatch: pytest.MonkeyPatch, text: str, says: str) -> None:
    monkeypatch.setattr(table_of, "read_text", lambda _: text)
    table.cache_clear()
    try:
        with pytest.raises(SetupcheckError, match=says):
            table()
    finally:
        table.cache_clear()


def test_two_materials_rub_alike_whichever_is_outside() -> None:
    bush = friction(hub="steel", shaft="copper-alloy", by="press", joint="degreased")
    assert bush is not None
    assert bush == friction(hub="copper-alloy", shaft="steel", by="press", joint="degreased")
    assert friction(hub="aluminium", shaft="copper-alloy", by="press", joint="oiled") is None
