"""The long run that files must repeat."""

from collections import Counter
from math import isfinite, isnan

from tests.deliver.samples import BARE, FULL, recording, specification
from tuner.deliver.excitation import PlantStep, excite
from tuner.deliver.reference import Before, Flags


def test_run_is_kicked_in_every_way() -> None:
    """References step, the hand comes and goes, limits are touched, readings fail, and every answer is finite."""
    run = recording(FULL, 10_000)
    kinds = Counter(sample.before for sample in run.samples)
    flags = Counter(flag for outcome in run.outcomes for flag in Flags if outcome.flags & flag)
    assert len({sample.reference for sample in run.samples}) == 25
    assert kinds[Before.MANUAL] == 15
    assert kinds[Before.AUTO] == 10
    assert sum(isnan(sample.measurement) for sample in run.samples) == flags[Flags.FAULT] == 2
    assert 100 < flags[Flags.LIMITED] < 9_000
    assert flags[Flags.MANUAL] == 1_000
    assert all(isfinite(outcome.effort) for outcome in run.outcomes)


def test_same_sheet_gives_the_same_run() -> None:
    """The proof can be repeated."""
    assert recording.__wrapped__(BARE, 500).inputs() == recording.__wrapped__(BARE, 500).inputs()


def test_a_loop_that_runs_away_starts_over() -> None:
    """An unstable plant does not fill the run with limits: the controller is reset beside a new plant."""

    def make() -> PlantStep:
        grown = [1.0]

        def push(effort: float) -> float:
            grown[0] = 3.0 * grown[0] + 0.0 * effort
            return grown[0]

        return push

    run = excite(specification(BARE), make, 400)
    resets = [sample for sample in run.samples if sample.before == Before.RESET]
    assert len(resets) > 20
    assert all(abs(sample.measurement) < 2e4 for sample in run.samples)
