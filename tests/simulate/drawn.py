"""Random loops of our invention, the same at every run: plants of all kinds under controllers of all kinds."""

import numpy as np

from tuner.model.controller import Controller, LeadLag, Notch
from tuner.simulate.linear import Linear, from_zeros_poles
from tuner.simulate.loop import Loop, loops_around


def plant(random: np.random.Generator, dead_time: float = 0.0, least_excess: int = 0) -> Linear:
    """Return a plant of up to five poles around 1 rad per time unit, now and then resonant, integrating or unstable."""
    poles: list[complex] = []
    count = int(random.integers(max(1, least_excess), 6))
    while len(poles) < count:
        if count - len(poles) > 1 and random.random() < 0.35:
            poles += _pair(random)
        else:
            poles.append(complex(-(10.0 ** random.uniform(-1.0, 1.0)) * (1.0 if random.random() < 0.93 else -0.1)))
    if random.random() < 0.2:
        poles[0 if poles[0].imag == 0.0 else -1] = 0j if poles[-1].imag == 0.0 or poles[0].imag == 0.0 else poles[-1]
    zeros = [complex(random.normal() * 3.0) for _ in range(int(random.integers(0, count - least_excess + 1)))]
    size = np.prod([abs(pole) or 1.0 for pole in poles]) / np.prod([abs(zero) for zero in zeros])
    sign = np.prod([1.0 if zero.real < 0.0 else -1.0 for zero in zeros])
    return from_zeros_poles(zeros, poles, float(10.0 ** random.uniform(-1.0, 1.0) * size * sign), dead_time)


def _pair(random: np.random.Generator) -> list[complex]:
    zeta, w = 10.0 ** random.uniform(-2.0, 0.0), 10.0 ** random.uniform(-0.7, 0.7)
    pole = w * complex(-zeta, np.sqrt(1.0 - zeta * zeta))
    return [pole, pole.conjugate()]


def controller(random: np.random.Generator, sample_time: float) -> Controller:
    """Return a controller with some of its parts, gains around one."""
    span = sample_time or 0.1
    part = random.random(5)
    return Controller(
        sample_time=sample_time,
        gain_1=float(10.0 ** random.uniform(-1.5, 0.5)),
        gain_2=float(10.0 ** random.uniform(-2.0, 0.0)) if part[0] < 0.6 else 0.0,
        gain_3=float(10.0 ** random.uniform(-2.0, 0.0)) if part[1] < 0.5 else 0.0,
        filter_time=float(random.uniform(0.5, 3.0) * span),
        measurement_filter=float(random.uniform(0.2, 2.0) * span) if part[2] < 0.3 else 0.0,
        notch=Notch(float(random.uniform(0.3, 0.8) * 3.0 / span), 0.1, 0.8) if part[3] < 0.3 else None,
        lead_lag=LeadLag(float(4.0 * part[0] * span), float((0.3 + 3.0 * part[1]) * span)) if _some(part[4]) else None,
        delay_samples=int(random.integers(0, 4)) if sample_time and part[4] < 0.5 else 0,
    )


def _some(share: float) -> bool:
    """Return whether a further part is there, by digits of a random number that decides another one as well."""
    return 7.0 * share % 1.0 < 0.3


def loop(seed: int, *, sampled: bool, dead_time: bool = False, least_excess: int = 1) -> Loop:
    """Return one random loop."""
    random = np.random.default_rng(seed)
    step = float(10.0 ** random.uniform(-1.5, 0.0)) if sampled else 0.0
    delay = float(random.choice([0.0, random.uniform(0.0, 3.0), 4.0 * step])) if dead_time else 0.0
    return loops_around(controller(random, step), [plant(random, delay, least_excess)])[0]
