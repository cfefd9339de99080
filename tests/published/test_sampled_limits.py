"""Sampled loops against published pulse transfer functions and Jury limits.

Coefficients and limits were computed independently to the digits given; attributions are from memory where no closed
form makes them certain. Attribution of the equivalents: Astrom and Wittenmark, Computer-Controlled Systems.
"""

from math import exp, inf, log, pi, tanh
from typing import NamedTuple

import numpy as np
import pytest

from tests.published.loops import limit, loop, margins_of, poles_of
from tuner.model.controller import Controller, Notch
from tuner.simulate.frequency import loop_response


def sampled(step: float, **keys: float) -> Controller:
    """Return a sampled controller, proportional with unit gain unless other keys are given."""
    return Controller(sample_time=step, **({"gain_1": 1.0} | keys))  # type: ignore[arg-type]  # keys are all numbers


def ultimate(formula: str, step: float, samples: int = 0) -> float:
    """Return the largest stable proportional gain: inside the circle by 1e-9, which costs digits."""

    def stable(gain: float) -> bool:
        return poles_of(formula, Controller(gain_1=gain, sample_time=step, delay_samples=samples)).stable

    return limit(stable, 1e-3, 1e4)


class Pulse(NamedTuple):
    """A plant, a sample time and its pulse transfer function in z, highest power first."""

    formula: str
    step: float
    numerator: tuple[float, ...]
    denominator: tuple[float, ...]


PULSES = (
    Pulse("1/(s+1)", 0.1, (0.095162582,), (1.0, -0.904837418)),
    Pulse("1/(s+1)", 0.5, (0.393469340,), (1.0, -0.606530660)),
    Pulse("1/(s+1)", 1.0, (0.632120559,), (1.0, -0.367879441)),
    Pulse("3/s", 0.2, (0.6,), (1.0, -1.0)),
    Pulse("1/s^2", 0.5, (0.125, 0.125), (1.0, -2.0, 1.0)),
    Pulse("1/(s(s+1))", 1.0, (0.367879441, 0.264241118), (1.0, -1.367879441, 0.367879441)),
    Pulse("1/(s(s+1))", 0.5, (0.106530660, 0.090204010), (1.0, -1.606530660, 0.606530660)),
    Pulse("1/(s(s+1))", 0.1, (0.004837418, 0.004678840), (1.0, -1.904837418, 0.904837418)),
    Pulse("1/(s+1)^2", 0.5, (0.0902040104, 0.0646141113), (1.0, -1.21306132, 0.367879441)),
    Pulse("1/(s^2+s+1)", 0.5, (0.104405473, 0.0882813366), (1.0, -1.41384385, 0.606530660)),
    Pulse("exp(-0.2s)/(s+1)", 0.5, (0.259181779, 0.134287561), (1.0, -0.606530660, 0.0)),
    Pulse("exp(-0.5s)/(s+1)", 1.0, (0.393469340, 0.238651219), (1.0, -0.367879441, 0.0)),
    Pulse("exp(-2.3s)/(10s+1)", 1.0, (0.0676061801, 0.0275564019), (1.0, -0.904837418, 0.0, 0.0, 0.0)),
    Pulse("exp(-0.25s)/(s+1)", 0.1, (0.0487705755, 0.0463920065), (1.0, -0.904837418, 0.0, 0.0, 0.0)),
    Pulse("exp(-0.25s)/s", 1.0, (0.75, 0.25), (1.0, -1.0, 0.0)),
)
"""Astrom and Wittenmark, Computer-Controlled Systems, table 2.1 and section 2.3 (fractional dead time)."""


@pytest.mark.parametrize("row", PULSES, ids=lambda row: f"{row.formula} every {row.step}")
def test_pulse_transfer_functions(row: Pulse) -> None:
    """The loop gain under unit gain is the published pulse transfer function, at every frequency."""
    w = np.linspace(0.02, 1.0, 50) * pi / row.step
    z = np.exp(1j * w * row.step)
    found = loop_response(loop(row.formula, sampled(row.step)), w)
    difference = np.abs(found * np.polyval(row.denominator, z) - np.polyval(row.numerator, z))
    assert np.all(difference < 1e-9 + 5e-9 * np.abs(found))


