"""A worm wheel: bored true to the register its teeth were cut on, and joined to its spindle, as a job file. Lengths mm."""

from __future__ import annotations

import math

from setupcheck.errors import SetupcheckError
from setupcheck.starting.answers import (
    Answers,
    Question,
    Value,
    in_bore,
    in_limit,
    in_module,
    in_size,
    in_torque,
    one_of,
    whole,
)
from setupcheck.starting.asking import Ask, head, requirements, shrunk, slid
from setupcheck.starting.dividing import division, passes
from setupcheck.starting.figures import Figures
from setupcheck.starting.gear import bore_text, module_text
from setupcheck.starting.layout import angle_words
from setupcheck.worm.geometry import lead_angle, outside_diameter, usual_face_width, wheel_sizes, worm_sizes

OPENING = (
    "A worm wheel whose teeth are cut gap by gap with a single-point cutter, the head leaned by the worm's lead angle.",
    "The one idea of this route: `hub`, `seat` and `throat` are finished in one holding (op 30), the teeth are cut on that hub",
    "(op 40), and the bore is trued to the same hub (op 50). The chucks before may be as bad as they like.",
)
CLEARANCE = 0.2
"""Clearance under the worm's tip, share of the module. Source: common practice, 0.16 to 0.25."""
CUTTER = 1.45
"""Tip radius of the cutter over the worm's radius with clearance. Source: our screening choice; the review judges it."""

THREAD_FRICTION = 0.1
"""Friction of the thread on the wheel when it starts or is short of oil. Source: from memory, hard steel on bronze."""

LEAST_SHRUNK = 18.0
"""Smallest bore that is proposed to be shrunk on [mm]. Source: our screening choice; below it, limits, peaks and heat leave
no interference that suits."""


def questions() -> tuple[Question, ...]:
    """What is asked of a worm wheel."""
    return (
        Question("teeth", "How many teeth?", "of the wheel", whole(10, 400, 72), lambda a: "72"),
        Question(
            "module", "What axial module?", "thread pitch over pi, in mm; 16 DP for a diametral pitch", in_module,
            lambda a: "1.5" if a.units == "mm" else "16 DP",
        ),
        Question("starts", "How many starts has the worm?", "threads side by side", whole(1, 6, 1), lambda a: "1"),
        Question(
            "worm-diameter", "What reference diameter has the worm?",
            "where thread and gap are equally wide, about its outside less two modules", in_size(3.0, 300.0),
            lambda a: a.measure.exact(16.0 * a.number("module")),
        ),
        Question("hand", "What hand is the worm?", "right, like a common screw, or left", one_of("right", "left"),
                 lambda a: "right"),
        Question("bore", "What bore and fit?", "as the drawing has it, 32 H6", _bore, _usual_bore),
        Question(
            "join", "How is the wheel joined to its spindle?", "shrink: hot on cold; slide: with play; none: not in this plan",
            one_of("shrink", "slide", "none"), _usual_join,
        ),
        Question("torque", "What torque must it carry?", "of a shrunk joint, at the worst", in_torque, usual_torque),
        Question(
            "tightest", "Cumulative pitch, at most?",
            "the largest error of any tooth to any other; plan takes what the plan keeps", in_limit, lambda a: "plan",
        ),
    )  # fmt: skip


def usual_torque(answers: Answers) -> str:
    """A torque that a shrunk bronze hub of this bore carries [N m]. Source: our screening choice."""
    torque = 0.0008 * answers.number("bore") ** 3  # N m for a bore in mm
    return f"{max(torque, 0.1):.2g} N m"


def _usual_join(answers: Answers) -> str:
    return "shrink" if answers.number("bore") >= LEAST_SHRUNK else "slide"


def most_hub(answers: Answers) -> float:
    """Largest hub that a cutter clears at the root of the teeth [mm]. Source: our screening choice, a module and a half."""
    m = answers.number("module")
    return m * answers.number("teeth") - 2.0 * m * (1.0 + CLEARANCE) - 3.0 * m


def _usual_bore(answers: Answers) -> str:
    usual = min(max(0.3 * answers.number("module") * answers.number("teeth"), 3.0), most_hub(answers) / 1.6, 400.0)
    return f"{answers.measure.exact(answers.measure.bore(usual))} H5"


def _bore(text: str, answers: Answers) -> Value:
    found = in_bore(text, answers)
    nominal, most = Answers("", "", "", answers.units, {"bore": found}).number("bore"), most_hub(answers) / 1.4
    if nominal > most:
        show = answers.measure
        raise SetupcheckError(
            f"a bore of {show.told(nominal)} leaves no hub inside {answers.number('teeth'):.0f} teeth of module "
            f"{answers.number('module'):g} mm. Write {show.told(show.down(most))} or less, or a larger module"
        )
    return found


