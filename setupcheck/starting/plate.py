"""An index plate with a circle of holes, drilled and reamed on a rotary table, as a job file. Lengths mm."""

from __future__ import annotations

from setupcheck.errors import SetupcheckError
from setupcheck.starting.answers import Answers, Question, Value, in_bore, in_limit, in_size, whole
from setupcheck.starting.asking import Ask, head, requirements
from setupcheck.starting.dividing import TABLE_CLAMP, TABLE_RATIO
from setupcheck.starting.figures import Figures
from setupcheck.starting.gear import bore_text

OPENING = (
    "An index plate with holes on a circle, drilled and reamed on a rotary table under a boring spindle.",
    "What rules a hole here: where the table's axis was found in the bore, where the spindle stands over the table",
    "(`spindle_to_axis`: x is the radius of the circle, y turns the pattern), the table's own division, and the reamer.",
)


def questions() -> tuple[Question, ...]:
    """What is asked of an index plate."""
    return (
        Question("holes", "How many holes?", "on the circle", whole(2, 400, 24), lambda a: "24"),
        Question("circle", "On what circle?", "its diameter, through the middles of the holes", in_size(10.0, 900.0),
                 lambda a: "120" if a.units == "mm" else "4.75"),
        Question("hole", "What diameter has a hole?", "as reamed", _hole,
                 lambda a: a.measure.exact(min(6.0 if a.units == "mm" else 6.35, 0.4 * _pitch(a)))),
        Question("bore", "What bore and fit?", "that the plate is set by, 30 H6", _bore,
                 lambda a: f"{a.measure.size(a.measure.up(0.25 * a.number('circle')))} H6"),
        Question("outside", "What outside diameter?", "of the plate", _outside,
                 lambda a: a.measure.size(a.measure.up(1.12 * a.number("circle") + 2.0 * a.number("hole")))),
        Question("width", "How thick is it?", "from face to face", in_size(3.0, 100.0),
                 lambda a: "16" if a.units == "mm" else "0.625"),
        Question("tightest", "Position of the holes, at most?",
                 "diameter of the circle each hole's middle stays in; plan takes what the plan keeps", in_limit,
                 lambda a: "plan"),
    )  # fmt: skip


def _pitch(answers: Answers) -> float:
    """Distance of neighbouring holes along the circle [mm]."""
    return 3.14159 * answers.number("circle") / answers.number("holes")


def _hole(text: str, answers: Answers) -> Value:
    return _bounded(text, answers, 1.0, 0.9 * _pitch(answers), "the holes would run into each other")


def _outside(text: str, answers: Answers) -> Value:
    least = answers.number("circle") + 1.2 * answers.number("hole")
    return _bounded(text, answers, least, 1000.0, "the holes would break out of the rim")


def _bore(text: str, answers: Answers) -> Value:
    found = in_bore(text, answers)
    nominal = Answers("", "", "", answers.units, {"bore": found}).number("bore")
    most = answers.number("circle") - 1.2 * answers.number("hole")
    if nominal > most:
        show = answers.measure
        raise SetupcheckError(
            f"a bore of {show.told(nominal)} runs into the holes. Write {show.told(show.down(most))} or less"
        )
    return found


def _bounded(text: str, answers: Answers, least: float, most: float, why: str) -> Value:
    value = in_size(0.5, 1000.0)(text, answers)
    if not isinstance(value, float) or not least - 1e-9 <= value <= most + 1e-9:
        show = answers.measure
        raise SetupcheckError(f"'{text}': {why}. Write {show.told(least)} to {show.told(most)}")
    return value


