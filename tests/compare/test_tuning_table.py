"""The table of tunings: by how much one is better than another."""

from math import inf

import pytest

from tuner.compare.tuning_table import Cell, change
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
