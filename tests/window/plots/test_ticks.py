"""Axes are divided at round numbers, in the engineering units that a person reads."""

import pytest

from tuner.window.plots.ticks import decimals, nice_step, ticks, written


@pytest.mark.parametrize(
    ("span", "count", "step"), [(10.0, 5, 2.0), (1.0, 4, 0.25), (7.0, 7, 1.0), (0.03, 3, 0.01), (90.0, 2, 50.0)]
)
def test_steps_are_round(span: float, count: int, step: float) -> None:
    """A step is 1, 2, 2.5 or 5 times a power of ten, the smallest with no more pieces than there is room for."""
    assert nice_step(span, count) == pytest.approx(step)


@pytest.mark.parametrize(("span", "step"), [(240.0, 60.0), (100.0, 30.0), (3600.0, 1200.0), (2.0, 0.5)])
def test_steps_of_time_are_clock_steps(span: float, step: float) -> None:
    """On an axis of time, four pieces of four minutes are minutes; below five units it is divided like any axis."""
    assert nice_step(span, 4, time=True) == pytest.approx(step)


@pytest.mark.parametrize("span", [0.0, -1.0, float("nan"), float("inf")])
def test_a_span_that_is_none_has_a_step_all_the_same(span: float) -> None:
    """Nothing to divide is divided by ones, not by zero."""
    assert nice_step(span, 4) == 1.0


def test_numbers_include_the_resting_point() -> None:
    """Ticks stand where the written number is round: deviations -2 to 3 around 72 are written 70 to 75."""
    made = ticks(-2.0, 3.0, 5, offset=72.0)
    assert [tick.text for tick in made] == ["70", "71", "72", "73", "74", "75"]
    assert [tick.at for tick in made] == pytest.approx([-2.0, -1.0, 0.0, 1.0, 2.0, 3.0])


def test_ends_count_in_spite_of_rounding() -> None:
    """An end that is a multiple of the step up to rounding gets its tick."""
    assert [tick.text for tick in ticks(0.0, 0.1 + 0.2, 3)] == ["0", "0.1", "0.2", "0.3"]


@pytest.mark.parametrize(
    ("value", "step", "text"),
    [(0.0, 0.5, "0"), (-2.0, 1.0, "\u22122"), (0.25, 0.25, "0.25"), (2e7, 1e7, "2e+07"), (2e-5, 1e-5, "2e\u221205")],
)
def test_numbers_are_written_as_short_as_their_neighbours_allow(value: float, step: float, text: str) -> None:
    """Decimals follow the step, the minus is a true one, far sizes get an exponent."""
    assert written(value, step) == text


def test_decimals_of_a_step() -> None:
    """A step has as many decimals as it takes to write it, at most six."""
    assert [decimals(step) for step in (10.0, 0.5, 0.25, 1e-9)] == [0, 1, 2, 6]
