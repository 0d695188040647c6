"""Which tests a mutant of each module has to get past: those of its subject, quickest first."""

from __future__ import annotations

from pathlib import Path

from tests.mutants.running import ROOT

UNIT, PUBLISHED, JOBS = "tests/unit", "tests/published", "tests/jobs"
JOINTS = (
    f"{UNIT}/quantities/test_joint_strength.py",
    f"{UNIT}/quantities/test_joint_sections.py",
    f"{UNIT}/quantities/test_through.py",
    f"{UNIT}/quantities/test_pressing.py",
    f"{UNIT}/quantities/test_pressed_and_moved.py",
    f"{UNIT}/quantities/test_joint_missing.py",
    f"{UNIT}/quantities/test_choosing.py",
    f"{UNIT}/quantities/test_joint_states.py",
    f"{UNIT}/quantities/test_joint_heat.py",
    f"{UNIT}/quantities/test_friction.py",
    f"{UNIT}/quantities/test_cold.py",
    f"{UNIT}/quantities/test_heat_checks.py",
    f"{UNIT}/quantities/test_material_classes.py",
    f"{UNIT}/quantities/test_stuff.py",
    f"{UNIT}/quantities/test_beyond_range.py",
    f"{PUBLISHED}/test_joints_through_job_files.py",
    f"{JOBS}/test_slips_of_fits.py",
)
LEDGER = (
    f"{UNIT}/ledger/test_by_hand.py",
    f"{UNIT}/ledger/test_bounds_by_hand.py",
    f"{UNIT}/ledger/test_figures_by_hand.py",
    f"{UNIT}/ledger/test_holes_by_hand.py",
    f"{UNIT}/ledger/test_teeth_by_hand.py",
    f"{UNIT}/ledger/test_draws_by_hand.py",
    f"{UNIT}/ledger/test_route_by_hand.py",
    f"{UNIT}/ledger/test_gaps_by_hand.py",
    f"{UNIT}/ledger/test_planned_waves_by_hand.py",
    f"{UNIT}/ledger/test_alike.py",
    f"{UNIT}/ledger/test_draws_and_ends.py",
    f"{UNIT}/ledger/test_drawn_when_asked.py",
    f"{UNIT}/ledger/test_small_pieces_by_hand.py",
    f"{UNIT}/ledger/test_gaps.py",
    f"{UNIT}/ledger/test_kept_devices.py",
    f"{UNIT}/ledger/test_waves_by_cause.py",
    f"{UNIT}/ledger/test_laws_of_the_figures.py",
    f"{PUBLISHED}/test_random_walk.py",
    f"{PUBLISHED}/test_shaft_stack.py",
    f"{PUBLISHED}/test_folded_harmonics.py",
    f"{UNIT}/ledger/test_laws_of_a_swing.py",
    f"{UNIT}/ledger/test_laws_of_the_route.py",
    f"{UNIT}/ledger/test_extreme_values.py",
    f"{UNIT}/worm/test_backlash_chain.py",
    f"{UNIT}/worm/test_mid_plane_of_a_tilted_head.py",
    f"{UNIT}/division/test_against_the_ledger.py",
    f"{UNIT}/report/pictures/test_high_spots.py",
    f"{PUBLISHED}/test_npl_dem_es_011.py",
    f"{JOBS}/test_measured_over_balls.py",
    f"{JOBS}/test_trued_and_in_place.py",
    f"{JOBS}/test_index_as_it_runs.py",
)
DIVISION = (
    f"{UNIT}/division/test_by_hand.py",
    f"{UNIT}/division",
    f"{UNIT}/test_backlash_wave.py",
    f"{UNIT}/test_prove_out_fit.py",
    f"{PUBLISHED}/test_index_tables.py",
    f"{PUBLISHED}/test_npl_dem_es_011.py",
    f"{PUBLISHED}/test_sighting_instruments.py",
    f"{PUBLISHED}/test_pitch_measurement.py",
    f"{PUBLISHED}/test_division_test.py",
    f"{PUBLISHED}/test_planted_divisions.py",
    "tests/bad_input/test_division_readings.py",
    f"{JOBS}/test_division_readings.py",
    f"{JOBS}/test_ways_of_dividing.py",
    f"{JOBS}/test_division_test_against_the_plan.py",
)
TESTS: dict[str, tuple[str, ...]] = {
    "setupcheck.physics.interference": (
        f"{UNIT}/physics/test_joints_by_hand.py",
        f"{UNIT}/physics/test_interference.py",
        f"{UNIT}/physics/test_laws_of_a_joint.py",
        f"{UNIT}/physics/test_ends_of_a_joint.py",
        f"{PUBLISHED}/test_interference_examples.py",
        f"{PUBLISHED}/test_two_rings_by_differences.py",
    ),
    "setupcheck.physics.heating": (
        f"{UNIT}/physics/test_heating_of_joints.py",
        f"{PUBLISHED}/test_heating.py",
        f"{PUBLISHED}/test_cooling_by_integration.py",
        f"{PUBLISHED}/test_heat_beside_a_hub.py",
        f"{UNIT}/quantities/test_joint_heat.py",
        f"{UNIT}/quantities/test_heat_plan.py",
    ),
    "setupcheck.quantities.pairing": JOINTS,
    "setupcheck.quantities.strength": JOINTS,
    "setupcheck.quantities.loosening": JOINTS,
}
AREAS = {
    "ledger": LEDGER,
    "division": DIVISION,
}


def modules() -> dict[str, tuple[str, ...]]:
    """Every module of the core, with its tests."""
    found = dict(TESTS)
    for area, tests in AREAS.items():
        for path in sorted((ROOT / "setupcheck" / area).glob("*.py")):
            if path.stem != "__init__":
                found[f"setupcheck.{area}.{path.stem}"] = tests
    return {name: tuple(t for t in tests if Path(ROOT / t).exists()) for name, tests in found.items()}
