"""A bronze bush pressed into its eye and bored in place, as a job file. Lengths mm."""

from __future__ import annotations

from setupcheck.errors import SetupcheckError
from setupcheck.starting.answers import Answers, Question, Value, in_bore, in_limit, in_size, in_torque
from setupcheck.starting.asking import Ask, carried, head, requirements
from setupcheck.starting.figures import PAIRED, Figures
from setupcheck.starting.gear import bore_text

OPENING = (
    "A bronze bush pressed into a lever and bored in place. A bush closes in as it is pressed home, often by more than its",
    "hole's whole tolerance: so the hole is left small (op 10) and bored after pressing (op 40). The press is asked by the",
    "tightest pair with the highest friction, while the loosest holds with the lowest.",
)


def questions() -> tuple[Question, ...]:
    """What is asked of a bush."""
    return (
        Question("bore", "What bore and fit?", "of the finished bush, as the drawing has it, 30 H7", in_bore,
                 lambda a: "30 H7" if a.units == "mm" else "1.25 H7"),
        Question("outside", "What outside diameter?", "of the bush, and so of the eye it is pressed into", _outside,
                 lambda a: a.measure.size(a.measure.up(1.25 * a.number("bore") + 2.0))),
        Question("width", "How long is it?", "bush and eye alike", in_size(6.0, 300.0),
                 lambda a: a.measure.size(a.measure.up(1.2 * a.number("outside")))),
        Question("torque", "What torque must its seat carry?", "what the shaft drags on it", in_torque,
                 lambda a: f"{max(0.8e-7 * a.number('outside') ** 2 * a.number('width') * 1000.0, 0.05):.2g} N m"),
        Question("tightest", "Run-out of the hole to the boss, at most?",
                 "full movement of the dial; plan takes what the plan keeps", in_limit, lambda a: "plan"),
    )  # fmt: skip


def _outside(text: str, answers: Answers) -> Value:
    value = in_size(3.0, 400.0)(text, answers)
    least, most = 1.15 * answers.number("bore"), 2.5 * answers.number("bore")
    if not isinstance(value, float) or not least <= value <= most:
        show = answers.measure
        raise SetupcheckError(
            f"'{text}' is no outside of a bush with this bore. Write {show.told(show.up(least))} to "
            f"{show.told(show.down(most))}"
        )
    return value


