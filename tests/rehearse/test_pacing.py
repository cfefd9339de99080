"""The pace of a rehearsal: samples by the clock, and a slow computer that is told of and never skips."""

import pytest

from tuner.rehearse.pacing import FASTEST, SLOWEST, Pacer


def test_samples_come_by_the_clock() -> None:
    """Ten seconds in a hundred looks, half a second a sample, four times as fast: eighty samples."""
    pacer = Pacer(0.5, speed=4.0)
    assert sum(pacer.due(3.0 + 0.1 * look) for look in range(101)) == 80


def test_fractions_are_not_lost() -> None:
    """A sample of seven seconds comes every seventh look a second apart."""
    pacer = Pacer(7.0)
    found = [pacer.due(float(look)) for look in range(29)]
    assert sum(found) == 4
    assert set(found) == {0, 1}


def test_a_pause_lets_no_time_pass() -> None:
    """What went by on the wall meanwhile is not made up for."""
    pacer = Pacer(0.1)
    pacer.due(0.0)
    pacer.pause()
    assert pacer.due(1000.0) == 0
    assert pacer.due(1000.5) in (4, 5)


def test_a_slow_computer_slows_the_run_and_says_so() -> None:
    """Samples that take a millisecond each, a thousand times too slow: the speed reached is told, nothing piles up."""
    pacer, now, ran, begun = Pacer(0.001, speed=100.0), 0.0, 0, 0.0
    for look in range(300):
        if look == 100:
            ran, begun = 0, now
        samples = pacer.due(now)
        ran += samples
        now += max(0.001 * samples, 0.03)
        pacer.took(samples, 0.001 * samples, now)
    assert pacer.behind
    assert pacer.achieved == pytest.approx(ran * 0.001 / (now - begun), rel=0.1)
    assert pacer.achieved < 1.0
    pacer.due(now)
    assert pacer.due(now + 0.03) * 0.001 < 0.03


def test_a_fast_one_reaches_what_is_asked() -> None:
    """With next to no cost the speed is that which was asked for."""
    pacer = Pacer(0.01, speed=10.0)
    for look in range(400):
        now = 0.02 * look
        pacer.took(pacer.due(now), 1e-6, now)
    assert not pacer.behind
    assert pacer.achieved == pytest.approx(10.0, rel=0.05)


@pytest.mark.parametrize("sample", [0.3, 1.0, 47.0])
def test_samples_far_apart_are_no_sign_of_a_slow_computer(sample: float) -> None:
    """Where hardly any sample is due in the time over which the speed is told, its parts count."""
    pacer = Pacer(sample, speed=1.0)
    behind = []
    for look in range(600):
        now = 0.033 * look
        pacer.took(pacer.due(now), 1e-6, now)
        behind.append(pacer.behind)
    assert not any(behind)
    assert pacer.achieved == pytest.approx(1.0, rel=0.05)


@pytest.mark.parametrize(("asked", "got"), [(0.0, SLOWEST), (1e6, FASTEST), (3.0, 3.0)])
def test_the_speed_has_bounds(asked: float, got: float) -> None:
    """A tenth to a hundred times real time."""
    pacer = Pacer(1.0)
    pacer.speed = asked
    assert pacer.speed == got
