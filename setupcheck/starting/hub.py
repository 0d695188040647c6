"""A coupling hub finished in one holding and shrunk on its shaft, as a job file. Lengths mm."""

from __future__ import annotations

from setupcheck.errors import SetupcheckError
from setupcheck.starting.answers import Answers, Question, Value, in_bore, in_limit, in_size, in_torque, one_of
from setupcheck.starting.asking import Ask, head, requirements, shrunk, slid
from setupcheck.starting.figures import Figures
from setupcheck.starting.gear import bore_text

OPENING = (
    "A coupling hub on a shaft. Bore, rim and front are finished in one holding (op 30), so they are true to each other however",
    "badly the chuck runs; what is left at the end is the shaft's own run-out and how the hub sits on it. A shrunk joint is",
    "judged at its two ends: the loosest pair has to carry the torque warm, the tightest sets the heat and must not yield.",
)
THINNEST = 1.3
"""Outside over bore that a hub has at the least. Source: our screening choice; the review judges its strength."""

RIM_FRICTION = 0.15
"""Friction of a coupling's teeth or jaws as a shaft shifts along its axis. Source: from memory, greased steel."""

LEAST_SHRUNK = 25.0
"""Smallest bore that is proposed to be shrunk on [mm]. Source: our screening choice; below it the heat gets too much."""


def questions() -> tuple[Question, ...]:
    """What is asked of a coupling hub."""
    return (
        Question("bore", "What bore and fit?", "as the drawing has it, 80 H6", in_bore,
                 lambda a: "80 H6" if a.units == "mm" else "3 H6"),
        Question("outside", "What outside diameter?", "of the rim", _outside,
                 lambda a: a.measure.size(a.measure.up(2.0 * a.number("bore")))),
        Question("width", "How long is it?", "from the back, which meets the shoulder, to the front", in_size(10.0, 400.0),
                 lambda a: a.measure.size(a.measure.up(max(0.85 * a.number("bore"), 12.0)))),
        Question("join", "How is it joined to its shaft?", "shrink: hot on cold; slide: with play, by hand",
                 one_of("shrink", "slide"),
                 lambda a: "shrink" if a.number("bore") >= LEAST_SHRUNK else "slide"),
        Question("torque", "What torque must it carry?", "of a shrunk joint, at the worst", in_torque, usual_torque),
        Question("tightest", "Run-out of the rim on its shaft, at most?",
                 "full movement of the dial; plan takes what the plan keeps", in_limit, lambda a: "plan"),
    )  # fmt: skip


def usual_torque(answers: Answers) -> str:
    """A torque that a shrunk steel hub of this bore and length carries with ease [N m]. Source: our screening choice."""
    return f"{max(1.2e-6 * answers.number('bore') ** 2 * answers.number('width') * 1000.0, 0.1):.2g} N m"


def _outside(text: str, answers: Answers) -> Value:
    value = in_size(3.0, 600.0)(text, answers)
    least = THINNEST * answers.number("bore")
    if float(value) < least:  # type: ignore[arg-type]
        show = answers.measure
        raise SetupcheckError(
            f"an outside of {show.told(float(value))} leaves no hub round the bore. Write "  # type: ignore[arg-type]
            f"{show.told(show.up(least))} or more"
        )
    return value


