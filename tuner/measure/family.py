"""The measures of every plant of a family, and why one does not exist."""

from collections.abc import Sequence
from dataclasses import dataclass, field

from tuner.measure.final import FinalValues
from tuner.measure.runs import Runs, stacked
from tuner.measure.trial import (
    ASTRAY,
    NO_OVERSHOOT,
    STILL_RISING,
    ZERO_FINAL,
    Readings,
    disturbance_readings,
    effort_readings,
    reference_readings,
)
from tuner.model.sheet import Sheet
from tuner.simulate.traces import Traces
from tuner.simulate.trial import kicks

REFERENCE = (
    "overshoot",
    "peak_time",
    "rise_time",
    "settling_time",
    "steady_state_error",
    "undershoot",
    "iae_reference",
    "peak_effort",
    "effort_travel",
    "saturated_share",
)
"""Measures of the reference run."""

DISTURBANCE = ("iae_disturbance", "disturbance_peak", "disturbance_recovery")
"""Measures of the disturbance run."""

OF_FINAL_VALUE = ("overshoot", "peak_time", "rise_time", "settling_time", "undershoot")
"""Measures that are told in parts of the final value."""

UNSTABLE = "the loop is unstable"
NO_REFERENCE = "the trial has no reference step"
NO_DISTURBANCE = "the trial has no disturbance step"


@dataclass(slots=True)
class Measured:
    """The measures of one plant's trial while they are gathered, why one is missing, and the final values used."""

    values: dict[str, float | None] = field(default_factory=dict)
    reasons: dict[str, str] = field(default_factory=dict)
    final_reference: float | None = None
    final_disturbance: float | None = None

    def absent(self, names: Sequence[str], why: str) -> None:
        """Note that measures do not exist."""
        self.values.update(dict.fromkeys(names))
        self.reasons.update(dict.fromkeys(names, why))

    def put(self, name: str, value: float | None, why: str) -> None:
        """Note one measure; a NaN is taken as none."""
        missing = value is None or value != value  # noqa: PLR0124 - only a NaN differs from itself
        self.values[name] = None if missing else value
        if missing:
            self.reasons[name] = why


def measure_trials(
    sheet: Sheet, traces: Sequence[Traces], stable: Sequence[bool], final: Sequence[FinalValues]
) -> tuple[Measured, ...]:
    """Return the measures of the trial for each plant of the family.

    Parameters
    ----------
    traces : sequence of Traces
        The runs, one pair for each plant.
    stable : sequence of bool
        Whether each plant's loop is stable; an unstable one has no measures.
    final : sequence of FinalValues
        Exact final values; a run that did not stay linear, or has none, takes the mean of its last tenth.
    """
    found = tuple(Measured() for _ in traces)
    for measured, holds in zip(found, stable, strict=True):
        if not holds:
            measured.absent((*REFERENCE, *DISTURBANCE), UNSTABLE)
    _reference(sheet, traces, stable, final, found)
    _disturbance(sheet, traces, stable, final, found)
    return found


def _reference(
    sheet: Sheet,
    traces: Sequence[Traces],
    stable: Sequence[bool],
    final: Sequence[FinalValues],
    found: Sequence[Measured],
) -> None:
    trial, controller = sheet.trial, sheet.controller
    if not trial.reference:
        _nowhere(found, stable, REFERENCE, NO_REFERENCE)
        return
    continuous = controller.sample_time == 0.0
    infinite = kicks(controller)
    for runs in stacked(
        [pair.reference for pair in traces],
        [exact.reference for exact in final],
        stable,
        abs(trial.reference),
        [exact.bounded for exact in final],
    ):
        readings = reference_readings(runs, trial.reference, trial.settling_band)
        readings |= effort_readings(runs, smooth=continuous, infinite=infinite)
        _hand_out(runs, readings, found)
        for row, member in enumerate(runs.members.tolist()):
            _settle_reasons(found[member], runs, row)


def _settle_reasons(measured: Measured, runs: Runs, row: int) -> None:
    """Correct the reasons that hold for one plant only."""
    if runs.astray[row]:
        measured.absent(REFERENCE, ASTRAY)
        return
    measured.final_reference = float(runs.final[row])
    if measured.values["overshoot"] is None:
        measured.absent(OF_FINAL_VALUE, ZERO_FINAL)
    elif measured.values["peak_time"] is None:
        measured.reasons["peak_time"] = STILL_RISING if measured.values["overshoot"] else NO_OVERSHOOT


def _disturbance(
    sheet: Sheet,
    traces: Sequence[Traces],
    stable: Sequence[bool],
    final: Sequence[FinalValues],
    found: Sequence[Measured],
) -> None:
    trial = sheet.trial
    if not trial.disturbance:
        _nowhere(found, stable, DISTURBANCE, NO_DISTURBANCE)
        return
    for runs in stacked(
        [pair.disturbance for pair in traces],
        [exact.disturbance for exact in final],
        stable,
        abs(trial.reference) or 1.0,
        [exact.bounded for exact in final],
    ):
        _hand_out(runs, disturbance_readings(runs, trial.settling_band), found)
        for row, member in enumerate(runs.members.tolist()):
            if runs.astray[row]:
                found[member].absent(DISTURBANCE, ASTRAY)
            else:
                found[member].final_disturbance = float(runs.final[row])


def _nowhere(found: Sequence[Measured], stable: Sequence[bool], names: Sequence[str], why: str) -> None:
    for measured, holds in zip(found, stable, strict=True):
        if holds:
            measured.absent(names, why)


def _hand_out(runs: Runs, readings: Readings, found: Sequence[Measured]) -> None:
    members = runs.members.tolist()
    for name, reading in readings.items():
        for member, value in zip(members, reading.values.tolist(), strict=True):
            found[member].put(name, value, reading.why)
