"""Transfer functions of the controller, against the law itself and against their formulas."""

from dataclasses import replace

import numpy as np
import pytest

from tests.simulate import drawn
from tests.simulate.lone_law import AT_REST, constants_of, sample
from tuner.model.controller import Controller, LeadLag, Notch
from tuner.simulate.factors import stack
from tuner.simulate.linear import from_zeros_poles
from tuner.simulate.traces import Array
from tuner.simulate.transfer import controller_factors, plant_factors, quadratic_roots

LENGTH = 4000


def impulse_response(controller: Controller) -> Array:
    """Return the efforts that the law itself answers to minus one at the first sample and zero after."""
    constants = constants_of(controller)
    state, efforts = AT_REST, []
    for k in range(LENGTH):
        state = sample(-1.0 if k == 0 else 0.0, state, constants)
        efforts.append(state[0])
    return np.array(efforts)


@pytest.mark.parametrize("seed", range(40))
def test_the_sampled_controller_is_the_law(seed: int) -> None:
    """The z-transform of what the law does to an impulse is the transfer function, with filter, lead-lag and notch."""
    random = np.random.default_rng(seed)
    controller = drawn.controller(random, float(random.uniform(0.05, 0.5)))
    controller = replace(controller, delay_samples=0)
    step = controller.sample_time
    z = 1.02 * np.exp(1j * np.linspace(0.1, 3.0, 7))
    efforts = impulse_response(controller)
    transformed = (efforts * z[:, None] ** -np.arange(LENGTH)).sum(1)
    law = controller_factors(controller)
    x = z - 1.0
    found = law.gain * np.prod(x[:, None] - law.zeros, axis=1) / np.prod(x[:, None] - law.poles, axis=1)
    assert found == pytest.approx(transformed, rel=1e-9)
    assert law.step == step


@pytest.mark.parametrize("gains", [(2.0, 0.3, 0.7), (2.0, 0.0, 0.7), (0.0, 0.3, 0.0), (0.0, 0.0, 0.5), (2.0, 0.3, 0.0)])
@pytest.mark.parametrize("filter_time", [0.0, 0.2])
@pytest.mark.parametrize("action", ["reverse", "direct"])
def test_the_continuous_controller(gains: tuple[float, float, float], filter_time: float, action: str) -> None:
    """It is kp + ki/s + kd s/(Tf s + 1) behind filter, lead-lag and notch, the sign of the action in front."""
    kp, ki, kd = gains
    controller = Controller(
        gain_1=kp, gain_2=ki, gain_3=kd, filter_time=filter_time, action=action,  # type: ignore[arg-type]  # both names are valid
        measurement_filter=0.4, lead_lag=LeadLag(0.7, 0.2), notch=Notch(3.0, 0.2, 0.5),
    )  # fmt: skip
    w = np.array([0.1, 1.0, 2.9, 30.0])
    s = 1j * w
    law = kp + ki / s + kd * s / (filter_time * s + 1.0)
    blocks = (s * s + 0.3 * s + 9.0) / (s * s + 1.5 * s + 9.0) / (0.4 * s + 1.0) * (0.7 * s + 1.0) / (0.2 * s + 1.0)
    found = stack([controller_factors(controller)]).response(w)[0]
    assert found == pytest.approx(controller.sign * law * blocks, rel=1e-12)


@pytest.mark.parametrize("step", [0.0, 0.1])
def test_parts_without_effect_leave_no_modes(step: float) -> None:
    """No integral without ki, no derivative without kd, nothing at all without gains or with feedback off."""
    assert len(controller_factors(Controller(gain_1=1.0, filter_time=0.5, sample_time=step)).poles) == 0
    assert len(controller_factors(Controller(gain_1=1.0, gain_2=1.0, sample_time=step)).poles) == 1
    for silent in (Controller(sample_time=step), Controller(gain_1=1.0, feedback=False, sample_time=step)):
        assert (controller_factors(silent).gain, len(controller_factors(silent).poles)) == (0.0, 0)


def test_the_computing_delay() -> None:
    """It is whole samples of delay."""
    assert controller_factors(Controller(gain_1=1.0, sample_time=0.2, delay_samples=3)).delay == pytest.approx(0.6)


def test_a_continuous_plant() -> None:
    """A chain keeps its factors and its dead time."""
    found = plant_factors(from_zeros_poles([-1.0], [-2.0, -3.0], 4.0, 0.5))
    assert (found.gain, found.delay, found.step) == (4.0, 0.5, 0.0)


@pytest.mark.parametrize(
    ("a", "b", "c", "roots", "leading"),
    [
        (1.0, -3.0, 2.0, [1.0, 2.0], 1.0),
        (2.0, 0.0, 8.0, [-2j, 2j], 2.0),
        (1.0, 1e8, 1.0, [-1e8, -1e-8], 1.0),
        (0.0, 2.0, 1.0, [-0.5], 2.0),
        (0.0, 0.0, 3.0, [], 3.0),
        (4.0, 0.0, 0.0, [0.0, 0.0], 4.0),
    ],
)
def test_quadratic_roots(a: float, b: float, c: float, roots: list[complex], leading: float) -> None:
    """Roots keep their digits though one is far smaller; a missing leading coefficient leaves fewer."""
    found, first = quadratic_roots(a, b, c)
    assert sorted(found.tolist(), key=lambda r: (r.real, r.imag)) == pytest.approx(roots, rel=1e-14)
    assert first == leading
