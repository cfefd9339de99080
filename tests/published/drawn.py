"""Random loops of every kind, from a seed: the sheets of an engineer who tries anything."""

from dataclasses import dataclass, replace
from math import pi

import numpy as np

from tuner.model.controller import Controller, Notch
from tuner.model.loop import Loop
from tuner.model.plant import ZeroPolePlant
from tuner.model.sheet import Actuator, Sensor, Sheet, Trial

KINDS = ("lags", "resonant", "integrating", "unstable", "wrong way", "biproper", "double integrator")
"""What a plant may be: see `_roots`."""

FIRST_SIZE = 0.3
"""A loop gain of about this size or more at the middle of the band, so that stable and unstable loops both occur."""


@dataclass(frozen=True, slots=True)
class _Roots:
    zeros: tuple[complex, ...]
    poles: tuple[complex, ...]


def sampled_sheet(seed: int) -> Sheet:
    """Return a loop with a sampled controller; every seventh is of the same kind of plant."""
    draw = np.random.default_rng(seed)
    plant, speed = _plant(KINDS[seed % len(KINDS)], draw)
    step = float(10.0 ** draw.uniform(-1.5, -0.1)) / speed
    plant = replace(plant, dead_time=_dead_time(step, draw))
    return Sheet(
        Loop(f"drawn {seed}"),
        plant,
        _controller(draw, speed, step, _gain_at(plant, speed)),
        Trial(float(draw.integers(150, 400)) * step, float(draw.uniform(0.5, 2.0)), float(draw.uniform(-2.0, 2.0))),
        Actuator(_sometimes(draw, 0.3 / speed)),
        Sensor(_sometimes(draw, 0.3 / speed)),
    )


def continuous_sheet(seed: int, *, dead_time: bool = False) -> Sheet:
    """Return a loop with a continuous controller whose derivative is filtered, without limits."""
    draw = np.random.default_rng(10_000 + seed)
    plant, speed = _plant(KINDS[seed % (len(KINDS) - 1)], draw)
    plant = replace(plant, dead_time=float(draw.uniform(0.1, 2.0)) / speed if dead_time else 0.0)
    controller = replace(_controller(draw, speed, 0.0, _gain_at(plant, speed)), notch=None)
    if controller.filter_time == 0.0:
        controller = replace(controller, filter_time=float(draw.uniform(0.05, 0.3)) / speed)
    return Sheet(
        Loop(f"drawn {seed}"),
        plant,
        controller,
        Trial(30.0 / speed, float(draw.uniform(0.5, 2.0)), float(draw.uniform(-2.0, 2.0))),
        Actuator(_sometimes(draw, 0.3 / speed)),
        Sensor(_sometimes(draw, 0.3 / speed)),
    )


def scaled(sheet: Sheet, factor: float) -> Sheet:
    """Return the same loop with every time multiplied by a factor, its signals unchanged."""
    plant, controller = sheet.plant, sheet.controller
    assert isinstance(plant, ZeroPolePlant)
    return replace(
        sheet,
        plant=ZeroPolePlant(
            tuple(zero / factor for zero in plant.zeros),
            tuple(pole / factor for pole in plant.poles),
            plant.gain * factor ** (len(plant.zeros) - len(plant.poles)),
            plant.dead_time * factor,
        ),
        controller=_scaled_controller(controller, factor),
        trial=replace(sheet.trial, duration=sheet.trial.duration * factor),
        actuator=Actuator(sheet.actuator.lag * factor),
        sensor=Sensor(sheet.sensor.lag * factor),
    )


def _scaled_controller(controller: Controller, factor: float) -> Controller:
    times = (factor, factor) if controller.form != "parallel" else (1.0 / factor, factor)
    notch = controller.notch
    return replace(
        controller,
        sample_time=controller.sample_time * factor,
        gain_2=controller.gain_2 * times[0],
        gain_3=controller.gain_3 * times[1],
        filter_time=controller.filter_time * factor,
        measurement_filter=controller.measurement_filter * factor,
        notch=replace(notch, frequency=notch.frequency / factor) if notch else None,
    )


