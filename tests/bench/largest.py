"""The largest job that is read: every count at its limit, each surface hanging on the one before."""

from __future__ import annotations

from setupcheck.jobfile.counts import MOST_REQUIREMENTS, MOST_SETUPS, MOST_SURFACES

TEETH = 1000  # the most that a ring of teeth may have


def largest(setups: int = MOST_SETUPS, surfaces: int = MOST_SURFACES, requirements: int = MOST_REQUIREMENTS) -> str:
    """A stepped shaft with a ring of teeth: one setup a step, the steps in a chain, as YAML. Invented part, invented figures."""
    steps = max(2, surfaces - 2)
    lines = ["setupcheck: 1", "title: The largest job", "units: mm", "parts:", "  shaft:", "    surfaces:"]
    lines += [
        f"      s{i}: {{kind: cylinder, diameter: {20 + i * 0.1:.1f}, from: {i * 5}, to: {i * 5 + 5}}}"
        for i in range(steps)
    ]
    lines.append(f"      teeth: {{kind: teeth, count: {TEETH}, on_circle: 2000, at: {steps * 5 + 20}, width: 18}}")
    lines.append("      end: {kind: face, at: 0, facing: -z, diameter: 20}")
    lines += [
        "    given:",
        "      - {of: end, about: s0, face_runout: 2 um, across: 18}",
        "      - {of: s1, about: s0, runout: 2 um}",
        "machines:",
    ]
    lines += ["  head: {kind: dividing-head, worm_ratio: 40, axis_runout: 2 um}", "setups:"]
    square = "{on: end, by: flange, face_runout: 3 um, across: 18}"
    for n in range(1, setups + 1):
        cut = f"s{n}: {{}}" if n < setups else "teeth: {error: 20 um}"
        divide = "" if n < setups else '\n    divide: {by: hole-circle, circle: 25, setting: 5"}'
        centre = f"{{on: s{n - 1}, by: four-jaw, runout: {n % 7 + 1} um}}"
        lines += [f"  - op: {n * 10}", "    machine: head", "    looks_at_tool: +z"]
        lines.append(f"    hold: {{centre: {centre}, square: {square}}}{divide}\n    cut: {{{cut}}}")
    lines.append("require:")
    for n in range(requirements - 1):
        lines.append(f"  - {{what: run-out, of: s{setups - 1 - n % (setups - 2)}, about: s0, at_most: {50 + n} um}}")
    lines.append('  - {what: index-within, of: teeth, about: s0, at_most: 400"}')
    return "\n".join(lines) + "\n"
