"""A record as data."""

import numpy as np

from tuner.model.record import Record, Units


def test_its_length_is_that_of_its_time() -> None:
    """As many as there are samples."""
    column = np.arange(3.0)
    record = Record(Units(), column, column, column, None, None, column > 1.0, ("", "", ""))
    assert len(record) == 3
