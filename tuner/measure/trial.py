"""Measures of the two runs of a trial, by their definitions, for all plants of a family that share a grid.

Values are NaN where a measure does not exist; `Reading.why` says why, as the end of a sentence.
"""

from typing import NamedTuple

import numpy as np

from tuner.measure.curve import Array, absolute_area, first_maximum, first_reach, highest, largest, last_exit, refined
from tuner.measure.runs import Runs

PERCENT = 100.0
NOTHING = 1e-6
"""Excursions below this share of the final value count as none: rounding, not motion."""

ZERO_FINAL = "the final value is 0"
ASTRAY = "the output runs away while a limit holds the effort"
NO_OVERSHOOT = "there is no overshoot"
STILL_RISING = "the output still rises at the end of the trial"
NOT_REACHED = "the output does not reach 90 % of its final value within the trial"
NOT_SETTLED = "the output is outside the settling band at the end of the trial"
NOT_RECOVERED = "the output is outside the recovery band at the end of the trial"
INFINITE_KICK = "an unfiltered derivative of a reference step is infinite"


class Reading(NamedTuple):
    """One measure over the plants: values of shape (m,), and why a value is NaN."""

    values: Array
    why: str = ""


Readings = dict[str, Reading]


def reference_readings(runs: Runs, step: float, band: float) -> Readings:
    """Return the measures of the output after a reference step; `band` is in % of the final value."""
    final = np.where(np.abs(runs.final) > NOTHING * abs(step), runs.final, np.nan)
    # In parts of its final value every curve goes from 0 to 1, whatever its sign.
    z = runs.y / final[:, None]
    over = _some(highest(runs.t, z).height - 1.0)
    peak = first_maximum(runs.t, z, 1.0 + NOTHING) if (over > 0.0).any() else np.full(len(z), np.nan)
    low, high = first_reach(runs.t, z, (0.1, 0.9), runs.block)
    z -= 1.0
    return {
        "overshoot": Reading(PERCENT * over),
        "peak_time": Reading(np.where(over > 0.0, peak, np.nan), NO_OVERSHOOT),
        "rise_time": Reading(high - low, NOT_REACHED),
        "settling_time": Reading(last_exit(runs.t, z, np.full(len(z), band / PERCENT), runs.block), NOT_SETTLED),
        "steady_state_error": Reading(PERCENT * (step - runs.final) / step),
        "undershoot": Reading(PERCENT * _some(_depth(runs.t, z))),
        "iae_reference": Reading(absolute_area(runs.t, step - runs.y)),
    }


def effort_readings(runs: Runs, *, smooth: bool, infinite: bool) -> Readings:
    """Return the measures of the effort.

    Parameters
    ----------
    smooth : bool
        Whether the effort moves between its samples: a continuous controller.
    infinite : bool
        Whether it holds an infinite kick that no trace can show.
    """
    peak = largest(runs.t, runs.u).height if smooth else np.abs(runs.u).max(axis=1)
    travel = np.abs(runs.u[:, 0]) + np.abs(np.diff(runs.u, axis=1)).sum(axis=1)
    hidden = np.nan if infinite else 1.0
    return {
        "peak_effort": Reading(peak * hidden, INFINITE_KICK),
        "effort_travel": Reading(travel * hidden, INFINITE_KICK),
        "saturated_share": Reading(runs.saturated),
    }


def disturbance_readings(runs: Runs, band: float) -> Readings:
    """Return the measures of the output after a disturbance step; `band` is in % of the peak."""
    peak = largest(runs.t, runs.y).height
    away = runs.y - runs.final[:, None]
    return {
        "iae_disturbance": Reading(absolute_area(runs.t, runs.y)),
        "disturbance_peak": Reading(peak),
        "disturbance_recovery": Reading(last_exit(runs.t, away, peak * band / PERCENT, runs.block), NOT_RECOVERED),
    }


def _some(excursion: Array) -> Array:
    """Return an excursion, 0 when there is none; NaN stays."""
    return np.where(excursion <= NOTHING, 0.0, excursion)


def _depth(t: Array, below_one: Array) -> Array:
    """Return how far curves go below zero, given less one; a parabola is laid only where one does."""
    index = below_one.argmin(axis=1)
    lowest = below_one[np.arange(len(index)), index]
    if not (lowest < -1.0 - NOTHING).any():
        return np.where(np.isnan(lowest), np.nan, 0.0)
    return refined(t, below_one, index, np.full(len(index), -1.0)).height - 1.0