def write(answers: Answers, figures: Figures, made_by: str) -> str:
    """The job file."""
    u, count, circle = answers.measure, int(answers.number("holes")), answers.number("circle")
    hole, outside, thick = answers.number("hole"), answers.number("outside"), answers.number("width")
    stock, grip, across = u.up(outside + 4.0), u.up(max(thick + 10.0, 0.2 * outside)), u.size(u.down(0.85 * outside))
    asks = (
        Ask("what: position, of: plate.holes, about: plate.bore"),
        Ask("what: pitch-circle, of: plate.holes, about: plate.bore", "between"),
        Ask("what: run-out, of: plate.outside, about: plate.bore"),
        Ask(f"what: face-run-out, of: plate.back, about: plate.bore, across: {across}"),
        Ask("what: length, of: plate.front, about: plate.back", "between", "how thick it comes out"),
    )
    return f"""\
{head(answers, OPENING, made_by)}
# Surfaces in the part's own frame: z along the axis, 0 at the back. `made: stock` is there before the first setup.
parts:
  plate:
    material: EN-GJL-250       # GUESS
    surfaces:
      rough:   {{kind: cylinder, diameter: {u.size(stock)}, from: {u.size(-grip - 2.0)}, to: {u.size(thick + 3.0)}, made: stock}}
      front:   {{kind: face, at: {u.size(thick)}, facing: +z, diameter: {u.size(outside)}}}
      back:    {{kind: face, at: 0, facing: -z, diameter: {u.size(outside)}}}
      outside: {{kind: cylinder, diameter: {u.size(outside)}, from: 0, to: {u.size(thick)}}}
      bore:    {{kind: bore, diameter: {bore_text(answers)}, from: 0, to: {u.size(thick)}}}
      holes:   {{kind: holes, count: {count}, on_circle: {u.exact(circle)}, at: {u.size(thick)}, diameter: {u.exact(hole)}}}

# Replace names and figures by those of your shop; axis_runout is how truly the spindle itself turns.
machines:
  lathe-E: {{kind: lathe, axis_runout: {u.error(0.003)}}}          # GUESS
  table-F: {{kind: rotary-table, worm_ratio: {TABLE_RATIO}, axis_runout: {{device: rotary-table}}, axis: vertical}}
cutters:
  reamer: {{kind: reamer, diameter: {u.exact(hole)}}}

# A hold is: what centres the part, what keeps it square (or a second centre), what stops it, each with what it may be out by.
setups:
  - op: 10          # front, bore and outside in one holding: the bore is the datum of everything
    machine: lathe-E
    looks_at_tool: +z
    hold:
      centre:     {{on: rough, by: three-jaw, at: {u.size(-grip)}, \
grip: {{from: {u.size(-grip - 2.0)}, to: {u.size(-u.up(1.0))}}}, runout: {{device: three-jaw}}}}
      and_centre: {{on: rough, by: three-jaw, at: {u.size(-u.up(2.0))}, runout: {{device: three-jaw}}}}    # rules the lean
    cut: {{front: {{}}, bore: {{}}, outside: {{}}}}
  - op: 20          # turned round on the outside against the front, back faced
    machine: lathe-E
    looks_at_tool: -z
    hold:
      centre: {{on: outside, by: soft-jaws, at: {u.size(0.6 * thick)}, runout: {{device: soft-jaws}}}}
      square: {{on: front, by: jaws, face_runout: {{device: jaws}}, across: {across}}}
      stop:   {{on: front, error: {u.error(0.025)}}}    # GUESS
    cut: {{back: {{error: {u.error(0.025)}, removes: [rough]}}}}
  - op: 30          # the holes: bore trued to the table's axis, then the spindle set over by the radius of the circle
    machine: table-F
    looks_at_tool: +z
    hold:
      centre: {{on: bore, by: indicator, at: {u.size(0.5 * thick)}, runout: {{device: indicator}}}}
      square: {{on: back, by: table, face_runout: {u.error(0.010)}, across: {across}}}    # GUESS
      stop:   {{on: back, error: {u.error(0.025)}}}    # GUESS
    divide: {{by: rotary-table, clamp: {TABLE_CLAMP}}}    # clamp is GUESS, rest typical
    cut:
      holes:
        cutter: reamer
        error: {u.error(0.025)}
        # GUESS: how well the spindle stands over the circle, and what the reamer wanders at each hole
        spindle_to_axis: {{x: {u.plus_minus(circle / 2.0, 0.005)}, y: {u.plus_minus(0.0, 0.005)}}}
        each: {{radial: {u.error(0.005)}, tangential: {u.error(0.005)}, by: reamer}}
{requirements(asks, answers, figures, ", about its bore")}"""
