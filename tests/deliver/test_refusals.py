"""Reasons not to deliver; their sentences are tested word for word where a delivery raises them."""

from dataclasses import replace

import pytest

from tests.deliver.samples import BARE, DYNAMIC, FULL, OPEN, assessment
from tuner.deliver.refusals import refuse_controller, refuse_feeds, refuse_languages, refuse_verdict
from tuner.errors import DeliveryError
from tuner.judge.assessment import LimitResult
from tuner.model.controller import Controller
from tuner.simulate.feeding import Digital, Feeds

MISSED = LimitResult("overshoot", 8.0, 9.0, "nominal", met=False)


@pytest.mark.parametrize("controller", [FULL.controller, BARE.controller, OPEN.controller, DYNAMIC.controller])
def test_what_the_law_holds_is_accepted(controller: Controller) -> None:
    """Feedforward of every kind, filters, notch, and a loop without feedback."""
    refuse_controller(controller)


def test_a_continuous_controller_is_refused() -> None:
    """It has no samples."""
    with pytest.raises(DeliveryError, match="a continuous controller has no samples: give a sample_time"):
        refuse_controller(replace(BARE.controller, sample_time=0.0))


def test_a_disturbance_that_comes_too_late_is_refused() -> None:
    """A target has room for so many past values and no more."""
    refuse_feeds(Feeds(disturbance=Digital(1.0, delay=10_000)))
    with pytest.raises(DeliveryError) as caught:
        refuse_feeds(Feeds(disturbance=Digital(1.0, delay=12_345)))
    assert str(caught.value) == (
        "controller.disturbance_feedforward: its dead time is 12,345 samples long, which the controller would have to "
        "remember: expected at most 10,000; give a longer sample_time"
    )


def test_verdict_counts_unless_it_is_accepted() -> None:
    """Met passes; missed passes when somebody says so."""
    refuse_verdict(BARE, assessment(), accept_unmet=False)
    refuse_verdict(BARE, assessment("missed", MISSED), accept_unmet=True)
    with pytest.raises(DeliveryError, match="overshoot 9 %, at most 8 % asked, not met; worst plant: nominal"):
        refuse_verdict(BARE, assessment("missed", MISSED), accept_unmet=False)


def test_known_languages_are_accepted() -> None:
    """One or all of them."""
    refuse_languages(["c"], ["c", "json"])
    with pytest.raises(DeliveryError, match=r"found 'cobol'$"):
        refuse_languages(["c", "cobol"], ["c", "json"])
