"""The table of tunings: by how much one is better than another."""

from math import inf

import pytest

from tuner.compare.tuning_table import Cell, badness, change, standing
from tuner.model.measures import BY_NAME


@pytest.mark.parametrize(
    ("measure", "value", "base", "share"),
    [
        ("overshoot", 6.0, 8.0, 0.25),
        ("gain_margin", 6.0, 8.0, -0.25),
        ("gain_margin", inf, 8.0, None),
        ("overshoot", None, 8.0, None),
        ("overshoot", 6.0, 0.0, None),
    ],
)
def test_by_how_much_it_is_better(measure: str, value: float | None, base: float, share: float | None) -> None:
    """In parts of the other value, above 0 for better."""
    assert change(BY_NAME[measure], Cell(value), Cell(base)) == share


@pytest.mark.parametrize(
    ("measure", "cell", "base", "stands"),
    [
        ("overshoot", Cell(6.0), Cell(8.0), 1),
        ("gain_margin", Cell(6.0), Cell(8.0), -1),
        ("settling_time", Cell(6.0), Cell(None), 1),
        ("peak_time", Cell(6.0), Cell(None, none=True), -1),
        ("settling_time", Cell(None), Cell(None), 0),
        ("overshoot", Cell(6.0), Cell(6.01), 0),
        ("gain_margin", Cell(inf), Cell(6.0), 1),
    ],
)
def test_which_is_better(measure: str, cell: Cell, base: Cell, stands: int) -> None:
    """A value is better than none, unless none is good; what differs by less than half a percent is alike."""
    assert standing(BY_NAME[measure], cell, base) == stands


def test_order_from_best_to_worst() -> None:
    """None that is good, then values, then none that is not."""
    cells = [Cell(None), Cell(3.0), Cell(None, none=True), Cell(2.0)]
    found = sorted(cells, key=lambda cell: badness(BY_NAME["peak_time"], cell))
    assert [(cell.value, cell.none) for cell in found] == [(None, True), (2.0, False), (3.0, False), (None, False)]
