"""A spur gear cut on the mandrel it was turned on, as a job file. Lengths mm."""

from __future__ import annotations

from setupcheck.errors import SetupcheckError
from setupcheck.starting.answers import Answers, Question, Value, in_bore, in_limit, in_module, in_size, whole
from setupcheck.starting.asking import Ask, head, requirements
from setupcheck.starting.dividing import division, passes
from setupcheck.starting.figures import Figures
from setupcheck.starting.layout import Measure

OPENING = (
    "A spur gear, bored first and then turned and cut on one taper mandrel, so that everything is true to the bore.",
    "The mandrel stays between its centres with its driving dog marked: what it runs out is the same when the outside is",
    "turned (op 30) and when the teeth are cut (op 40). `device` and `mark: kept` say so, and it is counted once.",
)


def questions() -> tuple[Question, ...]:
    """What is asked of a spur gear."""
    return (
        Question("teeth", "How many teeth?", "the count z", whole(6, 400, 40), lambda a: "40"),
        Question(
            "module",
            "What module?",
            "circular pitch over pi, in mm; 16 DP for a diametral pitch",
            in_module,
            lambda a: "1.5" if a.units == "mm" else "16 DP",
        ),
        Question(
            "bore", "What bore and fit?", "as the drawing has it, 20 H7", _bore, _usual_bore
        ),
        Question(
            "width", "How wide is the face?", "from one end to the other", in_size(2.0, 300.0),
            lambda a: a.measure.size(a.measure.up(10.0 * a.number("module"))),
        ),
        Question(
            "tightest", "Cumulative pitch about the bore, at most?",
            "the largest error of any tooth to any other; plan takes what the plan keeps", in_limit, lambda a: "plan",
        ),
    )  # fmt: skip


def _usual_bore(answers: Answers) -> str:
    root = answers.number("module") * (answers.number("teeth") - 2.5)
    return f"{answers.measure.exact(answers.measure.bore(min(max(root * 0.36, 3.0), most_bore(answers))))} H7"


def most_bore(answers: Answers) -> float:
    """Largest bore that leaves a wall of two and a half modules under the teeth [mm]. Source: our screening choice."""
    return answers.number("module") * max(answers.number("teeth") - 2.5 - 5.0, 1.0)


def _bore(text: str, answers: Answers) -> Value:
    found = in_bore(text, answers)
    nominal = Answers("", "", "", answers.units, {"bore": found}).number("bore")
    if nominal > most_bore(answers):
        show = answers.measure
        raise SetupcheckError(
            f"a bore of {show.told(nominal)} leaves no wall under {answers.number('teeth'):.0f} teeth of module "
            f"{answers.number('module'):g} mm. Write {show.told(show.down(most_bore(answers)))} or less, or a larger module"
        )
    return found