class Sizes:
    """Sizes of the wheel that follow from the answers [mm], along z from the back; angle [rad]."""

    def __init__(self, answers: Answers) -> None:
        u = answers.measure
        self.m, self.z, self.d1 = (
            answers.number("module"),
            int(answers.number("teeth")),
            answers.number("worm-diameter"),
        )
        self.starts, self.bore = int(answers.number("starts")), answers.number("bore")
        wheel = wheel_sizes(
            axial_module=self.m, reference_diameter=self.d1, wheel_teeth=self.z, clearance_factor=CLEARANCE
        )
        self.circle, self.throat, self.hollow = wheel.reference_diameter, wheel.throat_diameter, wheel.throat_radius
        self.tip = worm_sizes(axial_module=self.m, reference_diameter=self.d1).tip_diameter
        self.angle = lead_angle(starts=self.starts, axial_module=self.m, diameter=self.d1)
        self.face = u.up(usual_face_width(axial_module=self.m, quotient=self.d1 / self.m))
        self.rim = u.up(outside_diameter(throat_diameter=self.throat, axial_module=self.m, starts=self.starts))
        self.back = u.up(max(2.5, 0.25 * self.face))
        self.side = self.back + self.face + u.up(0.5)
        self.middle = (self.back + self.side) / 2.0
        self.length = self.side + u.up(max(6.0, 0.35 * self.face))
        self.hub = u.down(min(1.5 * self.bore + 2.0, most_hub(answers)))
        self.seat, self.disc = u.down(self.throat - self.m), u.down(wheel.root_diameter - self.m)
        self.cutter = u.up(CUTTER * (self.d1 / 2.0 + (1.0 + CLEARANCE) * self.m))
        self.depth = round((2.0 + CLEARANCE) * self.m / u.unit, 3) * u.unit
        self.thread = math.pi * self.m / 2.0 - 0.02 * self.m
        self.distance = (self.d1 + self.circle) / 2.0