def _plant(kind: str, draw: np.random.Generator) -> tuple[ZeroPolePlant, float]:
    """Return a plant without dead time, and about how fast it is, rad per time unit."""
    speed = float(10.0 ** draw.uniform(-1.0, 1.0))
    roots = _roots(kind, draw)
    size = float(10.0 ** draw.uniform(-1.0, 1.0))
    plant = ZeroPolePlant(tuple(z * speed for z in roots.zeros), tuple(p * speed for p in roots.poles), 1.0)
    return replace(plant, gain=size / abs(_gain_at(plant, speed)) * _sign(plant)), speed


def _roots(kind: str, draw: np.random.Generator) -> _Roots:
    """Return zeros and poles around a speed of one."""

    def left(count: int) -> tuple[complex, ...]:
        return tuple(complex(-value) for value in 10.0 ** draw.uniform(-0.7, 0.7, count))

    some = int(draw.integers(1, 4))
    ringing = complex(-draw.uniform(0.02, 0.5), draw.uniform(0.4, 2.0))
    made = {
        "lags": _Roots(left(some - 1), left(some + 1)),
        "resonant": _Roots(left(some - 1)[:1], (ringing, ringing.conjugate(), *left(some - 1))),
        "integrating": _Roots(left(some - 1)[:1], (0j, *left(some))),
        "unstable": _Roots(left(1) if some > 1 else (), (complex(draw.uniform(0.05, 0.8)), *left(some))),
        "wrong way": _Roots((complex(draw.uniform(0.5, 4.0)),), left(some + 1)),
        "biproper": _Roots(left(some), left(some)),
        "double integrator": _Roots(left(1), (0j, 0j, *left(some - 1))),
    }
    return made[kind]


def _sign(plant: ZeroPolePlant) -> float:
    """Return the sign that makes the gain at low frequency positive, zeros and unstable poles considered."""
    signs = [np.sign(root.real) for root in (*plant.zeros, *plant.poles) if root.imag == 0.0 and root.real > 0.0]
    return float(np.prod([-sign for sign in signs])) if signs else 1.0


def _gain_at(plant: ZeroPolePlant, w: float) -> float:
    value = np.prod([1j * w - z for z in plant.zeros]) / np.prod([1j * w - p for p in plant.poles])
    return float(abs(plant.gain * value))


def _dead_time(step: float, draw: np.random.Generator) -> float:
    """Return none, some whole samples, or any time of a few samples."""
    which = draw.integers(3)
    return (0.0, step * int(draw.integers(1, 6)), step * float(draw.uniform(0.05, 5.0)))[which]


def _controller(draw: np.random.Generator, speed: float, step: float, plant_gain: float) -> Controller:
    gain = FIRST_SIZE * float(10.0 ** draw.uniform(-0.7, 0.9)) / plant_gain
    parallel = bool(draw.random() < 0.6)
    ti, td = float(10.0 ** draw.uniform(-0.2, 1.3)) / speed, float(10.0 ** draw.uniform(-1.5, -0.2)) / speed
    second, third = (gain / ti, gain * td) if parallel else (ti, td)
    direct = bool(draw.random() < 0.1)
    made = Controller(
        form="parallel" if parallel else str(draw.choice(["standard", "series"])),  # type: ignore[arg-type]  # a form
        sample_time=step,
        gain_1=gain if not parallel or draw.random() < 0.9 else 0.0,
        gain_2=second * int(draw.random() < 0.7),
        gain_3=third * int(draw.random() < 0.5),
        filter_time=_sometimes(draw, 0.2 / speed),
        b=float(draw.uniform()),
        c=float(draw.uniform()) if draw.random() < 0.5 else 0.0,
        action="direct" if direct else "reverse",
        delay_samples=int(draw.integers(0, 3)) if step else 0,
        measurement_filter=_sometimes(draw, 0.2 / speed) * int(draw.random() < 0.4),
    )
    if step and draw.random() < 0.25:
        return replace(made, notch=Notch(float(draw.uniform(0.1, 0.8)) * pi / step, float(draw.uniform(0.0, 0.5)), 0.8))
    return made


def _sometimes(draw: np.random.Generator, size: float) -> float:
    return float(draw.uniform(0.2, 1.0)) * size if draw.random() < 0.5 else 0.0
