"""Random loops of our invention, seeded: every kind of plant, controller and limit that the footing has to grade."""

from dataclasses import replace

import numpy as np

from tuner.model.controller import Controller, DisturbanceFeedforward, Feedforward, LeadLag, Notch, ReferenceFilter
from tuner.model.loop import Loop, Manipulated, Signal
from tuner.model.plant import ExpressionPlant, PlantParameter, Spread
from tuner.model.sheet import Actuator, Sensor, Sheet, Trial

PLANTS = (
    "gain exp(-delay s)/(lag s + 1)",
    "gain exp(-delay s)/((lag s + 1)(0.3 s + 1))",
    "gain (1 - 0.4 s) exp(-delay s)/((lag s + 1)(0.5 s + 1))",
    "gain exp(-delay s)/(s (0.2 lag s + 1))",
    "gain exp(-delay s)/(s^2 + 0.5 s/lag + 1/lag)",
    "gain exp(-delay s)/((0.4 s + 1)(3 lag s - 1))",
)

LIMITS = (
    ("overshoot", 20.0),
    ("settling_time", 15.0),
    ("rise_time", 4.0),
    ("peak_time", 6.0),
    ("undershoot", 5.0),
    ("steady_state_error", 3.0),
    ("iae_reference", 6.0),
    ("iae_disturbance", 4.0),
    ("disturbance_peak", 0.6),
    ("disturbance_recovery", 12.0),
    ("peak_effort", 4.0),
    ("effort_travel", 8.0),
    ("saturated_share", 0.1),
    ("gain_margin", 2.0),
    ("phase_margin", 40.0),
    ("delay_margin", 0.3),
    ("max_sensitivity", 1.9),
    ("max_complementary", 1.5),
    ("bandwidth", 0.3),
    ("damping", 0.3),
)


def sheet(seed: int, *, continuous: bool = False) -> Sheet:
    """Return a random loop with two limits."""
    random = np.random.default_rng(seed)
    gain, lag, delay = random.uniform(0.5, 2.0), random.uniform(0.5, 2.0), float(random.choice((0.0, 0.13, 0.5)))
    parameters = (
        PlantParameter("gain", gain, spread=Spread(0.8 * gain, 1.2 * gain)),
        PlantParameter("lag", lag, spread=Spread(0.85 * lag, 1.15 * lag)),
        PlantParameter("delay", delay, spread=Spread(0.7 * delay, 1.3 * delay) if delay else None),
    )
    picked = random.choice(len(LIMITS), 2, replace=False)
    made = Sheet(
        Loop("invented", controlled=Signal(resting=3.0), manipulated=_effort(random)),
        ExpressionPlant(PLANTS[seed % len(PLANTS)], parameters),
        controller(random, continuous=continuous),
        Trial(25.0, reference=1.0, disturbance=0.4),
        limits=tuple(LIMITS[index] for index in sorted(picked.tolist())),
    )
    if random.random() < 0.4:
        made = replace(made, actuator=Actuator(0.1), sensor=Sensor(0.15))
    return made


def rich_sheet(seed: int) -> Sheet:
    """Return a random sampled loop with some of what few loops have, on top of `sheet`: blocks, weights, a direct term.

    A plant with a direct term answers its effort at once; one that falls with its effort takes a direct acting law.
    """
    found, random = sheet(seed), np.random.default_rng(10_000 + seed)
    plant, law = found.plant, found.controller
    assert isinstance(plant, ExpressionPlant)
    if random.random() < 0.2:
        plant = replace(plant, expression="gain (0.3 s + 1) exp(-delay s)/(lag s + 1)")
    if random.random() < 0.3:
        plant, law = replace(plant, expression=f"-({plant.expression})"), replace(law, action="direct")
    law = replace(law, c=float(random.choice((0.0, 0.4, 1.0))), delay_samples=int(random.integers(0, 4)))
    if random.random() < 0.4:
        law = replace(law, notch=Notch(random.uniform(2.0, 12.0), random.uniform(0.05, 0.6), random.uniform(0.3, 1.5)))
    if random.random() < 0.25:
        law = replace(law, lead_lag=LeadLag(random.uniform(0.0, 0.6), random.uniform(0.05, 0.5)))
    if random.random() < 0.25:
        law = replace(law, reference_filter=ReferenceFilter(random.uniform(0.2, 1.0), int(random.integers(1, 4))))
    kind = int(random.integers(0, 5))
    if kind == 0:
        law = replace(law, feedforward=Feedforward("static", gain=random.uniform(-0.5, 1.0)))
    if kind == 1:
        law = replace(law, feedforward=Feedforward("inverse", filter_time=random.uniform(0.3, 1.0)))
    if kind == 2:
        law = replace(law, disturbance_feedforward=DisturbanceFeedforward("0.4 exp(-0.6 s)/((s + 1)(0.5 s + 1)^2)"))
    sensor = replace(found.sensor, resolution=0.02) if random.random() < 0.15 else found.sensor
    return replace(found, plant=plant, controller=law, sensor=sensor)


def controller(random: np.random.Generator, *, continuous: bool = False) -> Controller:
    """Return a random controller in one of the forms."""
    form = random.choice(("parallel", "standard", "series"))
    kp, filter_time = random.uniform(0.3, 2.0), random.uniform(0.05, 0.2)
    second = random.uniform(0.1, 0.8) if form == "parallel" else random.uniform(2.0, 6.0)
    third = float(random.choice((0.0, 0.2)))
    return Controller(
        form=form.item(), sample_time=0.0 if continuous else float(random.choice((0.1, 0.05))), gain_1=kp,
        gain_2=second if random.random() < 0.8 else 0.0, gain_3=third, filter_time=filter_time,
        b=float(random.choice((1.0, 0.6))), windup_time=2.0 if random.random() < 0.6 else None,
        delay_samples=0 if continuous else int(random.integers(0, 2)),
        measurement_filter=0.1 if random.random() < 0.2 else 0.0,
    )  # fmt: skip


def _effort(random: np.random.Generator) -> Manipulated:
    if random.random() < 0.5:
        return Manipulated(low=-3.0, high=3.0, rate=8.0 if random.random() < 0.5 else None)
    return Manipulated()