def write(answers: Answers, figures: Figures, made_by: str) -> str:
    """The job file."""
    u, s, hand, join = answers.measure, Sizes(answers), answers.word("hand"), answers.word("join")
    machine, divide = division(s.z, "dividing-head-B", ", nose_points: left, cutter_stands: front")
    hub = u.size((s.side + s.length) / 2.0)
    bar, chuck = u.up(s.rim + 5.0), -u.up(max(40.0, 0.42 * s.rim))
    across, width = u.size(u.down(0.9 * s.seat)), s.thread + 0.03 + figures.thicker
    serves = "" if join == "shrink" else ", serves_at: [5 degC, 45 degC]"  # a joint that is shrunk says it itself
    leans = "nose-down" if hand == "right" else "nose-up"
    return f"""\
{head(answers, OPENING, made_by)}
# Surfaces in each part's own frame: z along the axis, 0 at the wheel's back. `made: stock` is there before the first setup.
parts:
  wheel:
    material: CuSn12-C         # GUESS; the joint's strength and heat rest on it
    surfaces:
      bar:      {{kind: cylinder, diameter: {u.size(bar)}, from: {u.size(chuck)}, to: {u.size(s.length + 2.0)}, made: stock}}
      front:    {{kind: face, at: {u.size(s.length)}, facing: +z, diameter: {u.size(s.hub)}}}
      hub:      {{kind: cylinder, diameter: {u.size(s.hub)}, from: {u.size(s.side)}, to: {u.size(s.length)}}}
      seat:     {{kind: face, at: {u.size(s.side)}, facing: +z, diameter: {u.size(s.seat)}}}
      rim:      {{kind: cylinder, diameter: {u.size(s.rim)}, from: {u.size(s.back)}, to: {u.size(s.side)}}}
      # throat = (teeth + 2) x module, hollow = half the worm's diameter less a module
      throat:   {{kind: throat, diameter: {u.exact(s.throat)}, radius: {u.exact(s.hollow)}, at: {u.size(s.middle)}}}
      # reference circle = module x teeth
      teeth:    {{kind: teeth, count: {s.z}, on_circle: {u.exact(s.circle)}, at: {u.size(s.middle)}, width: {u.size(s.face)}}}
      bore:     {{kind: bore, diameter: {bore_text(answers)}, from: 0, to: {u.size(s.length)}, roughness: Rz 2.5 um}}
      back:     {{kind: face, at: 0, facing: -z, diameter: {u.size(s.disc)}}}
{_spindle(answers, figures, s)}
# The worm as drawn. Measure its thread and write that in: thread_thickness: {{measured: …, uncertainty: 4 um}}.
worm:
  starts: {s.starts}
  hand: {hand}
  axial_module: {module_text(answers)}
  reference_diameter: {u.exact(s.d1)}
  tip_diameter: {u.exact(s.tip)}
  pressure_angle: 20 deg       # in the axial section
  profile: ZA                  # GUESS; ZN, ZI, ZK or ZC by how it was cut
  material: 16MnCr5            # GUESS
  thread_thickness: {u.plus_minus(s.thread, 0.010)}    # GUESS: along the axis, half the pitch less some play
  end_float: {u.error(0.010)}               # GUESS
# centre distance = half of both reference diameters; its tolerance and the squareness of the axes are GUESS
mesh: {{wheel: wheel.teeth, centre_distance: {u.plus_minus(s.distance, 0.010)}, shaft_angle_error: 1', \
housing: grey-iron{serves}}}
# The cutter's tip radius has to be larger than the worm's, or the ends of the face bear; the insert's width at pitch height
# rules the backlash.
cutters:
  fly: {{kind: single-point, tip_radius: {u.size(s.cutter)}, bar_diameter: {u.size(u.down(s.cutter))}, \
overhang: {u.size(u.up(s.rim / 2.0))}, insert: envelope, width: {u.plus_minus(width, 0.004)}}}
# Replace names and figures by those of your shop; axis_runout is how truly the spindle itself turns.
machines:
  lathe-A:         {{kind: lathe, axis_runout: {u.error(0.002)}}}          # GUESS
  {machine}

# A hold is: what centres the part, what keeps it square (or a second centre), what stops it, each with what it may be out by.
setups:
  - op: 10          # bar in the chuck: everything roughed, rim finished for later grips
    machine: lathe-A
    looks_at_tool: +z
    hold:
      centre:     {{on: bar, by: three-jaw, at: {u.size(chuck + 5.0)}, \
grip: {{from: {u.size(chuck)}, to: {u.size(-u.up(4.0))}}}, runout: {{device: three-jaw}}}}
      and_centre: {{on: bar, by: three-jaw, at: {u.size(s.side)}, runout: {{device: three-jaw}}}}    # rules the lean
    cut:
      front:  {{}}
      hub:    {{leave_on_diameter: {u.size(u.up(1.0))}}}
      seat:   {{leave: {u.size(0.6)}, error: {u.error(0.050)}}}
      rim:    {{}}
      throat: {{leave_on_diameter: {u.size(u.up(1.0))}}}
  - op: 20          # sawn off the bar, turned round, back faced and bored roughly
    machine: lathe-A
    looks_at_tool: -z
    hold:
      centre: {{on: rim, by: soft-jaws, at: {u.size(s.middle)}, runout: {{device: soft-jaws}}}}
      square: {{on: seat, by: jaws, face_runout: {{device: jaws}}, across: {across}}}
      stop:   {{on: seat, error: {u.error(0.020)}}}    # GUESS
    cut:
      back: {{leave: {u.size(u.up(0.5))}, error: {u.error(0.050)}, removes: [bar]}}
      bore: {{leave_on_diameter: {u.size(0.8)}, state: rough}}
  - op: 30          # the register: hub and seat finished in one holding, so they are true to each other
    machine: lathe-A
    looks_at_tool: +z
    hold:
      centre: {{on: rim, by: soft-jaws, at: {u.size(s.middle)}, runout: {{device: soft-jaws}}}}
      square: {{on: back, by: jaws, face_runout: {{device: jaws}}, across: {u.size(u.down(0.9 * s.disc))}}}
      stop:   {{on: back, error: {u.error(0.020)}}}    # GUESS
    cut:
      hub:    {{}}
      seat:   {{error: {u.error(0.010)}}}
      throat: {{error: {u.error(0.010)}}}
  - op: 40          # the teeth, on the register; the head leaned by the lead angle at the reference diameter
    machine: {machine.split(":")[0]}
    looks_at_tool: -z
    hold:    # GUESS: play of the register in its spigot, and what the spigot itself runs out
      centre: {{on: hub, by: spigot, at: {hub}, clearance: [{u.error(0.002)}, {u.error(0.008)}], rests: pushed, \
runout: {u.error(0.003)}}}
      square: {{on: seat, by: flange, face_runout: {u.error(0.004)}, across: {across}}}
      stop:   {{on: seat, error: {u.error(0.010)}}}
    # tan(lead angle) = starts x module / reference diameter of the worm; the side it leans to goes by hand, nose and cutter
    head:   {{tilt: {angle_words(s.angle)}, uncertainty: 2', leans: {leans}, \
mid_plane: {{found: after-tilt, error: {u.error(0.015)}}}}}
    {divide}
    # depth = 2.2 x module, counted from the throat; the last pass is fine
    cut:    {{teeth: {{cutter: fly, depth_from: {{surface: throat, at_most: {u.error(0.010)}, tool: standing}}, \
depth: {u.exact(s.depth)}, depth_error: {u.error(0.005)}, passes: {passes(s.depth, u)}}}}}
  - op: 50          # bored true to the register; once read, {{at_most: …, measured: …, uncertainty: …, indicator: …}}
    machine: lathe-A
    looks_at_tool: -z
    hold:
      centre: {{on: hub, by: four-jaw, at: {hub}, runout: {u.error(0.006)}}}    # GUESS
      square: {{on: seat, by: parallels, face_runout: {u.error(0.004)}, across: {across}}}    # GUESS
      stop:   {{on: seat, error: {u.error(0.005)}}}
    cut:
      bore: {{}}
      back: {{error: {u.error(0.010)}}}
{_joined(answers, figures, s, join)}
# Where the wheel works: the axis it turns about, and how far the worm's axis stands along it.
place:
  axis: {"wheel.bore" if join == "none" else "spindle.bearings"}
  worm_axis: {{from: {"wheel.back" if join == "none" else "spindle.shoulder"}, \
length: {u.plus_minus(s.middle, 0.020)}}}    # GUESS: its tolerance
{requirements(_asks(answers, s, join), answers, figures, ", about `place.axis` where nothing else is said")}"""