@pytest.mark.parametrize("row", PULSES, ids=lambda row: f"{row.formula} every {row.step}")
def test_closed_loop_polynomials(row: Pulse) -> None:
    """The closed-loop poles are the roots of the published denominator plus half the numerator."""
    characteristic = np.polyadd(row.denominator, np.multiply(0.5, row.numerator))
    expected = np.roots(characteristic)
    found = np.exp(poles_of(row.formula, sampled(row.step, gain_1=0.5)).values * row.step)
    assert np.sort_complex(found) == pytest.approx(np.sort_complex(expected), abs=2e-8)


@pytest.mark.parametrize(("ratio", "gain"), [(0.1, 20.0166639), (0.5, 4.08298817), (1.0, 2.16395341)])
def test_jury_limit_of_a_lag(ratio: float, gain: float) -> None:
    """A sampled lag ends at Ku = coth(h/2T)/K, with a pole at z = -1 (Jury)."""
    assert gain == pytest.approx(1.0 / tanh(0.5 * ratio), rel=1e-8)
    assert ultimate(f"2/({1.0 / ratio!r} s + 1)", 1.0) == pytest.approx(0.5 * gain, rel=1e-8)
    at = poles_of("1/(s+1)", sampled(ratio, gain_1=gain)).values[0]
    assert at.imag == pytest.approx(pi / ratio)


@pytest.mark.parametrize(("ratio", "gain"), [(0.1, 10.5083319), (0.5, 1.0 / (1.0 - exp(-0.5)))])
def test_jury_limit_with_a_sample_of_delay(ratio: float, gain: float) -> None:
    """One whole sample of delay, in the plant or in computing, lowers it to 1/(K (1 - a)): a complex pair (Jury)."""
    assert ultimate("1/(s+1)", ratio, samples=1) == pytest.approx(gain, rel=1e-8)
    assert ultimate(f"exp(-{ratio!r} s)/(s+1)", ratio) == pytest.approx(gain, rel=1e-8)


@pytest.mark.parametrize("step", [0.01, 0.5, 3.0])
def test_jury_limit_of_an_integrator(step: float) -> None:
    """A sampled integrator ends at 2/(K h) and is deadbeat at 1/(K h), where no pole is left but z = 0 (Jury)."""
    assert ultimate("4/s", step) == pytest.approx(0.5 / step, rel=1e-8)
    deadbeat = poles_of("4/s", sampled(step, gain_1=0.25 / step))
    assert (deadbeat.stable, len(deadbeat.values), deadbeat.growth) == (True, 0, -inf)


@pytest.mark.parametrize(("step", "gain"), [(1.0, 2.39221119), (0.5, 4.36199387), (0.1, 20.3389256)])
def test_jury_limit_of_a_servo(step: float, gain: float) -> None:
    """1/(s(s+1)) ends at (1 - a)/b2 (Ogata, Discrete-Time Control Systems: K < 2.3922 at T = 1; Dorf and Bishop)."""
    assert ultimate("1/(s(s+1))", step) == pytest.approx(gain, rel=3e-8)


@pytest.mark.parametrize(("dead_time", "gain"), [(0.0, 2.0), (0.25, 4.0), (0.5, 2.0), (0.4, 2.5), (0.1, 2.5)])
def test_a_little_delay_raises_the_limit(dead_time: float, gain: float) -> None:
    """exp(-t s)/s sampled every second ends at min(1/t, 2/(1 - 2t)): a small delay raises the limit (Jury)."""
    assert ultimate(f"exp(-{dead_time!r} s)/s", 1.0) == pytest.approx(gain, rel=1e-8)


def test_two_integrators_need_more_than_a_gain() -> None:
    """1/s^2 under proportional control is never stable when sampled (Jury)."""
    assert not any(poles_of("1/s^2", sampled(0.5, gain_1=gain)).stable for gain in (1e-3, 0.1, 1.0, 10.0))


