"""Why a sheet cannot be delivered: each reason in one sentence."""

from collections.abc import Iterable, Sequence

from tuner.deliver.summary import unmet
from tuner.errors import DeliveryError, nearest
from tuner.judge.assessment import Assessment
from tuner.model.controller import Controller
from tuner.model.sheet import Sheet
from tuner.simulate.feeding import Feeds

LONGEST_DELAY = 10_000
"""Samples of a measured disturbance that a delivered controller remembers at most."""


def refuse_languages(languages: Sequence[str], known: Iterable[str]) -> None:
    """Refuse a language that no target has, and none at all.

    Raises
    ------
    DeliveryError
        With the nearest valid name.
    """
    valid = sorted(known)
    if not languages:
        raise DeliveryError(f"expected at least one language of {', '.join(valid)}, found none")
    for language in languages:
        if language not in valid:
            near = nearest(language, valid)
            hint = f"; the nearest valid name is {near}" if near else ""
            raise DeliveryError(f"expected a language of {', '.join(valid)}, found {language!r}{hint}")


def refuse_controller(controller: Controller) -> None:
    """Refuse a controller that the delivered files could not run.

    Raises
    ------
    DeliveryError
        With the reason.
    """
    if controller.sample_time == 0.0:
        raise DeliveryError("controller.sample_time: a continuous controller has no samples: give a sample_time")


def refuse_feeds(feeds: Feeds) -> None:
    """Refuse a feedforward that would have to remember more than a target has room for.

    Raises
    ------
    DeliveryError
        With the reason.
    """
    if feeds.disturbance is not None and feeds.disturbance.delay > LONGEST_DELAY:
        raise DeliveryError(
            f"controller.disturbance_feedforward: its dead time is {feeds.disturbance.delay:,} samples long, which the "
            f"controller would have to remember: expected at most {LONGEST_DELAY:,}; give a longer sample_time"
        )


def refuse_verdict(sheet: Sheet, assessment: Assessment, *, accept_unmet: bool) -> None:
    """Refuse a controller that does not meet its acceptance sheet, unless that is accepted.

    Raises
    ------
    DeliveryError
        With the limits missed and the worst plants.
    """
    reasons = unmet(sheet, assessment)
    if reasons and not accept_unmet:
        raise DeliveryError(
            f"the acceptance sheet is not met: {'; '.join(reasons)}; accept that to deliver all the same"
        )