def _spindle(answers: Answers, figures: Figures, s: Sizes) -> str:
    if answers.word("join") == "none":
        return ""
    u = answers.measure
    journal = figures.journal or u.with_limits(s.bore, 0.0009 * s.bore, 0.0011 * s.bore)
    if answers.word("join") == "slide":
        journal = f"{u.exact(s.bore)} g5"
    shoulder = u.up(1.3 * s.bore + 2.0)
    return f"""\
  spindle:
    material: 42CrMo4          # GUESS
    surfaces:
      journal:  {{kind: cylinder, diameter: {journal}, \
from: 0, to: {u.size(s.length)}, hole: 0, roughness: Rz 1.6 um}}    # GUESS: solid
      shoulder: {{kind: face, at: 0, facing: +z, diameter: {u.size(shoulder)}}}
      bearings: {{kind: cylinder, diameter: {u.size(shoulder - u.up(1.0))}, from: {u.size(-u.up(80.0))}, \
to: {u.size(-u.up(5.0))}}}
    given:      # GUESS: a bought or finished part, as inspected; no setup here makes these
      - {{of: journal, about: bearings, runout: {u.error(0.002)}}}
      - {{of: shoulder, about: bearings, face_runout: {u.error(0.004)}, across: {u.size(u.down(0.9 * shoulder))}}}
"""


def _joined(answers: Answers, figures: Figures, s: Sizes, join: str) -> str:
    stop = f"{{on: wheel.back, against: spindle.shoulder, error: {answers.measure.error(0.005)}}}"
    ends = {"outer": "wheel.bore", "inner": "spindle.journal", "stop": stop}
    by_worm = f"what the worm drags, friction {THREAD_FRICTION:g}"
    if join == "shrink":
        return shrunk(
            answers, figures, **ends, op=70, why="hub hot, spindle cold", along=_thrust(answers, s), pushed_by=by_worm
        )
    return slid(answers, **ends, op=70) if join == "slide" else ""


def _thrust(answers: Answers, s: Sizes) -> float:
    """Force that the worm drags the wheel along its axis with, under the torque asked for [N].

    F = 2 T / d2 tan(gamma + rho): the wheel's tangential force, leaned by lead and friction angle, with the worm driving.
    Source: the wedge of the thread, derived; the pressure angle, which would raise the friction by 6 %, left out.
    """
    return 2.0 * answers.number("torque") / s.circle * math.tan(s.angle + math.atan(THREAD_FRICTION))


def _asks(answers: Answers, s: Sizes, join: str) -> tuple[Ask, ...]:
    u = answers.measure
    asks = [
        Ask("what: cumulative-pitch, of: wheel.teeth", why="how far any tooth may be out to any other"),
        Ask("what: single-pitch, of: wheel.teeth"),
        Ask("what: run-out, of: wheel.teeth"),
        Ask("what: backlash-swing, of: wheel.teeth", why="how the play comes and goes in a turn"),
        Ask("what: mid-plane", why="how far the wheel's middle may stand off the worm's axis"),
        Ask("what: allowance, of: wheel.bore@50", "at_least", "stock left for the boring cut at its thinnest"),
        Ask("what: backlash", "between", "along the reference circle, in service"),
        Ask(f"what: contact-area, film: {u.error(0.006)}", "at_least", "share of a flank that blue would mark"),
    ]
    if join != "none":
        disc = u.size(u.down(min(0.9 * s.disc, 1.2 * s.bore)))
        asks.append(Ask(f"what: squareness, of: wheel.back, about: spindle.shoulder, across: {disc}"))
    if join == "shrink" and answers.number("torque") > 0.0:
        asks.append(Ask(f"what: torque, of: 70, at_least: {answers.number('torque') / 1000.0:g} N m", "stated"))
    return tuple(asks)