@pytest.mark.parametrize("step", [0.01, 0.2, 1.0])
def test_the_hold_as_half_a_sample(step: float) -> None:
    """A sampled integrator lags the continuous one by exactly w h/2 (Franklin, Powell and Workman)."""
    w = np.linspace(0.05, 0.95, 10) * pi / step
    expected = np.exp(-0.5j * w * step) / (1j * w) * (0.5 * w * step / np.sin(0.5 * w * step))
    assert loop_response(loop("1/s", sampled(step)), w) == pytest.approx(expected, rel=1e-13)


def test_lag_of_the_hold_at_crossover() -> None:
    """At wc h = .2 the hold costs 5.730 degrees (Astrom and Wittenmark; Franklin, Powell and Workman)."""
    w = 1.0
    lag = np.angle(loop_response(loop("1/s", sampled(0.2)), np.array([w]))[0], deg=True) + 90.0
    assert lag == pytest.approx(-5.730, abs=5e-4)


def law_response(controller: Controller, z: complex) -> complex:
    """Return the controller's own response: that of a loop around a sampled integrator, over the integrator's."""
    step = controller.sample_time
    w = np.array([np.angle(z) / step])
    plain = loop_response(loop("1/s", sampled(step)), w)
    return complex((loop_response(loop("1/s", controller), w) / plain)[0])


Z = complex(np.exp(0.3j))


def test_backward_difference_derivative() -> None:
    """Kc = 1, Td = 1, N = 10, h = .05: ad = .6666667, bd = 6.6666667 (Astrom and Wittenmark, ch. 8)."""
    controller = Controller(form="standard", gain_1=1.0, gain_3=1.0, filter_time=0.1, sample_time=0.05)
    expected = 1.0 + 6.6666667 * (1.0 - 1.0 / Z) / (1.0 - 2.0 / 3.0 / Z)
    assert law_response(controller, Z) == pytest.approx(expected, rel=1e-8)


def test_forward_difference_integral() -> None:
    """The integral adds Kc h/Ti e after use: Kc (1 + h/(Ti (z - 1))) (Astrom and Wittenmark, ch. 8)."""
    controller = Controller(form="standard", gain_1=2.0, gain_2=5.0, sample_time=0.25)
    assert law_response(controller, Z) == pytest.approx(2.0 * (1.0 + 0.05 / (Z - 1.0)), rel=1e-12)


def test_prewarped_notch() -> None:
    """A notch by the prewarped bilinear transform is its analogue at tan(w h/2)/tan(w0 h/2) (all texts)."""
    notch = Notch(frequency=2.0, depth=0.2, width=0.5)
    controller = Controller(gain_1=1.0, sample_time=0.4, notch=notch)
    s = 1j * np.tan(0.15) / np.tan(0.4)
    assert law_response(controller, Z) == pytest.approx((s * s + 0.1 * s + 1.0) / (s * s + 0.5 * s + 1.0), rel=1e-12)


def test_backward_difference_filter() -> None:
    """The measurement filter is g z/(z - 1 + g), g = h/(T + h) (Astrom and Wittenmark)."""
    controller = Controller(gain_1=1.0, sample_time=0.5, measurement_filter=1.5)
    assert law_response(controller, Z) == pytest.approx(0.25 * Z / (Z - 0.75), rel=1e-12)


@pytest.mark.parametrize("step", [0.05, 0.5, 2.0])
def test_margins_of_a_sampled_integrator_in_closed_form(step: float) -> None:
    """Of k h/(z-1): gain margin 2/(k h) at pi/h, crossover 2/h asin(k h/2), phase margin 90 less wc h/2 (algebra)."""
    gain = 0.6 / step
    found = margins_of("1/s", sampled(step, gain_1=gain))
    crossover = 2.0 / step * np.arcsin(0.3)
    assert found.gain_margin == pytest.approx(2.0 / 0.6, rel=1e-12)
    assert found.gain_margin_at == pytest.approx(pi / step, rel=1e-12)
    assert found.phase_margin_at == pytest.approx(crossover, rel=1e-12)
    assert found.phase_margin == pytest.approx(90.0 - np.degrees(0.5 * crossover * step), rel=1e-12)
    assert found.max_sensitivity == pytest.approx(1.0 / 0.7, rel=1e-12)
    assert poles_of("1/s", sampled(step, gain_1=gain)).values == pytest.approx([log(0.4) / step], rel=1e-13)
