"""What must agree between the keys of a sheet, each disagreement in its sentence."""

import pytest

from tests.files.told import bare, edited, sentences

CASES = [
    (
        "kp = 3.0",
        "kc = 3.0",
        "controller.kc: expected the gains of the parallel form: kp, ki, kd, "
        "found a gain of the standard and series forms",
    ),
    (
        "[controller.as_found] ",
        '[controller.as_found]\nform = "series"\nki = 2',
        "controller.as_found.ki: expected the gains of the series form: kc, ti, td, found a gain of the parallel form",
    ),
    (
        "high = 150",
        "high = -1",
        "loop.controlled.low: expected a number below loop.controlled.high, -1, found 0",
    ),
    (
        "resting = 72",
        "resting = 151",
        "loop.controlled.resting: expected a number of at most loop.controlled.high, 150, found 151",
    ),
    (
        "low = 0, high = 100, resting = 40",
        "low = 10, high = 100",
        "loop.manipulated.resting: expected a number of at least loop.manipulated.low, 10, "
        "found nothing, which means 0",
    ),
    (
        "sample_time = 0.5",
        "sample_time = 300",
        "controller.sample_time: expected at most trial.duration, 240, found 300",
    ),
    (
        "sample_time = 0.5",
        "sample_time = 1e-5",
        "trial.duration: expected at most 5,000,000 samples of controller.sample_time, 1e-05, found 24,000,000",
    ),
    (
        "[controller.notch] ",
        "[controller.notch]\nfrequency = 7",
        "controller.notch.frequency: expected a frequency below pi / sample_time, 6.283, found 7",
    ),
    (
        "[controller.feedforward] ",
        '[controller.feedforward]\nkind = "static"',
        'controller.feedforward.gain: expected a number, for kind = "static", found nothing',
    ),
    (
        "[controller.feedforward] ",
        '[controller.feedforward]\nkind = "inverse"\nfilter_time = 1\ngain = 1',
        'controller.feedforward.gain: expected filter_time alone beside kind = "inverse", found gain',
    ),
]


@pytest.mark.parametrize(("old", "new", "said"), CASES)
def test_keys_that_do_not_agree_are_told(old: str, new: str, said: str) -> None:
    """Two keys that contradict each other give one sentence, at the one to change."""
    assert sentences(edited((old, new))) == [said]


def test_physical_models_count_in_seconds() -> None:
    """A physical model in SI units asks for the second as time unit."""
    text = bare('physics = "dc motor speed"').replace("[plant]", 'time_unit = "h"\n[plant]')
    assert sentences(text) == ["loop.time_unit: expected \"s\", the time unit of physical models, found the text 'h'"]
