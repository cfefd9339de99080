"""Contours run at round values and at the limit, and nowhere where nothing is known."""

import numpy as np
import pytest

from tuner.window.gain_map.contours import contours, levels

X, Y = np.linspace(0.0, 1.0, 41), np.linspace(0.0, 1.0, 31)


def test_a_line_runs_where_the_value_is() -> None:
    """On x + y every point of a line has its value."""
    worst = X[np.newaxis, :] + Y[:, np.newaxis]
    found = contours(worst, X, Y, None)
    assert {contour.level for contour in found} <= set(levels(worst))
    assert len(found) >= 5
    for contour in found:
        for line in contour.lines:
            assert line.sum(axis=1) == pytest.approx(np.full(len(line), contour.level))


def test_the_limit_has_its_own_line() -> None:
    """It comes last, and no round value next to it."""
    worst = 100.0 * (X[np.newaxis, :] + Y[:, np.newaxis])
    found = contours(worst, X, Y, 101.0)
    assert [contour.is_limit for contour in found] == [False] * (len(found) - 1) + [True]
    assert 100.0 not in [contour.level for contour in found]


def test_nothing_runs_where_nothing_is_known() -> None:
    """No point of any line lies in the part that has no values."""
    worst = X[np.newaxis, :] + Y[:, np.newaxis]
    worst[:, X > 0.5] = np.nan
    assert all(np.all(line[:, 0] <= 0.5) for contour in contours(worst, X, Y, 0.7) for line in contour.lines)
    assert contours(np.full((31, 41), np.nan), X, Y, 1.0) == ()


@pytest.mark.parametrize(
    ("low", "high", "expected"),
    [
        (20.0, 70.0, (25.0, 30.0, 35.0, 40.0, 45.0, 50.0, 55.0, 60.0, 65.0)),
        (1.0, 1000.0, (2.0, 5.0, 10.0, 20.0, 50.0, 100.0, 200.0, 500.0)),
    ],
)
def test_levels_are_round(low: float, high: float, expected: tuple[float, ...]) -> None:
    """By equal steps, or by factors where values are of different orders."""
    values = np.geomspace(low, high, 500) if high > 20.0 * low else np.linspace(low, high, 500)
    assert levels(values) == expected


def test_a_plain_has_no_lines() -> None:
    """Where the measure is one value everywhere, or mostly its least, no line runs around it."""
    assert levels(np.zeros((5, 5))) == ()
    assert 0.0 not in levels(np.maximum(np.linspace(-50.0, 50.0, 100), 0.0))


def test_places_closer_together_have_no_more_weight() -> None:
    """With many more columns at one end the levels are those of the plain grid, so none comes or goes."""
    closer = np.union1d(X, np.linspace(0.9, 1.0, 201))
    plain, dense = (100.0 * x[np.newaxis, :] + Y[:, np.newaxis] for x in (X, closer))
    expected = [contour.level for contour in contours(plain, X, Y, None)]
    assert [contour.level for contour in contours(dense, closer, Y, None)] == expected
    assert levels(dense) != levels(plain)
