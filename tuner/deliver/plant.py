"""The plant of the proof."""

from collections.abc import Callable
from math import exp

from tuner.deliver.excitation import PlantStep
from tuner.model.sheet import Sheet


def nominal_plant(sheet: Sheet) -> Callable[[], PlantStep]:
    decay = exp(-sheet.controller.sample_time / 10)

    def make() -> PlantStep:
        y = 0.0

        def step(u: float) -> float:
            nonlocal y
            y = decay * y + (1 - decay) * u
            return y

        return step

    return make
