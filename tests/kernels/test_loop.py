"""The compiled loop against the plain law in a plain loop, bit for bit, and what it does with a run that runs away."""

import math
from collections.abc import Callable
from dataclasses import dataclass

import numpy as np
import pytest
from numpy.typing import NDArray

from tuner.kernels.exponential import hold
from tuner.kernels.loop import run
from tuner.law.constants import bake, lead_lag, notch
from tuner.law.pid import PARAMETERS, STATE, law

Array = NDArray[np.float64]


@dataclass
class Case:
    """The arguments of one batch, at random."""

    constants: Array
    system: NDArray[np.int64]
    growth: Array
    old: Array
    new: Array
    c: Array
    direct: Array
    delay: NDArray[np.int64]
    steps: int
    reference: Array
    disturbance: Array
    feedforward: Array
    noise: Array
    quantum: float
    ceiling: Array
    points: int

    def outputs(self) -> tuple[Array, Array, Array]:
        """Return room for the results."""
        loops, samples = self.feedforward.shape
        return np.empty((loops, self.points)), np.empty((loops, samples)), np.empty((loops, samples))

    def run(self, function: Callable[..., None] = run) -> tuple[Array, Array, Array]:
        """Call the kernel with them and return its results."""
        results = self.outputs()
        function(*(getattr(self, name) for name in self.__annotations__ if name != "points"), *results)
        return results


def _random_case(seed: int) -> Case:
    random = np.random.default_rng(seed)
    plants, order, loops, samples, steps = 3, int(random.integers(1, 6)), 5, 60, int(random.integers(1, 5))
    a = np.tril(random.normal(size=(plants, order, order))) - np.eye(order)
    b = random.normal(size=(plants, order, 2))
    grown, old, new = np.empty_like(a), np.empty_like(b), np.empty_like(b)
    hold(a, b, 0.1, random.random((plants, 2)) * 0.1 * random.integers(0, 2, (plants, 2)), grown, old, new)
    bounds = random.random(loops) * 3.0
    constants = [
        bake(
            sample_time=0.1 * steps, kp=random.random() * 2, ki=random.random(), kd=random.random() * 0.3,
            filter_time=random.random() * 0.2, windup_time=1.0 + random.random(), c=random.random(),
            action=float(random.choice([-1.0, 1.0])), low=40.0 - bound, high=40.0 + bound, rate=20.0 * random.random(),
            measurement_filter_time=0.1 * random.random(), lead_section=lead_lag(0.1 * steps, random.random(), 0.3),
            notch_section=notch(0.1 * steps, 3.0, 0.1, 1.0),
            resting_measurement=72.0, resting_effort=40.0,
        )
        for bound in bounds
    ]  # fmt: skip
    return Case(
        constants=np.array(constants),
        system=random.integers(0, plants, loops),
        growth=grown,
        old=old,
        new=new,
        c=random.normal(size=(plants, 2, order)),
        direct=random.normal(size=(plants, 2, 2)) * random.integers(0, 2),
        delay=random.integers(0, 12, (plants, 2)),
        steps=steps,
        reference=random.normal(size=(loops, samples)),
        disturbance=random.normal(size=loops),
        feedforward=random.normal(size=(loops, samples)),
        noise=random.normal(size=(loops, samples)) * 0.01 if seed % 2 else np.zeros((0, 0)),
        quantum=0.05 * (seed % 3),
        ceiling=np.full((loops, 2), 1e300),
        points=(samples - 1) * steps + 1,
    )


