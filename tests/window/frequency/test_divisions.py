"""Axes over frequency are divided in decades, decibels and degrees."""

import pytest

from tuner.window.frequency.divisions import DECIBELS, DEGREES, decades, multiples


@pytest.mark.parametrize(
    ("low", "high", "count", "said"),
    [
        (-2.0, 0.0, 12, ["0.01", "0.02", "0.05", "0.1", "0.2", "0.5", "1"]),
        (-2.0, 0.0, 4, ["0.01", "0.1", "1"]),
        (-4.0, 4.0, 4, ["0.0001", "0.01", "1", "100", "10000"]),
    ],
)
def test_decades_are_divided_as_finely_as_there_is_room(low: float, high: float, count: int, said: list[str]) -> None:
    """Twos and fives where they fit, else decades, else every other one."""
    assert [tick.text for tick in decades(low, high, count)] == said


@pytest.mark.parametrize(
    ("low", "high", "count", "steps", "said"),
    [
        (-45.0, 45.0, 5, DECIBELS, ["\u221240", "\u221220", "0", "20", "40"]),
        (-45.0, 45.0, 2, DECIBELS, ["0"]),
        (-400.0, 20.0, 5, DEGREES, ["\u2212360", "\u2212270", "\u2212180", "\u221290", "0"]),
        (-1e6, 0.0, 4, DEGREES, None),
    ],
)
def test_steps_are_of_those_that_the_trade_uses(
    low: float, high: float, count: int, steps: tuple[float, ...], said: list[str] | None
) -> None:
    """Quarter turns rather than hundreds of degrees; the coarsest step where none is coarse enough."""
    found = multiples(low, high, count, steps)
    assert said is None or [tick.text for tick in found] == said
    assert all(tick.at % 5.0 == 0.0 for tick in found)
