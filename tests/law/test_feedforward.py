"""Static feedforward."""

from tuner.law.feedforward import static


def test_effort_is_the_gain_times_the_distance_from_rest() -> None:
    """The effort is a deviation: zero at the resting point, and proportional to the distance from it."""
    assert static(72.0, 72.0, 0.4) == 0.0
    assert static(77.0, 72.0, 0.4) == 2.0
