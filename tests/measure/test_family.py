"""A family measured at once: grids, final values, and the reasons for what is missing."""

from collections.abc import Callable

import numpy as np
import pytest

from tests.judge.invented import sheet
from tuner.measure.family import measure_trials
from tuner.measure.final import FinalValues
from tuner.simulate.traces import Array, Trace, Traces

Curve = Callable[[Array], Array]
STILL = FinalValues(float("nan"), 0.0)


def trace(y: Curve, step: float = 10.0, *, linear: bool = True, duration: float = 120.0) -> Trace:
    """Return a run of an output given as a function of time."""
    t = np.linspace(0.0, duration, 1201)
    return Trace(t, np.full_like(t, step), y(t), np.zeros_like(t), np.arange(1201), np.zeros(1201, np.bool_), linear)


def rise(t: Array) -> Array:
    """Rise to 10 with time constant 10."""
    return 10.0 * (1.0 - np.exp(-t / 10.0))


def hump(t: Array) -> Array:
    """Return a disturbance that is regulated away."""
    return t * np.exp(-t / 5.0)


def pair(reference: Curve = rise, disturbance: Curve = hump, *, linear: bool = True, duration: float = 120.0) -> Traces:
    """Return the two runs of one plant."""
    return Traces(
        trace(reference, linear=linear, duration=duration), trace(disturbance, 0.0, linear=linear, duration=duration)
    )


def test_plants_with_different_grids_are_measured_alike() -> None:
    """One family may hold runs on two grids; each plant gets its own numbers, in order."""
    fine = pair(duration=240.0)

    found = measure_trials(sheet(), [pair(), fine, pair()], [True] * 3, [FinalValues(10.0, 0.0)] * 3)

    assert [m.values["rise_time"] for m in found] == pytest.approx([10.0 * np.log(9.0)] * 3, rel=1e-5)


def test_an_unstable_plant_has_no_measures_and_spoils_no_others() -> None:
    """The runs of an unstable plant, infinite ones too, are not read."""
    wild = pair(lambda t: np.where(t > 60.0, np.inf, t), lambda t: np.where(t > 60.0, np.nan, t))

    found = measure_trials(sheet(), [pair(), wild], [True, False], [FinalValues(10.0, 0.0), STILL])

    assert set(found[1].values.values()) == {None}
    assert set(found[1].reasons.values()) == {"the loop is unstable"}
    assert found[0].values["overshoot"] == 0.0


def test_a_run_that_is_not_linear_ends_at_the_mean_of_its_last_tenth() -> None:
    """The exact final value holds only for a linear run; a limited one ends where it is seen to end."""
    found = measure_trials(sheet(), [pair(lambda t: 0.8 * rise(t), linear=False)], [True], [FinalValues(10.0, 0.0)])

    assert found[0].final_reference == pytest.approx(8.0, abs=1e-3)
    assert found[0].values["steady_state_error"] == pytest.approx(20.0, abs=0.01)


def test_a_trial_without_steps_has_no_measures() -> None:
    """Both steps zero: everything is missing and each half says which step is."""
    found = measure_trials(sheet(reference=0.0, disturbance=0.0), [pair()], [True], [FinalValues(0.0, 0.0)])[0]

    assert found.values["iae_reference"] is None
    assert found.reasons["iae_reference"] == "the trial has no reference step"
    assert found.reasons["disturbance_peak"] == "the trial has no disturbance step"
    assert found.final_reference is None


@pytest.mark.parametrize(
    ("curve", "final", "measure", "why"),
    [
        (rise, 10.0, "peak_time", "there is no overshoot"),
        (lambda t: 0.1 * t, 9.9, "peak_time", "the output still rises at the end of the trial"),
        (lambda t: 0.05 * t, 10.0, "rise_time", "the output does not reach 90 % of its final value within the trial"),
        (lambda t: 0.05 * t, 10.0, "settling_time", "the output is outside the settling band at the end of the trial"),
        (hump, 0.0, "undershoot", "the final value is 0"),
    ],
)
def test_each_missing_measure_says_why(curve: Curve, final: float, measure: str, why: str) -> None:
    """Every reason, word for word."""
    found = measure_trials(sheet(), [pair(curve)], [True], [FinalValues(final, 0.0)])[0]

    assert found.values[measure] is None
    assert found.reasons[measure] == why


def test_an_output_that_runs_away_at_a_limit_is_not_measured() -> None:
    """A linear loop that is stable only within its limits leaves them: no number is read off such a run."""
    away = pair(lambda t: -np.exp(t / 8.0), linear=False)

    found = measure_trials(sheet(), [away], [True], [FinalValues(10.0, 0.0)])[0]

    assert found.values["overshoot"] is None
    assert found.reasons["overshoot"] == "the output runs away while a limit holds the effort"


def test_an_output_held_where_it_ran_away_is_not_measured() -> None:
    """Also when the run was stopped far away long before its end."""
    held = pair(lambda t: np.where(t > 30.0, 1e13, t), lambda t: np.where(t > 30.0, 1e13, t), linear=False)

    found = measure_trials(sheet(), [held], [True], [FinalValues(10.0, 0.0)])[0]

    assert set(found.reasons.values()) == {"the output runs away while a limit holds the effort"}


def test_an_output_that_a_limit_holds_short_of_the_reference_is_measured() -> None:
    """An actuator that is too small leaves an error; that is a measure, not a runaway."""
    short = pair(lambda t: 0.5 * rise(t), lambda t: -0.7 * rise(t), linear=False)

    found = measure_trials(sheet(), [short], [True], [FinalValues(10.0, 0.0)])[0]

    assert found.values["steady_state_error"] == pytest.approx(50.0, abs=0.01)
    assert found.values["disturbance_peak"] == pytest.approx(7.0, abs=0.01)
