"""Measures of runs whose curves are closed forms."""

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from tuner.measure.curve import Array
from tuner.measure.runs import Runs
from tuner.measure.trial import disturbance_readings, effort_readings, reference_readings

T = np.linspace(0.0, 40.0, 4001)


def runs(y: Array, final: float, u: Array | None = None) -> Runs:
    """Return one run with its final value."""
    effort = np.zeros_like(T) if u is None else u
    return Runs(
        members=np.array([0]),
        t=T,
        block=1,
        y=np.asarray(y)[None],
        u=effort[None],
        saturated=np.array([0.25]),
        final=np.array([float(final)]),
        astray=np.array([False]),
    )


def read(y: Array, final: float, step: float = 1.0, band: float = 2.0) -> dict[str, float]:
    """Return the reference measures of one run as plain numbers."""
    return {name: float(r.values[0]) for name, r in reference_readings(runs(y, final), step, band).items()}


def test_a_first_order_rise() -> None:
    """No overshoot, no peak, T ln 9 to rise, T ln 50 to settle, T as the area of the error."""
    found = read(1.0 - np.exp(-T), 1.0)

    assert found["overshoot"] == 0.0
    assert np.isnan(found["peak_time"])
    assert found["rise_time"] == pytest.approx(np.log(9.0), rel=1e-7)
    assert found["settling_time"] == pytest.approx(np.log(50.0), rel=1e-7)
    assert found["iae_reference"] == pytest.approx(1.0, rel=2e-5)
    assert found["undershoot"] == 0.0
    assert found["steady_state_error"] == 0.0


def test_a_negative_step_is_the_mirror_of_a_positive_one() -> None:
    """Percentages keep their signs when everything is turned upside down, also with a lasting error."""
    curve = 0.8 * (1.0 - np.exp(-0.2 * T) * np.cos(T))

    down, up = read(-curve, -0.8, step=-1.0), read(curve, 0.8)

    assert down == pytest.approx(up, nan_ok=True)
    assert down["steady_state_error"] == pytest.approx(20.0)
    assert down["overshoot"] > 40.0


def test_an_inverse_response() -> None:
    """A plant with a zero at +1/2 first goes the wrong way; (1 - 2 s)/(s + 1)^2 does so by a known depth."""
    curve = 1.0 - np.exp(-T) * (1.0 + 3.0 * T)
    deepest = (1.0 + 3.0 * (2.0 / 3.0)) * np.exp(-2.0 / 3.0) - 1.0

    assert read(curve, 1.0)["undershoot"] == pytest.approx(100.0 * deepest, rel=1e-6)


def test_a_final_value_of_zero_gives_no_percentages() -> None:
    """Nothing is divided by zero: measures in parts of the final value are missing, the others are there."""
    found = read(np.exp(-T) * T, 0.0)

    missing = {name for name, value in found.items() if np.isnan(value)}
    assert missing == {"overshoot", "peak_time", "rise_time", "settling_time", "undershoot"}
    assert found["steady_state_error"] == 100.0


def test_a_run_that_ends_outside_its_band_does_not_settle() -> None:
    """A slow rise neither settles nor reaches 90 % within the run."""
    found = read(1.0 - np.exp(-T / 100.0), 1.0)

    assert np.isnan(found["settling_time"])
    assert np.isnan(found["rise_time"])


def test_an_output_that_jumps_to_its_final_value_needs_no_time() -> None:
    """A plant without lag is there at once."""
    found = read(np.ones_like(T), 1.0)

    assert (found["rise_time"], found["settling_time"], found["overshoot"]) == (0.0, 0.0, 0.0)


def test_a_disturbance_that_is_regulated_away() -> None:
    """A curve t exp(-t) peaks at 1/e at t = 1, encloses 1, and is within 2 % of the peak when it says."""
    found = {name: float(r.values[0]) for name, r in disturbance_readings(runs(T * np.exp(-T), 0.0), 2.0).items()}
    recovery = found["disturbance_recovery"]

    assert found["disturbance_peak"] == pytest.approx(1.0 / np.e, rel=1e-6)
    assert found["iae_disturbance"] == pytest.approx(1.0, rel=2e-5)
    assert recovery * np.exp(-recovery) == pytest.approx(0.02 / np.e, rel=1e-6)


def test_recovery_is_counted_about_the_final_value() -> None:
    """A deviation that remains without integral action recovers to where it stays."""
    found = disturbance_readings(runs(-2.0 * (1.0 - np.exp(-T)), -2.0), 5.0)

    assert found["disturbance_recovery"].values[0] == pytest.approx(np.log(20.0), rel=1e-6)


def test_effort_counts_its_first_jump() -> None:
    """A kick of 3 from rest that settles at 1 has peaked at 3 and travelled 3 + 2."""
    found = effort_readings(runs(0.0 * T, 1.0, u=1.0 + 2.0 * np.exp(-T)), smooth=True, infinite=False)

    assert found["peak_effort"].values[0] == pytest.approx(3.0)
    assert found["effort_travel"].values[0] == pytest.approx(5.0)
    assert found["saturated_share"].values[0] == 0.25


def test_held_effort_has_no_peak_between_samples() -> None:
    """The steps of a sampled effort are read as they are, not rounded up by a parabola."""
    effort = np.where(T < 1.0, 1.0, np.where(T < 2.0, 1.9, 1.8))

    found = effort_readings(runs(0.0 * T, 1.0, u=effort), smooth=False, infinite=False)

    assert found["peak_effort"].values[0] == 1.9
    assert found["effort_travel"].values[0] == pytest.approx(2.0)


def test_an_infinite_kick_has_no_numbers() -> None:
    """Peak and travel of an effort with an infinite kick are missing, with the reason."""
    found = effort_readings(runs(0.0 * T, 1.0), smooth=True, infinite=True)

    assert np.isnan(found["peak_effort"].values[0])
    assert found["effort_travel"].why == "an unfiltered derivative of a reference step is infinite"


@given(
    st.floats(0.05, 1.5),
    st.floats(0.2, 3.0),
    st.floats(0.01, 100.0) | st.floats(-100.0, -0.01),
)
def test_measures_do_not_depend_on_the_size_of_the_step(decay: float, frequency: float, size: float) -> None:
    """A linear response scaled by any factor, negative ones too, has the same percentages and times."""
    curve = 1.0 - np.exp(-decay * T) * np.cos(frequency * T)

    one, scaled = read(curve, 1.0), read(size * curve, size, step=size)

    assert scaled.pop("iae_reference") == pytest.approx(abs(size) * one.pop("iae_reference"), rel=1e-9)
    assert scaled == pytest.approx(one, rel=1e-6, abs=1e-6, nan_ok=True)