def write(answers: Answers, figures: Figures, made_by: str) -> str:
    """The job file."""
    u, bore, rim, length = answers.measure, answers.number("bore"), answers.number("outside"), answers.number("width")
    nose = u.down(rim - min(0.16 * (rim - bore), 30.0) - 1.0)
    step = u.up(0.65 * length)
    bar, stub = u.up(rim + 4.0), u.up(max(30.0, 0.45 * rim))
    journal = figures.journal or u.with_limits(bore, 0.0009 * bore, 0.0010 * bore)
    if answers.word("join") == "slide":
        journal = f"{u.exact(bore)} g6"
    shoulder = u.down(bore + 0.5 * (nose - bore))
    seat_face, front = u.size(u.down(0.95 * shoulder)), u.size(u.down(0.92 * rim))
    stop = f"{{on: hub.back, against: shaft.shoulder, error: {u.error(0.010)}}}"
    ends = {"outer": "hub.bore", "inner": "shaft.seat", "stop": stop, "op": 50}
    joined = (
        shrunk(
            answers,
            figures,
            why="hub from the oven onto the cold shaft, down to the shoulder",
            along=RIM_FRICTION * 2.0 * answers.number("torque") / rim,  # as it shifts, held at the rim
            pushed_by=f"what the other half drags at the rim, friction {RIM_FRICTION:g}",
            **ends,  # type: ignore[arg-type]
        )
        if answers.word("join") == "shrink"
        else slid(answers, **ends)  # type: ignore[arg-type]
    )
    return f"""\
{head(answers, OPENING, made_by)}
# Surfaces in each part's own frame: z along the axis, 0 at the hub's back. `made: stock` is there before the first setup.
parts:
  hub:
    material: C45              # GUESS; the joint's strength and heat rest on it
    surfaces:
      bar:      {{kind: cylinder, diameter: {u.size(bar)}, from: {u.size(-u.up(5.0))}, \
to: {u.size(length + u.up(4.0) + stub)}, made: stock}}
      front:    {{kind: face, at: {u.size(length)}, facing: +z, diameter: {u.size(rim)}}}
      rim:      {{kind: cylinder, diameter: {u.size(rim)}, from: {u.size(step)}, to: {u.size(length)}}}
      nose:     {{kind: cylinder, diameter: {u.size(nose)}, from: 0, to: {u.size(step)}}}    # the grip of op 20 and 30
      bore:     {{kind: bore, diameter: {bore_text(answers)}, from: 0, to: {u.size(length)}, roughness: Rz 4 um}}
      back:     {{kind: face, at: 0, facing: -z, diameter: {u.size(nose)}}}
  shaft:
    material: 42CrMo4          # GUESS
    surfaces:
      seat:     {{kind: cylinder, diameter: {journal}, \
from: 0, to: {u.size(length)}, hole: 0, roughness: Rz 3 um}}    # GUESS: solid
      shoulder: {{kind: face, at: 0, facing: +z, diameter: {u.size(shoulder)}}}
      bearings: {{kind: cylinder, diameter: {u.size(u.down(shoulder - 1.0))}, from: {u.size(-u.up(3.0 * bore))}, \
to: {u.size(-u.up(0.25 * bore))}}}
    given:      # GUESS: a finished shaft, as inspected; no setup here makes these
      - {{of: seat, about: bearings, runout: {u.error(0.006)}}}
      - {{of: shoulder, about: bearings, face_runout: {u.error(0.008)}, across: {seat_face}}}

# Replace the name and figure by those of your shop; axis_runout is how truly the spindle itself turns.
machines:
  lathe-G: {{kind: lathe, axis_runout: {u.error(0.003)}}}          # GUESS

# A hold is: what centres the part, what keeps it square (or a second centre), what stops it, each with what it may be out by.
setups:
  - op: 10          # held on the piece that is sawn off later: nose and back
    machine: lathe-G
    looks_at_tool: -z
    hold:
      centre:     {{on: bar, by: three-jaw, at: {u.size(length + stub)}, \
grip: {{from: {u.size(length + u.up(4.0))}, to: {u.size(length + u.up(4.0) + stub)}}}, runout: {{device: three-jaw}}}}
      and_centre: {{on: bar, by: three-jaw, at: {u.size(length + u.up(6.0))}, runout: {{device: three-jaw}}}}    # rules the lean
    cut:
      nose: {{}}
      back: {{leave: {u.size(u.up(0.5))}, error: {u.error(0.10)}}}
      bore: {{leave_on_diameter: {u.size(u.up(2.0))}, state: rough}}
  - op: 20          # sawn off, turned round on the nose, the rest roughed so that op 30 only finishes
    machine: lathe-G
    looks_at_tool: +z
    hold:
      centre: {{on: nose, by: soft-jaws, at: {u.size(step / 2.0)}, runout: {{device: soft-jaws}}}}
      square: {{on: back, by: jaws, face_runout: {{device: jaws}}, across: {u.size(u.down(0.9 * nose))}}}
      stop:   {{on: back, error: {u.error(0.050)}}}    # GUESS
    cut:
      rim:      {{leave_on_diameter: {u.size(u.up(1.0))}}}
      front:    {{leave: {u.size(u.up(0.5))}, error: {u.error(0.10)}, removes: [bar]}}
      bore:     {{leave_on_diameter: {u.size(u.up(1.0))}, state: rough}}
  - op: 30          # all that has to run true, finished before the jaws are opened: their error reaches none of it
    machine: lathe-G
    keeps: 20
    cut:
      bore:     {{}}
      rim:      {{}}
      front:    {{error: {u.error(0.020)}}}
  - op: 40          # turned round on the finished bore; the back will sit against the shoulder, so it must be square to it
    machine: lathe-G
    looks_at_tool: -z
    hold:
      centre: {{on: bore, by: indicator, at: {u.size(0.8 * length)}, runout: {{device: indicator}}}}
      square: {{on: front, by: parallels, face_runout: {{device: parallels}}, across: {front}}}
      stop:   {{on: front, error: {u.error(0.010)}}}    # GUESS
    cut:
      back: {{error: {u.error(0.015)}}}
{joined}
# Where the hub works: about the axis the shaft turns on.
place:
  axis: shaft.bearings
{requirements(_asks(answers, front, seat_face), answers, figures, " on its shaft")}"""


def _asks(answers: Answers, front: str, seat_face: str) -> tuple[Ask, ...]:
    asks = [
        Ask("what: run-out, of: hub.rim, about: shaft.bearings"),
        Ask(f"what: face-run-out, of: hub.front, about: shaft.bearings, across: {front}"),
        Ask("what: length, of: hub.front, about: shaft.shoulder", "between"),
        Ask(f"what: squareness, of: hub.back, about: shaft.shoulder, across: {seat_face}"),
        Ask("what: allowance, of: hub.bore@30", "at_least", "stock left for the finishing cut at its thinnest"),
    ]
    if answers.word("join") == "shrink" and answers.number("torque") > 0.0:
        asks.append(Ask(f"what: torque, of: 50, at_least: {answers.number('torque') / 1000.0:g} N m", "stated"))
    return tuple(asks)
