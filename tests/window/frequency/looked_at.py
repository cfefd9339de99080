"""Answers with curves over frequency, for the tests of the page."""

from functools import cache

from tuner.assess import assess, glance
from tuner.files.sheet import read
from tuner.judge.overlay import overlay
from tuner.model.sheet import Sheet
from tuner.places import sample_plants
from tuner.window.shown import Request, Shown
from tuner.window.worker import Assessing


def heater() -> Sheet:
    """Return a sample with dead time, sampled, with limits on margins."""
    return read(sample_plants() / "heater.toml")


@cache
def answer(*, whole: bool = True) -> Shown:
    """Return the answer on it, with its curves over frequency."""
    assessing = Assessing(assess, glance, overlay)
    request = Request(1, heater(), frequency=True)
    return assessing.whole(request) if whole else assessing.nominal(request)
