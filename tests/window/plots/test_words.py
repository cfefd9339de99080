"""What stands beside a plot about its limits."""

from dataclasses import replace

import pytest

from tests.window.plots.answers import answer
from tuner.judge.overlay import Plot
from tuner.window.plots.words import missed_words

REFERENCE: tuple[Plot, ...] = ("reference",)


def test_missed_limits_are_said() -> None:
    """Each missed limit of these plots is said by the overlay's own sentence, those of other plots not."""
    shown = answer(2.2)
    said, bad = missed_words(shown, REFERENCE)
    own = [callout.sentence for callout in shown.overlay.callouts if callout.plot == "reference"]
    other = [callout.sentence for callout in shown.overlay.callouts if callout.plot == "poles"]
    assert bad
    assert own
    assert other
    assert said == "; ".join(own)
    assert not any(sentence in said for sentence in other)


def test_two_plots_say_both() -> None:
    """A picture that shows two kinds of limits says the missed ones of both."""
    shown = answer(2.2)
    said, _ = missed_words(shown, ("poles", "frequency"))
    wanted = [one.sentence for one in shown.overlay.callouts if one.plot in ("poles", "frequency")]
    assert len(wanted) == 2
    assert said == "; ".join(wanted)


@pytest.mark.parametrize(
    ("limits", "plot", "words"),
    [
        ((), "reference", "nothing here is on the acceptance sheet"),
        ((("overshoot", 99.0),), "poles", "nothing here is on the acceptance sheet"),
        ((("overshoot", 99.0),), "reference", "the limit here is met"),
        ((("overshoot", 99.0), ("settling_time", 1e4)), "reference", "both limits here are met"),
        (
            (("overshoot", 99.0), ("settling_time", 1e4), ("damping", 0.01)),
            "reference",
            "both limits here are met",
        ),
    ],
)
def test_met_limits_are_counted(limits: tuple[tuple[str, float], ...], plot: Plot, words: str) -> None:
    """With nothing missed it says how many limits of the plot are met, or that it has none."""
    assert missed_words(answer(1.0, limits=limits), (plot,)) == (words, False)


def test_many_met_limits_are_said_as_a_number() -> None:
    """Three and more are all of so many."""
    shown = answer(1.0, limits=(("overshoot", 99.0),))
    (limit,) = shown.assessment.limits
    many = tuple(replace(limit, measure=name) for name in ("overshoot", "settling_time", "rise_time"))
    shown = replace(shown, assessment=replace(shown.assessment, limits=many))
    assert missed_words(shown, REFERENCE) == ("all 3 limits here are met", False)
