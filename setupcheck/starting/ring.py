"""The inner ring of a rolling bearing heated onto a seat ground between centres, as a job file. Lengths mm."""

from __future__ import annotations

from setupcheck.starting.answers import Answers, Question, in_limit, in_size
from setupcheck.starting.asking import Ask, carried, head, requirements
from setupcheck.starting.figures import Figures

OPENING = (
    "The inner ring of a rolling bearing on a ground seat. Both seats and the shoulder are ground in one clamping between the",
    "same centres (op 20), so the centres themselves drop out between them. The ring is hardened and takes little heat, so",
    "ring and seat are measured and paired. A ring has a thin wall: it copies its seat, so the seat's run-out is the raceway's.",
)
PAIRED = 0.00024
"""Interference of ring and seat as paired, share of the bore. Source: our screening choice; the review judges heat and grip."""

LEAST_BORE = 25.0
"""Smallest ring that this plan is for [mm]. Source: our screening choice; smaller ones are pressed on cold."""

SPREAD = 0.001
"""Either way of a size that is to be measured and paired, until it is [mm]. Source: our choice, what a comparator tells."""


def questions() -> tuple[Question, ...]:
    """What is asked of a bearing ring and its seat."""
    return (
        Question("bore", "What bore has the ring?", "its nominal size, as in the maker's list", in_size(LEAST_BORE, 250.0),
                 lambda a: "50" if a.units == "mm" else "2"),
        Question("outside", "What diameter has its raceway?", "of the inner ring, at the bottom of the track",
                 lambda t, a: in_size(1.08 * a.number("bore"), 1.8 * a.number("bore"))(t, a),
                 lambda a: a.measure.size(a.measure.up(1.19 * a.number("bore")))),
        Question("width", "How wide is the ring?", "from face to face", in_size(5.0, 120.0),
                 lambda a: a.measure.size(a.measure.up(max(0.35 * a.number("bore"), 8.0)))),
        Question("tightest", "Run-out of the raceway on its seat, at most?",
                 "full movement of the dial; plan takes what the plan keeps", in_limit, lambda a: "plan"),
    )  # fmt: skip


