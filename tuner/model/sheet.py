"""The tuning sheet: one loop with its blocks, its trial and its limits."""

from dataclasses import dataclass, field

from tuner.model.controller import Controller
from tuner.model.loop import Loop
from tuner.model.plant import FAMILY_SIZE, Plant, Spread


@dataclass(frozen=True, slots=True)
class Actuator:
    """The actuator: a first-order lag in time units, 0 for none, and how far it may drift."""

    lag: float = 0.0
    spread: Spread | None = None


@dataclass(frozen=True, slots=True)
class Sensor:
    """The sensor: a first-order lag, the standard deviation of its noise, its smallest step; the drift of the lag."""

    lag: float = 0.0
    noise: float = 0.0
    resolution: float = 0.0
    spread: Spread | None = None


@dataclass(frozen=True, slots=True)
class Trial:
    """What is simulated: two runs from rest of `duration`, a reference step and a disturbance step.

    `settling_band` is in % of the final value; `family_size` counts the plants that the verdict holds for.
    """

    duration: float
    reference: float = 1.0
    disturbance: float = 0.0
    settling_band: float = 2.0
    family_size: int = FAMILY_SIZE


@dataclass(frozen=True, slots=True)
class Sheet:
    """One loop, whole; `limits` pairs names of measures with their bounds, in the order given."""

    loop: Loop
    plant: Plant
    controller: Controller
    trial: Trial
    actuator: Actuator = Actuator()
    sensor: Sensor = Sensor()
    limits: tuple[tuple[str, float], ...] = field(default=())