def write(answers: Answers, figures: Figures, made_by: str) -> str:
    """The job file."""
    u, m, z = answers.measure, answers.number("module"), int(answers.number("teeth"))
    b, outside = answers.number("width"), m * (z + 2)
    bar, chuck = u.up(outside + 4.0), -u.up(max(30.0, 0.4 * outside))
    depth = 2.25 * m
    machine, divide = division(z, "dividing-head-D")
    asks = (
        Ask("what: cumulative-pitch, of: gear.teeth, about: gear.bore", why="or grade: 7 of ISO 1328-1"),
        Ask("what: single-pitch, of: gear.teeth, about: gear.bore"),
        Ask("what: run-out, of: gear.teeth, about: gear.bore"),
        Ask("what: run-out, of: gear.outside, about: gear.bore"),
        Ask(f"what: face-run-out, of: gear.front, about: gear.bore, across: {u.size(0.9 * outside)}"),
        Ask(f"what: face-run-out, of: gear.back, about: gear.bore, across: {u.size(0.9 * outside)}"),
    )
    return f"""\
{head(answers, OPENING, made_by)}
# Surfaces in the part's own frame: z along the axis, 0 at the back. `made: stock` is there before the first setup.
parts:
  gear:
    material: 16MnCr5          # GUESS
    surfaces:
      bar:     {{kind: cylinder, diameter: {u.size(bar)}, from: {u.size(chuck)}, to: {u.size(b + 3.0)}, made: stock}}
      front:   {{kind: face, at: {u.size(b)}, facing: +z, diameter: {u.size(outside)}}}
      back:    {{kind: face, at: 0, facing: -z, diameter: {u.size(outside)}}}
      bore:    {{kind: bore, diameter: {bore_text(answers)}, from: 0, to: {u.size(b)}}}
      outside: {{kind: cylinder, diameter: {u.size(outside)}, from: 0, to: {u.size(b)}}}
      # reference circle = module x teeth
      teeth:   {{kind: teeth, count: {z}, on_circle: {u.exact(m * z)}, at: {u.size(b / 2.0)}, width: {u.size(b)}, \
pressure_angle: 20 deg, module: {module_text(answers)}}}

# Replace names and figures by those of your shop; axis_runout is how truly the spindle itself turns.
machines:
  lathe-C:         {{kind: lathe, axis_runout: {u.error(0.003)}}}          # GUESS
  {machine}
cutters:
  disc: {{kind: form-cutter, diameter: {u.size(u.up(max(40.0, 12.0 * m)))}}}

# A hold is: what centres the part, what keeps it square (or a second centre), what stops it, each with what it may be out by.
setups:
  - op: 10          # bore and front in one holding, so they are true to each other
    machine: lathe-C
    looks_at_tool: +z
    hold:
      centre:     {{on: bar, by: three-jaw, at: {u.size(chuck + 5.0)}, \
grip: {{from: {u.size(chuck)}, to: {u.size(-u.up(4.0))}}}, runout: {{device: three-jaw}}}}
      and_centre: {{on: bar, by: three-jaw, at: {u.size(0.3 * b)}, runout: {{device: three-jaw}}}}    # rules the lean
    cut: {{front: {{}}, bore: {{}}, outside: {{leave_on_diameter: {u.size(u.up(1.5))}, state: rough}}}}
  - op: 20          # sawn off, back faced against the front
    machine: lathe-C
    looks_at_tool: -z
    hold:
      centre: {{on: bore, by: expanding-mandrel, at: {u.size(0.5 * b)}, runout: {{device: expanding-mandrel}}}}
      square: {{on: front, by: collar, face_runout: {u.error(0.008)}, across: {u.size(0.8 * outside)}}}    # GUESS
      stop:   {{on: front, error: {u.error(0.020)}}}    # GUESS
    cut: {{back: {{error: {u.error(0.020)}, removes: [bar]}}}}
  - op: 30          # outside turned on the taper mandrel; the long fit of bore and mandrel rules the lean
    machine: lathe-C
    looks_at_tool: +z
    hold:    # GUESS: what the mandrel runs out at either end of the bore
      centre:     {{on: bore, by: taper-mandrel, at: 0, runout: {{at_most: {u.error(0.004)}, device: mandrel-1, mark: kept}}}}
      and_centre: {{on: bore, by: taper-mandrel, at: {u.size(b)}, \
runout: {{at_most: {u.error(0.005)}, device: mandrel-1-far, mark: kept}}}}
    cut: {{outside: {{}}}}
  - op: 40          # same mandrel, same dog, between the centres of the dividing head
    machine: {machine.split(":")[0]}
    looks_at_tool: +z
    hold:
      centre:
        {{on: bore, by: taper-mandrel, at: 0, runout: {{at_most: {u.error(0.004)}, device: mandrel-1, mark: kept}},
         through: [{{by: centres, runout: {u.error(0.003)}}}]}}
      and_centre:
        {{on: bore, by: taper-mandrel, at: {u.size(b)}, runout: {{at_most: {u.error(0.005)}, device: mandrel-1-far, mark: kept}},
         through: [{{by: centres, runout: {u.error(0.003)}}}]}}
    {divide}
    # tooth depth = 2.25 x module
    cut: {{teeth: {{cutter: disc, depth: {u.size(depth)}, depth_from: outside, passes: {passes(depth, u)}}}}}
{requirements(asks, answers, figures, ", about its bore")}"""


def module_text(answers: Answers) -> str:
    """The module, in mm in every file."""
    return Measure("mm").exact(answers.number("module")) + ("" if answers.units == "mm" else " mm")


def bore_text(answers: Answers) -> str:
    """The bore as the planner gave it."""
    size, u = answers.size("bore"), answers.measure
    if size.fit is not None:
        return f"{u.exact(size.nominal)} {size.fit}"
    return u.with_limits(size.nominal, size.lower or 0.0, size.upper or 0.0)
