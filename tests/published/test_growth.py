"""Stability is decided from the poles and never from a trace, and the two agree: in sign, in rate and in frequency.

Late in a run without limits one pole, or one pair, has outlived all others. The numbers of the curve then follow the
recurrence of that pole (Prony, 1795), whose coefficients are found by least squares and compared with the pole.
"""

from dataclasses import replace
from math import exp, log
from typing import NamedTuple

import numpy as np
import pytest
from numpy.typing import NDArray

from tests.published.drawn import continuous_sheet, sampled_sheet
from tests.published.test_random_loops import judged
from tuner.errors import TrimwrightError
from tuner.judge.assessment import MemberResult
from tuner.model.sheet import Sheet
from tuner.simulate.traces import Trace

Array = NDArray[np.float64]


class Reading(NamedTuple):
    """How a pole is read off a curve.

    Parameters
    ----------
    outlived : float
        What is left of the second pole by then, if both began alike.
    rate : float
        How well the pole is known, as a share of its size.
    begin, end : float
        The motion, as a share of the step, between which the curve counts: above its error, below what is held.
    """

    outlived: float
    rate: float
    begin: float
    end: float


SAMPLED = Reading(outlived=1e-9, rate=1e-3, begin=1e-9, end=1e9)
"""Exact curves, read to what rounding leaves."""

CONTINUOUS = Reading(outlived=1e-4, rate=2e-2, begin=1e-2, end=1e8)
"""Curves known to a thousandth of the step, read where they move by a hundredth of it or more."""


@pytest.mark.parametrize("sampled", [True, False], ids=["sampled", "continuous"])
def test_the_trace_grows_as_the_poles_say(*, sampled: bool) -> None:
    """Of many random loops, those with one outliving pole or pair, growing or dying away, follow it in their curves."""
    draw = sampled_sheet if sampled else continuous_sheet
    reading = SAMPLED if sampled else CONTINUOUS
    seen = [_follows(draw(seed), reading) for seed in range(200)]

    assert sum(rate is not None and rate > 0.0 for rate in seen) >= 20
    assert sum(rate is not None and rate < 0.0 for rate in seen) >= 20


def _follows(sheet: Sheet, reading: Reading) -> float | None:
    """Compare the end of a run with the rightmost pole; return its rate, None where no pole is ever alone."""
    found = judged(sheet)
    duration = _long_enough(sheet, found, reading)
    if duration is None:
        return None
    sheet = replace(sheet, trial=replace(sheet.trial, duration=duration))
    try:
        again = judged(sheet)
    except TrimwrightError:  # more samples than a run may take
        return None
    pole = complex(again.poles[0])
    read = _read(again.traces.reference, pole, reading)
    if read is None:
        return None
    assert abs(read - pole) < reading.rate * abs(pole), (sheet.loop.title, read, pole)
    assert again.stable == (read.real < 0.0), sheet.loop.title
    return read.real


def _long_enough(sheet: Sheet, found: MemberResult, reading: Reading) -> float | None:
    """Return how long a run must be until its rightmost pole is alone; None when that has gone or run away by then."""
    right, rest = found.poles[0], [pole for pole in found.poles[1:] if pole != found.poles[0].conjugate()]
    gap = right.real - (rest[0].real if rest else right.real - 5.0 * abs(right))
    if not gap > 0.0 or right.real == 0.0:
        return None
    alone = -log(reading.outlived) / gap
    span = 4.0 * 3.0 / abs(right)
    end = exp(min(right.real * (alone + span), 700.0))
    return alone + span if reading.begin < end < reading.end and sheet.controller.feedback else None


def _read(trace: Trace, pole: complex, reading: Reading) -> complex | None:
    """Return the pole that the end of a curve follows, from samples some eight to a turn or to a time constant.

    Between its samples a sampled loop follows no pole.
    """
    y, step = trace.y[trace.sample_index], float(trace.t[trace.sample_index[1]])
    every = max(1, round(0.8 / abs(pole) / step))
    change = np.diff(y[::-every][:16][::-1])
    if change.size < 8 or not reading.begin < np.abs(change).max() < reading.end:
        return None
    if pole.imag == 0.0:
        ratio = float(change[1:] @ change[:-1] / (change[:-1] @ change[:-1]))
        return complex(log(ratio) / (every * step)) if ratio > 0.0 else None
    rows = np.column_stack((change[1:-1], change[:-2]))
    (first, second), *_ = np.linalg.lstsq(rows, change[2:], rcond=None)
    root = np.roots([1.0, -first, -second]).astype(complex)
    return complex(np.log(root[np.argmax(root.imag)]) / (every * step))
