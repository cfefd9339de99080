"""What must agree between the keys of a sheet, each disagreement in its sentence."""

from typing import Any

import pytest

from tests.files.told import bare, edited, sentences
from tuner.files.checks import MOST_SAMPLES, check_all, table

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


def said(sheet: dict[str, Any]) -> list[str]:
    """Return the faults of tables that the schema has passed."""
    return [str(fault) for fault in check_all(sheet, sheet)]


def test_a_table_is_found_by_its_path() -> None:
    """A path that leads nowhere, or to a value, is an empty table."""
    sheet = {"controller": {"notch": {"depth": 1}, "kp": 3}}
    assert table(sheet, "controller.notch") == {"depth": 1}
    assert table(sheet, "controller.kp") == table(sheet, "controller.kp.more") == table(sheet, "trial") == {}


def test_nothing_agrees_with_nothing() -> None:
    """Tables without any key contradict nothing."""
    assert said({}) == []


@pytest.mark.parametrize(
    ("found", "reading"),
    [
        (
            {"low": 1, "high": 1, "resting": 1},
            "low: expected a number below loop.controlled.high, 1, found 1",
        ),
        (
            {"low": 1},
            "resting: expected a number of at least loop.controlled.low, 1, found nothing, which means 0",
        ),
        (
            {"high": -1},
            "resting: expected a number of at most loop.controlled.high, -1, found nothing, which means 0",
        ),
        (
            {"high": 150.0000001, "resting": 150.0000002},
            "resting: expected a number of at most loop.controlled.high, 150.0000001, found 150.0000002",
        ),
    ],
)
def test_a_signal_rests_within_its_range(found: dict[str, float], reading: str) -> None:
    """Ends that are no range, and a resting value beyond an end, are told with digits that tell them apart."""
    assert said({"loop": {"controlled": found}}) == [f"loop.controlled.{reading}"]


@pytest.mark.parametrize("found", [{"low": 0, "high": 1}, {"low": 1, "resting": 1}, {"high": 2, "resting": 2}, {}])
def test_the_ends_belong_to_the_range(found: dict[str, float]) -> None:
    """A signal may rest at an end of its range, and may have one end or none."""
    assert said({"loop": {"manipulated": found}}) == []


def test_gains_are_not_judged_by_a_form_that_is_wrong() -> None:
    """While the form itself is refused, nothing is said of the gains."""
    written = {"controller": {"form": "paralel", "kc": 1}}
    assert check_all(written, {"controller": {"kc": 1}}) == []


def notched(as_found: object, frequency: float = 5.0, sample_time: float = 0.5) -> list[str]:
    """Return what is said of a sampled controller with a notch and another as found."""
    notch = {"frequency": frequency}
    return said({"controller": {"sample_time": sample_time, "notch": notch, "as_found": as_found}})


def test_the_notch_that_as_found_takes_over_is_below_its_own_nyquist() -> None:
    """A slower controller as found cannot have the notch of the present one; it says so or has its own."""
    assert notched({"sample_time": 2}) == [
        "controller.as_found.notch.frequency: expected a frequency below pi / sample_time, 1.571, "
        'or notch = "none", found the controller\'s, 5'
    ]
    assert notched({"sample_time": 2, "notch": "none"}) == []
    assert notched({"sample_time": 2, "notch": {"frequency": 1}}) == []
    assert notched({"sample_time": 0}) == []
    assert notched({"notch": {"frequency": 7}}) == [
        "controller.as_found.notch.frequency: expected a frequency below pi / sample_time, 6.283, found 7"
    ]


def test_a_notch_that_is_wrong_is_told_once() -> None:
    """What as found only takes over is told where it stands."""
    assert len(notched({"kp": 1}, frequency=7.0)) == 1


def test_the_most_samples_are_allowed() -> None:
    """A trial of exactly the limit, and one that is a single sample long, are let be."""
    longest = {"controller": {"sample_time": 0.5}, "trial": {"duration": 0.5 * MOST_SAMPLES}}
    assert said(longest) == []
    assert said({"controller": {"sample_time": 3}, "trial": {"duration": 3}}) == []


def test_each_sampled_controller_is_counted() -> None:
    """The controller as found is held to the same number of samples."""
    found = {"controller": {"sample_time": 1, "as_found": {"sample_time": 1e-6}}, "trial": {"duration": 10}}
    assert said(found) == [
        "trial.duration: expected at most 5,000,000 samples of controller.as_found.sample_time, 1e-06, found 10,000,000"
    ]


def test_feedforward_as_found_is_checked_too() -> None:
    """Each kind of feedforward has its own number, also in the controller as found."""
    found = {"kind": "static", "gain": 1, "filter_time": 2}
    assert said({"controller": {"as_found": {"feedforward": found}}}) == [
        'controller.as_found.feedforward.filter_time: expected gain alone beside kind = "static", found filter_time'
    ]
