"""What a stretch of a rehearsal leaves behind."""

import numpy as np

from tuner.rehearse.strip import Strip


def test_its_length_is_that_of_its_arrays() -> None:
    """As many samples as there are times."""
    one, flag = np.zeros(3), np.zeros(3, dtype=bool)
    assert len(Strip(one, one, one, one, one, one, flag, flag, flag)) == 3
