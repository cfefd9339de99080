"""Reasons not to deliver; their sentences are tested word for word where a delivery raises them."""

from dataclasses import replace

import pytest

from tests.deliver.samples import BARE, FULL, INVERSE, MEASURED, OPEN, assessment
from tuner.deliver.refusals import refuse_controller, refuse_languages, refuse_verdict
from tuner.errors import DeliveryError
from tuner.judge.assessment import LimitResult
from tuner.model.controller import Controller

MISSED = LimitResult("overshoot", 8.0, 9.0, "nominal", met=False)


@pytest.mark.parametrize("controller", [FULL.controller, BARE.controller, OPEN.controller])
def test_what_the_law_holds_is_accepted(controller: Controller) -> None:
    """Static feedforward, filters, notch, and a loop without feedback."""
    refuse_controller(controller)


@pytest.mark.parametrize(
    "controller",
    [
        replace(BARE.controller, sample_time=0.0),
        replace(BARE.controller, feedforward=INVERSE),
        replace(BARE.controller, disturbance_feedforward=MEASURED),
    ],
)
def test_what_the_law_does_not_hold_is_refused(controller: Controller) -> None:
    """No samples, or a filter of the plant beside the law."""
    with pytest.raises(DeliveryError):
        refuse_controller(controller)


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
