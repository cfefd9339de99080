"""The table of measures holds together."""

from tuner.model.measures import BY_NAME, MEASURES

LOWER_BOUNDS = {"gain_margin", "phase_margin", "delay_margin", "bandwidth", "damping"}


def test_the_measures_are_those_of_the_assessment() -> None:
    """Twenty measures, each under its own name, each with a sentence and a unit that can be filled in."""
    assert len(MEASURES) == len(BY_NAME) == 20
    assert all(measure.sentence.endswith(".") for measure in MEASURES)
    assert all("{" not in measure.unit.format(t="s", y="degC", u="%") for measure in MEASURES)


def test_limits_bound_from_the_right_side() -> None:
    """Margins, bandwidth and damping are bounded from below, all else from above; only an error counts by its size."""
    assert {measure.name for measure in MEASURES if measure.at_least} == LOWER_BOUNDS
    assert [measure.name for measure in MEASURES if measure.by_size] == ["steady_state_error"]
    assert [measure.name for measure in MEASURES if measure.none_is_good] == ["peak_time"]
