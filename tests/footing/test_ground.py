"""What grading stands on does not depend on gains."""

from dataclasses import replace

from tests.footing.random_loops import sheet
from tuner.footing.ground import ground_of


def test_gains_do_not_matter() -> None:
    """The same ground comes back; another trial stands on another."""
    found = sheet(1)
    moved = replace(found, controller=found.controller.with_value("filter_time", 0.33), limits=())
    assert ground_of(moved, 3) is ground_of(found, 3)
    assert ground_of(replace(found, trial=replace(found.trial, duration=30.0)), 3) is not ground_of(found, 3)


def test_a_continuous_controller_runs_at_two_steps() -> None:
    """One half of the other."""
    ground = ground_of(sheet(1, continuous=True), 3)
    assert ground.steps[0] == 2.0 * ground.steps[1]
    assert len(ground_of(sheet(1), 3).speeds) == 1
