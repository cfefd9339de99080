"""The nominal plant of a sheet with its actuator and sensor, sampled as the simulation samples it."""

from collections import deque
from collections.abc import Callable
from operator import mul

from tuner.deliver.excitation import PlantStep
from tuner.model.sheet import Sheet
from tuner.simulate.batch import nominal
from tuner.simulate.discrete import Held, chain, hold


def nominal_plant(sheet: Sheet) -> Callable[[], PlantStep]:
    """Return what makes the nominal plant at rest.

    Raises
    ------
    LoopError
        When the plant cannot be realised.
    """
    system = chain(nominal(sheet).plant, sheet.actuator.lag, sheet.sensor.lag)
    held = hold(system, sheet.controller.sample_time, sheet.controller.delay_samples)
    return lambda: _Stepping(held)


class _Stepping:
    """Steps a sampled system with plain numbers, which for a few states is faster than arrays are."""

    __slots__ = ("_d", "_efforts", "_growth", "_new", "_old", "_output", "_state")

    def __init__(self, held: Held) -> None:
        self._growth = [[float(number) for number in row] for row in held.growth]
        self._old, self._new = held.old.tolist(), held.new.tolist()
        self._output, self._d = held.c.tolist(), held.d
        self._state = [0.0] * len(self._output)
        self._efforts = deque([0.0] * (held.steps + 2), maxlen=held.steps + 2)

    def __call__(self, effort: float) -> float:
        """Take the effort of one sample and return the measurement of the next, both as deviations."""
        self._efforts.append(effort)
        before, now, state = self._efforts[0], self._efforts[1], self._state
        self._state = [
            x + sum(map(mul, row, state)) + old * before + new * now
            for x, row, old, new in zip(state, self._growth, self._old, self._new, strict=True)
        ]
        return float(sum(map(mul, self._output, self._state)) + self._d * now)
