"""Rulers of a block's numbers: each value is what the assessment says of it, and the edges lie where it changes."""

from dataclasses import replace

import numpy as np
import pytest

from tests.footing.random_loops import sheet
from tuner.assess import assess
from tuner.footing.blocks import grade_at, paint_block
from tuner.footing.classes import FIRM, LOST, SOFT, UNKNOWN, Overtaken, Track, never, tuned
from tuner.footing.ground import ground_of
from tuner.footing.rulers import paint_rulers
from tuner.model.controller import Feedforward, LeadLag, Notch, ReferenceFilter
from tuner.model.sheet import Sheet

GRADES = {"met": FIRM, "missed": SOFT, "unstable": LOST}
SIZE = 5


def made(seed: int = 3) -> Sheet:
    """Return a loop with every block."""
    found = sheet(seed)
    law = replace(
        found.controller,
        measurement_filter=0.3,
        lead_lag=LeadLag(0.4, 0.2),
        notch=Notch(4.0, 0.3, 0.8),
        reference_filter=ReferenceFilter(0.5),
        feedforward=Feedforward("static", gain=0.2),
    )
    return replace(found, controller=law)


@pytest.mark.parametrize("seed", [3, 5, 8])
@pytest.mark.parametrize(
    "name",
    [
        "measurement_filter.time",
        "lead_lag.lead",
        "notch.frequency",
        "notch.depth",
        "reference_filter.time",
        "feedforward.gain",
    ],
)
def test_a_value_is_what_the_assessment_says(name: str, seed: int) -> None:
    """Met is firm, missed soft, unstable lost."""
    found = made(seed)
    ground = ground_of(found, SIZE)
    for value in (0.05, 0.4, 0.9):
        changed = replace(found, controller=tuned(found.controller, name, value))
        assert grade_at(found, ground, name, value) == GRADES[assess(changed, SIZE).verdict]


def test_what_is_refused_is_unknown() -> None:
    """A notch above half the sampling frequency has no class."""
    found = made()
    assert grade_at(found, ground_of(found, SIZE), "notch.frequency", 1e4) == UNKNOWN


def test_a_slow_filter_loses_the_loop() -> None:
    """Along the time of the measurement filter the loop becomes unstable once, and the edge parts both classes."""
    found = made()
    track = Track("measurement_filter.time", np.geomspace(0.01, 1000.0, 31))
    (painted,) = paint_rulers(found, [track], SIZE)
    assert painted.classes[-1] == LOST
    lost = [edge for edge in painted.edges if LOST in (edge.below, edge.above)]
    ground = ground_of(found, SIZE)
    for edge in lost:
        below, above = (grade_at(found, ground, track.name, edge.value * factor) for factor in (0.99, 1.01))
        assert (below, above) == (edge.below, edge.above)
    assert lost


def test_gains_and_blocks_come_back_in_the_order_asked() -> None:
    """Each track under its name, whichever road it took."""
    found = made()
    values = np.geomspace(0.1, 1.0, 4)
    names = ["notch.depth", "kp" if found.controller.form == "parallel" else "kc", "lead_lag.lag"]
    painted = paint_rulers(found, [Track(name, values) for name in names], SIZE, fine=False)
    assert [track.name for track in painted] == names
    assert all(len(track.classes) == 4 for track in painted)


def test_it_is_given_up_when_a_newer_question_comes() -> None:
    """As the rulers of gains are."""
    found = made()
    with pytest.raises(Overtaken):
        paint_block(
            found, ground_of(found, SIZE), Track("notch.depth", np.linspace(0.1, 1.0, 5)), lambda: True, fine=True
        )
    paint_block(found, ground_of(found, SIZE), Track("notch.depth", np.linspace(0.1, 1.0, 5)), never, fine=False)


def test_without_limits_a_stable_loop_is_firm() -> None:
    """There is nothing to miss."""
    found = replace(made(), limits=())
    assert grade_at(found, ground_of(found, SIZE), "notch.depth", 0.5) == FIRM
