"""The nominal plant's trial as it was simulated, seen from the controller: what it read, what it answered."""

from collections.abc import Iterator
from math import floor

import numpy as np

from tuner.deliver.excitation import Recording
from tuner.deliver.reference import Before, Outcome, Sample
from tuner.deliver.specification import Specification
from tuner.model.family import Member
from tuner.model.sheet import Sheet
from tuner.simulate.batch import nominal, nominal_values, simulate
from tuner.simulate.grid import sampled_grid
from tuner.simulate.traces import Array

MOST_SAMPLES = 50_000
"""Samples of each run that are repeated; longer trials are repeated up to there."""


def trial(specification: Specification) -> Recording:
    """Return both runs, one after the other, with the efforts of the simulation itself and not of a copy of it.

    Raises
    ------
    LoopError
        When the nominal plant cannot be computed.
    """
    sheet = specification.sheet
    grid = sampled_grid(sheet.trial.duration, sheet.controller.sample_time, nominal(sheet).plant)
    runs = simulate(sheet, (Member("nominal", nominal_values(sheet)),), grid, sensed=True)
    at = np.arange(min(grid.samples, MOST_SAMPLES)) * grid.steps
    samples: list[Sample] = []
    outcomes: list[Outcome] = []
    for which, (step, push) in enumerate(((sheet.trial.reference, 0.0), (0.0, sheet.trial.disturbance))):
        sensed = runs.y[0, which][at]
        end = len(at) if specification.assessment.nominal.stable else _end(sensed)
        measured = specification.resting_disturbance + push if specification.feeds.disturbance else 0.0
        samples += list(_samples(sheet, step, measured, sensed[:end]))
        outcomes += [
            Outcome(float(effort) + specification.constants.resting_effort, int(limited))
            for effort, limited in zip(runs.u[0, which][:end], runs.limited[0, which][:end], strict=True)
        ]
    return Recording(tuple(samples), tuple(outcomes))


def _samples(sheet: Sheet, step: float, measured: float, sensed: Array) -> Iterator[Sample]:
    """Yield what the controller was given, the resolution of the sensor included, in engineering units."""
    rest, quantum = float(sheet.loop.controlled.resting), float(sheet.sensor.resolution)
    before = Before.RESET
    for value in sensed.tolist():
        reading = value + rest
        if quantum > 0.0:
            reading = quantum * floor(reading / quantum + 0.5)
        yield Sample(before, 0.0, step + rest, reading, measured)
        before = Before.NOTHING


def _end(sensed: Array) -> int:
    """Return how many samples there are before an unstable run was held, having run away."""
    moving = np.flatnonzero(sensed != sensed[-1])
    return int(moving[-1]) + 1 if len(moving) else 1