def write(answers: Answers, figures: Figures, made_by: str) -> str:
    """The job file."""
    u, d, race, b = answers.measure, answers.number("bore"), answers.number("outside"), answers.number("width")
    lip, seat_end = u.up(race + 1.5), b + u.up(4.0)
    body, shoulder = u.up(lip + 3.0), u.down(lip - 1.0)
    rear, back, far = u.down(0.9 * d), -u.up(4.0 * d), -u.up(5.2 * d)
    bar, face = u.up(body + 4.0), u.size(u.down(0.97 * shoulder))
    paired = max(PAIRED * d, 0.007)
    asks = (
        Ask("what: run-out, of: ring.raceway, about: spindle.rear"),
        Ask("what: run-out, of: spindle.seat, about: spindle.rear"),
        Ask(
            f"what: squareness, of: spindle.shoulder, about: spindle.rear, across: {face}",
            why="same clamping: nothing adds",
        ),
        Ask(f"what: face-run-out, of: ring.front, about: spindle.rear, across: {face}"),
        Ask("what: length, of: ring.front, about: spindle.shoulder", "between"),
        Ask("what: allowance, of: spindle.seat@20", "at_least", "stock left for the grinding at its thinnest"),
    )
    return f"""\
{head(answers, OPENING, made_by)}
# Surfaces in each part's own frame: z along the axis, 0 at the shoulder. `made: stock` is there before the first setup.
parts:
  spindle:
    material: 42CrMo4          # GUESS
    surfaces:
      bar:          {{kind: cylinder, diameter: {u.size(bar)}, from: {u.size(far - 5.0)}, \
to: {u.size(seat_end + 1.0)}, made: stock}}
      front_centre: {{kind: centre, at: {u.size(seat_end)}, facing: +z, made: stock}}
      rear_centre:  {{kind: centre, at: {u.size(far)}, facing: -z, made: stock}}
      # Ring and seat are measured and paired. Until then narrow spans stand for both, GUESS; afterwards write
      # {{nominal: {u.exact(d)}, measured: …, uncertainty: {u.error(SPREAD)}}}.
      seat:         {{kind: cylinder, diameter: {u.with_limits(d, 0.7 * paired - SPREAD, 0.7 * paired + SPREAD)}, \
from: 0, to: {u.size(seat_end)}, hole: 0, roughness: Rz 1.6 um}}    # GUESS: solid
      shoulder:     {{kind: face, at: 0, facing: +z, diameter: {u.size(shoulder)}}}
      body:         {{kind: cylinder, diameter: {u.size(body)}, from: {u.size(back)}, to: 0}}
      rear:         {{kind: cylinder, diameter: {u.size(rear)}, from: {u.size(far)}, to: {u.size(back)}}}
    given:      # GUESS: the bar comes with both centres drilled by one centring machine
      - {{of: rear_centre, about: front_centre, runout: {u.error(0.10)}, face_runout: {u.error(0.050)}, \
across: {u.size(u.up(8.0))}}}
  ring:
    material: 100Cr6
    # GUESS: ask its maker what heat the ring takes; many allow less, and none with seals or grease in it
    properties: {{expansion: 12.0 um/m/K, heat_cap: 120 degC, yield_strength: 1400 MPa}}
    surfaces:
      bore:    {{kind: bore, diameter: {u.with_limits(d, -0.3 * paired - SPREAD, -0.3 * paired + SPREAD)}, \
from: 0, to: {u.size(b)}, roughness: Rz 1.6 um}}    # GUESS
      raceway: {{kind: cylinder, diameter: {u.size(race)}, from: {u.size(0.15 * b)}, to: {u.size(0.85 * b)}}}
      land:    {{kind: cylinder, diameter: {u.size(lip)}, from: 0, to: {u.size(0.15 * b)}}}
      lip:     {{kind: cylinder, diameter: {u.size(lip)}, from: {u.size(0.85 * b)}, to: {u.size(b)}}}
      back:    {{kind: face, at: 0, facing: -z, diameter: {u.size(lip)}}}
      front:   {{kind: face, at: {u.size(b)}, facing: +z, diameter: {u.size(lip)}}}
    given:      # GUESS: the bearing maker's figures for one ring
      - {{of: raceway, about: bore, runout: {u.error(0.002)}}}
      - {{of: back, about: bore, face_runout: {u.error(0.003)}, across: {face}}}
      - {{of: front, about: bore, face_runout: {u.error(0.003)}, across: {face}}}
      - {{of: front, from: back, length: {u.plus_minus(b, 0.003)}}}

# Replace names and figures by those of your shop; axis_runout is how truly the spindle itself turns.
machines:
  lathe-K:   {{kind: lathe, axis_runout: {u.error(0.004)}}}          # GUESS
  grinder-L: {{kind: grinder, axis_runout: {u.error(0.0005)}}}      # GUESS

# A hold is: what centres the part, what keeps it square (or a second centre), what stops it, each with what it may be out by.
setups:
  - op: 10          # turned between its centres, grinding stock left on seat, shoulder and rear
    machine: lathe-K
    part: spindle
    looks_at_tool: +z
    hold:
      centre:     {{on: front_centre, by: centres, runout: {{device: centres}}}}
      and_centre: {{on: rear_centre, by: centres, runout: {{device: centres}}}}
      stop:       {{on: rear_centre, error: {u.error(0.050)}, radius: {u.size(u.up(4.0))}}}
    cut:
      body:     {{}}
      seat:     {{leave_on_diameter: {u.size(0.3)}}}
      shoulder: {{leave: {u.size(0.2)}, error: {u.error(0.030)}}}
      rear:     {{leave_on_diameter: {u.size(0.3)}}}
  - op: 20          # the same centres again, lapped; seat, shoulder and rear ground in one clamping
    machine: grinder-L
    part: spindle
    looks_at_tool: +z
    hold:
      centre:     {{on: front_centre, by: centres, runout: {{device: centres}}}}
      and_centre: {{on: rear_centre, by: centres, runout: {{device: centres}}}}
      stop:       {{on: rear_centre, error: {u.error(0.020)}, radius: {u.size(u.up(4.0))}}}
    cut:
      seat:     {{}}
      shoulder: {{error: {u.error(0.010)}}}
      rear:     {{}}
  - op: 30          # ring from the heater, spindle from the freezer; wipe the frost off the seat just before
    join:
      outer: ring.bore
      inner: spindle.seat
      by: shrink
      square: bore
      fit_error: {u.error(0.001)}                # GUESS
      stop: {{on: ring.back, against: spindle.shoulder, error: {u.error(0.002)}}}
      grips_first: shoulder-end      # held against the shoulder until it has bitten
      heat:                          # the probe reads the ring, and the spindle as it comes out: displays tell neither
        {{hub: 117 degC, by: oven, oven_error: 3 degC, read_by: contact-probe, carry: 5 s,
         shaft: -40 degC, cold_by: freezer, cold_error: 2 K}}
      joint: oiled                   # a film against rust: this joint has no torque to carry
      must_carry: {carried(0.0, 0.0)}    # GUESS: thrust goes onto the shoulder, none the other way
      serves_at: [15 degC, 60 degC]  # GUESS: coldest and warmest it works at

# Where the ring works: about the axis of the other bearing's seat.
place:
  axis: spindle.rear
{requirements(asks, answers, figures, "")}"""