def write(answers: Answers, figures: Figures, made_by: str) -> str:
    """The job file."""
    u, hole, out, length = answers.measure, answers.number("bore"), answers.number("outside"), answers.number("width")
    torque, boss = answers.number("torque"), u.up(1.8 * out)
    face, side = u.down((hole + 2.0 * out) / 3.0), u.size(u.down(0.93 * boss))
    bar, chuck = u.up(out + 4.0), -u.up(max(45.0, 0.9 * length))
    journal = figures.journal or u.with_limits(out, 0.0009 * out, 0.0010 * out)
    rating = figures.rating if figures.rating is not None else 1.0e6
    asks: tuple[Ask, ...] = (
        Ask("what: run-out, of: bush.hole, about: lever.boss"),
        Ask("what: run-out, of: bush.hole, about: lever.eye"),
        Ask(f"what: squareness, of: lever.side, about: bush.hole, across: {side}"),
        Ask("what: allowance, of: bush.hole@40", "at_least", "stock left for the boring cut at its thinnest"),
    )
    if torque > 0.0:
        asks += (Ask(f"what: torque, of: 20, at_least: {torque / 1000.0:g} N m", "stated"),)
    return f"""\
{head(answers, OPENING, made_by)}
# Surfaces in each part's own frame: z along the axis, 0 at the back. `made: stock` is there before the first setup.
parts:
  lever:
    material: C45              # GUESS; the joint's strength rests on it
    surfaces:
      boss:  {{kind: cylinder, diameter: {u.size(boss)}, from: 0, to: {u.size(length)}, made: stock}}
      # The eye is measured and the bush turned to suit it. Until then this narrow span stands for it, GUESS; afterwards write
      # {{nominal: {u.exact(out)}, measured: …, uncertainty: {u.error(0.002)}}}, and the bush's own size to suit.
      eye:   {{kind: bore, diameter: {u.plus_minus(out, PAIRED)}, \
from: 0, to: {u.size(length)}, roughness: Rz 4 um}}
      side:  {{kind: face, at: 0, facing: -z, diameter: {u.size(boss)}}}
      front: {{kind: face, at: {u.size(length)}, facing: +z, diameter: {u.size(boss)}}}
    given:      # GUESS: a finished lever, as inspected; no setup here makes these
      - {{of: eye, about: boss, runout: {u.error(0.020)}}}
      - {{of: side, about: eye, face_runout: {u.error(0.010)}, across: {side}}}
  bush:
    material: CuSn7Zn4Pb7-C    # GUESS
    surfaces:
      bar:   {{kind: cylinder, diameter: {u.size(bar)}, from: {u.size(chuck)}, to: {u.size(length + 2.0)}, made: stock}}
      back:  {{kind: face, at: 0, facing: -z, diameter: {u.size(face)}}}
      front: {{kind: face, at: {u.size(length)}, facing: +z, diameter: {u.size(face)}}}
      out:   {{kind: cylinder, diameter: {journal}, from: 0, to: {u.size(length)}, roughness: Rz 4 um}}
      hole:  {{kind: bore, diameter: {bore_text(answers)}, from: 0, to: {u.size(length)}}}

# Replace names and figures by those of your shop; axis_runout is how truly the spindle itself turns.
machines:
  lathe-M: {{kind: lathe, axis_runout: {u.error(0.004)}}}          # GUESS
  press-1: {{kind: press, rating: {rating / 1000.0:g} kN}}              # GUESS: what your press is marked for

# A hold is: what centres the part, what keeps it square (or a second centre), what stops it, each with what it may be out by.
setups:
  - op: 10          # outside, hole and front in one holding, parted off with the back
    machine: lathe-M
    part: bush
    looks_at_tool: +z
    hold:
      centre:     {{on: bar, by: three-jaw, at: {u.size(chuck + 5.0)}, \
grip: {{from: {u.size(chuck)}, to: {u.size(chuck + u.up(40.0))}}}, runout: {{device: three-jaw}}}}
      and_centre: {{on: bar, by: three-jaw, at: {u.size(chuck + u.up(35.0))}, runout: {{device: three-jaw}}}}    # rules the lean
    cut:
      out:   {{}}
      hole:  {{leave_on_diameter: {u.size(u.up(0.5))}, state: rough}}
      front: {{error: {u.error(0.020)}}}
      back:  {{error: {u.error(0.050)}, removes: [bar]}}
  - op: 20          # dry and clean: a film of oil halves the grip
    machine: press-1
    join:
      outer: lever.eye
      inner: bush.out
      by: press
      square: bore
      fit_error: {u.error(0.010)}                   # GUESS
      lead_in: {u.size(u.up(2.0))}                       # a chamfer or taper that lets the bush find its way
      joint: degreased
      must_carry: {carried(torque, 2.0 * torque / hole)}    # GUESS along the axis: a shaft that slides drags no harder
      serves_at: [5 degC, 45 degC]   # GUESS: coldest and warmest the joint works at
  - op: 40          # bored in place, trued on the boss in two planes: what the pressing has leaned is gone
    machine: lathe-M
    part: lever
    looks_at_tool: +z
    hold:
      centre:     {{on: boss, by: four-jaw, at: {u.size(0.15 * length)}, runout: {{device: four-jaw}}}}
      and_centre: {{on: boss, by: four-jaw, at: {u.size(0.85 * length)}, runout: {{device: four-jaw}}}}
      stop:       {{on: side, error: {u.error(0.020)}}}    # GUESS
    cut:
      bush.hole: {{}}

# Where the bush works: about its own hole.
place:
  axis: bush.hole
{requirements(asks, answers, figures, "")}"""
