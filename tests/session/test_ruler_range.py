"""What rulers span, and the mapping between places and values."""

import math

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from tests.session.sheets import wash_bath
from tuner.model.parameters import find, rulers
from tuner.session.ruler_range import (
    OFF_NOTCH,
    POSITIONS,
    RulerRange,
    notches,
    place,
    position,
    range_for,
    stepped,
    ticks,
    typical_value,
    value_at,
    values_along,
    widened,
)

KP, B, WINDUP = (find(f"controller.{name}") for name in ("kp", "b", "windup_time"))
GAIN = RulerRange(0.1, 100.0, has_off=True)
WEIGHT = RulerRange(0.0, 1.5, logarithmic=False)
SPANS = st.sampled_from([GAIN, WEIGHT, RulerRange(1e-6, 1e-3, has_off=True), RulerRange(1.0, 1000.0)])


@given(SPANS, st.integers(0, POSITIONS))
def test_positions_come_back(span: RulerRange, at: int) -> None:
    """The value at a position lies at that position; anywhere in the off notch is off, at its left end."""
    expected = 0 if at < span.start else at
    assert position(span, value_at(span, at)) == expected


@given(SPANS, st.floats(0.0, 1.0))
def test_values_come_back_within_one_position(span: RulerRange, share: float) -> None:
    """A value on the scale, sent to its position and back, moves by less than one position."""
    value = span.low * (span.high / span.low) ** share if span.logarithmic else span.high * share
    back = value_at(span, position(span, value))
    assert back is not None
    assert abs(place(span, back) - place(span, value)) <= 1.0


@given(SPANS, st.integers(0, POSITIONS), st.integers(0, POSITIONS))
def test_the_scale_rises(span: RulerRange, one: int, other: int) -> None:
    """Farther right is never less."""
    left, right = value_at(span, min(one, other)), value_at(span, max(one, other))
    assert left is not None
    assert right is not None
    assert left <= right


def test_the_ends_are_exact() -> None:
    """Off, the low and the high end are met exactly."""
    assert [value_at(GAIN, at) for at in (0, OFF_NOTCH - 1, OFF_NOTCH, POSITIONS)] == [0.0, 0.0, 0.1, 100.0]


def test_a_drag_gives_round_numbers() -> None:
    """Where one pixel is about a percent, a drag gives three digits, four where the scale is finest."""
    values = [value_at(GAIN, at, 12.0) for at in range(OFF_NOTCH + 1, POSITIONS, 12)]
    digits = [len(f"{value:.12g}".replace(".", "").strip("0")) for value in values]
    assert max(digits) <= 4
    assert sum(count <= 3 for count in digits) > 0.9 * len(digits)


def test_a_range_is_whole_decades_around_the_value() -> None:
    """A gain of 3 gets 0.1 to 100 with an off notch; the same decades hold for 1 and for 9.99."""
    assert range_for(KP, 3.0, 1.0) == GAIN
    assert range_for(KP, 1.0, 1.0) == range_for(KP, 9.99, 1.0) == GAIN


def test_an_absent_value_is_placed_by_a_typical_one() -> None:
    """A time that is absent gets its decades from a typical one, and its off notch means absent."""
    assert range_for(WINDUP, None, 15.0) == RulerRange(1.0, 1000.0, has_off=True, off=None)
    assert value_at(range_for(WINDUP, None, 15.0), 0) is None


def test_weights_are_linear() -> None:
    """Weights run from 0 to 1.5, or as far as a larger one needs."""
    assert range_for(B, 1.0, 1.0) == WEIGHT
    assert range_for(B, 2.3, 1.0).high == 2.5


@pytest.mark.parametrize(
    ("value", "low", "high"), [(5.0, 0.1, 100.0), (0.0, 0.1, 100.0), (0.02, 0.01, 100.0), (2e4, 0.1, 1e5)]
)
def test_typed_values_widen_by_decades(value: float, low: float, high: float) -> None:
    """A value outside widens the range to hold it, and nothing narrows."""
    assert widened(GAIN, value) == RulerRange(low, high, has_off=True)


@given(st.floats(1e-290, 1e290))
def test_any_positive_value_fits_its_range(value: float) -> None:
    """Every finite gain lies on its own ruler, and not at its end."""
    span = range_for(KP, value, 1.0)
    assert span.low <= value < span.high
    assert span.start <= position(span, value) <= POSITIONS


@pytest.mark.parametrize(("pace", "up", "down"), [("fine", 3.03, 2.97), ("coarse", 3.3, 2.727)])
def test_steps_are_percents(pace: str, up: float, down: float) -> None:
    """A fine step is 1 %, a coarse one 10 %."""
    assert stepped(GAIN, 3.0, pace, 1) == up  # type: ignore[arg-type] # the words of the type
    assert stepped(GAIN, 3.0, pace, -1) == pytest.approx(down, rel=1e-3)  # type: ignore[arg-type] # as above


def test_steps_end_at_the_ends() -> None:
    """Up from off is the low end, down from the low end is off, and the high end holds."""
    assert stepped(GAIN, 0.0, "fine", 1) == 0.1
    assert stepped(GAIN, 0.1, "fine", -1) == 0.0
    assert stepped(GAIN, 0.0, "fine", -1) == 0.0
    assert stepped(GAIN, 100.0, "coarse", 1) == 100.0
    assert stepped(WEIGHT, 1.0, "fine", 1) == 1.01
    assert stepped(WEIGHT, 0.05, "coarse", -1) == 0.0


def test_values_along_are_those_of_the_middles() -> None:
    """The values along a track rise, are 0 in the off notch, and lie at the middles of equal pieces."""
    values = values_along(GAIN, 64)
    outside = values == 0.0
    assert outside.sum() == np.sum((np.arange(64) + 0.5) * POSITIONS / 64 < OFF_NOTCH)
    assert np.all(np.diff(values[~outside]) > 0)
    assert place(GAIN, values[40]) == pytest.approx(40.5 * POSITIONS / 64)


@given(SPANS, st.integers(2, 200))
def test_notches_go_from_end_to_end(span: RulerRange, count: int) -> None:
    """The notches rise from the low end to the high one, with 0 before them for an off notch, evenly on the track."""
    values = notches(span, count)
    scale = values[1:] if span.has_off else values
    assert (values[0] == 0.0) == (span.has_off or span.low == 0.0)
    assert (scale[0], scale[-1], len(scale)) == (span.low, span.high, count)
    assert np.all(np.diff(values) > 0.0)
    gaps = np.diff([place(span, value) for value in scale])
    assert gaps == pytest.approx((POSITIONS - span.start) / (count - 1))
    assert notches(span, count) is values


def test_decades_are_marked() -> None:
    """The scale names its decades, with eight lines between two of them."""
    lines = ticks(GAIN)
    assert [tick.text for tick in lines if tick.main] == ["0.1", "1", "10", "100"]
    assert len(lines) == 3 * 9 + 1
    assert [tick.text for tick in ticks(WEIGHT) if tick.main] == ["0", "0.5", "1", "1.5"]
    assert [tick.text for tick in ticks(widened(WEIGHT, 40.0)) if tick.main] == [
        "0",
        "5",
        "10",
        "15",
        "20",
        "25",
        "30",
        "35",
        "40",
    ]


@pytest.mark.parametrize("form", ["parallel", "standard", "series"])
def test_every_ruler_has_a_typical_value(form: str) -> None:
    """Whatever is off has a positive finite value to place its ruler by."""
    typical = [typical_value(wash_bath(), parameter.name) for parameter in rulers(form)]
    assert all(math.isfinite(value) and value > 0 for value in typical)
