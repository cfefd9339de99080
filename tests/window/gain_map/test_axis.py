"""An axis maps values to shares of its length and back, off included, and has more places close to a value."""

import numpy as np
import pytest

from tuner.session.ruler_range import RulerRange
from tuner.window.gain_map.axis import Axis

LOG = Axis("kp", RulerRange(0.1, 100.0, has_off=True), "%/degC")
LINEAR = Axis("b", RulerRange(0.0, 1.5, logarithmic=False))


@pytest.mark.parametrize("axis", [LOG, LINEAR])
@pytest.mark.parametrize("share", [0.1, 0.35, 0.6, 0.99])
def test_a_share_leads_to_a_value_and_back(axis: Axis, share: float) -> None:
    """Within half a pixel."""
    value = axis.value(share, 500)
    assert axis.share(value) == pytest.approx(share, abs=0.5 / 500)


def test_off_is_at_the_left_end() -> None:
    """What is left of the scale is off."""
    assert LOG.value(0.02, 500) == 0.0
    assert LOG.share(0.0) == 0.0
    assert LOG.share(0.1) == LOG.start == 0.05


def test_a_track_has_places_close_to_a_value() -> None:
    """Their factor is a tenth of the steps', and all values rise."""
    far, near = LOG.track(17).values, LOG.track(17, 2.0).values
    assert len(far) == 18
    assert np.all(np.diff(near) > 0.0)
    around = near[(near > 1.8) & (near < 2.2)]
    assert np.max(around[1:] / around[:-1]) < 1.05
    assert set(far) <= set(near)


@pytest.mark.parametrize(("value", "close"), [(2.0, True), (2.2, True), (3.0, False), (0.0, False)])
def test_what_is_close(value: float, close: bool) -> None:
    """Well within the places close around a value; off is close to off alone."""
    assert LOG.is_close(value, 2.0) is close
    assert LOG.is_close(0.0, 0.0)


def test_pixels_lie_among_the_values() -> None:
    """A pixel over a value has its index, one between two a fraction, one over off has 0."""
    values = LOG.track(4).values
    indices = LOG.indices(2000, values)
    assert indices[0] == 0.0
    assert indices[99] == 0.0
    assert indices[100] == pytest.approx(1.0, abs=0.01)
    assert indices[-1] == pytest.approx(4.0, abs=0.01)
    assert indices[round(2000 * LOG.share(1.0))] == pytest.approx(2.0, abs=0.01)


def test_words_have_units() -> None:
    """Name, value and unit; an absent value is off."""
    assert LOG.in_words(4.2) == "kp 4.2 %/degC"
    assert LOG.in_words(None) == "kp off"
    assert LINEAR.title == "b"
