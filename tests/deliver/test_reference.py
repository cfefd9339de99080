"""The controller that deliveries are held against."""

from math import nan

import pytest

from tests.deliver.samples import BARE, FULL, OPEN, specification
from tuner.deliver.reference import Before, Flags, Reference, Sample
from tuner.model.sheet import Sheet


def steps(controller: Reference, count: int, reference: float = 75.0, measurement: float = 73.0) -> list[float]:
    """Take some samples and return the efforts."""
    return [controller.take(Sample(Before.NOTHING, 0.0, reference, measurement)).effort for _ in range(count)]


def test_rest_is_the_resting_point_in_automatic() -> None:
    """New and after a reset, the effort at rest is the resting effort, without a flag."""
    controller = specification(FULL).reference()
    at_rest = Sample(Before.NOTHING, 0.0, 72.0, 72.0)
    assert controller.take(at_rest) == (40.0, 0)
    steps(controller, 10)
    assert controller.take(at_rest._replace(before=Before.RESET)) == (40.0, 0)


@pytest.mark.parametrize("sheet", [FULL, BARE])
def test_going_to_automatic_keeps_the_effort(sheet: Sheet) -> None:
    """The first automatic sample after set_auto changes nothing, to 1e-12."""
    controller = specification(sheet).reference()
    controller.set_manual(41.0)
    by_hand = steps(controller, 30)[-1]
    controller.set_auto()
    assert steps(controller, 1)[0] == pytest.approx(by_hand, abs=1e-12)


def test_set_auto_in_automatic_does_nothing() -> None:
    """Thrown twice, the switch does not disturb a running controller."""
    one, other = specification(FULL).reference(), specification(FULL).reference()
    steps(one, 5)
    steps(other, 5)
    one.set_auto()
    assert steps(one, 5) == steps(other, 5)


def test_without_feedback_the_effort_is_the_feedforward_alone() -> None:
    """Automatic means feedforward, also after manual, as fast as the rate allows."""
    controller = specification(OPEN).reference()
    controller.set_manual(60.0)
    steps(controller, 30)
    controller.set_auto()
    assert steps(controller, 30)[-1] == 40.0 + 0.4 * 3.0


def test_a_manual_effort_that_is_no_number_holds_until_there_is_one() -> None:
    """The effort stays, the fault is raised, and going to automatic clears it."""
    controller = specification(FULL).reference()
    before = steps(controller, 5)[-1]
    assert controller.take(Sample(Before.MANUAL, nan, 75.0, 73.0)) == (before, Flags.FAULT | Flags.MANUAL)
    assert controller.take(Sample(Before.AUTO, 0.0, 75.0, 73.0)) == (before, 0)