class _PlainLoop:
    """One loop of a case, run by Python: effort and disturbance are looked up by their index."""

    def __init__(self, case: Case, loop: int) -> None:
        self.case, self.loop, self.which = case, loop, int(case.system[loop])
        self.x = [0.0] * case.growth.shape[1]
        self.y, self.u, self.limited = (part[0] for part in case.outputs())

    def run(self) -> tuple[Array, Array, Array]:
        """Run it whole."""
        case, constants = self.case, tuple(map(float, self.case.constants[self.loop]))
        state, rest = (0.0,) * len(STATE), constants[PARAMETERS.index("resting_measurement")]
        for k in range(len(self.u)):
            measured = self.measured(k) + rest
            if case.quantum:
                measured = case.quantum * math.floor(measured / case.quantum + 0.5)
            asked, forward = float(case.reference[self.loop, k]) + rest, float(case.feedforward[self.loop, k])
            state = law(asked, measured, forward, 0.0, *state, *constants)
            self.u[k], self.limited[k] = state[0], state[STATE.index("limited")]
            for index in range(k * case.steps, min((k + 1) * case.steps, case.points)):
                self.y[index] = self.output(0, index)
                self.advance(index)
        return self.y, self.u, self.limited

    def measured(self, k: int) -> float:
        """Return what the sensor reads, noise included."""
        reading = self.output(1, k * self.case.steps)
        return reading + float(self.case.noise[self.loop, k]) if len(self.case.noise) else reading

    def inputs(self, index: int) -> tuple[float, float]:
        """Return effort and disturbance that reach the system from a point on."""
        effort, disturbance = (index - int(late) for late in self.case.delay[self.which])
        return (
            float(self.u[effort // self.case.steps]) if effort >= 0 else 0.0,
            float(self.case.disturbance[self.loop]) if disturbance >= 0 else 0.0,
        )

    def output(self, row: int, index: int) -> float:
        """Return the output or the sensor's reading, just before a point."""
        direct, before = self.case.direct[self.which, row], self.inputs(index - 1)
        total = direct[0] * before[0] + direct[1] * before[1]
        for weight, value in zip(self.case.c[self.which, row], self.x, strict=True):
            total += weight * value
        return float(total)

    def advance(self, index: int) -> None:
        """Take the state to the next point."""
        before, after, rise = self.inputs(index - 1), self.inputs(index), []
        for i in range(len(self.x)):
            old, new = self.case.old[self.which, i], self.case.new[self.which, i]
            total = old[0] * before[0] + new[0] * after[0]
            total += old[1] * before[1] + new[1] * after[1]
            for j in range(len(self.x)):
                total += self.case.growth[self.which, i, j] * self.x[j]
            rise.append(float(total))
        self.x = [value + more for value, more in zip(self.x, rise, strict=True)]


@pytest.mark.parametrize("seed", range(12))
def test_the_kernel_is_the_law_in_a_plain_loop_bit_for_bit(seed: int) -> None:
    """Limits, rate, wind-up, filters, notch, noise, resolution and dead times: not a bit differs."""
    case = _random_case(seed)
    y, u, limited = case.run()
    for loop in range(len(case.system)):
        plain = _PlainLoop(case, loop).run()
        for found, expected in zip((y, u, limited), plain, strict=True):
            assert np.array_equal(found[loop], expected)
    assert limited.any()


def test_the_uncompiled_kernel_gives_the_same_bits() -> None:
    """The kernel's own text, run by Python, agrees with what was compiled of it."""
    case = _random_case(4)
    plain = case.run(run.py_func)  # type: ignore[attr-defined]  # given by numba
    assert all(np.array_equal(*pair) for pair in zip(case.run(), plain, strict=True))


@pytest.mark.parametrize("ceiling", [(1e3, 1e12), (1e12, 1e3)])
def test_a_run_that_runs_away_is_held(ceiling: tuple[float, float]) -> None:
    """Past its ceiling, in output or effort, everything stays finite, within the ceiling, and still."""
    case = _random_case(0)
    case.constants[:, 0] = 1e3
    case.constants[:, 8:10] = -1e300, 1e300
    case.constants[:, 10] = 1e300
    case.ceiling[:] = ceiling
    y, u, _ = case.run()
    assert np.isfinite(y).all()
    assert np.isfinite(u).all()
    assert np.abs(y).max() <= ceiling[0]
    assert np.abs(u).max() <= ceiling[1]
    assert (y[:, -1] == y[:, -2]).all()
    assert (u[:, -1] == u[:, -2]).all()
